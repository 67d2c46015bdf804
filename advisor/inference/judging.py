"""The rules of one step: every condition judged plainly with three outcomes, and by the engine; the two must agree."""

from collections.abc import Callable, Mapping, Sequence

from advisor.conditions import (
    VOID,
    Bound,
    Condition,
    Domain,
    Either,
    Every,
    FactRef,
    Member,
    Record,
    Stated,
    Ticked,
    Valueless,
    waits_for,
)
from advisor.conditions.terms import SIGNS
from advisor.inference.faults import Disagreement
from advisor.inference.matching import Matcher

Judge = Callable[[Record], bool | None]
"""A condition made ready: True holds, False fails, None is undecided."""


class StepRules:
    """The conditions of one step, known by their position; belongs to the thread that made it."""

    def __init__(self, conditions: Sequence[Condition], domains: Mapping[str, Domain]) -> None:
        self._conditions = tuple(conditions)
        self._matcher = Matcher(self._conditions, domains)
        self._judges = [judge_of(condition) for condition in self._conditions]

    def judge(self, record: Record) -> tuple[bool | None, ...]:
        """The outcome of every condition; raises `Disagreement` where the engine fired otherwise."""
        outcomes = tuple([judge(record) for judge in self._judges])
        holding = {index for index, outcome in enumerate(outcomes) if outcome}
        fired = self._matcher.fired(record)
        if holding != fired:
            raise Disagreement(holding ^ fired)
        return outcomes

    def waits(self, index: int, record: Record) -> set[str]:
        """The unanswered facts that an undecided condition waits for."""
        return waits_for(self._conditions[index], record)

    def close(self) -> None:
        """Give the engine's memory back."""
        self._matcher.close()


def judge_of(condition: Condition) -> Judge:
    """The condition as nested closures, so that judging walks no tree; same outcomes as `conditions.holds`.

    >>> judge = judge_of(Bound("t", ">", 70.0))
    >>> judge({"t": 85.0}), judge({"t": VOID}), judge({})
    (True, False, None)
    """
    if isinstance(condition, Every | Either):
        if len(condition.parts) == 1:
            return judge_of(condition.parts[0])
        join = _every if isinstance(condition, Every) else _either
        return join(tuple(judge_of(part) for part in condition.parts))
    if isinstance(condition, Bound):
        if isinstance(condition.limit, FactRef):
            return _against_fact(condition.name, condition.sign, condition.limit.name)
        return _against_limit(condition.name, condition.sign, condition.limit)
    if isinstance(condition, Member):
        return _member(condition)
    if isinstance(condition, Valueless):
        return _valueless(condition)
    return _ticked(condition) if isinstance(condition, Ticked) else _stated(condition)


def _every(parts: tuple[Judge, ...]) -> Judge:
    def judge(record: Record) -> bool | None:
        outcome: bool | None = True
        for part in parts:
            one = part(record)
            if one is False:
                return False
            if one is None:
                outcome = None
        return outcome

    return judge


def _either(parts: tuple[Judge, ...]) -> Judge:
    def judge(record: Record) -> bool | None:
        outcome: bool | None = False
        for part in parts:
            one = part(record)
            if one:
                return True
            if one is None:
                outcome = None
        return outcome

    return judge


def _against_limit(name: str, sign: str, limit: float) -> Judge:
    compare = SIGNS[sign]

    def judge(record: Record) -> bool | None:
        seen = record.get(name)
        if seen is None:
            return None
        return False if seen is VOID else compare(seen, limit)  # type: ignore[arg-type]  # declared a number or place

    return judge


def _against_fact(name: str, sign: str, other: str) -> Judge:
    compare = SIGNS[sign]

    def judge(record: Record) -> bool | None:
        seen, limit = record.get(name), record.get(other)
        if seen is VOID or limit is VOID:
            return False
        if seen is None or limit is None:
            return None
        return compare(seen, limit)  # type: ignore[arg-type]  # both are declared numbers or places

    return judge


def _valueless(term: Valueless) -> Judge:
    name, wanted = term.name, term.wanted

    def judge(record: Record) -> bool | None:
        seen = record.get(name)
        return None if seen is None else (seen is VOID) is wanted

    return judge


def _member(term: Member) -> Judge:
    name, among, wanted = term.name, term.among, term.wanted

    def judge(record: Record) -> bool | None:
        seen = record.get(name)
        if seen is None:
            return None
        return False if seen is VOID else (seen in among) is wanted

    return judge


def _ticked(term: Ticked) -> Judge:
    name, apart, wanted = term.name, term.among.isdisjoint, term.wanted

    def judge(record: Record) -> bool | None:
        seen = record.get(name)
        if seen is None:
            return None
        return False if seen is VOID else apart(seen) is not wanted  # type: ignore[arg-type]  # declared a tick list

    return judge


def _stated(term: Stated) -> Judge:
    name, wanted = term.name, term.wanted

    def judge(record: Record) -> bool | None:
        seen = record.get(name)
        return (seen is not None and seen is not VOID) is wanted

    return judge
