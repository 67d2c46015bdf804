"""A case: what was answered about one lubrication point, and the facts that stand from it."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from enum import StrEnum
from typing import NamedTuple

from advisor.conditions import Value


class Origin(StrEnum):
    """Where the value of a fact comes from."""

    ANSWERED = "answered"
    ASSUMED = "assumed"
    NOT_ASKED = "not asked"
    TUNED = "tuned"
    COMPUTED = "computed"
    LOOKED_UP = "looked up"
    CONCLUDED = "concluded"
    UNANSWERED = "unanswered"
    VOID = "void"


@dataclass(frozen=True, slots=True)
class Answer:
    """One answer: its canonical value (None for don't know), and the text that was typed.

    Without a value it may still say something: the `alternatives` that are open, or the ends of a range (`span`).
    `assumed`: the value is one of several that stand for a don't know.
    """

    value: Value | None
    typed: str
    estimate: bool = False
    alternatives: tuple[Value, ...] = ()
    span: tuple[float, float] | None = None
    assumed: bool = False

    @property
    def left_open(self) -> bool:
        """Whether it says between what the value lies."""
        return self.span is not None or bool(self.alternatives)

    def says(self, other: "Answer") -> bool:
        """Whether it says the same as another, whichever way it was typed."""
        return (self.value, self.alternatives, self.span) == (other.value, other.alternatives, other.span)

    @property
    def known(self) -> bool:
        """Whether it gives a value."""
        return self.value is not None


@dataclass(frozen=True, slots=True)
class Case:
    """The answers about one point, in the order in which they were given."""

    point_kind: str
    title: str = ""
    answers: Mapping[str, Answer] = field(default_factory=dict)

    def with_answer(self, name: str, answer: Answer) -> "Case":
        """The case with one answer added or replaced."""
        return Case(self.point_kind, self.title, {**self.answers, name: answer})

    def without(self, name: str) -> "Case":
        """The case with one answer taken back."""
        return Case(self.point_kind, self.title, {key: each for key, each in self.answers.items() if key != name})


class Fact(NamedTuple):
    """A fact of the case: a value with its origin; `note` says why a fact is void or what stood for it."""

    name: str
    value: Value | None
    origin: Origin
    note: str = ""
