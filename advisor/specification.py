"""The specification: demands on the lubricant, combined by intersection; conflicts are named, never hidden."""

import builtins
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field, replace
from itertools import combinations, pairwise

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


@dataclass(frozen=True, slots=True)
class Demand:
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
    """All demands: plain ones hold for every lubricant, conditional ones only for some."""

    plain: tuple[Demand, ...] = ()
    conditional: tuple[Demand, ...] = ()
    conflicts: tuple[Conflict, ...] = ()
    allowed: Mapping[str, frozenset[Coded]] = field(default_factory=dict)

    @property
    def demands(self) -> tuple[Demand, ...]:
        """Plain and conditional demands."""
        return self.plain + self.conditional


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
    """Combine demands: a `for` that the plain musts leave no choice about becomes plain; then look for conflicts.

    A `for` that no allowed value meets stays conditional: it still speaks of lubricants whose sheet lacks the value.
    """
    plain: list[Demand] = []
    conditional: list[Demand] = []
    for demand in demands:
        (plain if demand.for_ == ALWAYS else conditional).append(demand)
    allowed = _allowed(plain, domains, {})
    while True:
        now_plain = [demand for demand in conditional if _always_for(demand.for_, allowed)]
        if not now_plain:
            break
        conditional = [demand for demand in conditional if demand not in now_plain]
        now_plain = [replace(demand, for_=ALWAYS) for demand in now_plain]
        plain += now_plain
        allowed = _allowed(now_plain, domains, allowed)
    conflicts = tuple(_empty_intersections(plain, domains))
    return Specification(tuple(plain), tuple(conditional), conflicts, allowed)


def _finite(domain: Domain) -> list[Coded]:
    if domain.places:
        return list(domain.places)
    if domain.kind in {"choice", "scale", "yes_no"}:
        return [domain.code(choice) for choice in domain.choices]
    return []


def _allowed(
    plain: list[Demand], domains: Mapping[str, Domain], before: Mapping[str, frozenset[Coded]]
) -> dict[str, frozenset[Coded]]:
    """For each finite property with a plain must: the values that all of its musts allow."""
    found = dict(before)
    for demand in plain:
        if not demand.must or demand.void:
            continue
        name = demand.property
        values = found[name] if name in found else frozenset(_finite(domains[name]))
        if values or name in found:
            found[name] = _kept(demand, values)
    return found


def _kept(demand: Demand, values: frozenset[Coded]) -> frozenset[Coded]:
    """Those of the values that meet the demand's test."""
    test = demand.test
    if isinstance(test, Member):
        return values & test.among if test.wanted else values - test.among
    return frozenset(each for each in values if holds(test, {demand.property: each}))


def _always_for(condition: Condition, allowed: Mapping[str, frozenset[Coded]]) -> bool:
    """Whether every value that the plain musts allow meets a `for`."""
    if isinstance(condition, Every):
        return all(_always_for(part, allowed) for part in condition.parts)
    if isinstance(condition, Either):
        return any(_always_for(part, allowed) for part in condition.parts)
    values = allowed.get(condition.name)
    if not values or not isinstance(condition, Bound | Member):
        return False
    return all(holds(condition, {condition.name: each}) for each in values)


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
    return set(names(condition))
