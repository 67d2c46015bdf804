"""Which rules of a step fire: matched by the rule engine, judged a second time in plain Python, and compared."""

from advisor.inference.faults import (
    Disagreement,
    EngineFault,
    EngineMissing,
    TooManyBranches,
    UnfitCondition,
    Unsendable,
)
from advisor.inference.judging import StepRules
from advisor.inference.matching import Matcher

__all__ = [
    "Disagreement",
    "EngineFault",
    "EngineMissing",
    "Matcher",
    "StepRules",
    "TooManyBranches",
    "UnfitCondition",
    "Unsendable",
]
