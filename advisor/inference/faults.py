"""What can go wrong with conditions, records and the rule engine itself."""

from collections.abc import Iterable


class UnfitCondition(ValueError):
    """A condition that the engine cannot be given; `index` is its position, `reason` a sentence for its author."""

    def __init__(self, index: int, reason: str) -> None:
        super().__init__(f"Condition {index}: {reason}")
        self.index = index
        self.reason = reason


class TooManyBranches(UnfitCondition):
    """A condition whose alternatives multiply to more conjunctions than one rule may have."""


class Unsendable(ValueError):
    """A value that cannot be written for the engine exactly."""


class EngineFault(RuntimeError):
    """The engine cannot be trusted with this case; no advice may rest on it."""


class EngineMissing(EngineFault):
    """The engine is not installed, or was built for another Python."""


class Disagreement(EngineFault):
    """Engine and plain judgement differ; `indices` are the conditions concerned."""

    def __init__(self, indices: Iterable[int]) -> None:
        self.indices = tuple(sorted(indices))
        listed = ", ".join(map(str, self.indices))
        super().__init__(
            f"The rule engine and the plain judgement disagree on condition {listed}; "
            "this is an error of the program, please report it with the saved case."
        )
