"""What a scenario may expect of an advice, kind by kind; each expectation knows the line that wrote it."""

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final, Literal

from advisor.advice import State
from advisor.conditions import Condition, Value
from advisor.documents import Mark
from advisor.shelf import Verdict

Standard = Literal["din", "iso"]
Strength = Literal["must", "should", "should_1", "should_2", "should_3", "should_4", "unwanted", "allowed"]
"""How a demand stands to a value; `should` is a should of any level."""

ASKING: Final[Mapping[str, tuple[int, ...]]] = {
    "must": (0,),
    "should": (1, 2, 3, 4),
    "should_1": (1,),
    "should_2": (2,),
    "should_3": (3,),
    "should_4": (4,),
}
"""The strengths that ask for something, with the levels of demand that have them."""


@dataclass(frozen=True, slots=True)
class StateIs:
    """The advice is settled, open, in conflict or referred."""

    mark: Mark
    state: State


@dataclass(frozen=True, slots=True)
class WithheldIs:
    """Products and grades are hidden, or they are not."""

    mark: Mark
    withheld: bool


@dataclass(frozen=True, slots=True)
class FactIs:
    """A fact has this value; None: it is void."""

    mark: Mark
    name: str
    value: Value | None


@dataclass(frozen=True, slots=True)
class FactWithin:
    """A number lies between these ends, which are included."""

    mark: Mark
    name: str
    low: float
    high: float


@dataclass(frozen=True, slots=True)
class Recommends:
    """The docket recommends at least one of the expected values, and none beyond expected and accepted ones."""

    mark: Mark
    property: str
    expected: tuple[Value, ...]
    accept: tuple[Value, ...] = ()


@dataclass(frozen=True, slots=True)
class KeepsFrom:
    """The docket recommends none of these values."""

    mark: Mark
    property: str
    values: tuple[Value, ...]


@dataclass(frozen=True, slots=True)
class Bars:
    """A must rules the value out; `rule` says whose must, and is empty where any will do."""

    mark: Mark
    property: str
    value: Value
    rule: str


@dataclass(frozen=True, slots=True)
class AsksFor:
    """A must or a should asks for the value of what is recommended, or turns against it, or leaves it free."""

    mark: Mark
    property: str
    strength: Strength
    value: Value | None


@dataclass(frozen=True, slots=True)
class AsksAtLeast:
    """The musts that fall on what is recommended say together (or one of the shoulds says) at least this test."""

    mark: Mark
    property: str
    strength: Strength
    test: Condition
    written: str


@dataclass(frozen=True, slots=True)
class DemandedBy:
    """What a rule demands of what is recommended is exactly this: properties, tests and levels; or it is nothing."""

    mark: Mark
    rule: str
    demands: frozenset[tuple[str, Condition, int]]


@dataclass(frozen=True, slots=True)
class CodeServes:
    """A grease of this code meets a code that is asked for; None: no code is given."""

    mark: Mark
    standard: Standard
    code: str | None


@dataclass(frozen=True, slots=True)
class CautionIs:
    """A caution is given, or it is not."""

    mark: Mark
    caution: str
    given: bool


@dataclass(frozen=True, slots=True)
class ReferralIs:
    """A referral is made, or it is not."""

    mark: Mark
    to: str
    given: bool


@dataclass(frozen=True, slots=True)
class ProductIs:
    """A product gets this verdict; `rule` says whose must it misses, and is empty where any will do."""

    mark: Mark
    item: str
    verdict: Verdict
    rule: str


@dataclass(frozen=True, slots=True)
class LeavesOpen:
    """A question is open."""

    mark: Mark
    fact: str


@dataclass(frozen=True, slots=True)
class Assumes:
    """A fact is assumed."""

    mark: Mark
    fact: str


@dataclass(frozen=True, slots=True)
class ConflictBetween:
    """One conflict names all of these rules."""

    mark: Mark
    rules: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class IntervalIs:
    """The interval that is shown lies between these ends; None: no figure is shown."""

    mark: Mark
    ends: tuple[float, float] | None


@dataclass(frozen=True, slots=True)
class FillIs:
    """The fill of a part is shown from .. to."""

    mark: Mark
    part: str
    low: float
    high: float


@dataclass(frozen=True, slots=True)
class RuleIs:
    """A rule fires, or it does not: seen in the trace only, so that it proves nothing about what people read."""

    mark: Mark
    rule: str
    fires: bool


Expectation = (
    StateIs
    | WithheldIs
    | FactIs
    | FactWithin
    | Recommends
    | KeepsFrom
    | Bars
    | AsksFor
    | AsksAtLeast
    | DemandedBy
    | CodeServes
    | CautionIs
    | ReferralIs
    | ProductIs
    | LeavesOpen
    | Assumes
    | ConflictBetween
    | IntervalIs
    | FillIs
    | RuleIs
)


def fill_row(part: str) -> str:
    """The docket row that shows the fill of a part."""
    return f"{part}_fill"


INTERVAL_ROW = "interval"
"""The docket row that shows the interval."""
