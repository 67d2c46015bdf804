"""Conditions as trees of thresholds and set memberships, judged with three outcomes.

An outcome is True (holds), False (fails) or None (undecided: it waits for a fact without a value).
A fact missing from the record is unanswered; a fact that is `VOID` makes every term on it fail.
"""

import operator
from collections.abc import Callable, Container, Iterator, Mapping
from dataclasses import dataclass
from math import prod
from typing import Final

from advisor.conditions.domains import Coded


class Void:
    """The value of a fact that has none for good: a formula outside its range, a look-up without a row."""

    __slots__ = ()

    def __repr__(self) -> str:
        return "VOID"


VOID: Final = Void()

Record = Mapping[str, Coded | Void]
"""Coded values by name; what is missing is unanswered."""


@dataclass(frozen=True, slots=True)
class FactRef:
    """A fact that stands where a constant may."""

    name: str


@dataclass(frozen=True, slots=True)
class Bound:
    """A threshold, or equality, on a number or a place of a scale."""

    name: str
    sign: str
    limit: float | FactRef


@dataclass(frozen=True, slots=True)
class Member:
    """A choice that is (or is not) among these."""

    name: str
    among: frozenset[str] | frozenset[float]
    wanted: bool = True


@dataclass(frozen=True, slots=True)
class Ticked:
    """A tick list of which any (or none) of these is ticked."""

    name: str
    among: frozenset[str]
    wanted: bool = True


@dataclass(frozen=True, slots=True)
class Stated:
    """Whether a product's sheet gives the value at all."""

    name: str
    wanted: bool = True


@dataclass(frozen=True, slots=True)
class Valueless:
    """Whether a fact is void: it has no value for good."""

    name: str
    wanted: bool = True


@dataclass(frozen=True, slots=True)
class Every:
    """All parts hold; without parts it always holds."""

    parts: tuple["Condition", ...] = ()


@dataclass(frozen=True, slots=True)
class Either:
    """At least one part holds."""

    parts: tuple["Condition", ...]


Term = Bound | Member | Ticked | Stated | Valueless
Condition = Term | Every | Either
ALWAYS: Final = Every()

SIGNS: Final[dict[str, Callable[[float, float], bool]]] = {
    "<": operator.lt,
    "<=": operator.le,
    ">": operator.gt,
    ">=": operator.ge,
    "=": operator.eq,
    "!=": operator.ne,
}
_OPPOSITE: Final = {"<": ">=", "<=": ">", ">": "<=", ">=": "<", "=": "!=", "!=": "="}


def holds(condition: Condition, record: Record) -> bool | None:
    """Judge a condition by strong Kleene logic.

    >>> holds(Bound("t", ">", 70.0), {"t": 85.0}), holds(Bound("t", ">", 70.0), {})
    (True, None)
    >>> holds(Every((Bound("t", ">", 90.0), Bound("n", ">", 1.0))), {"t": 85.0})
    False
    """
    if isinstance(condition, Every):
        return _every(condition.parts, record)
    if isinstance(condition, Either):
        return _either(condition.parts, record)
    return term_holds(condition, record)


def _every(parts: tuple[Condition, ...], record: Record) -> bool | None:
    outcome: bool | None = True
    for part in parts:
        one = holds(part, record)
        if one is False:
            return False
        if one is None:
            outcome = None
    return outcome


def _either(parts: tuple[Condition, ...], record: Record) -> bool | None:
    outcome: bool | None = False
    for part in parts:
        one = holds(part, record)
        if one:
            return True
        if one is None:
            outcome = None
    return outcome


def term_holds(term: Term, record: Record) -> bool | None:
    """Judge one threshold or membership."""
    seen = record.get(term.name)
    if isinstance(term, Stated):
        return (seen is not None and seen is not VOID) is term.wanted
    if isinstance(term, Valueless):
        return None if seen is None else (seen is VOID) is term.wanted
    limit: object = None
    if isinstance(term, Bound):
        limit = record.get(term.limit.name) if isinstance(term.limit, FactRef) else term.limit
        if seen is VOID or limit is VOID:
            return False
        if seen is None or limit is None:
            return None
        return SIGNS[term.sign](seen, limit)  # type: ignore[arg-type]  # the loader lets thresholds meet numbers only
    if seen is None:
        return None
    if seen is VOID:
        return False
    if isinstance(term, Ticked):
        return (not term.among.isdisjoint(seen)) is term.wanted  # type: ignore[arg-type]  # tick lists are sets
    return (seen in term.among) is term.wanted


