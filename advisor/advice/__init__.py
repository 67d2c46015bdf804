"""From a case to advice: `Advisor(knowledge).advise(case)`."""

from advisor.advice.advising import Advisor
from advisor.advice.branching import TooOpen
from advisor.advice.merging import KAPPA
from advisor.advice.model import (
    FORMAT,
    Advice,
    AtLimit,
    Branch,
    Candidate,
    CautionGiven,
    Course,
    Line,
    OpenQuestion,
    Part,
    Reading,
    Referral,
    Span,
    Spread,
    State,
    StepTrace,
)
from advisor.advice.ranges import said_at
from advisor.advice.waiting import falls_on

__all__ = [
    "FORMAT",
    "KAPPA",
    "Advice",
    "Advisor",
    "AtLimit",
    "Branch",
    "Candidate",
    "CautionGiven",
    "Course",
    "Line",
    "OpenQuestion",
    "Part",
    "Reading",
    "Referral",
    "Span",
    "Spread",
    "State",
    "StepTrace",
    "TooOpen",
    "falls_on",
    "said_at",
]
