"""The end of the plain interview: save the case, write a report, change an answer, or leave."""

from pathlib import Path
from typing import TYPE_CHECKING

from advisor.screens.talk import Talk

if TYPE_CHECKING:
    from advisor.interview import Session

_NEXT = {
    "scenario": "save the case as a scenario",
    "markdown": "write the report as Markdown",
    "html": "write the report as HTML",
    "change": "change an answer",
    "go_on": "go on with the questions left",
    "quit": "leave; the answers are kept",
}
_LEAVES = {"", "quit", "exit"}


def goes_on(session: "Session", talk: Talk) -> bool:
    """Do what is picked until the user leaves (False) or there is a question to ask again (True)."""
    from advisor.interview import list_number

    entries = [what for what in _NEXT if what != "go_on" or session.open]
    told = False
    while True:
        if not told:
            told = True
            talk.say("\nWhat next?")
            for number, what in enumerate(entries, start=1):
                talk.say(f"  {number}  {_NEXT[what]}")
        typed = talk.ask("> ")
        if typed is None or typed.casefold() in _LEAVES:
            return False
        picked = list_number(typed, len(entries))
        what = entries[picked - 1] if picked else typed.casefold()
        if what == "quit":
            return False
        if what == "go_on" or (what == "change" and _changes(session, talk)) or _moves(session, what):
            return True
        if what in {"scenario", "markdown", "html"}:
            talk.say(_written(session, talk, what))
        elif what != "change":
            talk.say(f"! Type a number from 1 to {len(entries)}; an empty line leaves.")


def _moves(session: "Session", word: str) -> bool:
    """Whether one of the words of the interview has brought a question back."""
    if word == "<":
        session.back()
    return word == "<" or (word == "undo" and session.undo())


def _changes(session: "Session", talk: Talk) -> bool:
    """Let a question be picked that is to be answered anew; False if none was."""
    from advisor.interview import answer_shown, list_number

    names = (*session.answered, *session.may_be_asked)
    for number, name in enumerate(names, start=1):
        declaration, given = session.knowledge.facts[name], session.case.answers.get(name)
        shown = answer_shown(declaration, given) if given is not None else "not asked"
        talk.say(f"  {number:>2}  {declaration.title}: {shown}")
    picked = list_number(talk.ask("Which one? A number: ") or "", len(names))
    if picked is None:
        talk.say("Nothing is changed.")
        return False
    session.revise(names[picked - 1])
    return True


def _written(session: "Session", talk: Talk, what: str) -> str:
    """Ask where to, and write; what became of it in a sentence."""
    from advisor.documents import Unwritable
    from advisor.screens import reports

    title = session.case.title
    usual = reports.file_stem(title) + {"scenario": ".yaml", "markdown": ".md", "html": ".html"}[what]
    name = talk.ask(f"File, an empty line for {usual}: ")
    if name is None:
        return "\nNothing is written."
    name = name or usual
    if not name.isprintable():
        return "! This is no file name: it holds signs that cannot be shown. Type another."
    try:
        if what == "scenario":
            called = talk.ask(f"Title, an empty line for '{title}': ") or title
            guards = talk.ask("Why it is worth keeping: ") or called
            session.save_scenario(Path(name), called, guards)
        else:
            reports.write(session.advice, what, Path(name))
    except Unwritable as fault:
        return f"! {fault}"
    return f"Written: {name}"