def negated(condition: Condition, voidable: Container[str] = ()) -> Condition:
    """The condition that holds exactly where this one fails (De Morgan, signs flipped).

    On a void fact every term fails, so the opposite holds there: for the names in `voidable` that is written out.

    >>> negated(Either((Bound("t", ">", 70.0), Member("shock", frozenset({"none"})))))
    Every(parts=(Bound(name='t', sign='<=', limit=70.0), Member(name='shock', among=frozenset({'none'}), wanted=False)))
    >>> negated(Bound("interval_h", ">=", 100.0), {"interval_h"})
    Either(parts=(Bound(name='interval_h', sign='<', limit=100.0), Valueless(name='interval_h', wanted=True)))
    """
    if isinstance(condition, Every):
        return Either(tuple(negated(part, voidable) for part in condition.parts))
    if isinstance(condition, Either):
        return Every(tuple(negated(part, voidable) for part in condition.parts))
    lacking = tuple(Valueless(name) for name in names(condition) if name in voidable)
    if isinstance(condition, Stated | Valueless):
        return type(condition)(condition.name, not condition.wanted)
    opposite: Term
    if isinstance(condition, Bound):
        opposite = Bound(condition.name, _OPPOSITE[condition.sign], condition.limit)
    elif isinstance(condition, Member):
        opposite = Member(condition.name, condition.among, not condition.wanted)
    else:
        opposite = Ticked(condition.name, condition.among, not condition.wanted)
    return Either((opposite, *lacking)) if lacking else opposite


def leaves(condition: Condition) -> Iterator[Term]:
    """All terms of the condition, in order."""
    if isinstance(condition, Every | Either):
        for part in condition.parts:
            yield from leaves(part)
    else:
        yield condition


def names(condition: Condition) -> Iterator[str]:
    """All names that the condition looks at, limits included."""
    for term in leaves(condition):
        yield term.name
        if isinstance(term, Bound) and isinstance(term.limit, FactRef):
            yield term.limit.name


def waits_for(condition: Condition, record: Record) -> set[str]:
    """The unanswered facts that still matter to an undecided condition; empty if it is decided."""
    if holds(condition, record) is not None:
        return set()
    if isinstance(condition, Every | Either):
        return set().union(*(waits_for(part, record) for part in condition.parts))
    return {name for name in names(condition) if name not in record}


def failures(condition: Condition, record: Record) -> tuple[Term, ...]:
    """The terms that made a condition fail; empty if it does not fail."""
    if isinstance(condition, Every):
        return tuple([term for part in condition.parts for term in failures(part, record)])
    if holds(condition, record) is not False:
        return ()
    if isinstance(condition, Either):
        return tuple([term for part in condition.parts for term in failures(part, record)])
    return (condition,)


def branches(condition: Condition) -> list[tuple[Term, ...]]:
    """The disjunctive normal form: conjunctions of terms, one of which must hold."""
    if isinstance(condition, Either):
        return [branch for part in condition.parts for branch in branches(part)]
    if isinstance(condition, Every):
        product: list[tuple[Term, ...]] = [()]
        for part in condition.parts:
            product = [done + more for done in product for more in branches(part)]
        return product
    return [(condition,)]


def alternatives(condition: Condition) -> int:
    """How many conjunctions the condition is when every choice is written out, without building them.

    >>> alternatives(Every((Member("cage", frozenset({"steel", "brass"})), Member("seal", frozenset({"NBR", "FKM"})))))
    4
    """
    if isinstance(condition, Every):
        return prod(alternatives(part) for part in condition.parts)
    if isinstance(condition, Either):
        return sum(alternatives(part) for part in condition.parts)
    return len(condition.among) if isinstance(condition, Member | Ticked) and condition.wanted else 1
