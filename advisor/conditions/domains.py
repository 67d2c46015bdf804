"""Domains: the kinds of value that facts and properties can have, and how such values are counted."""

import math
from collections.abc import Mapping
from dataclasses import dataclass, field

type_names = {
    "number": "a number",
    "choice": "one of the choices",
    "scale": "a place on the scale",
    "several": "a list of ticks",
    "item": "a product of the shelf",
    "yes_no": "yes or no",
    "text": "text",
}

Value = float | str | tuple[str, ...]
"""A value as people mean it: a number, a choice, or the ticked choices of a list."""

Coded = float | str | frozenset[str]
"""The same value as conditions see it: places of scales and yes/no as numbers, ticks as a set."""

_ROUNDING = 1e-9


@dataclass(frozen=True, slots=True)
class Step:
    """How a shortfall is counted: by an absolute size, by a ratio, or by places of a list."""

    kind: str
    size: float = 1.0


@dataclass(frozen=True, slots=True)
class Domain:
    """The declared domain of a fact or a property.

    `choices` maps ids to labels in their declared order; for scales low comes first.
    `places` lists the only numbers that exist (ISO viscosity grades). `order` is the place of each choice.
    """

    kind: str
    unit: str = ""
    low: float = -math.inf
    high: float = math.inf
    step: Step | None = None
    choices: Mapping[str, str] = field(default_factory=dict)
    places: tuple[float, ...] = ()
    named: Mapping[str, float] = field(default_factory=dict)
    open_choices: bool = False
    order: Mapping[str, int] = field(default_factory=dict, init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        object.__setattr__(self, "order", {choice: place for place, choice in enumerate(self.choices)})

    @property
    def ordered(self) -> bool:
        """Whether thresholds make sense on it."""
        return self.kind in {"number", "scale", "yes_no"}

    def code(self, value: Value) -> Coded:
        """The value as conditions see it; `value` must lie inside the domain.

        >>> Domain("scale", choices={"none": "none", "humid": "humid", "wash": "wash"}).code("humid")
        1.0
        """
        if self.kind in {"scale", "yes_no"}:
            return float(self.order[str(value)])
        if isinstance(value, tuple):
            return frozenset(value)
        return value

    def decode(self, coded: Coded) -> Value:
        """The value that people mean by a coded one."""
        if self.kind in {"scale", "yes_no"} and isinstance(coded, float):
            return tuple(self.choices)[int(coded)]
        if isinstance(coded, frozenset):
            return tuple(choice for choice in self.choices if choice in coded)
        return coded

    def label(self, value: Value) -> str:
        """What a person reads for the value, without the unit."""
        if isinstance(value, tuple):
            return ", ".join(self.choices.get(each, each) for each in value) or "none"
        if isinstance(value, str):
            return self.choices.get(value, value)
        return f"{value:.6g}"

    def accepts(self, value: Value) -> bool:
        """Whether the value lies inside the domain."""
        if self.kind == "number":
            inside = isinstance(value, float | int) and math.isfinite(value) and self.low <= value <= self.high
            return inside and (not self.places or value in self.places)
        if self.kind == "several":
            return isinstance(value, tuple) and all(each in self.choices for each in value)
        if self.kind == "text":
            return isinstance(value, str)
        return isinstance(value, str) and (value in self.choices or self.open_choices)

    def steps_between(self, value: float, limit: float) -> int:
        """Whole steps by which `value` misses `limit`, rounded up after taking off 1e-9; at least 1.

        >>> Domain("number", step=Step("ratio", 1.5)).steps_between(1.0, 1.5)
        1
        >>> Domain("number", step=Step("absolute", 10)).steps_between(95.0, 120.0)
        3
        """
        kind, size = (self.step.kind, self.step.size) if self.step else ("places", 1.0)
        if kind == "ratio":
            apart = abs(math.log(limit / value) / math.log(size)) if value > 0 and limit > 0 else 99.0
        elif kind == "places" and self.places:
            apart = abs(self._place(value) - self._place(limit))
        else:
            apart = abs(limit - value) / size
        return max(1, math.ceil(apart - _ROUNDING))

    def _place(self, value: float) -> float:
        return float(sum(1 for place in self.places if place < value))


YES_NO = Domain("yes_no", choices={"no": "no", "yes": "yes"})
