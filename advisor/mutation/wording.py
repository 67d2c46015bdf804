"""Words for mutants, a scenario that kills one as it would be written, and the whole result as text and data."""

from collections.abc import Iterator, Mapping
from typing import TYPE_CHECKING, Any

from advisor.bending import typed
from advisor.conditions import ALWAYS, FactRef
from advisor.explanation.words import LEVELS, say_condition, say_test, say_value, title_of
from advisor.knowledge import Asks, Instance, Knowledge, Refers, Sets, Warns
from advisor.knowledge.model import Conclusion
from advisor.mutation.mutants import Mutant
from advisor.mutation.searching import Found
from advisor.mutation.telling import Part

if TYPE_CHECKING:
    from advisor.mutation.measuring import Measured, Survivor

FORMAT = 1
_ABSENT = {"cautions": "no_cautions", "referrals": "no_referrals"}
_LISTS = {"cautions", "no_cautions", "referrals", "no_referrals", "open_questions", "conflicts"}


def say_mutant(mutant: Mutant, knowledge: Knowledge) -> str:
    """What was changed: before -> after, for the first row where the rule goes over a table."""
    place, after = next(iter(mutant.changed.items()))
    before = knowledge.instances[mutant.step][place]
    if after is None:
        return "the rule deleted"
    if after.when != before.when:
        change = f"{say_condition(before.when, knowledge)} -> {say_condition(after.when, knowledge)}"
    else:
        change = _then(before, after, knowledge)
    return change + (f" (row {before.row.id}, and so for every row)" if before.row else "")


def _then(before: Instance, after: Instance, knowledge: Knowledge) -> str:
    if len(before.then) != len(after.then):
        gone = next(each for each in before.then if each not in after.then)
        return f"without '{say_conclusion(gone, knowledge)}'"
    was, now = next((a, b) for a, b in zip(before.then, after.then, strict=True) if a != b)
    return f"{say_conclusion(was, knowledge)} -> {say_conclusion(now, knowledge)}"


def say_conclusion(conclusion: Conclusion, knowledge: Knowledge) -> str:
    """A conclusion in one line."""
    if isinstance(conclusion, Refers):
        return f"refer to {conclusion.to}{', withholding' if conclusion.withhold else ''}"
    for_ = "" if conclusion.for_ == ALWAYS else f", where {say_condition(conclusion.for_, knowledge)}"
    if isinstance(conclusion, Asks):
        return f"{LEVELS[conclusion.level]}: {say_test(conclusion.test, knowledge)}{for_}"
    if isinstance(conclusion, Warns):
        return f"caution {conclusion.caution}{for_}"
    assert isinstance(conclusion, Sets)  # noqa: S101 - the fourth and last kind
    if isinstance(conclusion.value, FactRef):
        return f"set {conclusion.name} to {title_of(conclusion.value.name, knowledge)}{for_}"
    return f"set {conclusion.name} to {say_value(knowledge.domain(conclusion.name), conclusion.value)}{for_}"


def as_scenario(found: Found) -> str:
    """The case as a scenario: the answers that differ, and what the rules tell as they stand now."""
    saved, knowledge = found.like.saved, found.knowledge
    base = saved.case
    lines = ["format: 1", 'title: ""', 'guards: ""', "status: draft", f"like: {found.like.name}"]
    changed = {name: answer for name, answer in found.case.answers.items() if base.answers.get(name) != answer}
    if changed:
        lines.append("answers:")
        lines += [
            f"  {name}: {typed(answer.value, name, knowledge) if answer.value is not None else answer.typed}"
            for name, answer in changed.items()
        ]
    lines += ["gaps: dont_know"] if saved.assume_gaps else []
    lines += [f"shelf: [{', '.join(sorted(saved.only))}]"] if saved.only is not None else []
    return "\n".join([*lines, "expect:  # as the rules stand; confirm it by the source", *_expected(found)])


def _expected(found: Found) -> Iterator[str]:
    """What tells the two apart, in the words of an expectation."""
    lists: dict[str, list[str]] = {}
    maps: dict[str, dict[str, str]] = {}
    for part, text in found.kept.items():
        if part[0] in {"cautions", "referrals", "open_questions"}:
            lists.setdefault(part[0], []).append(text)
        elif part[0] == "conflicts":
            yield f"  conflicts: {text}"
        elif part[0] in {"state", "withheld"}:
            yield f"  {part[0]}: {text}"
        elif part[0] == "barred":
            maps.setdefault(f"barred/{part[1]}", {})[part[2]] = text
        elif _writable(part, text):
            maps.setdefault(part[0], {})[part[1]] = text
    for part in found.lost:
        if part not in found.kept and part[0] in _ABSENT:
            lists.setdefault(_ABSENT[part[0]], []).append(part[1])
        elif part not in found.kept and part[0] == "demanded_by":
            maps.setdefault(part[0], {})[part[1]] = "none"
    yield from (f"  {key}: [{', '.join(dict.fromkeys(texts))}]" for key, texts in lists.items())
    yield from _mappings(maps)


def _mappings(maps: Mapping[str, Mapping[str, str]]) -> Iterator[str]:
    barred = False
    for key, entries in maps.items():
        if key.startswith("barred/"):
            yield from () if barred else ("  barred:",)
            barred = True
            yield f"    {key.partition('/')[2]}: {{{_entries(entries)}}}"
        else:
            yield f"  {key}: {{{_entries(entries)}}}"


def _entries(entries: Mapping[str, str]) -> str:
    return ", ".join(f"{name}: {text}" for name, text in entries.items())


def _writable(part: Part, text: str) -> bool:
    """Whether a scenario has words for the part."""
    return part[0] in {"facts", "recommended", "products", "codes", "demanded_by"} and text != "[]"


def as_text(measured: "Measured") -> str:
    """Every survivor by rule, then the score."""
    lines: list[str] = []
    rule = ""
    for each in measured.survivors:
        if each.rule != rule:
            lines += ["", each.rule] if lines else [each.rule]
            rule = each.rule
        lines += _survivor_lines(each)
    return "\n".join([*lines, *([""] if lines else []), summary(measured)])


def summary(measured: "Measured") -> str:
    """The score in one sentence."""
    lasting = measured.made - measured.equivalent
    return (
        f"{measured.point_kind}: {measured.made} mutants, {measured.equivalent} of them advise the same on every case; "
        f"{measured.killed} of the other {lasting} are killed by the scenarios: {100 * measured.score:.1f} %."
    )


def _survivor_lines(survivor: "Survivor") -> list[str]:
    lines = [f"  {survivor.kind}: {survivor.words}"]
    if survivor.equivalent:
        return [*lines, "    equivalent: no case can tell it from the rule"]
    if survivor.scenario:
        return [*lines, "    would be killed by:", *(f"      {line}" for line in survivor.scenario.splitlines())]
    return [*lines, f"    not killed; no case found in {survivor.tries} tries"]


def as_data(measured: "Measured") -> dict[str, Any]:
    """The result for JSON."""
    return {
        "format": FORMAT,
        "point_kind": measured.point_kind,
        "mutants": measured.made,
        "killed": measured.killed,
        "equivalent": measured.equivalent,
        "score": round(measured.score, 4),
        "survivors": [
            {
                "rule": each.rule,
                "kind": each.kind,
                "change": each.words,
                "equivalent": each.equivalent,
                "scenario": each.scenario,
                "tries": each.tries,
            }
            for each in measured.survivors
        ],
    }
