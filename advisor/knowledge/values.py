"""Typing of values by the declared kinds of the names they stand under."""

from collections.abc import Iterable
from collections.abc import Mapping as Map
from dataclasses import dataclass, field, replace

from advisor.conditions import Domain, Value
from advisor.documents import CURLY, Mapping, Mark, Node, Problem, Problems, Scalar, Sequence, as_number, closest
from advisor.knowledge.lost import Lost, Space
from advisor.knowledge.model import Band, Cell, Row, Table


class Blank(Exception):
    """The row has no value in a cell that the rule names: the row does not apply."""


class Mistyped(Exception):
    """The part has no value; a problem was recorded for it, or for what it names."""


@dataclass(slots=True, eq=False)
class Scope:
    """What names mean in one place of the knowledge.

    Nothing changes a scope once it is made. It is not frozen because one is made for every value, and a frozen one
    takes five times as long.
    """

    problems: Problems
    names: Map[str, Domain]
    facts: Map[str, Domain] = field(default_factory=dict)
    table: Table | None = None
    row: Row | None = None
    trail: tuple[str, ...] = ()
    what: str = "fact"
    may_ask_stated: bool = False
    hints: Map[str, str] = field(default_factory=dict)
    lost: Lost = field(default_factory=Lost)

    def at(self, *trail: str) -> "Scope":
        """The same scope further down the trail."""
        return self._with(self.names, self.trail + trail, self.what)

    def over(self, names: Map[str, Domain], *trail: str, what: str = "fact") -> "Scope":
        """The same ground with other names."""
        return self._with(names, trail, what)

    def of(self, names: Map[str, Domain], what: str, hints: Map[str, str], *, stated: bool = False) -> "Scope":
        """The same place with other names, and what is said of names that belong elsewhere."""
        return self._with(names, self.trail, what, hints, stated)

    def _with(
        self,
        names: Map[str, Domain],
        trail: tuple[str, ...],
        what: str,
        hints: Map[str, str] | None = None,
        stated: bool | None = None,
    ) -> "Scope":
        """The scope with these; written out, because one is made for every value of the knowledge."""
        return Scope(
            self.problems,
            names,
            self.facts,
            self.table,
            self.row,
            trail,
            what,
            self.may_ask_stated if stated is None else stated,
            self.hints if hints is None else hints,
            self.lost,
        )

    def fault(self, node: Node, message: str, hint: str = "") -> Mistyped:
        """Record a problem at a node."""
        self.problem(node.mark, message, hint)
        return Mistyped()

    def problem(self, mark: Mark, message: str, hint: str = "") -> None:
        """Record a problem at a mark, once."""
        self._record(Problem.at(mark, message, hint, self.trail))

    def stranger(self, mark: Mark, name: str, message: str, known: Iterable[str], hint: str = "") -> Mistyped:
        """Record that a name is none of those known; the hint asks for the one most like it, where there is one."""
        like = closest(name, known)
        hint = f"Did you mean '{like}'?" if like else hint
        self._record(replace(Problem.at(mark, message, hint, self.trail), name=name, like=like))
        return Mistyped()

    def _record(self, problem: Problem) -> None:
        if problem not in tuple(self.problems):
            self.problems.add(problem)

    def unknown(
        self, mark: Mark, space: Space, name: str, message: str, known: Iterable[str], hint: str = ""
    ) -> Mistyped:
        """Record that a name names nothing, unless it may have stood in what is lost."""
        if not self.lost.may_have(space, name):
            self.stranger(mark, name, message, known, hint)
        return Mistyped()

    def domain(self, name: str, mark: Mark) -> Domain:
        """The domain of a name, or a problem at its mark."""
        if name in self.names and not self.lost.has("names", name):
            return self.names[name]
        message = f"'{name}' is no {self.what} that is known here"
        if name in self.hints:
            raise self.unknown(mark, "names", name, message, (), self.hints[name])
        raise self.unknown(mark, "names", name, message, self.names, f"declare it, or use another {self.what}")


def value(node: Node, domain: Domain, scope: Scope) -> Value:
    """A constant of the domain."""
    if domain.kind == "several":
        return _ticks(node, domain, scope)
    if not isinstance(node, Scalar):
        raise scope.fault(node, "one value is expected here, not a list or a mapping", "write the value alone")
    if domain.kind == "number":
        return _number(node, domain, scope)
    text = str(node)
    if domain.kind == "yes_no":
        text = {"true": "yes", "false": "no"}.get(text, text)
    if domain.kind == "text" or domain.accepts(text):
        return text
    if text[:1] in set(CURLY) and domain.accepts(text.strip(CURLY)):
        raise scope.fault(node, f"'{text}' stands in curly quotes", f'use straight quotes: "{text.strip(CURLY)}"')
    known = list(domain.choices)
    hint = f"known here: {', '.join(known[:12])}{' ...' if len(known) > 12 else ''}"
    raise scope.stranger(node.mark, text, f"'{text}' is not one of the choices", known, hint)


def _ticks(node: Node, domain: Domain, scope: Scope) -> Value:
    if isinstance(node, Scalar) and str(node) == "none" and "none" not in domain.choices:
        return ()
    entries = list(node) if isinstance(node, Sequence) else [node]
    single = replace(domain, kind="choice")
    ticked = {str(value(entry, single, scope)) for entry in entries}
    return tuple(choice for choice in domain.choices if choice in ticked)


def _number(node: Scalar, domain: Domain, scope: Scope) -> float:
    if str(node) in domain.named:
        return domain.named[str(node)]
    try:
        number = as_number(node)
    except ValueError as fault:
        message, _, hint = str(fault).partition("; ")
        raise scope.fault(node, message, hint) from None
    if not domain.accepts(number):
        if domain.places and domain.low <= number <= domain.high:
            raise scope.fault(node, f"{number:g} is none of the grades", f"use one of {_series(domain.places)}")
        raise scope.fault(
            node,
            f"{number:g} {domain.unit}".strip()
            + f" lies outside {domain.low:g} to {domain.high:g} {domain.unit}".rstrip(),
            "check the unit and the decimal point",
        )
    return number


def _series(numbers: tuple[float, ...]) -> str:
    return ", ".join(f"{number:g}" for number in numbers)


def cell(node: Node, domain: Domain, scope: Scope, *, band: bool) -> Cell:
    """A cell of a table."""
    if not band:
        return value(node, domain, scope)
    if not isinstance(node, Mapping) or not set(node) <= {"from", "below"} or not node:
        raise scope.fault(node, "a band is written {from: 1, below: 2}", "either end may be left out")
    low = value(node["from"], domain, scope) if "from" in node else float("-inf")
    high = value(node["below"], domain, scope) if "below" in node else float("inf")
    if not low < high:  # type: ignore[operator]  # both are numbers by the domain
        raise scope.fault(node, "the band is empty: 'from' is not below 'below'", "exchange them")
    return Band(low, high)  # type: ignore[arg-type]  # both are numbers by the domain
