"""Keeping interviews: one file per point, begun, listed, and opened again."""

import contextlib
import re
import secrets
import time
import unicodedata
from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime
from pathlib import Path
from typing import TYPE_CHECKING

from advisor import places
from advisor.advice import Advice, Advisor, TooOpen
from advisor.answers import Unsuitable, answer, read_case
from advisor.case import Answer, Case
from advisor.documents import Mapping, Node, Problems, Scalar, read_document
from advisor.documents import Sequence as Listed
from advisor.documents.writing import Plain
from advisor.interview.keeper import Keeper
from advisor.interview.typed import writable
from advisor.interview.wording import rows_shown
from advisor.knowledge import Knowledge

if TYPE_CHECKING:
    from advisor.interview.session import Session


class Damaged(Exception):
    """A file that is no interview; the message says what became of it."""


@dataclass(frozen=True, slots=True)
class Kept:
    """A kept interview, as the list of them shows it."""

    path: Path
    title: str
    answered: int
    when: float

    @property
    def touched(self) -> str:
        """When it was saved last."""
        return f"{datetime.fromtimestamp(self.when):%Y-%m-%d %H:%M}"


# ---- what stands in the file -----------------------------------------------------------------------------------


def as_plain(case: Case, knowledge: Knowledge) -> dict[str, Plain]:
    """The answers as typed; ticks as lists."""
    found: dict[str, Plain] = {}
    for name, each in case.answers.items():
        ticks = knowledge.facts[name].domain.kind == "several" and isinstance(each.value, tuple)
        found[name] = list(each.value) if ticks and isinstance(each.value, tuple) else each.typed
    return found


def document(case: Case, advice: Advice, history: Sequence[str]) -> dict[str, Plain]:
    """The kept interview: readable as a saved case, with its changes and what the docket said."""
    docket: dict[str, Plain] = {} if advice.withheld else {each.id: each.full for each in rows_shown(advice)}
    return {
        "format": 1,
        "title": writable(case.title),
        "point_kind": case.point_kind,
        "answers": as_plain(case, advice.knowledge),
        "knowledge": {"fingerprint": advice.knowledge.fingerprint, "docket": docket},
        "history": [writable(each) for each in history],
    }


# ---- starting, resuming ----------------------------------------------------------------------------------------


def new_interview(advisor: Advisor, title: str, path: Path | None = None) -> "Session":
    """A fresh interview, kept in the usual folder unless a file is named."""
    from advisor.interview.session import Session

    title = " ".join(writable(title).split()) or "Point without a name"
    keeper = Keeper(path or _new_path(title))
    if keeper.take() and keeper.path.exists():  # another process has begun and left it in between
        keeper.release()
        return open_interview(advisor, keeper.path)
    session = Session(advisor, keeper, Case(advisor.knowledge.point_kind.id, title), notices=_held(keeper))
    session.save()
    return session


def _new_path(title: str) -> Path:
    ascii_only = unicodedata.normalize("NFKD", title).encode("ascii", "ignore").decode()
    slug = re.sub(r"[^a-z0-9]+", "-", ascii_only.casefold()).strip("-")[:40].strip("-") or "point"
    return places.kept_interviews() / f"{slug}-{secrets.token_hex(3)}.yaml"


def kept_interviews() -> list[Kept]:
    """The kept interviews, the last one touched first."""
    found = []
    for path in places.kept_interviews().glob("*.yaml"):
        tree = read_document(path, Problems())
        title, answered = path.stem, 0
        if isinstance(tree, Mapping):
            title = str(tree.get("title", path.stem))
            answers = tree.get("answers")
            answered = len(list(answers)) if isinstance(answers, Mapping) else 0
        with contextlib.suppress(OSError):
            found.append(Kept(path, title, answered, path.stat().st_mtime))
    return sorted(found, key=lambda each: -each.when)


def open_interview(advisor: Advisor, path: Path) -> "Session":
    """Go on with the interview in a file.

    Raises:
        Damaged: it cannot be read. One of the usual folder has then been moved aside.
    """
    keeper = Keeper(path)
    keeper.take()  # before the file is read, so that no answer given elsewhere in between is written over
    try:
        session = _opened(advisor, keeper)
    except BaseException:
        keeper.release()
        raise
    if session.keeper is not keeper:
        keeper.release()
    return session


