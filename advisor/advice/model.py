"""The advice: one immutable object that the sheet, the command line, reports and replay only read."""

from collections.abc import Mapping
from dataclasses import dataclass
from enum import StrEnum
from typing import NamedTuple

from advisor.case import Case, Fact
from advisor.conditions import Record, Value
from advisor.designations import CodesFound
from advisor.knowledge import Instance, Knowledge
from advisor.shelf import Judgement, Verdict
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


class Ranked(NamedTuple):
    """A product with its verdict and the whole steps it misses of the shoulds, level by level."""

    place: int
    item: str
    verdict: Verdict
    steps: tuple[int, int, int, int]


@dataclass(frozen=True, slots=True)
class AtLimit:
    """A must that is met with nothing to spare."""

    what: str
    name: str
    rule: str


@dataclass(frozen=True, slots=True)
class Branch:
    """The advice for one value of what was left open, or for a stretch of a range (then also for its other end)."""

    label: str
    settings: Mapping[str, Value]
    advice: "Advice"
    other_end: "Advice | None" = None


@dataclass(frozen=True, slots=True)
class Advice:
    """Everything concluded about one case, and how."""

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
    assume_gaps: bool = False
    only: frozenset[str] | None = None

    @property
    def fits(self) -> bool:
        """Whether a product of the shelf fits, if only as second best."""
        return any(each.verdict in {Verdict.FITS, Verdict.SECOND_BEST, Verdict.STILL_IN} for each in self.shelf)

    def line(self, row: str) -> Line:
        """The docket row of that id."""
        return next(line for line in (*self.docket, *self.quantities) if line.row == row)
