"""Compare an advice with what a scenario expects of it."""

import math
from collections.abc import Iterable
from dataclasses import dataclass

from advisor.advice import Advice, Line, State
from advisor.conditions import Value, holds
from advisor.designations import Designer, din_serves, iso_serves
from advisor.documents import Mark
from advisor.knowledge import Instance, Knowledge, Refers, Warns
from advisor.replay import reasons
from advisor.replay.expectations import (
    INTERVAL_ROW,
    AsksAtLeast,
    AsksFor,
    Assumes,
    Bars,
    CautionIs,
    CodeServes,
    ConflictBetween,
    Expectation,
    FactIs,
    FactWithin,
    FillIs,
    IntervalIs,
    KeepsFrom,
    LeavesOpen,
    ProductIs,
    Recommends,
    ReferralIs,
    RuleIs,
    StateIs,
    WithheldIs,
    fill_row,
)
from advisor.replay.falling import asks, falling, must_ask, nothing, say_at_least
from advisor.shelf import Verdict


@dataclass(frozen=True, slots=True)
class Difference:
    """What an advice has otherwise than expected, and the part of the trace that made it.

    `read` says whether people read it; what shows in the trace only proves nothing about the advice.
    """

    kind: str
    what: str
    expected: str
    got: str
    because: tuple[str, ...]
    mark: Mark
    read: bool = True

    def __str__(self) -> str:
        what = f" {self.what}" if self.what else ""
        return f"{self.kind}{what}: expected {self.expected}, got {self.got}"


def differences(advice: Advice, expectations: Iterable[Expectation]) -> tuple[Difference, ...]:
    """Every expectation that the advice does not meet, in the order written."""
    return tuple(found for each in expectations if (found := compare(advice, each)) is not None)


def compare(advice: Advice, expected: Expectation) -> Difference | None:  # noqa: C901, PLR0911, PLR0912 - one case per kind of expectation
    """The difference from one expectation, if there is any."""
    match expected:
        case StateIs():
            return _state(advice, expected)
        case WithheldIs():
            return _withheld(advice, expected)
        case FactIs():
            return _fact(advice, expected)
        case FactWithin():
            return _fact_within(advice, expected)
        case Recommends():
            return _recommends(advice, expected)
        case KeepsFrom():
            return _keeps_from(advice, expected)
        case Bars():
            return _bars(advice, expected)
        case AsksFor():
            return _asks_for(advice, expected)
        case AsksAtLeast():
            return _asks_at_least(advice, expected)
        case CodeServes():
            return _code(advice, expected)
        case CautionIs():
            return _caution(advice, expected)
        case ReferralIs():
            return _referral(advice, expected)
        case ProductIs():
            return _product(advice, expected)
        case LeavesOpen():
            return _open_question(advice, expected)
        case Assumes():
            return _assumption(advice, expected)
        case ConflictBetween():
            return _conflict(advice, expected)
        case IntervalIs():
            return _interval(advice, expected)
        case FillIs():
            return _fill(advice, expected)
        case RuleIs():
            return _rule(advice, expected)
