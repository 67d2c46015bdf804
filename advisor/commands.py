"""What the commands do: load, call one room, print; the result is the exit code."""

import gc
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
        loaded = load(knowledge or kept.knowledge or knowledge_folder(), point_kind, shelf or kept.shelf)
    except Faulty as fault:
        raise Refusal(f"{fault}\n{_count(len(fault.problems))} in the knowledge; nothing was done.") from None
    # Knowledge lives as long as the process: the collector need not walk it again for every advice.
    gc.freeze()
    return loaded


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

    def load() -> "Knowledge":
        from advisor.answers import point_kind_of

        known = file is not None and file.is_file()
        return _loaded(knowledge, shelf, point_kind_of(file) if known and file is not None else "rolling_bearing")

    if plain or os.environ.get("TERM", "dumb") == "dumb" or not (sys.stdin.isatty() and sys.stdout.isatty()):
        from advisor.screens import plain as lines

        return lines.run(load, file)
    from advisor.screens import running

    return running.run(load, file, plain_glyphs=plain_glyphs)


def check(folder: Path | None, shelf: Path | None, everything: bool = False) -> int:
    """Print every problem of a knowledge folder; where there is none, what its meaning holds against itself."""
    from advisor.documents import Problems
    from advisor.knowledge import examine

    root = folder or knowledge_folder()
    problems = Problems()
    bodies = [knowledge for kind in _kinds(root) if (knowledge := examine(root, kind, shelf, problems)) is not None]
    for problem in problems:
        _print(str(problem))
    if len(problems):
        sys.stderr.write(f"{_count(len(problems))}.\n")
        return USAGE
    if _print_findings(bodies, everything=everything):
        return USAGE
    for knowledge in bodies[-1:]:
        counts = f"{len(knowledge.rules)} rules, {len(knowledge.facts)} facts, {len(knowledge.tables)} tables"
        _print(f"{root}: no problems. {counts}, {len(knowledge.shelf)} products; fingerprint {knowledge.fingerprint}.")
    return DONE


def _print_findings(bodies: "list[Knowledge]", *, everything: bool) -> int:
    """Print what the meaning holds against itself, each with its witness; the result counts what must be mended."""
    from advisor.anomalies import examine_together

    findings = examine_together(bodies)
    for finding in findings:
        if everything or not finding.silenced:
            _print(str(finding))
            _print(f"    {finding.shown(bodies[-1], whole=everything)}")
    faults = sum(finding.must_be_mended for finding in findings)
    accepted = sum(1 for finding in findings if finding.silenced)
    if findings:
        listed = f"{len(findings)} findings: {faults} to be mended, {len(findings) - faults - accepted} to be weighed"
        sys.stderr.write(f"{listed}, {accepted} accepted with a reason.\n")
    return faults


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


def rules(words: tuple[str, ...], show: str | None, as_json: bool, knowledge: Path | None) -> int:
    """List the rules, or show one as its reader meets it."""
    from advisor.listing import rule_rows, rules_text

    if show is not None:
        return _rule(show, as_json, knowledge)
    rows = rule_rows(_loaded(knowledge, None), words)
    _print(_json(rows) if as_json else rules_text(rows))
    return DONE


def _rule(name: str, as_json: bool, knowledge: Path | None) -> int:
    """One rule with its scenarios; faulty scenarios are told and passed over."""
    from advisor import replay as replaying
    from advisor import rule_sheet

    found = replaying.find(())
    advisors = _advisors(replaying.kinds_of(found), knowledge, None)
    advisor = next((each for each in advisors.values() if name in each.knowledge.rules), next(iter(advisors.values())))
    sheet = rule_sheet.rule_sheet(name, advisor, replaying.replay(found, advisors))
    _print(_json(rule_sheet.as_data(sheet)) if as_json else rule_sheet.as_text(sheet))
    return DONE


