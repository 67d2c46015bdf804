"""Demands that cannot be had together: musts, and shoulds of one level, whose rules can speak in one case."""

from collections.abc import Iterator
from itertools import combinations, product

from advisor.anomalies.finding import Finding, Kind
from advisor.anomalies.ground import Ground, Spoken
from advisor.anomalies.proving import Proving
from advisor.boxes import Box
from advisor.conditions import ALWAYS, Bound, Condition, Either, Every, FactRef, leaves
from advisor.knowledge import Asks

_UP, _DOWN = frozenset({">", ">=", "="}), frozenset({"<", "<=", "="})


def clashes(ground: Ground, proving: Proving) -> Iterator[Finding]:
    """Each pair of rules with such demands on one property, once, with a case in which both speak."""
    by_property: dict[tuple[str, int], list[Spoken]] = {}
    for spoken in ground.spoken():
        each = spoken.instance.then[spoken.place]
        if isinstance(each, Asks):
            by_property.setdefault((each.property, each.level), []).append(spoken)
    memory = _Memory(ground)
    for (name, level), demands in by_property.items():
        told: set[tuple[str, str]] = set()
        for one, other in combinations(demands, 2):
            pair = (one.rule.id, other.rule.id)
            if pair in told:
                continue
            when = memory.clash(_test(one), _test(other))
            box = None if when is None else _together(one, other, when, ground)
            if box is not None and when is not None:
                told.add(pair)
                yield _finding(name, level, (one, other), box, when, proving)


def _test(spoken: Spoken) -> Condition:
    each = spoken.instance.then[spoken.place]
    return each.test if isinstance(each, Asks) else ALWAYS


class _Memory:
    """When two tests leave nothing, found once per pair of tests."""

    def __init__(self, ground: Ground) -> None:
        self.ground = ground
        self._known: dict[tuple[Condition, Condition], Condition | None] = {}

    def clash(self, one: Condition, other: Condition) -> Condition | None:
        """The condition on facts under which nothing meets both; nothing where something always does."""
        if (one, other) not in self._known:
            self._known[one, other] = self._clash(one, other)
        return self._known[one, other]

    def _clash(self, one: Condition, other: Condition) -> Condition | None:
        if not _facts_in(one) and not _facts_in(other):
            met = (a.intersect(b) for a, b in product(self.ground.boxes(one), self.ground.boxes(other)))
            return None if any(each is not None for each in met) else ALWAYS
        if isinstance(one, Either) or isinstance(other, Either):
            return None
        first = [term for term in leaves(one) if isinstance(term, Bound)]
        second = [term for term in leaves(other) if isinstance(term, Bound)]
        ways = [way for low, high in (*product(first, second), *product(second, first)) if (way := _crossed(low, high))]
        return Either(tuple(ways)) if ways else None


def _facts_in(test: Condition) -> bool:
    return any(isinstance(term, Bound) and isinstance(term.limit, FactRef) for term in leaves(test))


def _crossed(low: Bound, high: Bound) -> Condition | None:
    """The condition that a lower limit lies above an upper one."""
    if low.sign not in _UP or high.sign not in _DOWN:
        return None
    strict = low.sign == ">" or high.sign == "<"
    if isinstance(low.limit, FactRef):
        return Bound(low.limit.name, ">=" if strict else ">", high.limit)
    if isinstance(high.limit, FactRef):
        return Bound(high.limit.name, "<=" if strict else "<", low.limit)
    return ALWAYS if low.limit > high.limit or (strict and low.limit == high.limit) else None


def _together(one: Spoken, other: Spoken, when: Condition, ground: Ground) -> Box | None:
    """A region that a case can reach, in which both rules speak of the same lubricants and leave nothing."""
    for first, second in product(ground.boxes(one.region), ground.boxes(other.region)):
        met = first.intersect(second)
        for box in ground.boxes(when) if met is not None else ():
            cut = met.intersect(box) if met is not None else None
            if cut is not None and ground.reached(cut) is not None:
                return cut
    return None


def _finding(
    name: str, level: int, pair: tuple[Spoken, Spoken], box: Box, when: Condition, proving: Proving
) -> Finding:
    one, other = pair[0].rule, pair[1].rule
    kind: Kind = "opposed shoulds" if level else "conflict"
    witness = proving.shows(box, [pair[0].region, pair[1].region, Every((when,))])
    also = f" (instances {pair[0].instance.id} and {pair[1].instance.id})" if one.table or other.table else ""
    wish = f"shoulds of level {level}" if level else "musts"
    return Finding(
        kind,
        max(one, other, key=lambda rule: rule.mark).mark,
        f"rules '{one.id}' and '{other.id}' can speak together, and no {name} meets both their {wish}{also}",
        "part their conditions, or say under 'may_conflict' why real life has both",
        witness,
        (one.id, other.id),
        one.may_conflict.get(other.id, "") or other.may_conflict.get(one.id, ""),
    )
