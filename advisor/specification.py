"""The specification: demands on the lubricant, combined by intersection; conflicts are named, never hidden."""

import builtins
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from itertools import combinations, pairwise
from typing import NamedTuple

from advisor.conditions import (
    ALWAYS,
    Bound,
    Coded,
    Condition,
    Domain,
    Either,
    Every,
    FactRef,
    Member,
    Record,
    holds,
    leaves,
)
from advisor.conditions.terms import names

MUST = 0
STRONG = 2
"""Shoulds up to this level are strong: missing one makes a product second best."""


class Demand(NamedTuple):
    """A condition on one property of the lubricant, put by a rule.

    `level` 0 is a must, 1 (strong) to 4 (taste) a should; `for_` says for which lubricants.
    `void` names the facts without a value that its limit would need: such a demand proves nothing.
    """

    property: str
    test: Condition
    level: int
    for_: Condition
    rule: str
    void: frozenset[str] = frozenset()

    @builtins.property
    def must(self) -> bool:
        """Whether it decides."""
        return self.level == MUST


@dataclass(frozen=True, slots=True)
class Conflict:
    """Demands that cannot be had together; `about` is the property, or the usual oils."""

    about: str
    rules: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Specification:
    """All demands: plain ones hold for every lubricant, conditional ones only for some.

    `dropped` are conditional demands that no lubricant meeting the plain musts can fall under: products are not
    judged by them, but classes that lack the deciding property are.
    """

    plain: tuple[Demand, ...] = ()
    conditional: tuple[Demand, ...] = ()
    dropped: tuple[Demand, ...] = ()
    conflicts: tuple[Conflict, ...] = ()
    allowed: Mapping[str, frozenset[Coded]] = field(default_factory=dict)

    @property
    def demands(self) -> tuple[Demand, ...]:
        """The demands by which products are judged."""
        return self.plain + self.conditional

    @property
    def class_demands(self) -> tuple[Demand, ...]:
        """The demands by which usual oils and choices are judged."""
        return self.plain + self.conditional + self.dropped


def with_limits(condition: Condition, record: Record) -> tuple[Condition, set[str], set[str]]:
    """The condition with facts put in for limits, the facts it still waits for, and the void ones.

    >>> with_limits(Bound("kappa", ">=", FactRef("film_floor")), {"film_floor": 0.15})
    (Bound(name='kappa', sign='>=', limit=0.15), set(), set())
    """
    if isinstance(condition, Every | Either):
        done = [with_limits(part, record) for part in condition.parts]
        kind = type(condition)
        return (
            kind(tuple(each[0] for each in done)),
            set().union(*(e[1] for e in done)),
            set().union(*(e[2] for e in done)),
        )
    if isinstance(condition, Bound) and isinstance(condition.limit, FactRef):
        name = condition.limit.name
        limit = record.get(name)
        if limit is None:
            return condition, {name}, set()
        if not isinstance(limit, float):
            return condition, set(), {name}
        return Bound(condition.name, condition.sign, limit), set(), set()
    return condition, set(), set()


def combine(demands: Iterable[Demand], domains: Mapping[str, Domain]) -> Specification:
    """Combine demands: decide every `for` that the plain musts leave no choice about, then look for conflicts."""
    plain: list[Demand] = []
    conditional: list[Demand] = []
    for demand in demands:
        (plain if demand.for_ == ALWAYS else conditional).append(demand)
    left = _Left(plain, domains)
    while True:
        now_plain = [demand for demand in conditional if left.meets(demand.for_) is True]
        if not now_plain:
            break
        conditional = [demand for demand in conditional if demand not in now_plain]
        plain += [demand._replace(for_=ALWAYS) for demand in now_plain]
        left.narrow(now_plain)
    dropped = tuple(demand for demand in conditional if left.meets(demand.for_) is False)
    kept = tuple(demand for demand in conditional if demand not in dropped)
    conflicts = tuple(_empty_intersections(plain, domains))
    return Specification(tuple(plain), kept, dropped, conflicts, left.values)


