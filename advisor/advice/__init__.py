"""From a case to advice: `Advisor(knowledge).advise(case)`."""

from advisor.advice.advising import Advisor
from advisor.advice.model import (
    FORMAT,
    Advice,
    AtLimit,
    Candidate,
    Line,
    OpenQuestion,
    Ranked,
    Referral,
    State,
    StepTrace,
    Warning,
)
from advisor.advice.recommending import falls_on

__all__ = [
    "FORMAT",
    "Advice",
    "Advisor",
    "AtLimit",
    "Candidate",
    "Line",
    "OpenQuestion",
    "Ranked",
    "Referral",
    "State",
    "StepTrace",
    "Warning",
    "falls_on",
]
