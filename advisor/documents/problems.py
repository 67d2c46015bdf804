"""What is wrong in a document, where it stands and how to mend it; all of it at once."""

import difflib
import re
from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field
from typing import Literal, NamedTuple

Severity = Literal["error", "finding"]


class Mark(NamedTuple):
    """A place in a file; line and column count from one."""

    file: str
    line: int
    column: int


@dataclass(frozen=True, slots=True)
class Problem:
    """One fault: where it stands, what it sits in (outermost first, named by id), what was seen and the mend.

    An error keeps the document from being used; a finding only asks for a look. A name that is known nowhere is kept,
    with the known name most like it: either of the two may be the misspelt one.
    """

    file: str
    line: int
    column: int
    trail: tuple[str, ...]
    message: str
    hint: str = ""
    severity: Severity = "error"
    name: str = field(default="", compare=False)
    like: str = field(default="", compare=False)

    @classmethod
    def at(
        cls, mark: Mark, message: str, hint: str = "", trail: tuple[str, ...] = (), severity: Severity = "error"
    ) -> "Problem":
        """The problem at a mark."""
        return cls(mark.file, mark.line, mark.column, trail, message, hint, severity)

    @property
    def mark(self) -> Mark:
        """Where it stands."""
        return Mark(self.file, self.line, self.column)

    def __str__(self) -> str:
        within = f"at {' > '.join(self.trail)}: " if self.trail else ""
        hint = f" {_sentence(_begun(self.hint))}" if self.hint else ""
        return f"{self.file}:{self.line}:{self.column}: {within}{_sentence(self.message)}{hint}"


class Faulty(Exception):
    """Documents that cannot be used, with every problem found in them."""

    def __init__(self, problems: Iterable[Problem]) -> None:
        self.problems = tuple(problems)
        super().__init__("\n".join(str(problem) for problem in self.problems))


class Problems:
    """Gathers problems; gives them back in the order of the files' lines."""

    def __init__(self, problems: Iterable[Problem] = ()) -> None:
        self._gathered = list(problems)

    def add(self, problem: Problem) -> None:
        """Note one problem."""
        self._gathered.append(problem)

    def extend(self, problems: Iterable[Problem]) -> None:
        """Note several problems."""
        self._gathered.extend(problems)

    @property
    def errors(self) -> tuple[Problem, ...]:
        """The problems that keep the documents from being used."""
        return tuple(problem for problem in self if problem.severity == "error")

    @property
    def findings(self) -> tuple[Problem, ...]:
        """The problems that only ask for a look."""
        return tuple(problem for problem in self if problem.severity == "finding")

    def raise_if_any(self) -> None:
        """Stop here if there are errors; findings alone do not stop."""
        if self.errors:
            raise Faulty(self.errors)

    def __iter__(self) -> Iterator[Problem]:
        return iter(sorted(self._gathered, key=lambda problem: problem.mark))

    def __len__(self) -> int:
        return len(self._gathered)


_WORD_FIRST = re.compile(r"[a-z]+[ .,;]|[a-z]+$|known here:")
_LIKENESS, _LIKENESS_OF_SHORT, _SHORT = 0.75, 0.6, 8
"""In a long word a slip leaves most letters alike; two names of the trade may have as much in common as 0.6."""


def nearest(word: str, known: Iterable[str]) -> str:
    """The question ` Did you mean 'x'?` for the known word most like this one, or nothing.

    >>> nearest("thickner", ["thickener", "form"])
    " Did you mean 'thickener'?"
    """
    near = closest(word, known)
    return f" Did you mean '{near}'?" if near else ""


def closest(word: str, known: Iterable[str]) -> str:
    """The known word most like this one, or nothing; one of the same letters comes first.

    >>> closest("thickner", ["thickener", "form"]), closest("PE", ["CR", "EP"]), closest("zebra", ["form"])
    ('thickener', 'EP', '')
    """
    words = list(known)
    exchanged = [each for each in words if sorted(each) == sorted(word)]
    likeness = _LIKENESS if len(word) > _SHORT else _LIKENESS_OF_SHORT
    return next(iter(exchanged or difflib.get_close_matches(word, words, n=1, cutoff=likeness)), "")


def _begun(text: str) -> str:
    """The text with a capital, where it begins with a word and not with a key, a code or a name."""
    return text[0].upper() + text[1:] if _WORD_FIRST.match(text) else text


def _sentence(text: str) -> str:
    """The text on one line, with its full stop."""
    line = " ".join(text.split())
    return line if line.endswith((".", "?", "!")) else f"{line}."
