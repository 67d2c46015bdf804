"""What the commands do: load, call one room, print; the result is the exit code."""

import os
import sys
from pathlib import Path
from typing import TYPE_CHECKING

from advisor.desk import (
    advisors_for,
    as_json_text,
    count,
    kinds_in,
    loaded,
    loaded_for_now,
    say,
    what_counts,
    write,
)
from advisor.mishaps import DONE, NOT_SETTLED, USAGE, Refusal
from advisor.reviewing import approve, compare, mutate, replay

__all__ = [
    "advise",
    "approve",
    "check",
    "compare",
    "compute",
    "facts",
    "interview",
    "mutate",
    "replay",
    "rules",
    "schema",
    "start",
]

if TYPE_CHECKING:
    from advisor.advice import Advice
    from advisor.answers import Saved
    from advisor.knowledge import Knowledge


def _saved(file: Path, knowledge: "Knowledge") -> "Saved":
    from advisor.answers import read_case
    from advisor.documents import Problems

    problems = Problems()
    saved = read_case(file, knowledge, problems)
    if saved is None:
        raise Refusal("\n".join(map(str, problems)) + f"\n{count(len(problems))} in the case; nothing was done.")
    return saved


def start() -> int:
    """Without a command: the interview on a terminal; otherwise the demonstration case, and how to go on."""
    from advisor.places import demonstration_case

    if sys.stdin.isatty() and sys.stdout.isatty():
        return interview(None, plain=False, plain_glyphs=False, knowledge=None, shelf=None)
    from advisor import explanation

    file = demonstration_case()
    say(explanation.text(_advice(file, loaded(None, None)), full=False))
    say(f"""
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

    def kind() -> str:
        from advisor.answers import point_kind_of

        return point_kind_of(file) if file is not None and file.is_file() else "rolling_bearing"

    if plain or os.environ.get("TERM", "dumb") == "dumb" or not (sys.stdin.isatty() and sys.stdout.isatty()):
        from advisor.screens import plain as lines

        return lines.run(lambda: loaded(knowledge, shelf, kind()), file)
    from advisor.screens import running

    return running.run(lambda: loaded_for_now(knowledge, shelf, kind()), file, plain_glyphs=plain_glyphs)


def check(folder: Path | None, shelf: Path | None, everything: bool = False) -> int:
    """Print every problem of a knowledge folder; where there is none, what its meaning holds against itself."""
    from advisor.documents import Problems
    from advisor.knowledge import examine

    root, products = what_counts(folder, shelf)
    problems = Problems()
    bodies = [found for kind in kinds_in(root) if (found := examine(root, kind, products, problems)) is not None]
    for problem in problems:
        say(str(problem))
    if len(problems):
        sys.stderr.write(f"{count(len(problems))}.\n")
        return USAGE
    if _print_findings(bodies, everything=everything):
        return USAGE
    for knowledge in bodies[-1:]:
        counts = f"{len(knowledge.rules)} rules, {len(knowledge.facts)} facts, {len(knowledge.tables)} tables"
        say(f"{root}: no problems. {counts}, {len(knowledge.shelf)} products; fingerprint {knowledge.fingerprint}.")
    return DONE


def _print_findings(bodies: "list[Knowledge]", *, everything: bool) -> int:
    """Print what the meaning holds against itself, each with its witness; the result counts what must be mended."""
    from advisor.anomalies import examine_together

    findings = examine_together(bodies)
    for finding in findings:
        if everything or not finding.silenced:
            say(str(finding))
            say(f"    {finding.shown(bodies[-1], whole=everything)}")
    faults = sum(finding.must_be_mended for finding in findings)
    accepted = sum(1 for finding in findings if finding.silenced)
    if findings:
        listed = f"{len(findings)} findings: {faults} to be mended, {len(findings) - faults - accepted} to be weighed"
        sys.stderr.write(f"{listed}, {accepted} accepted with a reason.\n")
    return faults


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

    advice = _advice(file, loaded(knowledge, shelf, point_kind_of(file)), assume=assume)
    if html is not None:
        write(html, explanation.html(advice))
    text = (
        explanation.as_json(advice)
        if as_json
        else explanation.markdown(advice)
        if markdown
        else explanation.text(advice, full=full)
    )
    say(text)
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

    rows = fact_rows(loaded(knowledge, None), words)
    say(as_json_text(rows) if as_json else facts_text(rows))
    return DONE


def rules(words: tuple[str, ...], show: str | None, as_json: bool, knowledge: Path | None) -> int:
    """List the rules, or show one as its reader meets it."""
    from advisor.listing import rule_rows, rules_text

    if show is not None:
        return _rule(show, as_json, knowledge)
    rows = rule_rows(loaded(knowledge, None), words)
    say(as_json_text(rows) if as_json else rules_text(rows))
    return DONE


def _rule(name: str, as_json: bool, knowledge: Path | None) -> int:
    """One rule with its scenarios; faulty scenarios are told and passed over."""
    from advisor import replay as replaying
    from advisor import rule_sheet

    found = replaying.find(())
    advisors = advisors_for(replaying.kinds_of(found), knowledge, None)
    advisor = next((each for each in advisors.values() if name in each.knowledge.rules), next(iter(advisors.values())))
    sheet = rule_sheet.rule_sheet(name, advisor, replaying.replay(found, advisors))
    say(as_json_text(rule_sheet.as_data(sheet)) if as_json else rule_sheet.as_text(sheet))
    return DONE


def schema(file: str | None, out: Path | None) -> int:
    """Print the schema of a knowledge file, list the schemas, or write them all into a folder."""
    from advisor.documents import nearest
    from advisor.knowledge import editor_schema

    if out is not None:
        try:
            out.mkdir(parents=True, exist_ok=True)
        except OSError as fault:
            raise Refusal(f"The schemas were not written: '{out}' is no folder: {fault.strerror}.") from None
        for name in editor_schema.NAMES:
            write(out / f"{name}.schema.json", editor_schema.schema_text(name))
        say(f"{out}: {len(editor_schema.NAMES)} schemas.")
        return DONE
    if file is None:
        say("\n".join(f"{name:<14} {editor_schema.schema(name)['description']}" for name in editor_schema.NAMES))
        return DONE
    name = file if file in editor_schema.NAMES else editor_schema.schema_of(file) if file.endswith(".yaml") else ""
    if not name:
        near = nearest(file, editor_schema.NAMES) or f" There are schemas for {', '.join(editor_schema.NAMES)}."
        raise Refusal(f"There is no schema for '{file}'.{near}")
    say(editor_schema.schema_text(name))
    return DONE


def compute(name: str | None, inputs: tuple[str, ...], as_json: bool) -> int:
    """List the formulas, or work one out."""
    from advisor import computing

    if name is None:
        say(computing.list_formulas())
        return DONE
    pairs = dict(each.partition("=")[::2] for each in inputs)
    try:
        computed = computing.compute(name, pairs)
    except computing.ComputeFault as fault:
        raise Refusal("\n".join(fault.messages)) from None
    if as_json:
        say(as_json_text(computing.as_data(computed)))
    else:
        say(computing.render_text(computed))
    return DONE
