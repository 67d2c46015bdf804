"""Judging a catalogue against a specification: verdicts, shortfalls with margins, and the ranking."""

from collections.abc import Mapping, Sequence
from enum import StrEnum
from typing import NamedTuple

from advisor.conditions import Bound, Coded, Condition, Domain, Either, Every, Member, Stated, Ticked, leaves
from advisor.conditions.terms import SIGNS
from advisor.shelf.catalogue import Catalogue
from advisor.shelf.columns import Column, judge, places
from advisor.specification import MUST, STRONG, Demand


class Verdict(StrEnum):
    """What a product is to a specification."""

    FITS = "fits"
    SECOND_BEST = "second_best"
    STILL_IN = "still_in"
    UNPROVEN = "unproven"
    FALLS_SHORT = "falls_short"


_RANK = {verdict: place for place, verdict in enumerate(Verdict)}


class Shortfall(NamedTuple):
    """A demand that an item misses: by what it shows (None: its sheet lacks the value) and how many steps."""

    demand: Demand
    seen: Coded | None
    steps: int


class Judgement:
    """All items of a catalogue against all demands, as masks."""

    def __init__(
        self,
        catalogue: Catalogue,
        columns: Mapping[str, Column],
        demands: Sequence[Demand],
        domains: Mapping[str, Domain],
        *,
        missing_counts: bool,
    ) -> None:
        self.catalogue, self.columns, self.demands, self.domains = catalogue, columns, tuple(demands), domains
        everything = catalogue.everything
        self.failing: list[int] = []
        self.missing: list[int] = []
        self.fails_must = self.unproven = self.misses_strong = 0
        self._waiting = frozenset(name for name, column in columns.items() if column.waiting)
        for demand in self.demands:
            failing, missing = self._judge(demand, everything, missing_counts=missing_counts)
            self.failing.append(failing)
            self.missing.append(missing)
            if demand.level == MUST:
                self.fails_must |= failing
                self.unproven |= missing
            elif demand.level <= STRONG:
                self.misses_strong |= failing | missing

    def _judge(self, demand: Demand, everything: int, *, missing_counts: bool) -> tuple[int, int]:
        if self._waits(demand.for_):
            return 0, 0
        _, not_for = judge(demand.for_, self.columns, everything)
        applies = everything & ~not_for
        if demand.void:
            return 0, applies if missing_counts else 0
        column = self.columns.get(demand.property)
        if column is not None and column.waiting:
            return 0, 0
        holding, failing = judge(demand.test, self.columns, everything)
        return applies & failing, applies & ~(holding | failing) if missing_counts else 0

    def _waits(self, condition: Condition) -> bool:
        """Whether a `for` speaks of a property that is not known for any item until questions are answered."""
        return bool(self._waiting) and any(term.name in self._waiting for term in leaves(condition))

    @property
    def passing(self) -> int:
        """The items that no must rules out and that leave no must unproven."""
        return self.catalogue.everything & ~self.fails_must & ~self.unproven

    def verdict(self, place: int, *, is_open: bool = False) -> Verdict:
        """The verdict on one item."""
        if self.fails_must >> place & 1:
            return Verdict.FALLS_SHORT
        if self.unproven >> place & 1:
            return Verdict.UNPROVEN
        if is_open:
            return Verdict.STILL_IN
        return Verdict.SECOND_BEST if self.misses_strong >> place & 1 else Verdict.FITS

    def steps(self, among: int) -> dict[int, tuple[int, int, int, int]]:
        """For the items among these: the whole steps short of the shoulds, added level by level."""
        short = {place: [0, 0, 0, 0] for place in places(among)}
        for demand, failing, missing in zip(self.demands, self.failing, self.missing, strict=True):
            if demand.level == MUST:
                continue
            level = demand.level - 1
            for place in places(missing & among):
                short[place][level] += 1
            if failing & among:
                self._add(demand, failing & among, level, short)
        return {place: (each[0], each[1], each[2], each[3]) for place, each in short.items()}

    def _add(self, demand: Demand, failing: int, level: int, short: dict[int, list[int]]) -> None:
        column = self.columns[demand.property]
        known: dict[Coded, int] = {}
        for place in places(failing):
            value = column.values[place]
            if value is None:
                continue
            if value not in known:
                known[value] = steps_short(demand.test, value, self.domains[demand.property])
            short[place][level] += known[value]

    def shortfalls(self, place: int) -> list[Shortfall]:
        """Every demand that the item misses, musts first."""
        bit = 1 << place
        found = []
        for demand, failing, missing in zip(self.demands, self.failing, self.missing, strict=True):
            if missing & bit:
                found.append(Shortfall(demand, None, 1))
            elif failing & bit:
                seen = self.columns[demand.property].values[place]
                found.append(
                    Shortfall(
                        demand,
                        seen,
                        0 if seen is None else steps_short(demand.test, seen, self.domains[demand.property]),
                    )
                )
        return sorted(found, key=lambda each: each.demand.level)

    def ranking(self, *, is_open: bool = False) -> list[tuple[int, Verdict, tuple[int, int, int, int]]]:
        """All items, best first: by verdict, by steps short level by level, by item code."""
        alive = self.catalogue.everything & ~self.fails_must
        steps = self.steps(alive)
        none = (0, 0, 0, 0)
        rows = [
            (_RANK[verdict := self.verdict(place, is_open=is_open)], steps.get(place, none), item.code, place, verdict)
            for place, item in enumerate(self.catalogue.items)
        ]
        rows.sort()
        return [(place, verdict, short) for _, short, _, place, verdict in rows]


