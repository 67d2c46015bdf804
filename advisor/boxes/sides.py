"""Sides of boxes: stretches of numbers, sets of choices, ticks set or clear, and having no value for good."""

import math
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Final

from advisor.conditions import VOID, Coded, Domain
from advisor.conditions.terms import Void


@dataclass(frozen=True, slots=True)
class Stretch:
    """Numbers from `low` to `high`; an end belongs to it unless it is open."""

    low: float
    high: float
    low_open: bool = False
    high_open: bool = False

    @property
    def empty(self) -> bool:
        """Whether no number lies in it, the gaps between neighbouring floats counted."""
        first = math.nextafter(self.low, math.inf) if self.low_open else self.low
        last = math.nextafter(self.high, -math.inf) if self.high_open else self.high
        return first > last or first == math.inf or last == -math.inf

    def has(self, value: float) -> bool:
        """Whether the number lies in it."""
        above = value > self.low if self.low_open else value >= self.low
        return above and (value < self.high if self.high_open else value <= self.high)

    def meet(self, other: "Stretch") -> "Stretch":
        """What lies in both."""
        low, low_open = max((self.low, self.low_open), (other.low, other.low_open))
        high, high_closed = min((self.high, not self.high_open), (other.high, not other.high_open))
        return Stretch(low, high, low_open, not high_closed)

    def without(self, other: "Stretch") -> Iterator["Stretch"]:
        """What lies below and above the other."""
        yield self.meet(Stretch(-math.inf, other.low, high_open=not other.low_open))
        yield self.meet(Stretch(other.high, math.inf, low_open=not other.high_open))


@dataclass(frozen=True, slots=True)
class Among:
    """These choices (or places of a scale, or grades); where `wanted` is false, all others of an open list."""

    values: frozenset[Coded]
    wanted: bool = True

    @property
    def empty(self) -> bool:
        """Whether no choice is left; an open list never runs out."""
        return self.wanted and not self.values

    def meet(self, other: "Among") -> "Among":
        """What both allow."""
        if self.wanted:
            return Among(self.values & other.values if other.wanted else self.values - other.values)
        return Among(other.values - self.values) if other.wanted else Among(self.values | other.values, wanted=False)

    def without(self, other: "Among") -> Iterator["Among"]:
        """What the other does not allow."""
        yield self.meet(Among(other.values, not other.wanted))


@dataclass(frozen=True, slots=True)
class Ticks:
    """Lists on which these ticks are set and those are clear; the rest is free."""

    set: frozenset[str] = frozenset()
    clear: frozenset[str] = frozenset()

    @property
    def empty(self) -> bool:
        """Whether a tick would have to be both."""
        return not self.set.isdisjoint(self.clear)

    def meet(self, other: "Ticks") -> "Ticks":
        """Lists that suit both."""
        return Ticks(self.set | other.set, self.clear | other.clear)

    def without(self, other: "Ticks") -> Iterator["Ticks"]:
        """Lists that suit this but not the other, as disjoint pieces."""
        here = self
        for tick in sorted(other.set - self.set):
            yield Ticks(here.set, here.clear | {tick})
            here = Ticks(here.set | {tick}, here.clear)
        for tick in sorted(other.clear - self.clear):
            yield Ticks(here.set | {tick}, here.clear)
            here = Ticks(here.set, here.clear | {tick})


@dataclass(frozen=True, slots=True)
class Lacking:
    """No value for good: a formula outside its range, a look-up without a row, a sheet that does not say."""

    @property
    def empty(self) -> bool:
        """Never: it is one point."""
        return False

    def meet(self, other: "Lacking") -> "Lacking":
        """Itself."""
        return other

    def without(self, other: "Lacking") -> Iterator["Lacking"]:
        """Nothing."""
        yield from () if self == other else (self,)


Side = Stretch | Among | Ticks | Lacking
LACKING: Final = Lacking()


def meet(one: Side, other: Side) -> Side | None:
    """What both sides have in common; nothing where that is empty."""
    if type(one) is not type(other):
        return None
    met: Side = one.meet(other)  # type: ignore[arg-type]  # both are of one kind
    return None if met.empty else met


def without(one: Side, other: Side) -> list[Side]:
    """Disjoint sides that make up what is in the one and not in the other."""
    if type(one) is not type(other):
        return [one]
    return [piece for piece in one.without(other) if not piece.empty]  # type: ignore[arg-type]  # both are of one kind


def whole(domain: Domain) -> Side:
    """All values of a domain."""
    if domain.places:
        return Among(frozenset(domain.places))
    if domain.kind == "number":
        return Stretch(domain.low, domain.high)
    if domain.kind == "several":
        return Ticks()
    if domain.kind == "text" or domain.open_choices:
        return Among(frozenset(), wanted=False)
    return Among(frozenset(domain.code(choice) for choice in domain.choices))


def a_value(side: Side, domain: Domain) -> Coded | Void:
    """A value on the side: a number on the declared step where one lies there, the first choice in declared order."""
    if isinstance(side, Stretch):
        return a_number(side, domain)
    if isinstance(side, Ticks):
        return side.set
    if isinstance(side, Lacking):
        return VOID
    if side.wanted:
        declared = [domain.code(choice) for choice in domain.choices] if domain.choices else sorted(domain.places)
        return next((each for each in declared if each in side.values), min(side.values, key=str))
    stranger = next((choice for choice in domain.choices if choice not in side.values), "another")
    while stranger in side.values:
        stranger += "_one"
    return stranger


def a_number(stretch: Stretch, domain: Domain) -> float:
    """A number of a stretch that is not empty, as plain as can be found and off its ends where possible."""
    centre = _centre(stretch)
    size = domain.step.size if domain.step and domain.step.kind == "absolute" else 0.0
    on_step = [place * size for place in _places(stretch, centre, size)] if size else []
    rounded = [float(f"{centre:.{digits}g}") for digits in (2, 3, 4, 6, 9)]
    first = math.nextafter(stretch.low, math.inf) if stretch.low_open else stretch.low
    for value in (*(round(each, 10) for each in on_step), *rounded, centre):
        if stretch.has(value):
            return value + 0.0
    return first


def _centre(stretch: Stretch) -> float:
    low, high = stretch.low, stretch.high
    if math.isinf(low) and math.isinf(high):
        return 0.0
    if math.isinf(high):
        return low + max(1.0, abs(low) / 10)
    if math.isinf(low):
        return high - max(1.0, abs(high) / 10)
    return low / 2 + high / 2


def _places(stretch: Stretch, centre: float, size: float) -> list[float]:
    """Whole multiples of the step, the most central first; some lie in the stretch if any does."""
    ends = [math.ceil(end / size) for end in (stretch.low, stretch.high) if math.isfinite(end)]
    return [float(place + more) for place in (round(centre / size), *ends) for more in (0, 1, -1)]
