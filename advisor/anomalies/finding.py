"""What is found: its class, where it stands, what was seen, the mend, and a case that shows it."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Final, Literal

from advisor.conditions import Value
from advisor.documents import Mark
from advisor.knowledge import Knowledge

Kind = Literal[
    "contradiction",
    "duplicate",
    "subsumed",
    "redundant",
    "conflict",
    "opposed shoulds",
    "circular",
    "unused conclusion",
    "never fires",
    "unused question",
    "undefined name",
    "outside its domain",
    "overlap",
    "gap",
    "beyond physics",
]
WitnessIs = Literal["case", "record", "load"]

REAL_LIFE: Final[frozenset[Kind]] = frozenset({"conflict", "opposed shoulds"})
"""Findings that may be right: the world asks for both. They are listed, and a reason silences them."""


@dataclass(frozen=True, slots=True)
class Witness:
    """Values that show a finding: a whole case (answers), or a record of facts.

    It is a record where no case may reach it, or where its computations could not be inverted; where the loader itself
    turned the knowledge down there is nothing to show. `void` names facts without a value; `about` the facts that
    matter, where that is not all of them; `confirmed` says whether the replay came out as claimed.
    """

    values: Mapping[str, Value] = field(default_factory=dict)
    is_: WitnessIs = "record"
    confirmed: bool = False
    void: frozenset[str] = frozenset()
    about: frozenset[str] = frozenset()


LOADER: Final = Witness(is_="load", confirmed=True)
"""The loader's own word."""


@dataclass(frozen=True, slots=True)
class Finding:
    """One anomaly: its class, where it stands, what was seen, the mend, and what shows it.

    `silenced` is the reason with which the knowledge accepts it.
    """

    kind: Kind
    where: Mark
    message: str
    hint: str
    witness: Witness
    rules: tuple[str, ...] = ()
    silenced: str = ""

    @property
    def witness_is(self) -> WitnessIs:
        """Whether the witness is a whole case, a record, or the loader's word."""
        return self.witness.is_

    @property
    def confirmed(self) -> bool:
        """Whether the engine (or the loader) agreed when the witness was replayed."""
        return self.witness.confirmed

    @property
    def must_be_mended(self) -> bool:
        """Whether the knowledge is faulty; what may be right in real life is only listed."""
        return self.kind not in REAL_LIFE

    def __str__(self) -> str:
        place = f"{self.where.file}:{self.where.line}:{self.where.column}"
        because = f" Accepted: {self.silenced}" if self.silenced else ""
        return f"{place}: finding, {self.kind}: {self.message}. {self.hint[:1].upper()}{self.hint[1:]}.{because}"

    def shown(self, knowledge: Knowledge, *, whole: bool = True) -> str:
        """The witness on one line, whole or only with the facts that matter; empty where there is none."""
        witness = self.witness
        about = witness.about if witness.about and not whole else frozenset(witness.values)
        parts = [f"{name} {_said(name, value, knowledge)}" for name, value in witness.values.items() if name in about]
        parts += [f"{name} without a value" for name in sorted(witness.void)]
        if not parts:
            return ""
        rest = len(witness.values) - len(about)
        more = f", and {rest} usual answers" if rest > 0 else ""
        proof = "" if witness.confirmed else ", not confirmed by the engine"
        return f"{witness.is_}{proof}: {', '.join(parts)}{more}"


def _said(name: str, value: Value, knowledge: Knowledge) -> str:
    known = name in knowledge.facts or name in knowledge.computations or name in knowledge.properties
    unit = knowledge.domain(name).unit if known else ""
    if isinstance(value, tuple):
        return f"[{', '.join(value)}]"
    return value if isinstance(value, str) else f"{value:.6g} {unit}".rstrip()
