"""What the commands do: load, call one room, print; the result is the exit code."""

import sys
from pathlib import Path
from typing import TYPE_CHECKING

from advisor.mishaps import DONE, NOT_SETTLED, USAGE, Refusal
from advisor.places import demonstration_case, knowledge_folder

if TYPE_CHECKING:
    from advisor.advice import Advice
    from advisor.answers import Saved
    from advisor.knowledge import Knowledge


def _loaded(knowledge: Path | None, shelf: Path | None, point_kind: str = "rolling_bearing") -> "Knowledge":
    from advisor.documents import Faulty
    from advisor.knowledge import load

    try:
        return load(knowledge or knowledge_folder(), point_kind, shelf)
    except Faulty as fault:
        raise Refusal(f"{fault}\n{_count(len(fault.problems))} in the knowledge; nothing was done.") from None


def _saved(file: Path, knowledge: "Knowledge") -> "Saved":
    from advisor.answers import read_case
    from advisor.documents import Problems

    problems = Problems()
    saved = read_case(file, knowledge, problems)
    if saved is None:
        raise Refusal("\n".join(map(str, problems)) + f"\n{_count(len(problems))} in the case; nothing was done.")
    return saved


def _count(faults: int) -> str:
    return "1 problem" if faults == 1 else f"{faults} problems"


def check(folder: Path | None, shelf: Path | None) -> int:
    """Print every problem of a knowledge folder."""
    from advisor.documents import Problems
    from advisor.knowledge import examine

    root = folder or knowledge_folder()
    problems = Problems()
    knowledge = None
    for kind in _kinds(root):
        knowledge = examine(root, kind, shelf, problems)
    for problem in problems:
        print(problem)  # noqa: T201 - the command's output
    if len(problems):
        print(f"{_count(len(problems))}.", file=sys.stderr)  # noqa: T201 - words beside the output
        return USAGE
    if knowledge is not None:
        print(  # noqa: T201 - the command's output
            f"{root}: no problems. {len(knowledge.rules)} rules, {len(knowledge.facts)} facts, {len(knowledge.tables)} tables, "
            f"{len(knowledge.shelf)} products; fingerprint {knowledge.fingerprint}.")
    return DONE


def _kinds(root: Path) -> list[str]:
    from advisor.documents import Mapping, Problems, read_document

    tree = read_document(root / "point_kinds.yaml", Problems())
    kinds = tree.get("kinds") if isinstance(tree, Mapping) else None
    return list(kinds) if isinstance(kinds, Mapping) and kinds else ["rolling_bearing"]


def advise(
    file: Path, assume: bool, as_json: bool, markdown: bool, html: Path | None, knowledge: Path | None, shelf: Path | None  # noqa: FBT001 - flags as click gives them
) -> int:
    """Print the advice for a saved case."""
    from advisor import explanation
    from advisor.answers import point_kind_of
    from advisor.documents import Unwritable, write_text_safely

    advice = _advice(file, _loaded(knowledge, shelf, point_kind_of(file)), assume=assume)
    if html is not None:
        try:
            write_text_safely(html, explanation.html(advice))
        except Unwritable as fault:
            raise Refusal(str(fault)) from None
    text = explanation.as_json(advice) if as_json else explanation.markdown(advice) if markdown else explanation.text(advice)
    sys.stdout.write(text if text.endswith("\n") else text + "\n")
    return _exit_code(advice)


def _advice(file: Path, knowledge: "Knowledge", *, assume: bool = False) -> "Advice":
    from advisor.advice import Advisor

    saved = _saved(file, knowledge)
    return Advisor(knowledge).advise(saved.case, assume_gaps=assume or saved.assume_gaps, only=saved.only)


def _exit_code(advice: "Advice") -> int:
    from advisor.advice import State

    return DONE if advice.state is State.SETTLED and advice.fits else NOT_SETTLED
