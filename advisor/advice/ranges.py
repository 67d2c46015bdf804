"""A range of values: which of them are looked at, where the advice changes, and the stretches between."""

import heapq
import math
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field
from itertools import groupby, pairwise
from operator import itemgetter

from advisor.advice.model import Advice, Course, Part, Reading
from advisor.advice.readings import LEVELS, Name, level_of, readings
from advisor.conditions import Domain
from advisor.formulas.formula import with_unit

_ROUNDING = 1e-9
Key = Callable[[int], object]


@dataclass(frozen=True, slots=True)
class Grid:
    """The values of a range by their places: its two ends, and between them the multiples of the step of its fact.

    >>> grid = Grid(71.1, 74.0, 1.0)
    >>> [grid.value(place) for place in range(grid.last + 1)]
    [71.1, 72.0, 73.0, 74.0]
    """

    low: float
    high: float
    step: float

    @property
    def _base(self) -> int:
        """The steps from nought to the last multiple that is not above the lower end."""
        return math.floor(self.low / self.step + _ROUNDING)

    @property
    def last(self) -> int:
        """The place of the upper end."""
        return max(1, math.ceil(self.high / self.step - _ROUNDING) - self._base)

    def value(self, place: int) -> float:
        """The value at a place."""
        if place <= 0 or place >= self.last:
            return self.low if place <= 0 else self.high
        return round((self._base + place) * self.step, 9)

    def beside(self, limits: Iterable[float]) -> list[int]:
        """The places at these limits and on both sides of them.

        >>> Grid(70.0, 76.0, 1.0).beside([72.0, 74.5, 90.0])
        [1, 2, 3, 4, 5]
        """
        found: set[int] = set()
        for limit in limits:
            at = limit / self.step - self._base
            if -1 <= at <= self.last + 1:
                found |= {math.ceil(at - _ROUNDING) - 1, math.ceil(at - _ROUNDING), math.floor(at + _ROUNDING) + 1}
        return sorted(place for place in found if 0 <= place <= self.last)


def said_at(value: float, domain: Domain) -> str:
    """A value of a range, told exactly enough for the step of its fact.

    >>> from advisor.conditions.domains import Step
    >>> said_at(71.11111, Domain("number", "°C", step=Step("absolute", 1.0)))
    '71.11 °C'
    """
    step = domain.step.size if domain.step else 1.0
    return with_unit(round(value, 2 - min(0, math.floor(math.log10(step)))), domain.unit)


@dataclass(slots=True)
class Walk:
    """A part of a range from its first to its last place, and the values in it that were looked at.

    `surely`: what was not looked at lies between two values between which nothing can change.
    """

    first: int
    last: int
    run: Callable[[int], Advice]
    nothing_between: Callable[[Advice, Advice], bool]
    known: dict[int, Advice] = field(default_factory=dict)
    read: dict[int, Mapping[Name, Reading]] = field(default_factory=dict)
    surely: bool = True

    @property
    def places(self) -> list[int]:
        """The places looked at, in order."""
        return sorted(self.known)

    def at(self, place: int) -> Advice:
        """The advice at a place, run once."""
        if place not in self.known:
            self.known[place] = self.run(place)
            self.read[place] = readings(self.known[place])
        return self.known[place]

    def look(self, marks: Iterable[int], most: int) -> None:
        """Halve the widest gap between places looked at until nothing can change in any, or enough were looked at."""
        inside = sorted({self.first, self.last, *(each for each in marks if self.first < each < self.last)})
        for place in inside:
            self.at(place)
        gaps = [(before - after, before, after) for before, after in pairwise(inside)]
        heapq.heapify(gaps)
        while gaps:
            _, before, after = heapq.heappop(gaps)
            if after - before == 1 or self.nothing_between(self.at(before), self.at(after)):
                continue
            if len(self.known) >= most:
                self.surely = False
                continue
            middle = (before + after) // 2
            self.at(middle)
            for one, other in ((before, middle), (middle, after)):
                heapq.heappush(gaps, (one - other, one, other))

    def changes(self, key: Key) -> list[tuple[int, int]]:
        """Neighbouring places looked at whose key differs."""
        return [(before, after) for before, after in pairwise(self.places) if key(before) != key(after)]

    def sharpen(self, key: Key, most: float = math.inf) -> None:
        """Find the very step at which a key changes; round by round, as far as the number of values to look at goes."""
        while wide := [each for each in self.changes(key) if each[1] - each[0] > 1]:
            for before, after in wide:
                if len(self.known) >= most:
                    return
                self.at((before + after) // 2)

    def key_of(self, level: int) -> Key:
        """What is read down to a level of meaning."""
        kept: dict[int, object] = {}
        some = self.at(self.first)

        def key(place: int) -> object:
            if place not in kept:
                kept[place] = {name: each for name, each in self.read[place].items() if level_of(name, some) <= level}
            return kept[place]

        return key


def stretches(walk: Walk, most: int) -> list[tuple[int, int]]:
    """Neighbouring stretches, at most so many, parted where the gravest things change, exactly to the step.

    Level after level of meaning is told apart as long as the stretches stay few enough.
    """
    starts = [walk.first]
    for level in range(LEVELS):
        key = walk.key_of(level)
        if len(walk.changes(key)) >= most:
            break
        walk.sharpen(key)
        changes = walk.changes(key)
        if len(changes) >= most:
            break
        starts = [walk.first, *(after for _, after in changes)]
    return [(start, following - 1) for start, following in pairwise([*starts, walk.last + 1])]


def courses(walk: Walk, first: int, last: int, value: Callable[[int], float], variant: str = "") -> tuple[Course, ...]:
    """Everything that changes between two places, with the stretches over which it reads the same."""
    within = [place for place in walk.places if first <= place <= last]
    names = dict.fromkeys(name for place in within for name in walk.read[place])
    found = []
    for what, name in names:
        seen = [(walk.read[place].get((what, name), False), place) for place in within]
        parts = []
        for reading, group in groupby(seen, itemgetter(0)):
            places = [place for _, place in group]
            parts.append(Part(value(places[0]), value(places[-1]), reading))
        if len(parts) > 1:
            found.append(Course(what, name, tuple(parts), variant))
    return tuple(sorted(found, key=lambda each: level_of((each.what, each.name), walk.at(first))))