def schema(file: str | None, out: Path | None) -> int:
    """Print the schema of a knowledge file, list the schemas, or write them all into a folder."""
    from advisor.documents import Unwritable, nearest, write_text_safely
    from advisor.knowledge import editor_schema

    if out is not None:
        try:
            out.mkdir(parents=True, exist_ok=True)
            for name in editor_schema.NAMES:
                write_text_safely(out / f"{name}.schema.json", editor_schema.schema_text(name))
        except (Unwritable, OSError) as fault:
            raise Refusal(f"The schemas were not written: {fault}") from None
        _print(f"{out}: {len(editor_schema.NAMES)} schemas.")
        return DONE
    if file is None:
        _print("\n".join(f"{name:<14} {editor_schema.schema(name)['description']}" for name in editor_schema.NAMES))
        return DONE
    name = file if file in editor_schema.NAMES else editor_schema.schema_of(file) if file.endswith(".yaml") else ""
    if not name:
        near = nearest(file, editor_schema.NAMES) or f" There are schemas for {', '.join(editor_schema.NAMES)}."
        raise Refusal(f"There is no schema for '{file}'.{near}")
    _print(editor_schema.schema_text(name))
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
    markdown: bool = False,
) -> int:
    """Replay scenarios, or advice that was saved as JSON, and tell what differs."""
    from advisor import approval
    from advisor import replay as replaying
    from advisor.documents import Unwritable, write_text_safely

    if any(each.suffix == ".json" for each in files):
        return _replay_saved(files, as_json, knowledge, shelf)
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
    review, faults = approval.review_of(found, outcome, advisors)
    for problem in (*outcome.problems, *faults):
        print(problem, file=sys.stderr)  # noqa: T201 - words beside the output
    if as_json:
        signing = {"to_be_signed": approval.as_data(review)} if review else {}
        _print(_json(replaying.as_data(outcome, covered) | signing))
    elif markdown:
        _print(replaying.as_markdown(outcome, covered) + (f"\n{approval.as_markdown(review)}" if review else ""))
    else:
        _print(replaying.as_text(outcome, covered) + (f"\n\n{approval.as_text(review)}".rstrip() if review else ""))
    if outcome.problems or len(faults):
        return USAGE
    return NOT_SETTLED if outcome.differing or (review and review.groups) else DONE


def _replay_saved(files: tuple[Path, ...], as_json: bool, knowledge: Path | None, shelf: Path | None) -> int:
    """Replay advice that was saved as JSON."""
    from advisor.advice import Advisor
    from advisor.replay import saved_advice

    advisors: dict[str, Advisor] = {}

    def advisor_for(kind: str) -> "Advisor":
        if kind not in advisors:
            advisors[kind] = Advisor(_loaded(knowledge, shelf, kind))
        return advisors[kind]

    found = [saved_advice.replay(file, advisor_for) for file in files]
    _print(_json([saved_advice.as_data(each) for each in found]) if as_json else saved_advice.as_text(found))
    return DONE if all(each.same for each in found) else NOT_SETTLED


def approve(
    group: str | None, by: str | None, because: str | None, scenarios: Path | None, knowledge: Path | None
) -> int:
    """Sign for one group of changed expectations; without a group: list what is to be signed."""
    from datetime import UTC, datetime

    from advisor import approval
    from advisor import replay as replaying
    from advisor.places import scenario_folder

    root = (scenarios or scenario_folder()).absolute()

    def advisors() -> "dict[str, Advisor]":
        return _advisors_of(knowledge or knowledge_folder(), replaying.kinds_of(replaying.find([root])))

    if group is None:
        if by is not None or because is not None:
            raise Refusal("Name the group that you sign for. 'gudgeon approve' alone lists them.")
        review = approval.review(root, advisors())
        _print(approval.as_text(review) or "Nothing is to be signed.")
        return NOT_SETTLED if review.groups else DONE
    signature = approval.signature(by or "", because or "")
    entry = approval.approve(root, group, signature, datetime.now(UTC).date().isoformat(), advisors)
    _print(f"{root / approval.NAME}\n{entry.text()}")
    return DONE


