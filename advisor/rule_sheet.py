"""One rule as its reader meets it: in words, with its example, its scenarios, and what would change without it."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from pathlib import Path
from textwrap import wrap
from typing import Any

from advisor.advice import Advisor
from advisor.conditions import ALWAYS, FactRef, Record, holds
from advisor.documents import nearest
from advisor.explanation.words import (
    LEVELS,
    domain_of,
    fill_in,
    harmless,
    say_condition,
    say_source,
    say_test,
    say_value,
    title_of,
)
from advisor.knowledge import Asks, Instance, Knowledge, Rule, Sets, Warns
from advisor.knowledge.rules import PLACEHOLDER
from advisor.mishaps import Refusal
from advisor.replay import Difference, Outcome, Played, play

_FEW = 12
"""So many scenarios are named where nothing changes."""
_STATUS = {
    "agreed": "agreed: it binds",
    "draft": "draft: it is shown, but binds nothing",
    "retired": "retired: it is not judged any more",
}


@dataclass(frozen=True, slots=True)
class Fired:
    """A scenario that fires the rule, and what its readers would see otherwise without the rule."""

    name: str
    title: str
    guards: str
    file: Path
    changes: tuple[Difference, ...]


@dataclass(frozen=True, slots=True)
class RuleSheet:
    """A rule in words; where it goes over a table, `row` is the row of the example."""

    id: str
    title: str
    step: str
    status: str
    place: str
    table: str
    rows: int
    row: str
    condition: str
    concludes: tuple[str, ...]
    example: tuple[str, ...]
    because: str
    limits: str
    sources: tuple[str, ...]
    may_conflict: tuple[str, ...]
    fired: tuple[Fired, ...]
    replayed: int


def rule_sheet(rule_id: str, advisor: Advisor, outcome: Outcome) -> RuleSheet:
    """The sheet of a rule, with the scenarios that fire it among those replayed.

    Raises:
        Refusal: where there is no such rule.
    """
    knowledge = advisor.knowledge
    rule = knowledge.rules.get(rule_id.partition("/")[0])
    if rule is None:
        near = nearest(rule_id, knowledge.rules) or " 'gudgeon rules' lists them."
        raise Refusal(f"'{harmless(rule_id)}' is no rule of this knowledge.{near}")
    instances = [each for each in knowledge.instances.get(rule.step, ()) if each.rule.id == rule.id]
    record = {name: domain_of(name, knowledge).code(value) for name, value in rule.fires.items()}
    shown = _shown(instances, record)
    return RuleSheet(
        rule.id,
        rule.title,
        next(step.title for step in knowledge.steps if step.id == rule.step),
        _STATUS[rule.status],
        f"{rule.mark.file}:{rule.mark.line}",
        knowledge.tables[rule.table].title if rule.table else "",
        len(instances) if rule.table else 0,
        shown.row.id if shown and shown.row else "",
        say_condition(shown.when, knowledge) if shown else "",
        tuple(_conclusions(shown, knowledge, record)) if shown else (),
        tuple(_example(rule, knowledge)),
        _filled(rule.because, shown, record, knowledge) if shown else rule.because,
        _filled(rule.limits, shown, record, knowledge) if shown else rule.limits,
        tuple(dict.fromkeys(say_source(each, knowledge) for each in _citations(rule, shown))),
        tuple(f"{other}: {because}" for other, because in rule.may_conflict.items()),
        tuple(_fired(rule.id, advisor, outcome)),
        len(outcome.played),
    )


def _shown(instances: Sequence[Instance], record: Record) -> Instance | None:
    """The instance that the rule's own example fires."""
    return next((each for each in instances if holds(each.when, record)), instances[0] if instances else None)


def _citations(rule: Rule, shown: Instance | None) -> Iterator[Any]:
    yield from rule.source
    if shown is not None and shown.row is not None:
        yield from shown.row.source


def _example(rule: Rule, knowledge: Knowledge) -> Iterator[str]:
    for name, value in rule.fires.items():
        yield f"{title_of(name, knowledge)} {say_value(domain_of(name, knowledge), value)}"


def _conclusions(instance: Instance, knowledge: Knowledge, record: Record) -> Iterator[str]:
    """What follows, one sentence each."""
    for each in instance.then:
        if isinstance(each, Asks):
            said = f"{LEVELS[each.level]}: {say_test(each.test, knowledge, record)}"
        elif isinstance(each, Sets):
            said = f"{title_of(each.name, knowledge)} becomes {_value(each, knowledge)}"
        elif isinstance(each, Warns):
            said = f"caution: {knowledge.cautions[each.caution].text.removesuffix('.')}"
        else:
            referral = knowledge.referrals[each.to]
            held = " Products and grades are withheld." if each.withhold else ""
            yield f"referred to {referral.to}: {referral.text}{held}"
            continue
        for_ = "" if each.for_ == ALWAYS else f", for lubricants whose {say_condition(each.for_, knowledge, record)}"
        yield said + for_


