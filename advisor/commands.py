"""What the commands do: load, call one room, print; the result is the exit code."""

import os
import sys
from pathlib import Path
from typing import TYPE_CHECKING

from advisor.mishaps import DONE, NOT_SETTLED, USAGE, Refusal
from advisor.places import knowledge_folder

if TYPE_CHECKING:
    from advisor.advice import Advice, Advisor
    from advisor.answers import Saved
    from advisor.knowledge import Knowledge


def _loaded(knowledge: Path | None, shelf: Path | None, point_kind: str = "rolling_bearing") -> "Knowledge":
    from advisor.documents import Faulty
    from advisor.knowledge import load
    from advisor.settings import settings

    kept = settings()
    try:
        return load(knowledge or kept.knowledge or knowledge_folder(), point_kind, shelf or kept.shelf)
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


def _print(text: str) -> None:
    sys.stdout.write(text if text.endswith("\n") else text + "\n")


def _count(faults: int) -> str:
    return "1 problem" if faults == 1 else f"{faults} problems"


def start() -> int:
    """Without a command: the interview on a terminal; otherwise the demonstration case, and how to go on."""
    from advisor.places import demonstration_case

    if sys.stdin.isatty() and sys.stdout.isatty():
        return interview(None, plain=False, plain_glyphs=False, knowledge=None, shelf=None)
    from advisor import explanation

    file = demonstration_case()
    _print(explanation.text(_advice(file, _loaded(None, None)), full=False))
    _print(f"""
This was the advice for the bundled demonstration case, {file}
  gudgeon interview            choose a lubricant for a point of your own (on a terminal)
  gudgeon interview --plain    the same question by question, line by line
  gudgeon advise FILE --html OUT    advice for a saved case, and a report
  gudgeon --help               everything else""")
    return DONE


def interview(
    file: Path | None, plain: bool, plain_glyphs: bool, knowledge: Path | None, shelf: Path | None
) -> int:
    """Start or resume an interview: the sheet on a terminal that can show it, else line by line."""
    from functools import partial

    load = partial(_loaded, knowledge, shelf)
    if plain or os.environ.get("TERM", "dumb") == "dumb" or not (sys.stdin.isatty() and sys.stdout.isatty()):
        from advisor.screens import plain as lines

        return lines.run(load, file)
    from advisor.screens import running

    return running.run(load, file, plain_glyphs=plain_glyphs)


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
        _print(str(problem))
    if len(problems):
        sys.stderr.write(f"{_count(len(problems))}.\n")
        return USAGE
    if knowledge is not None:
        counts = f"{len(knowledge.rules)} rules, {len(knowledge.facts)} facts, {len(knowledge.tables)} tables"
        _print(f"{root}: no problems. {counts}, {len(knowledge.shelf)} products; fingerprint {knowledge.fingerprint}.")
    return DONE


def _kinds(root: Path) -> list[str]:
    from advisor.documents import Mapping, Problems, read_document

    tree = read_document(root / "point_kinds.yaml", Problems())
    kinds = tree.get("kinds") if isinstance(tree, Mapping) else None
    return list(kinds) if isinstance(kinds, Mapping) and kinds else ["rolling_bearing"]


def advise(
    file: Path,
    assume: bool,
    full: bool,
    as_json: bool,
    markdown: bool,
    html: Path | None,
    knowledge: Path | None,
    shelf: Path | None,
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
    text = (
        explanation.as_json(advice)
        if as_json
        else explanation.markdown(advice)
        if markdown
        else explanation.text(advice, full=full)
    )
    _print(text)
    return _exit_code(advice)


def _advice(file: Path, knowledge: "Knowledge", *, assume: bool = False) -> "Advice":
    from advisor.advice import Advisor, TooOpen

    saved = _saved(file, knowledge)
    try:
        return Advisor(knowledge).advise(saved.case, assume_gaps=assume or saved.assume_gaps, only=saved.only)
    except TooOpen as fault:
        raise Refusal(f"{file}: {fault}") from None


def _exit_code(advice: "Advice") -> int:
    from advisor.advice import State

    return DONE if advice.state is State.SETTLED and advice.fits else NOT_SETTLED


def facts(words: tuple[str, ...], as_json: bool, knowledge: Path | None) -> int:
    """List the facts."""
    from advisor.listing import fact_rows, facts_text

    rows = fact_rows(_loaded(knowledge, None), words)
    _print(_json(rows) if as_json else facts_text(rows))
    return DONE


def rules(words: tuple[str, ...], as_json: bool, knowledge: Path | None) -> int:
    """List the rules."""
    from advisor.listing import rule_rows, rules_text

    rows = rule_rows(_loaded(knowledge, None), words)
    _print(_json(rows) if as_json else rules_text(rows))
    return DONE


def compute(name: str | None, inputs: tuple[str, ...], as_json: bool) -> int:
    """List the formulas, or work one out."""
    from advisor import computing

    if name is None:
        _print(computing.list_formulas())
        return DONE
    pairs = dict(each.partition("=")[::2] for each in inputs)
    try:
        computed = computing.compute(name, pairs)
    except computing.ComputeFault as fault:
        raise Refusal("\n".join(fault.messages)) from None
    if as_json:
        _print(_json(computing.as_data(computed)))
    else:
        _print(computing.render_text(computed))
    return DONE


def replay(
    files: tuple[Path, ...],
    as_json: bool,
    junit: Path | None,
    coverage: bool,
    knowledge: Path | None,
    shelf: Path | None,
) -> int:
    """Replay scenarios and tell where their advice differs from what is expected."""
    from advisor import replay as replaying
    from advisor.documents import Unwritable, write_text_safely

    found = replaying.find(files)
    if not found:
        raise Refusal("There is no scenario to replay here. Name a file or a folder that holds some.")
    advisors = _advisors(replaying.kinds_of(found), knowledge, shelf)
    outcome = replaying.replay(found, advisors)
    covered = replaying.coverage(outcome, [each.knowledge for each in advisors.values()]) if coverage else None
    if junit is not None:
        try:
            write_text_safely(junit, replaying.as_junit(outcome))
        except Unwritable as fault:
            raise Refusal(str(fault)) from None
    for problem in outcome.problems:
        print(problem, file=sys.stderr)  # noqa: T201 - words beside the output
    _print(_json(replaying.as_data(outcome, covered)) if as_json else replaying.as_text(outcome, covered))
    return USAGE if outcome.problems else NOT_SETTLED if outcome.differing else DONE


def _advisors(kinds: list[str], knowledge: Path | None, shelf: Path | None) -> "dict[str, Advisor]":
    """One advisor for each kind of point that the knowledge has; a kind that it lacks is told where a file names it."""
    from advisor.advice import Advisor

    known = _kinds(knowledge or knowledge_folder())
    chosen = [kind for kind in kinds if kind in known] or known[:1]
    return {kind: Advisor(_loaded(knowledge, shelf, kind)) for kind in chosen}


def _json(data: object) -> str:
    import json

    return json.dumps(data, ensure_ascii=False, indent=1)