def _advisors_of(folder: Path, kinds: list[str]) -> "dict[str, Advisor]":
    """Advisors on the knowledge of this folder with its own shelf, whatever the settings say: what is signed for."""
    from advisor.advice import Advisor
    from advisor.documents import Faulty
    from advisor.knowledge import load

    known = _kinds(folder)
    try:
        chosen = [kind for kind in kinds if kind in known] or known[:1]
        return {kind: Advisor(load(folder, kind, None)) for kind in chosen}
    except Faulty as fault:
        raise Refusal(f"{fault}\n{_count(len(fault.problems))} in the knowledge; nothing was done.") from None


def mutate(
    files: tuple[Path, ...],
    rules: tuple[str, ...],
    tries: int | None,
    as_json: bool,
    knowledge: Path | None,
    shelf: Path | None,
) -> int:
    """Change every agreed rule in one place after the other; 1 where a change goes unnoticed."""
    from advisor import mutation
    from advisor import replay as replaying

    found = replaying.find(files)
    if not found:
        raise Refusal("There is no scenario here, so nothing would notice a change. Name a file or a folder with some.")
    root = knowledge or knowledge_folder()
    kinds = [kind for kind in replaying.kinds_of(found) if kind in _kinds(root)] or _kinds(root)[:1]
    for kind in kinds:
        known = _loaded(root, shelf, kind).rules
        unknown = [rule for rule in rules if rule not in known]
        if unknown:
            raise Refusal(f"'{unknown[0]}' is no rule of {kind}. 'gudgeon rules' lists them.")
    measured = [
        mutation.measure(root, kind, shelf, found, rules=rules, tries=mutation.TRIES if tries is None else tries)
        for kind in kinds
    ]
    _print(_json(list(map(mutation.as_data, measured))) if as_json else "\n\n".join(map(mutation.as_text, measured)))
    return NOT_SETTLED if any(len(each.survivors) > each.equivalent for each in measured) else DONE


def compare(old: str, new: str, scenarios: Path | None, kind: str, as_json: bool, markdown: bool) -> int:
    """Tell what changes between two editions of the knowledge; 1 where a scenario or a region does."""
    from advisor import comparison
    from advisor import replay as replaying

    with comparison.edition(old) as before, comparison.edition(new) as after:
        editions = _edition(before, kind, old), _edition(after, kind, new)
        files = replaying.find([scenarios] if scenarios else [])
        if replaying.kinds_of(files) != [kind]:
            files = [each for each in files if replaying.kinds_of([each]) == [kind]]
        compared = comparison.compare(*editions, files)
    for problem in compared.problems:
        print(problem, file=sys.stderr)  # noqa: T201 - words beside the output
    write = comparison.as_markdown if markdown else comparison.as_text
    _print(_json(comparison.as_data(compared)) if as_json else write(compared))
    return NOT_SETTLED if compared.changed or compared.regions else DONE


def _edition(root: Path, kind: str, named: str) -> "Knowledge":
    from advisor.documents import Faulty
    from advisor.knowledge import load

    try:
        return load(root, kind, None)
    except Faulty as fault:
        raise Refusal(f"{fault}\n{_count(len(fault.problems))} in {named}; nothing was compared.") from None


def _advisors(kinds: list[str], knowledge: Path | None, shelf: Path | None) -> "dict[str, Advisor]":
    """One advisor for each kind of point that the knowledge has; a kind that it lacks is told where a file names it."""
    from advisor.advice import Advisor

    known = _kinds(knowledge or knowledge_folder())
    chosen = [kind for kind in kinds if kind in known] or known[:1]
    return {kind: Advisor(_loaded(knowledge, shelf, kind)) for kind in chosen}


def _json(data: object) -> str:
    import json

    return json.dumps(data, ensure_ascii=False, indent=1)
