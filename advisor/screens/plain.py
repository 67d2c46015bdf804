"""The interview line by line: for screen readers, plain terminals and scripts."""

import sys
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING, TextIO

from advisor.mishaps import DONE, Refusal

if TYPE_CHECKING:
    from advisor.advice import Advisor
    from advisor.interview import Session
    from advisor.knowledge import Declaration, Knowledge

_HELP = (
    "? don't know, < the question before, > later, undo takes the last answer back, quit leaves. "
    "Answers are kept after each one."
)
_MANY = 20


def run(
    load: "Callable[[], Knowledge]", file: Path | None, source: TextIO | None = None, sink: TextIO | None = None
) -> int:
    """Ask until nothing is left to ask, or the user leaves."""
    from advisor.advice import Advisor

    talk = _Talk(source or sys.stdin, sink or sys.stdout)
    session = _session(Advisor(load()), file, talk)
    if session is None:
        return DONE
    try:
        _ask_all(session, talk)
        for line in _parting(session):
            talk.say(line)
    finally:
        session.close()
    return DONE


class _Talk:
    """Lines out, lines in."""

    def __init__(self, source: TextIO, sink: TextIO) -> None:
        self.source, self.sink = source, sink

    def say(self, text: str = "") -> None:
        """One line out; signs that the terminal cannot show are replaced."""
        encoding = getattr(self.sink, "encoding", None) or "utf-8"
        self.sink.write(text.encode(encoding, "replace").decode(encoding) + "\n")

    def ask(self, prompt: str) -> str | None:
        """One line in; None at the end of the input."""
        self.sink.write(prompt)
        self.sink.flush()
        line = self.source.readline()
        return line.strip() if line else None


def _session(advisor: "Advisor", file: Path | None, talk: _Talk) -> "Session | None":
    from advisor.interview import Damaged, new_interview, open_interview

    if file is None:
        title = talk.ask("What is the point called? ")
        return None if title is None else new_interview(advisor, title)
    try:
        return open_interview(advisor, file) if file.exists() else new_interview(advisor, file.stem, file)
    except Damaged as fault:
        raise Refusal(str(fault)) from None


def _ask_all(session: "Session", talk: _Talk) -> None:
    for notice in session.notices:
        talk.say(notice)
    talk.say(_HELP)
    told_enough = False
    while (question := session.question) is not None:
        if session.only_quantities_left and not told_enough:
            told_enough = True
            talk.say(
                "All that decides the lubricant is known. What follows tunes quantity and interval; quit stops here."
            )
        for line in _asked(session, question):
            talk.say(line)
        typed = talk.ask("> ")
        if typed is None or typed.casefold() in {"quit", "exit"}:
            return
        _take(session, question, typed, talk)


def _asked(session: "Session", question: "Declaration") -> Iterator[str]:
    from advisor.interview import answer_shown, shown_value

    assert question.question is not None  # noqa: S101 - asked facts only
    asked = session.answered
    number = asked.index(question.name) + 1 if question.name in asked else len(asked) + 1
    yield ""
    yield f"Question {number}: {question.question.ask}"
    yield f"  {question.question.help}"
    domain = question.domain
    if 0 < len(domain.choices) <= _MANY:
        yield from (f"  {place}  {label}" for place, label in enumerate(domain.choices.values(), start=1))
    elif domain.choices:
        yield f"  Type a part of the name; {len(domain.choices)} entries."
    if domain.kind == "several":
        yield "  Several numbers apart by commas; an empty line for none."
    if domain.named:
        yield f"  A word will do: {', '.join(word.replace('_', ' ') for word in domain.named)}."
    if question.assume is not None:
        yield f"  ?  don't know: taken as {shown_value(question, question.assume.value)}"
    if question.name in session.case.answers:
        yield f"  Answered: {answer_shown(question, session.case.answers[question.name])}. An empty line leaves it so."


def _take(session: "Session", question: "Declaration", typed: str, talk: _Talk) -> None:
    from advisor.answers import Unsuitable
    from advisor.interview import answer_shown

    word = typed.casefold()
    if word == "undo":
        if not session.undo():
            talk.say("Nothing is left to take back.")
    elif word in {"<", ">"}:
        (session.back if word == "<" else session.later)()
    elif not typed and question.name in session.case.answers:
        session.later()
    else:
        try:
            session.answer(_meant(question, typed))
        except Unsuitable as fault:
            talk.say(f"! {fault}")
            return
        talk.say(f"  {question.title}: {answer_shown(question, session.case.answers[question.name])}")
        _changes(session, talk)


def _changes(session: "Session", talk: _Talk) -> None:
    from advisor.interview import count_text

    settled = session.settled_rows()
    if settled:
        talk.say(f"  Settled now: {', '.join(settled)}. {count_text(session.advice)}.")
    if session.trouble:
        talk.say(f"! {session.trouble}")


def _meant(question: "Declaration", typed: str) -> str:
    """The ids that numbers or parts of names stand for."""
    from advisor.answers import Unsuitable

    choices, kind = question.domain.choices, question.domain.kind
    if not choices or typed == "?":
        return typed
    if kind == "several":
        return ", ".join(_numbered(list(choices), part.strip()) for part in typed.split(",") if part.strip())
    if len(choices) <= _MANY:
        return _numbered(list(choices), typed)
    found = [name for name, label in choices.items() if typed.casefold() in {name.casefold(), label.casefold()}] or [
        name
        for name, label in choices.items()
        if typed and all(word in label.casefold() for word in typed.casefold().split())
    ]
    if len(found) == 1:
        return found[0]
    if not found:
        return typed
    if len(found) > _MANY:
        raise Unsuitable(f"{len(found)} entries hold '{typed}'. Type more of the name.")
    raise Unsuitable(
        f"'{typed}' may be any of these; type more of the name: {'; '.join(choices[name] for name in found)}."
    )


def _numbered(names: list[str], typed: str) -> str:
    return names[int(typed) - 1] if typed.isdigit() and 0 < int(typed) <= len(names) else typed


def _parting(session: "Session") -> Iterator[str]:
    from advisor import explanation

    yield ""
    if session.finished or session.only_quantities_left:
        yield explanation.text(session.advice)
    if session.keeper is not None and session.keeper.holds and not session.trouble:
        yield f"Kept in {session.keeper.path}"
        yield f"Go on with: gudgeon interview --plain '{session.keeper.path}'"
