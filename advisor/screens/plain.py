"""The interview line by line: for screen readers, plain terminals and scripts."""

import sys
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING, TextIO

from advisor.mishaps import DONE, Refusal
from advisor.screens.talk import Talk

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

    talk = Talk(source or sys.stdin, sink or sys.stdout)
    session = _session(Advisor(load()), file, talk)
    if session is None:
        return DONE
    try:
        for line in (*session.notices, _HELP):
            talk.say(line)
        _talk_over(session, talk)
        for line in _parting(session):
            talk.say(line)
    finally:
        session.close()
    return DONE


def _talk_over(session: "Session", talk: Talk) -> None:
    """Ask, show what came out, offer what is next; a changed answer begins this again."""
    from advisor import explanation
    from advisor.screens.plain_ending import goes_on

    shown = None
    while True:
        left = _ask_all(session, talk)
        if (session.finished or session.only_quantities_left) and session.advice is not shown:
            shown = session.advice
            talk.say()
            talk.say(explanation.text(shown))
        if left or not goes_on(session, talk):
            return


def _session(advisor: "Advisor", file: Path | None, talk: Talk) -> "Session | None":
    from advisor.interview import Damaged, new_interview, open_interview

    if file is None:
        title = talk.ask("What is the point called? ")
        return None if title is None else new_interview(advisor, title)
    try:
        return open_interview(advisor, file) if file.exists() else new_interview(advisor, file.stem, file)
    except Damaged as fault:
        raise Refusal(str(fault)) from None


def _ask_all(session: "Session", talk: Talk) -> bool:
    """Ask until nothing is left to ask; whether the user has left before that."""
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
            return typed is None or not session.only_quantities_left
        _take(session, question, typed, talk)
    return False


def _asked(session: "Session", question: "Declaration") -> Iterator[str]:
    from advisor.interview import answer_shown, if_unknown, own_choices

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
        own = "; ".join(own_choices(domain.choices).values())
        yield f"  Type a part of the name; {len(domain.choices)} entries{f', among them: {own}' if own else ''}."
    if domain.kind == "several":
        yield "  Several numbers apart by commas; an empty line for none."
    if domain.named:
        yield f"  A word will do: {', '.join(word.replace('_', ' ') for word in domain.named)}."
    yield f"  ?  {if_unknown(question)}"
    if question.name in session.case.answers:
        yield f"  Answered: {answer_shown(question, session.case.answers[question.name])}. An empty line leaves it so."


def _take(session: "Session", question: "Declaration", typed: str, talk: Talk) -> None:
    from advisor.answers import Unsuitable
    from advisor.interview import answer_shown

    word = typed.casefold()
    if word == "undo":
        if not session.undo():
            talk.say("Nothing is left to take back.")
    elif word in {"<", ">"}:
        (session.back if word == "<" else session.later)()
    elif not typed and question.name in session.case.answers:
        (session.go_on if session.finished else session.later)()
    else:
        try:
            session.answer(_meant(question, typed))
        except Unsuitable as fault:
            talk.say(f"! {fault}")
            return
        talk.say(f"  {question.title}: {answer_shown(question, session.case.answers[question.name])}")
        _changes(session, talk)


def _changes(session: "Session", talk: Talk) -> None:
    from advisor.interview import count_text, referrals_added

    settled = session.settled_rows()
    if settled:
        talk.say(f"  Settled now: {', '.join(settled)}. {count_text(session.advice)}.")
    for told in referrals_added(session.before, session.advice):
        talk.say(f"! {told}")
    if session.trouble:
        talk.say(f"! {session.trouble}")


def _meant(question: "Declaration", typed: str) -> str:
    """The ids that numbers or parts of names stand for."""
    from advisor.answers import Unsuitable
    from advisor.interview import holding

    choices, kind = question.domain.choices, question.domain.kind
    if not choices or typed == "?":
        return typed
    if kind == "several":
        return ", ".join(_numbered(list(choices), part.strip()) for part in typed.split(",") if part.strip())
    if len(choices) <= _MANY:
        return _numbered(list(choices), typed)
    found = [name for name, label in choices.items() if typed.casefold() in {name.casefold(), label.casefold()}]
    found = found or (holding(choices, typed) if typed else [])
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
    from advisor.interview import list_number

    number = list_number(typed, len(names))
    return typed if number is None else names[number - 1]


def _parting(session: "Session") -> Iterator[str]:
    yield ""
    if session.keeper is not None and session.keeper.holds and not session.trouble:
        yield f"Kept in {session.keeper.path}"
        yield f"Go on with: gudgeon interview --plain '{session.keeper.path}'"
