"""What every part of an expectation is checked by: names against the knowledge, values against their kind."""

from collections.abc import Callable, Iterable
from dataclasses import dataclass

from advisor.answers import Saved
from advisor.documents import (
    Mapping,
    Mark,
    Node,
    Problem,
    Problems,
    Scalar,
    Sequence,
    as_number,
    as_yes_no,
    nearest,
)
from advisor.knowledge import Knowledge, Mistyped, Scope
from advisor.replay.expectations import Expectation


@dataclass(slots=True)
class Checker:
    """Checks one `expect`; `key` is the part being read."""

    saved: Saved
    knowledge: Knowledge
    problems: Problems
    key: str = ""

    def problem(self, mark: Mark, message: str, hint: str = "", *trail: str) -> Mistyped:
        """Note a fault."""
        within = ("expect", *([self.key] if self.key else []), *trail)
        self.problems.add(Problem(mark.file, mark.line, mark.column, within, message, hint.strip()))
        return Mistyped()

    def each(self, node: Node, read: Callable[[Scalar, Node], Iterable[Expectation]]) -> list[Expectation]:
        """Read every entry of a mapping; a faulty one keeps none of the others from being read."""
        if not isinstance(node, Mapping) or not node:
            raise self.problem(node.mark, f"'{self.key}' is written 'name: what is expected'")
        found: list[Expectation] = []
        for name, child in node.items():
            try:
                found += read(Scalar(name, node.key_marks[name]), child)
            except Mistyped:
                continue
        return found

    def listed(self, node: Node) -> list[Scalar]:
        if not isinstance(node, Sequence) or not node:
            raise self.problem(node.mark, f"'{self.key}' is a list with at least one entry", f"{self.key}: [a, b]")
        for each in node:
            if not isinstance(each, Scalar):
                raise self.problem(each.mark, "a plain value is expected in this list")
        return [each for each in node if isinstance(each, Scalar)]

    def names(
        self, node: Node, known: Iterable[str], what: str, make: Callable[[Mark, str], Expectation]
    ) -> list[Expectation]:
        found: list[Expectation] = []
        for each in self.listed(node):
            try:
                found.append(make(each.mark, self.known(each, known, what)))
            except Mistyped:
                continue
        return found

    def known(self, word: Scalar, known: Iterable[str], what: str) -> str:
        names = list(known)
        if str(word) not in names:
            raise self.problem(word.mark, f"'{word}' is no {what} that is known here", nearest(word, names))
        return str(word)

    def word(self, node: Node, known: Iterable[str], what: str) -> str:
        names = [str(each) for each in known]
        if not isinstance(node, Scalar) or str(node) not in names:
            seen = f"'{node}'" if isinstance(node, Scalar) else "this"
            raise self.problem(node.mark, f"{seen} is no {what}", f"use one of {', '.join(names)}")
        return str(node)

    def yes_no(self, node: Node) -> bool:
        try:
            return as_yes_no(node)  # type: ignore[arg-type]  # anything but a text is refused below
        except (ValueError, AttributeError, TypeError):
            raise self.problem(node.mark, "yes or no is expected here") from None

    def number(self, node: Node) -> float:
        if not isinstance(node, Scalar):
            raise self.problem(node.mark, "a number is expected here")
        try:
            return as_number(node)
        except ValueError as fault:
            message, _, hint = str(fault).partition("; ")
            raise self.problem(node.mark, message, hint) from None

    def rule(self, word: Node) -> str:
        ids = {*self.knowledge.rules, *(each.id for step in self.knowledge.instances.values() for each in step)}
        if not isinstance(word, Scalar):
            raise self.problem(word.mark, "a rule is expected here")
        return self.known(word, sorted(ids), "rule")

    def scope(self, *trail: str) -> Scope:
        return Scope(self.problems, {}, trail=("expect", self.key, *trail), what="property")

    def only_keys(self, node: Mapping, *known: str) -> None:
        faults = [
            self.problem(
                node.key_marks[key], f"'{key}' is not known here", nearest(key, known) or f"known: {', '.join(known)}"
            )
            for key in node
            if key not in known
        ]
        if faults:
            raise faults[0]

    def ends(self, node: Mapping) -> tuple[float, float]:
        if set(node) != {"from", "to"}:
            raise self.problem(node.mark, "both ends are expected here", "{from: 1, to: 2}")
        low, high = self.number(node["from"]), self.number(node["to"])
        if low > high:
            raise self.problem(node["to"].mark, f"'to' ({high:g}) lies below 'from' ({low:g})", "change the two about")
        return low, high

    def text(self, node: Node) -> str:
        if not isinstance(node, Scalar):
            raise self.problem(node.mark, "a plain value is expected here")
        return str(node).strip()

    def row(self, mark: Mark, row: str) -> None:
        rows = [each.id for each in self.knowledge.docket]
        if row not in rows:
            raise self.problem(mark, f"the docket has no row '{row}'", nearest(row, rows))