def _opened(advisor: Advisor, keeper: Keeper) -> "Session":
    from advisor.interview.session import Session

    path, problems = keeper.path, Problems()
    tree = read_document(path, problems)
    if not isinstance(tree, Mapping) or problems.errors or str(tree.get("format", "")) != "1":
        raise Damaged(_moved_aside(keeper, problems))
    case, notices = _not_too_open(*_case(path, tree, advisor.knowledge), advisor)
    if "expect" in tree or "like" in tree:
        return copy_of(
            advisor,
            case,
            (f"'{path.name}' is a scenario and stays as it is; this interview is kept beside the others.", *notices),
        )
    session = Session(advisor, keeper, case, history=_texts(tree.get("history")), notices=(*_held(keeper), *notices))
    session.notices += _changed_since(tree.get("knowledge"), session.advice)
    return session


def copy_of(advisor: Advisor, case: Case, notices: Sequence[str] = ()) -> "Session":
    """An interview that begins with the answers of another case."""
    from advisor.interview.session import Session

    keeper = Keeper(_new_path(case.title))
    keeper.take()
    return Session(advisor, keeper, case, notices=notices)


def _case(path: Path, tree: Mapping, knowledge: Knowledge) -> tuple[Case, tuple[str, ...]]:
    """The case of a file; answers that the knowledge does not know or take any more are left out, and told."""
    saved = read_case(path, knowledge, Problems())
    if saved is not None:
        return saved.case, ()
    answers: dict[str, Answer] = {}
    notices = []
    told = tree.get("answers")
    for name, node in told.items() if isinstance(told, Mapping) else ():
        declaration = knowledge.facts.get(name)
        if declaration is None or declaration.question is None:
            notices.append(f"The answer to {name} was left out. This is no question here.")
            continue
        text = ", ".join(_texts(node)) if isinstance(node, Listed) else str(node)
        try:
            answers[name] = answer(declaration, text, strict=False)
        except Unsuitable as fault:
            notices.append(f"The answer to {name} was left out. {fault}")
    return Case(knowledge.point_kind.id, str(tree.get("title", path.stem)), answers), tuple(notices)


def _not_too_open(case: Case, notices: tuple[str, ...], advisor: Advisor) -> tuple[Case, tuple[str, ...]]:
    """The case without the last answers that leave too much open together; that is told."""
    for name in reversed([name for name, each in case.answers.items() if each.left_open]):
        try:
            advisor.advise(case)
        except TooOpen as fault:
            case, notices = case.without(name), (*notices, f"The answer to {name} was left out. {fault}")
    return case, notices


def _texts(node: Node | None) -> list[str]:
    return [str(each) for each in node if isinstance(each, Scalar)] if isinstance(node, Listed) else []


def _held(keeper: Keeper) -> tuple[str, ...]:
    if keeper.holds:
        return ()
    who = f"process {keeper.holder}" if keeper.holder else "another process"
    told = f"This interview is open elsewhere ({who}): look and try, nothing is saved here."
    return (f"{told} If no other gudgeon runs, delete '{keeper.lock}'.",)


def _moved_aside(keeper: Keeper, problems: Problems) -> str:
    path = keeper.path
    first = next(iter(problems), None)
    why = f"{first}" if first else f"'{path}' is no kept interview."
    ours = keeper.holds and path.is_file() and path.resolve().parent == places.kept_interviews().resolve()
    if not ours:
        return f"{why} Nothing was changed."
    aside = path.with_name(f"{path.name}.broken-{time.strftime('%Y-%m-%d')}")
    count = 1
    while aside.exists():
        count += 1
        aside = path.with_name(f"{path.name}.broken-{time.strftime('%Y-%m-%d')}-{count}")
    try:
        path.rename(aside)
    except OSError:
        return f"{why} Nothing was changed."
    return f"{why} The file was moved to '{aside}'; nothing was deleted."


def _changed_since(node: Node | None, advice: Advice) -> tuple[str, ...]:
    """A sentence on the rows that another state of the knowledge reads differently."""
    if not isinstance(node, Mapping) or str(node.get("fingerprint", "")) == advice.knowledge.fingerprint:
        return ()
    docket = node.get("docket")
    was = {row: str(text) for row, text in docket.items()} if isinstance(docket, Mapping) else {}
    changed = [each.title for each in rows_shown(advice) if each.id in was and was[each.id] != each.full]
    what = (
        f"these rows of the docket read differently: {', '.join(changed)}" if changed else "the docket reads the same"
    )
    return (f"The knowledge has changed since; {what}.",)