def steps_short(test: Condition, value: Coded, domain: Domain) -> int:
    """Whole steps by which a value misses a test; at least 1 where it misses at all.

    >>> steps_short(Member("nlgi", frozenset({3.0, 4.0})), 6.0, Domain("scale"))
    2
    """
    if isinstance(test, Every):
        return max((steps_short(part, value, domain) for part in test.parts), default=0)
    if isinstance(test, Either):
        return min((steps_short(part, value, domain) for part in test.parts), default=1)
    if isinstance(test, Bound) and isinstance(value, float | int) and isinstance(test.limit, float | int):
        if _meets(test, value):
            return 0
        return domain.steps_between(value, test.limit)
    if isinstance(test, Member):
        if (value in test.among) is test.wanted:
            return 0
        numbers = [each for each in test.among if isinstance(each, float)]
        if test.wanted and numbers and isinstance(value, float):
            return min(domain.steps_between(value, each) for each in numbers)
        return 1
    if isinstance(test, Ticked) and isinstance(value, frozenset):
        return 0 if (not test.among.isdisjoint(value)) is test.wanted else 1
    return 0 if isinstance(test, Stated) and test.wanted else 1


def _meets(test: Bound, value: float) -> bool:
    return isinstance(test.limit, float | int) and SIGNS[test.sign](value, test.limit)


def limits_of(test: Condition) -> list[float]:
    """The inclusive limits of a test."""
    if isinstance(test, Every | Either):
        return [limit for part in test.parts for limit in limits_of(part)]
    if isinstance(test, Bound) and test.sign in {"<=", ">="} and isinstance(test.limit, float):
        return [test.limit]
    return []


def at_limit(judgement: Judgement, place: int, among: int) -> int:
    """Of these items, those that the demand at this place concerns and that meet it with nothing to spare."""
    demand = judgement.demands[place]
    column = judgement.columns.get(demand.property)
    if column is None:
        return 0
    met = 0
    for limit in limits_of(demand.test):
        met |= column.by_value.get(limit, 0)
    if not met & among:
        return 0
    _, not_for = judge(demand.for_, judgement.columns, judgement.catalogue.everything)
    return met & among & ~not_for & ~judgement.failing[place]
