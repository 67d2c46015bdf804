"""The advice: one immutable object that the sheet, the command line, reports and replay only read."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from enum import StrEnum
from typing import NamedTuple

from advisor.case import Case, Fact
from advisor.conditions import Record, Value
from advisor.designations import CodesFound
from advisor.knowledge import Instance, Knowledge
from advisor.shelf import USABLE, Judgement, Ranked
from advisor.specification import Conflict, Demand, Specification

FORMAT = 1


class State(StrEnum):
    """The state of an advice, worst first."""

    REFERRED = "referred"
    CONFLICT = "conflict"
    OPEN = "open"
    SETTLED = "settled"


@dataclass(frozen=True, slots=True)
class StepTrace:
    """What one step did: facts computed, and the outcome of every rule instance (True, False or None)."""

    step: str
    computed: tuple[str, ...]
    instances: tuple[Instance, ...]
    outcomes: tuple[bool | None, ...]


@dataclass(frozen=True, slots=True)
class CautionGiven:
    """A caution with the rules that gave it; `concerns` names the classes and products it is for, if not all."""

    caution: str
    rules: tuple[str, ...]
    concerns: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Referral:
    """A referral with the rule that made it."""

    to: str
    rule: str
    withhold: bool


@dataclass(frozen=True, slots=True)
class OpenQuestion:
    """A question without a value, and what waits for it."""

    fact: str
    decides: str
    waiting: tuple[str, ...]
    dont_know: bool


class Candidate(NamedTuple):
    """A candidate for a docket row: its value, and how it did."""

    value: Value
    item: str
    steps: tuple[int, int, int, int]


@dataclass(frozen=True, slots=True)
class Line:
    """A row of the docket: the recommended class, the demands or facts it shows, and what it waits for."""

    row: str
    title: str
    values: tuple[Value, ...] = ()
    candidates: tuple[Candidate, ...] = ()
    demands: tuple[Demand, ...] = ()
    facts: tuple[str, ...] = ()
    waits: tuple[str, ...] = ()
    skipped: bool = False
    differs: bool = False
    barred: Mapping[Value, tuple[str, ...]] | None = None


@dataclass(frozen=True, slots=True)
class AtLimit:
    """A must that is met with nothing to spare."""

    what: str
    name: str
    rule: str


Reading = tuple[Value, ...] | str | bool | None
"""What one thing reads at one value: the classes of a row (None: it does not apply), a verdict, whether it is given."""


class Part(NamedTuple):
    """The first and the last value looked at of a stretch of a range over which one thing reads the same."""

    low: float
    high: float
    reading: Reading


@dataclass(frozen=True, slots=True)
class Course:
    """How one thing goes along a range: a row, a product, a code, a caution; `variant` says under what else is open."""

    what: str
    name: str
    parts: tuple[Part, ...]
    variant: str = ""


@dataclass(frozen=True, slots=True)
class Span:
    """A range that was answered, and how closely it was looked at.

    `surely`: the advice changes nowhere but where a course says so. Otherwise a change that is taken back between
    two of the values looked at may be missed.
    """

    fact: str
    low: float
    high: float
    looked_at: int
    values: int
    surely: bool


class Spread(NamedTuple):
    """The values that a fact takes where it is not the same throughout: a number lowest and highest, others one by one.

    `lacking`: somewhere it has none.
    """

    values: tuple[Value, ...]
    lacking: bool


@dataclass(frozen=True, slots=True)
class Branch:
    """The advice for one way to settle what was left open; for a stretch of a range it holds over the stretch.

    `contested` are the forks of which it takes one side.
    """

    label: str
    settings: Mapping[str, Value]
    advice: "Advice"
    stretch: tuple[float, float] | None = None
    contested: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Advice:
    """Everything concluded about one case, and how.

    Where something was left open it is put together from `runs`, each on settled answers and with its label: rows,
    verdicts, cautions and state hold for all of them, `spread` tells the figures that differ, and the rest (facts,
    trace, specification, judgement) is that of the run `told_for`. `branches` are the variants, `courses` what changes
    along a range.
    """

    case: Case
    knowledge: Knowledge
    state: State
    facts: Mapping[str, Fact]
    record: Record
    specification: Specification
    docket: tuple[Line, ...]
    quantities: tuple[Line, ...]
    shelf: tuple[Ranked, ...]
    judgement: Judgement | None
    oils: Judgement | None
    choices: Judgement | None
    oil_ranks: Mapping[str, tuple[int, int, int, int]]
    codes: CodesFound
    withheld: bool
    cautions: tuple[CautionGiven, ...]
    referrals: tuple[Referral, ...]
    assumptions: tuple[str, ...]
    keeping_open: tuple[str, ...]
    open_questions: tuple[OpenQuestion, ...]
    conflicts: tuple[Conflict, ...]
    at_limit: tuple[AtLimit, ...]
    set_aside: tuple[str, ...]
    trace: tuple[StepTrace, ...]
    closing: Record
    kappa: float | None
    overridden: Mapping[str, Value]
    branches: tuple[Branch, ...] = ()
    held_over: str = ""
    told_for: str = ""
    runs: "tuple[tuple[str, Advice], ...]" = ()
    spread: Mapping[str, Spread] = field(default_factory=dict)
    courses: tuple[Course, ...] = ()
    span: Span | None = None
    assume_gaps: bool = False
    only: frozenset[str] | None = None

    @property
    def single(self) -> "tuple[Advice, ...]":
        """The advices on settled answers behind this one; without anything left open the advice itself."""
        return tuple(run for _, run in self.runs) or (self,)

    @property
    def fits(self) -> bool:
        """Whether a product of the shelf fits, if only as second best."""
        return any(each.verdict in USABLE for each in self.shelf)

    def line(self, row: str) -> Line:
        """The docket row of that id."""
        return next(line for line in (*self.docket, *self.quantities) if line.row == row)
