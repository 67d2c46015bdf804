"""From a case to advice: `Advisor(knowledge).advise(case)`."""

from advisor.advice.advising import Advisor
from advisor.advice.model import (
    FORMAT,
    Advice,
    AtLimit,
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
    "Candidate",
    "CautionGiven",
    "Line",
    "OpenQuestion",
    "Ranked",
    "Referral",
    "State",
    "StepTrace",
    "falls_on",
]
