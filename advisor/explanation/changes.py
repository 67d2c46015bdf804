"""What would change the advice: open questions, assumptions and what they reach, and limits that are close."""

import math
from collections.abc import Iterator
from dataclasses import dataclass

from advisor.advice import Advice
from advisor.conditions import Bound, Condition, Domain, FactRef, Record, holds, leaves
from advisor.conditions.terms import names
from advisor.explanation.seeing import hides, record_at, rules_seen, run_assuming, say_known
from advisor.explanation.weighing import field_of
from advisor.explanation.words import (
    OPERATORS,
    domain_of,
    listed,
    margin,
    say_margin,
    say_source,
    say_test,
    say_value,
    title_of,
)
from advisor.explanation.workings import HIDDEN, reads
from advisor.knowledge import Asks, DocketRow, Instance, Refers, Sets
from advisor.shelf import at_limit
from advisor.shelf.catalogue import reads as property_reads

MOST_NEAR = 5
_KELVINS = 100.0
_NEAR = 0.2
"""Limits farther away than a fifth of the value, or than 20 K, are not called close."""


@dataclass(frozen=True, slots=True)
class Open:
    """A question without a value, and what waits for it."""

    fact: str
    title: str
    ask: str
    decides: str
    dont_know: bool
    waiting: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Assumed:
    """An assumption with its reason, and the rows that another answer might change."""

    fact: str
    title: str
    value: str
    because: str
    sources: tuple[str, ...]
    keeps_open: bool
    rows: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Near:
    """A limit close to which the case lies: how far, and the rules whose outcome would turn there."""

    fact: str
    title: str
    value: str
    limit: str
    margin: str
    exact: bool
    rules: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Changes:
    """Everything that would, or might, change the advice."""

    open: tuple[Open, ...]
    assumed: tuple[Assumed, ...]
    at_limit: tuple[str, ...]
    near: tuple[Near, ...]
    set_aside: tuple[str, ...]


def what_would_change(advice: Advice) -> Changes:
    """Open questions, assumptions, musts met with nothing to spare, the closest limits, and answers set aside."""
    knowledge = advice.knowledge
    return Changes(
        tuple(_open(advice)),
        tuple(_assumed(advice, name) for name in advice.assumptions),
        tuple(_at_limit(advice)),
        tuple(near_limits(advice)),
        tuple(title_of(name, knowledge) for name in advice.set_aside),
    )


def _open(advice: Advice) -> Iterator[Open]:
    for each in advice.open_questions:
        question = advice.knowledge.facts[each.fact].question
        waiting = tuple(
            _say_waiting(advice, name) for name in dict.fromkeys(_written(advice, name) for name in each.waiting)
        )
        ask = question.ask if question is not None else ""
        yield Open(each.fact, title_of(each.fact, advice.knowledge), ask, each.decides, each.dont_know, waiting)


def _written(advice: Advice, name: str) -> str:
    """The written rule of a rule for one row of a table; other names as they are."""
    rule = name.partition("/")[0]
    return rule if rule in advice.knowledge.rules else name


def _say_waiting(advice: Advice, name: str) -> str:
    rule = advice.knowledge.rules.get(name.partition("/")[0])
    return f"{rule.title} ({name})" if rule is not None else title_of(name, advice.knowledge)


def _assumed(advice: Advice, name: str) -> Assumed:
    knowledge, assume = advice.knowledge, advice.knowledge.facts[name].assume
    sources = tuple(say_source(each, knowledge) for each in assume.source) if assume is not None else ()
    value = HIDDEN if hides(advice, name) else say_known(advice, name)
    rows = () if advice.withheld else rows_reached(advice, name)
    because = run_assuming(advice, name).facts[name].note
    return Assumed(name, title_of(name, knowledge), value, because, sources, name in advice.keeping_open, rows)


def _at_limit(advice: Advice) -> Iterator[str]:
    """One line for each demand that is met with nothing to spare, with the products or classes that meet it so."""
    products: dict[tuple[str, str], list[str]] = {}
    for each in advice.at_limit:
        if each.what == "product":
            products.setdefault((_met_at_limit(advice, each.name, each.rule), each.rule), []).append(each.name)
        else:
            barred = f"a little more, and it is barred by: {_say_waiting(advice, each.rule)}"
            yield f"{_class_title(advice, each.name)}: {barred}"
    for (said, rule), items in products.items():
        yield f"{listed(items, 'and')}: {said}, with nothing to spare ({rule})"


def _met_at_limit(advice: Advice, name: str, rule: str) -> str:
    judgement = advice.judgement
    if judgement is None:
        return rule
    place = 1 << judgement.catalogue.place[name]
    return " and ".join(
        say_test(demand.test, advice.knowledge)
        for number, demand in enumerate(judgement.demands)
        if demand.rule == rule and demand.must and at_limit(judgement, number, place)
    )