def _value(sets: Sets, knowledge: Knowledge) -> str:
    if isinstance(sets.value, FactRef):
        return title_of(sets.value.name, knowledge)
    return say_value(knowledge.domain(sets.name), sets.value)


def _filled(text: str, instance: Instance, record: Record, knowledge: Knowledge) -> str:
    """The reason with the example's values; what the example does not say stands by its name in brackets."""

    def named(found: Any) -> str:
        of_row, name = found.groups()
        return found.group() if of_row or name in record else f"[{title_of(name, knowledge)}]"

    return fill_in(PLACEHOLDER.sub(named, text), instance, {}, record, knowledge)


def _fired(rule_id: str, advisor: Advisor, outcome: Outcome) -> Iterator[Fired]:
    """The scenarios that fire the rule, each replayed without it."""
    firing = [each for each in outcome.played if any(_of_rule(name, rule_id) for name in each.fired)]
    without = Advisor(_without(rule_id, advisor.knowledge)) if firing else advisor
    for played in firing:
        scenario = played.scenario
        changes = _new(played, play(scenario, without))
        yield Fired(scenario.name, scenario.title, scenario.guards, scenario.path, changes)


def _of_rule(instance_id: str, rule_id: str) -> bool:
    return instance_id.partition("/")[0] == rule_id


def _without(rule_id: str, knowledge: Knowledge) -> Knowledge:
    """The knowledge with the rule taken out; what expectations name stays known."""
    instances = {
        step: tuple(each for each in of_step if each.rule.id != rule_id)
        for step, of_step in knowledge.instances.items()
    }
    return replace(knowledge, instances=instances)


def _new(before: Played, after: Played) -> tuple[Difference, ...]:
    """What readers see otherwise: differences that are not there already."""
    known = {(each.mark, each.got) for each in before.differences}
    return tuple(each for each in after.differences if each.read and (each.mark, each.got) not in known)


def as_text(sheet: RuleSheet) -> str:
    """The sheet for people."""
    over = f" (over {sheet.rows} rows of '{sheet.table}'; shown for {sheet.row})" if sheet.table else ""
    lines = [
        sheet.title,
        f"  {sheet.id}, step '{sheet.step}', {sheet.status}{over}",
        f"  {sheet.place}",
        *_block("When", [sheet.condition] if sheet.condition else []),
        *_block("Then", sheet.concludes),
        *_block("Because", [sheet.because]),
        *_block("In its example", sheet.example),
        *_block("Limits", [sheet.limits] if sheet.limits else []),
        *_block("Sources, and how sure", sheet.sources),
        *_block("May exclude everything together with", sheet.may_conflict),
        "",
        *_scenarios(sheet),
    ]
    return "\n".join(harmless(line) for line in lines)


def _block(heading: str, lines: Sequence[str]) -> list[str]:
    return ["", heading, *(f"  {line}" for line in lines)] if lines else []


def _scenarios(sheet: RuleSheet) -> Iterator[str]:
    if not sheet.fired:
        yield f"No scenario of {sheet.replayed} fires it, so nobody would see if it were taken out."
        return
    seen = [each for each in sheet.fired if each.changes]
    same = [each.name for each in sheet.fired if not each.changes]
    yield f"Fired by {len(sheet.fired)} of {sheet.replayed} scenarios; taken out, {len(seen)} of them would differ."
    for each in seen:
        yield f"  {each.name}: {each.title}"
        for change in each.changes:
            what = f" {change.what}" if change.what else ""
            yield f"      {change.kind}{what}: {change.expected}; without the rule {change.got}"
    if same:
        more = f" and {len(same) - _FEW} more" if len(same) > _FEW else ""
        yield "  Nothing that is expected would change in:"
        yield from wrap(", ".join(same[:_FEW]) + more, 116, initial_indent="      ", subsequent_indent="      ")


def as_data(sheet: RuleSheet) -> dict[str, Any]:
    """The sheet for machines."""
    plain = {name: getattr(sheet, name) for name in RuleSheet.__slots__ if name != "fired"}
    listed_ = {name: list(value) if isinstance(value, tuple) else value for name, value in plain.items()}
    return listed_ | {
        "fired": [
            {
                "scenario": each.name,
                "file": str(each.file),
                "guards": each.guards,
                "changes": [
                    {"kind": one.kind, "what": one.what, "expected": one.expected, "without": one.got}
                    for one in each.changes
                ],
            }
            for each in sheet.fired
        ]
    }
