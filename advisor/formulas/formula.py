"""What a formula is: a function on plain numbers, with equation, ranges, directions and source beside it as data.

A `Formula` takes numbers and gives one number, and knowledge may bind it. A `Lookup` is for people: it takes a name
from a list beside its numbers, or answers with names.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import lru_cache
from math import inf, isfinite
from typing import Literal, NamedTuple

Direction = Literal["up", "down", "none"]
Checked = Literal["yes", "from memory", "common practice"]


class OutOfRange(ValueError):
    """The physics of a formula ends here; the message names the range in a plain sentence."""


@dataclass(frozen=True, slots=True)
class Input:
    """One input of a formula: its range, and how the result moves when the input rises.

    `joints` are the values of the input at which the formula changes branch.
    """

    name: str
    symbol: str
    unit: str
    low: float
    high: float
    direction: Direction
    text: str
    joints: tuple[float, ...] = ()

    @property
    def range(self) -> str:
        """The inclusive range as it is printed, such as "10 to 500 mm" or "ISO VG 2 to 3200"."""
        if self.unit == "ISO VG":
            return f"{with_unit(self.low, self.unit)} to {plain(self.high)}"
        return f"{plain(self.low)} to {with_unit(self.high, self.unit)}"

    def holds(self, value: float) -> bool:
        """Whether the value lies in the inclusive range; a value that is no number does not."""
        return self.low <= value <= self.high

    def misses(self, values: Mapping[str, float]) -> bool:
        """Whether the value given for this input lies outside its range."""
        return self.name in values and not self.holds(values[self.name])

    def outside(self, value: float) -> str:
        """The sentence about a value outside the range."""
        return (
            f"{self.text[:1].upper()}{self.text[1:]} ({self.symbol}) is {with_unit(value, self.unit)}; "
            f"the formula is stated for {self.range}."
        )


@dataclass(frozen=True, slots=True)
class Formula:
    """A named engineering formula: the function together with what a reader must know to trust it."""

    name: str
    subject: str
    title: str
    function: Callable[..., float]
    inputs: tuple[Input, ...]
    result: str
    result_symbol: str
    result_unit: str
    equation: str
    source: str
    checked: Checked
    note: str = ""
    unit_follows: str = ""
    """The input whose unit the result takes, for formulas that hold in any unit."""

    def __call__(self, *values: float, **named: float) -> float:
        """The result, finite; OutOfRange where the arithmetic itself breaks down."""
        try:
            result = self.function(*values, **named)
        except (ArithmeticError, OutOfRange) as fault:
            if isinstance(fault, OutOfRange):
                raise
            raise OutOfRange(self._breakdown()) from fault
        if not isfinite(result):
            raise OutOfRange(self._breakdown())
        return result

    def outside(self, values: Mapping[str, float]) -> tuple[str, ...]:
        """One sentence for each value outside the inclusive range of its input."""
        return tuple(each.outside(values[each.name]) for each in self.inputs if each.misses(values))

    def _breakdown(self) -> str:
        return no_finite_value(self.title, self.inputs)


class Named(NamedTuple):
    """An answer in names: none, one or several of them, and the sentence in which they are told."""

    names: tuple[str, ...]
    text: str


@dataclass(frozen=True, slots=True)
class Choice:
    """An input that is one name out of a list."""

    name: str
    symbol: str
    options: tuple[str, ...]
    text: str

    @property
    def range(self) -> str:
        """The options as they are printed."""
        return f"one of {', '.join(self.options)}"


@dataclass(frozen=True, slots=True)
class Lookup:
    """A table or rule that people read by a name, or that answers with names; knowledge does not bind it."""

    name: str
    subject: str
    title: str
    function: Callable[..., float | Named]
    inputs: tuple[Input | Choice, ...]
    result: str
    result_symbol: str
    result_unit: str
    equation: str
    source: str
    checked: Checked
    note: str = ""

    def __call__(self, *values: float | str, **named: float | str) -> float | Named:
        """The answer, finite where it is a number; OutOfRange where the arithmetic itself breaks down."""
        try:
            answer = self.function(*values, **named)
        except (ArithmeticError, OutOfRange) as fault:
            if isinstance(fault, OutOfRange):
                raise
            raise OutOfRange(no_finite_value(self.title, self.inputs)) from fault
        if not isinstance(answer, Named) and not isfinite(answer):
            raise OutOfRange(no_finite_value(self.title, self.inputs))
        return answer

    def outside(self, values: Mapping[str, float]) -> tuple[str, ...]:
        """One sentence for each number outside the inclusive range of its input."""
        numbers = [each for each in self.inputs if isinstance(each, Input)]
        return tuple(each.outside(values[each.name]) for each in numbers if each.misses(values))


def put_in(equation: str, numbers: Mapping[str, str]) -> str:
    """The equation with every one of these symbols replaced by its number; a power may follow a symbol.

    >>> put_in("a = π·d²/4 + d₁", {"d": "20"})
    'a = π·20²/4 + d₁'
    """
    pieces = _pieces(equation, tuple(numbers))
    return "".join([numbers[piece] if place % 2 else piece for place, piece in enumerate(pieces)])


@lru_cache(maxsize=1024)
def _pieces(equation: str, symbols: tuple[str, ...]) -> tuple[str, ...]:
    """The equation cut before and after every one of these symbols: text and symbol by turns."""
    if not symbols:
        return (equation,)
    longest_first = "|".join(sorted(map(re.escape, symbols), key=len, reverse=True))
    # A letter or an index after the symbol makes another symbol of it.
    return tuple(re.split(rf"(?<!\w)({longest_first})(?!(?![²³])\w)", equation))


def no_finite_value(title: str, inputs: tuple[Input | Choice, ...]) -> str:
    """The sentence that is told where the arithmetic of a formula breaks down."""
    ranges = ", ".join(f"{each.symbol} {each.range}" for each in inputs)
    return f"{title} has no finite value here; it is stated for {ranges}."


def plain(value: float) -> str:
    """A number as it is printed in a sentence, with spaces between the thousands from five digits on.

    >>> plain(20_000_000), plain(1500), plain(-2.2)
    ('20 000 000', '1500', '-2.2')
    """
    return f"{value:,.10g}".replace(",", " ") if abs(value) >= 10_000 else f"{value:.10g}"


def with_unit(value: float, unit: str) -> str:
    """A number with its unit; the viscosity grade carries its unit in front.

    >>> with_unit(46, "ISO VG"), with_unit(1500, "1/min"), with_unit(0.5, "")
    ('ISO VG 46', '1500 1/min', '0.5')
    """
    if unit == "ISO VG":
        return f"{unit} {plain(value)}"
    return f"{plain(value)} {unit}".rstrip()


def demand_positive(value: float, text: str, unit: str = "") -> None:
    """Refuse a value that is not a finite number above zero."""
    if not 0 < value < inf:
        raise OutOfRange(f"The {text} must be more than 0 {unit}".rstrip() + f", but it is {with_unit(value, unit)}.")


def demand_within(value: float, low: float, high: float, text: str, unit: str = "") -> None:
    """Refuse a value outside an inclusive range beyond which the physics or the table ends."""
    if not low <= value <= high:
        raise OutOfRange(
            f"The {text} must lie between {plain(low)} and {with_unit(high, unit)}, but it is {with_unit(value, unit)}."
        )
