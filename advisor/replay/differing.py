"""What an advice has otherwise than a scenario expects."""

from dataclasses import dataclass

from advisor.documents import Mark


@dataclass(frozen=True, slots=True)
class Difference:
    """One expectation that an advice does not meet, and the part of the trace that made it.

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