def _class_title(advice: Advice, name: str) -> str:
    for line in advice.docket:
        row = next(each for each in advice.knowledge.docket if each.id == line.row)
        if name in line.values:
            return say_value(advice.knowledge.properties[row.recommends].domain, name)
    return name


def rows_reached(advice: Advice, fact: str) -> tuple[str, ...]:
    """The titles of the rows whose demands, limits or figures depend on a fact."""
    facts = facts_reached(advice, fact)
    touched = {
        name for name, prop in advice.knowledge.properties.items() if facts & {*property_reads(prop), prop.same_item}
    }
    for step in advice.knowledge.instances.values():
        for instance in step:
            touched |= set(_touched(instance, facts))
    return tuple(
        row.title for row in advice.knowledge.docket if _looks_at(advice, row) & touched or facts & set(row.facts)
    )


def _touched(instance: Instance, facts: set[str]) -> Iterator[str]:
    read = bool(facts & set(names(instance.when)))
    for each in instance.then if instance.binds else ():
        if isinstance(each, Asks) and (read or facts & {*names(each.test), *names(each.for_)}):
            yield each.property
        elif isinstance(each, Sets) and (read or (isinstance(each.value, FactRef) and each.value.name in facts)):
            yield each.name


def facts_reached(advice: Advice, fact: str) -> set[str]:
    """The fact and everything computed or concluded from it."""
    found = {fact}
    knowledge = advice.knowledge
    while True:
        more = {each.fact for each in knowledge.computations.values() if found & set(reads(each.how))}
        for step in knowledge.instances.values():
            for instance in step:
                more |= set(_touched(instance, found)) & knowledge.facts.keys()
        if more <= found:
            return found
        found |= more


def _looks_at(advice: Advice, row: DocketRow) -> set[str]:
    """The properties that a row shows, or on which its candidates differ."""
    if not row.recommends or row.section != "docket":
        return set(row.demands)
    field = field_of(advice, advice.line(row.id))
    if field is None:
        return {row.recommends, "pair"}
    columns = field.judgement.columns
    differing = {name for name, column in columns.items() if len({column.values[place] for place in field.misses}) > 1}
    return {row.recommends} | differing


def near_limits(advice: Advice) -> list[Near]:
    """The closest limits of rules that bind: crossing one of them turns the rule."""
    found: dict[tuple[str, float], tuple[float, str, list[str]]] = {}
    for step, instance, outcome in rules_seen(advice):
        if outcome is None or not instance.binds or not _matters(instance):
            continue
        record = record_at(advice, step) if step == "closing" else advice.record
        for term, limit in _turning(instance.when, record, outcome=outcome):
            seen = record[term.name]
            assert isinstance(seen, float)  # noqa: S101 - turning terms are on numbers
            if not hides(advice, term.name):
                scaled = _scaled(seen, limit, domain_of(term.name, advice.knowledge))
                found.setdefault((term.name, limit), (scaled, term.sign, []))[2].append(instance.id)
    near = [each for each in found.items() if each[1][0] <= _NEAR]
    closest = sorted(near, key=lambda each: (each[1][0], each[0]))[:MOST_NEAR]
    return [_near(advice, name, limit, sign, rules) for (name, limit), (_, sign, rules) in closest]


def _matters(instance: Instance) -> bool:
    return any(
        isinstance(each, Refers | Sets) or (isinstance(each, Asks) and each.level <= 1) for each in instance.then
    )


def _turning(when: Condition, record: Record, *, outcome: bool) -> Iterator[tuple[Bound, float]]:
    """The thresholds on numbers of which crossing alone turns the outcome, with their limits."""
    for term in leaves(when):
        seen = record.get(term.name)
        if not isinstance(term, Bound) or not isinstance(seen, float):
            continue
        limit = record.get(term.limit.name) if isinstance(term.limit, FactRef) else term.limit
        if not isinstance(limit, float):
            continue
        beside = (limit, math.nextafter(limit, -math.inf), math.nextafter(limit, math.inf))
        if any(holds(when, {**record, term.name: each}) is (not outcome) for each in beside):
            yield term, limit


def _scaled(seen: float, limit: float, domain: Domain) -> float:
    if domain.unit in {"°C", "K"}:
        return abs(seen - limit) / _KELVINS
    if domain.kind != "number":
        return math.inf
    return abs(seen - limit) / max(abs(seen), abs(limit), 1e-12)


def _near(advice: Advice, name: str, limit: float, sign: str, rules: list[str]) -> Near:
    domain = domain_of(name, advice.knowledge)
    seen = record_at(advice, "closing")[name]
    away = margin(Bound(name, sign, limit), seen, {}) or 0.0
    wanted = f"{OPERATORS[sign]} {say_value(domain, limit)}"
    return Near(
        name,
        title_of(name, advice.knowledge),
        say_value(domain, seen),
        wanted,
        say_margin(away, domain),
        away == 0,
        tuple(rules),
    )
