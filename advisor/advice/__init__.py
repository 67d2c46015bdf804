"""From a case to advice: `Advisor(knowledge).advise(case)`."""

from advisor.advice.advising import Advisor
from advisor.advice.branching import TooOpen
from advisor.advice.model import (
    FORMAT,
    Advice,
    AtLimit,
    Branch,
    Candidate,
    CautionGiven,
    Line,
    OpenQuestion,
    Ranked,
    Referral,
    State,
    StepTrace,
)
from advisor.advice.waiting import falls_on

__all__ = [
    "FORMAT",
    "Advice",
    "Advisor",
    "AtLimit",
    "Branch",
    "Candidate",
    "CautionGiven",
    "Line",
    "OpenQuestion",
    "Ranked",
    "Referral",
    "State",
    "StepTrace",
    "TooOpen",
    "falls_on",
]
