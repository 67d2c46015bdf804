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
        """The entries of a list of plain values."""
        if not isinstance(node, Sequence) or not node:
            message = f"'{self.key}' is a list with at least one entry"
            raise self.problem(node.mark, message, f"Write {self.key}: [a, b]")
        for each in node:
            if not isinstance(each, Scalar):
                raise self.problem(each.mark, "a plain value is expected in this list")
        return [each for each in node if isinstance(each, Scalar)]

    def names(
        self, node: Node, known: Iterable[str], what: str, make: Callable[[Mark, str], Expectation]
    ) -> list[Expectation]:
        """An expectation for every name of a list."""
        found: list[Expectation] = []
        for each in self.listed(node):
            try:
                found.append(make(each.mark, self.known(each, known, what)))
            except Mistyped:
                continue
        return found

    def known(self, word: Scalar, known: Iterable[str], what: str) -> str:
        """The name, where the knowledge has it."""
        names = list(known)
        if str(word) not in names:
            raise self.problem(word.mark, f"'{word}' is no {what} that is known here", nearest(word, names))
        return str(word)

    def word(self, node: Node, known: Iterable[str], what: str) -> str:
        """One of these words."""
        names = [str(each) for each in known]
        if not isinstance(node, Scalar) or str(node) not in names:
            seen = f"'{node}'" if isinstance(node, Scalar) else "this"
            raise self.problem(node.mark, f"{seen} is no {what}", f"Use one of {', '.join(names)}")
        return str(node)

    def yes_no(self, node: Node) -> bool:
        """A yes or a no."""
        try:
            return as_yes_no(self.text(node))
        except ValueError as fault:
            raise self.problem(node.mark, str(fault)) from None

    def number(self, node: Node) -> float:
        """A number."""
        try:
            return as_number(self.text(node))
        except ValueError as fault:
            raise self.problem(node.mark, str(fault)) from None

    def rule(self, word: Node) -> str:
        """A rule, as written or for one row of its table."""
        rows = (each.id for step in self.knowledge.instances.values() for each in step)
        return self.known(Scalar(self.text(word), word.mark), [*self.knowledge.rules, *rows], "rule")

    def scope(self, *trail: str) -> Scope:
        """Where values are read: nothing but constants is known."""
        return Scope(self.problems, {}, trail=("expect", self.key, *trail), what="property")

    def only_keys(self, node: Mapping, *known: str) -> None:
        """Refuse a mapping with other keys than these."""
        unknown = [key for key in node if key not in known]
        for key in unknown:
            hint = nearest(key, known) or f"Known: {', '.join(known)}"
            self.problem(node.key_marks[key], f"'{key}' is not known here", hint)
        if unknown:
            raise Mistyped

    def ends(self, node: Mapping) -> tuple[float, float]:
        """Two numbers, the lower one first."""
        if set(node) != {"from", "to"}:
            raise self.problem(node.mark, "both ends are expected here", "Write {from: 1, to: 2}")
        low, high = self.number(node["from"]), self.number(node["to"])
        if low > high:
            raise self.problem(node["to"].mark, f"'to' ({high:g}) lies below 'from' ({low:g})", "Change the two about")
        return low, high

    def text(self, node: Node) -> str:
        """A plain value."""
        if not isinstance(node, Scalar):
            raise self.problem(node.mark, "a plain value is expected here")
        return str(node).strip()

    def row(self, mark: Mark, row: str) -> None:
        """Refuse a row that the docket lacks."""
        rows = [each.id for each in self.knowledge.docket]
        if row not in rows:
            raise self.problem(mark, f"the docket has no row '{row}'", nearest(row, rows))