class _Left:
    """What the plain musts leave: values of finite properties, ranges of numbers."""

    def __init__(self, plain: Iterable[Demand], domains: Mapping[str, Domain]) -> None:
        self.domains = domains
        self.values: dict[str, frozenset[Coded]] = {}
        self.bounds: dict[str, list[Bound]] = {}
        self.narrow(plain)

    def narrow(self, demands: Iterable[Demand]) -> None:
        """Take more plain demands into account."""
        for demand in demands:
            if not demand.must or demand.void:
                continue
            name = demand.property
            values = self.values[name] if name in self.values else frozenset(_finite(self.domains[name]))
            if values or name in self.values:
                self.values[name] = _kept(demand, values)
            elif all(isinstance(term, Bound) for term in leaves(demand.test)) and not isinstance(demand.test, Either):
                self.bounds.setdefault(name, []).extend(term for term in leaves(demand.test) if isinstance(term, Bound))

    def meets(self, condition: Condition) -> bool | None:
        """Whether all that is left meets the condition (True), nothing does (False), or only some (None)."""
        if isinstance(condition, Every | Either):
            outcomes = [self.meets(part) for part in condition.parts]
            if isinstance(condition, Every):
                return False if False in outcomes else None if None in outcomes else True
            return True if True in outcomes else None if None in outcomes else False
        values = self.values.get(condition.name)
        if values and isinstance(condition, Bound | Member):
            met = [holds(condition, {condition.name: each}) for each in values]
            return True if all(met) else None if any(met) else False
        if isinstance(condition, Bound):
            return self._in_range(condition)
        return None

    def _in_range(self, term: Bound) -> bool | None:
        """The same for a threshold on a number, against each plain threshold on it."""
        for known in self.bounds.get(term.name, ()):
            if known.sign in _UP and term.sign in _DOWN and _beyond(known, term):
                return False
            if known.sign in _DOWN and term.sign in _UP and _beyond(term, known):
                return False
        return None


_UP, _DOWN = frozenset({">", ">="}), frozenset({"<", "<="})


def _beyond(low: Bound, high: Bound) -> bool:
    """Whether nothing lies both above the one threshold and below the other."""
    if not isinstance(low.limit, float | int) or not isinstance(high.limit, float | int):
        return False
    return low.limit > high.limit or (low.limit == high.limit and (low.sign == ">" or high.sign == "<"))


def _finite(domain: Domain) -> list[Coded]:
    if domain.places:
        return list(domain.places)
    if domain.kind in {"choice", "scale", "yes_no"}:
        return [domain.code(choice) for choice in domain.choices]
    return []


def _kept(demand: Demand, values: frozenset[Coded]) -> frozenset[Coded]:
    """Those of the values that meet the demand's test."""
    test = demand.test
    if isinstance(test, Member):
        return values & test.among if test.wanted else values - test.among
    return frozenset(each for each in values if holds(test, {demand.property: each}))


def _empty_intersections(plain: list[Demand], domains: Mapping[str, Domain]) -> Iterable[Conflict]:
    by_property: dict[str, list[Demand]] = {}
    for demand in plain:
        if demand.must and not demand.void:
            by_property.setdefault(demand.property, []).append(demand)
    for name, musts in by_property.items():
        if (rules := _smallest_empty(name, musts, domains[name])) is not None:
            yield Conflict(name, rules)


def _smallest_empty(name: str, musts: list[Demand], domain: Domain) -> tuple[str, ...] | None:
    values = _finite(domain) or _samples(name, musts, domain)
    if not values:
        return None
    whole = frozenset(values)
    left = whole
    for demand in musts:
        left = _kept(demand, left)
    if left:
        return None
    chosen = smallest_cover([whole - _kept(demand, whole) for demand in musts], whole)
    return None if chosen is None else tuple(sorted({musts[each].rule for each in chosen}))


def _samples(name: str, musts: list[Demand], domain: Domain) -> list[Coded]:
    """Numbers at, between and beyond all limits: enough to find whether thresholds leave anything."""
    limits = sorted(
        {
            term.limit
            for demand in musts
            for term in leaves(demand.test)
            if isinstance(term, Bound) and term.name == name and isinstance(term.limit, float)
        }
    )
    if not limits or domain.kind != "number":
        return []
    between = [(low + high) / 2 for low, high in pairwise(limits)]
    ends = [max(domain.low, limits[0] - 1), min(domain.high, limits[-1] + 1)]
    return [*limits, *between, *ends]


def smallest_cover(parts: list[frozenset[Coded]], whole: frozenset[Coded]) -> tuple[int, ...] | None:
    """The fewest parts that together make the whole, by their places; None if all together do not.

    >>> smallest_cover([frozenset({1.0}), frozenset({2.0}), frozenset({1.0, 2.0})], frozenset({1.0, 2.0}))
    (2,)
    """
    if not whole or frozenset().union(*parts) != whole:
        return None
    useful = [place for place, part in enumerate(parts) if part]
    for size in (1, 2, 3):
        for chosen in combinations(useful, size):
            if frozenset().union(*(parts[place] for place in chosen)) == whole:
                return chosen
    left, greedy = whole, []
    while left:
        best = max(useful, key=lambda place: len(parts[place] & left))
        greedy.append(best)
        left -= parts[best]
    return tuple(greedy)


def mentions(condition: Condition) -> set[str]:
    """The names that a condition looks at."""
    return set(names(condition)) if condition is not ALWAYS else set()
