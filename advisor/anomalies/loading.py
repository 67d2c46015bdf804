"""What the loader turns down, told by the same classes: circles, undefined names, values outside their domain."""

import re
from collections.abc import Iterable

from advisor.anomalies.finding import LOADER, Finding, Kind
from advisor.documents import Problem

_SAID: tuple[tuple[Kind, re.Pattern[str]], ...] = (
    ("circular", re.compile(r"need one another")),
    ("outside its domain", re.compile(r"is not one of the choices|lies outside|is none of the grades|cannot be that")),
    (
        "undefined name",
        re.compile(
            r"is no (?!id\b|test\b|step\b|operator\b)\w+|is neither a number nor a known|stands nowhere under"
            r"|stands for no|is not known (here|yet)|is declared nowhere"
        ),
    ),
)


def turned_down(problems: Iterable[Problem]) -> list[Finding]:
    """The problems that belong to a class of anomalies; the loader itself is their proof."""
    return [
        Finding(kind, problem.mark, problem.message, problem.hint or "mend it here", LOADER)
        for problem in problems
        if (kind := _kind(problem.message)) is not None
    ]


def _kind(message: str) -> Kind | None:
    return next((kind for kind, said in _SAID if said.search(message)), None)
