"""Judging a catalogue against a specification: verdicts, shortfalls with margins, and the ranking."""

from collections.abc import Callable, Iterator, Mapping, Sequence
from enum import StrEnum
from itertools import repeat
from typing import NamedTuple

from advisor.conditions import ALWAYS, Bound, Coded, Condition, Domain, Either, Every, Member, Stated, Ticked, leaves
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


USABLE = frozenset({Verdict.FITS, Verdict.SECOND_BEST, Verdict.STILL_IN})
"""Verdicts of products that may be used."""

Steps = tuple[int, int, int, int]
"""Whole steps short of the shoulds, level by level."""
_NOT_COUNTED: Steps = (0, 0, 0, 0)
_SOUGHT = 4
"""Demands beside one another that may have gone or come between two judgements."""


class Shortfall(NamedTuple):
    """A demand that an item misses: by what it shows (None: its sheet lacks the value) and how many steps."""

    demand: Demand
    seen: Coded | None
    steps: int


class Ranked(NamedTuple):
    """A product with its verdict and the whole steps it misses of the shoulds, level by level."""

    place: int
    item: str
    verdict: Verdict
    steps: Steps


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
        like: "Judgement | None" = None,
    ) -> None:
        self.catalogue, self.columns, self.demands, self.domains = catalogue, columns, tuple(demands), domains
        everything = catalogue.everything
        self.failing: list[int] = []
        self.missing: list[int] = []
        self.fails_must = self.unproven = self.misses_strong = 0
        self._waiting = frozenset(name for name, column in columns.items() if column.waiting)
        known = _known(self.demands, like) if like is not None else repeat(None, len(self.demands))
        for demand, before in zip(self.demands, known, strict=True):
            failing, missing = before or self._judge(demand, everything, missing_counts=missing_counts)
            self.failing.append(failing)
            self.missing.append(missing)
            if demand.level == MUST:
                self.fails_must |= failing
                self.unproven |= missing
            elif demand.level <= STRONG:
                self.misses_strong |= failing | missing

    def _judge(self, demand: Demand, everything: int, *, missing_counts: bool) -> tuple[int, int]:
        applies = everything
        if demand.for_ is not ALWAYS:
            if self._waits(demand.for_):
                return 0, 0
            applies = everything & ~judge(demand.for_, self.columns, everything)[1]
            if not applies:
                return 0, 0
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

    def musts_failed(self, among: int) -> list[tuple[str, int]]:
        """The rule of each must that some of these items fail, with the items."""
        return [
            (demand.rule, both)
            for demand, failing in zip(self.demands, self.failing, strict=True)
            if demand.level == MUST and (both := failing & among)
        ]

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

    def steps(self, among: int) -> dict[int, Steps]:
        """For the items among these: the whole steps short of the shoulds, added level by level."""
        short = {place: [0, 0, 0, 0] for place in places(among)}
        for demand, failing, missing in zip(self.demands, self.failing, self.missing, strict=True):
            if demand.level == MUST or not (failing | missing) & among:
                continue
            level = demand.level - 1
            for place in places(missing & among):
                short[place][level] += 1
            if failing & among:
                self._add(demand, failing & among, level, short)
        return {place: (each[0], each[1], each[2], each[3]) for place, each in short.items()}

    def _add(self, demand: Demand, failing: int, level: int, short: dict[int, list[int]]) -> None:
        column = self.columns[demand.property]
        short_of = shortness(demand.test, self.domains[demand.property])
        if failing.bit_count() < len(column.by_value):
            for place in places(failing):
                short[place][level] += short_of(column.values[place])  # type: ignore[arg-type]  # what fails has a value
            return
        for value, items in column.by_value.items():
            if both := items & failing:
                steps = short_of(value)
                for place in places(both):
                    short[place][level] += steps

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

    def ranking(self, *, is_open: bool = False) -> tuple[Ranked, ...]:
        """All items, best first: by verdict, by steps short level by level, by item code."""
        steps = self.steps(self.catalogue.everything & ~self.fails_must)
        codes = self.catalogue.codes
        found: list[Ranked] = []
        for verdict, items in self._by_verdict(is_open=is_open):
            order = sorted(places(items), key=codes.__getitem__)
            if verdict is Verdict.FALLS_SHORT:
                found += [Ranked(place, codes[place], verdict, _NOT_COUNTED) for place in order]
            else:
                order.sort(key=steps.__getitem__)
                found += [Ranked(place, codes[place], verdict, steps[place]) for place in order]
        return tuple(found)

    def _by_verdict(self, *, is_open: bool) -> list[tuple[Verdict, int]]:
        """The items that each verdict is given to, in the order of the ranking."""
        good = self.passing
        second = 0 if is_open else good & self.misses_strong
        best = 0 if is_open else good & ~second
        return [
            (Verdict.FITS, best),
            (Verdict.SECOND_BEST, second),
            (Verdict.STILL_IN, good if is_open else 0),
            (Verdict.UNPROVEN, self.unproven & ~self.fails_must),
            (Verdict.FALLS_SHORT, self.fails_must),
        ]


def _known(demands: Sequence[Demand], like: Judgement) -> Iterator[tuple[int, int] | None]:
    """For each demand who misses it and who lacks the value, where another judgement of the same columns has it.

    The two have most of their demands in common, and in the same order.
    """
    at = 0
    for demand in demands:
        near = range(at, min(at + _SOUGHT, len(like.demands)))
        place = next((each for each in near if like.demands[each] == demand), None)
        if place is None:
            yield None
        else:
            at = place + 1
            yield like.failing[place], like.missing[place]


def steps_short(test: Condition, value: Coded, domain: Domain) -> int:
    """Whole steps by which a value misses a test; at least 1 where it misses at all.

    >>> steps_short(Member("nlgi", frozenset({3.0, 4.0})), 6.0, Domain("scale"))
    2
    """
    return shortness(test, domain)(value)


def shortness(test: Condition, domain: Domain) -> Callable[[Coded], int]:
    """How many steps a value is short of this test, as a function made once for all values."""
    if isinstance(test, Every | Either):
        parts = [shortness(part, domain) for part in test.parts]
        if len(parts) == 1:
            return parts[0]
        pick, without = (max, 0) if isinstance(test, Every) else (min, 1)
        return lambda value: pick((part(value) for part in parts), default=without)
    if isinstance(test, Bound) and isinstance(test.limit, float | int):
        return _short_of_bound(test.sign, test.limit, domain)
    if isinstance(test, Member):
        return _short_of_members(test, domain)
    if isinstance(test, Ticked):
        return lambda value: 1 if isinstance(value, frozenset) and test.among.isdisjoint(value) is test.wanted else 0
    met = isinstance(test, Stated) and test.wanted
    return lambda _: 0 if met else 1


def _short_of_bound(sign: str, limit: float, domain: Domain) -> Callable[[Coded], int]:
    meets, between = SIGNS[sign], domain.steps_between

    def short(value: Coded) -> int:
        if not isinstance(value, float | int):
            return 1
        return 0 if meets(value, limit) else between(value, limit)

    return short


def _short_of_members(test: Member, domain: Domain) -> Callable[[Coded], int]:
    numbers = [each for each in test.among if isinstance(each, float)] if test.wanted else []

    def short(value: Coded) -> int:
        if (value in test.among) is test.wanted:
            return 0
        if numbers and isinstance(value, float):
            return min(domain.steps_between(value, each) for each in numbers)
        return 1

    return short


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
