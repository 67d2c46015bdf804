"""What an expectation could say instead, so that the advice meets it: tried in this order, checked by who rewrites."""

import math
from collections.abc import Iterable, Iterator
from functools import singledispatch

from advisor.advice import Advice
from advisor.case import Origin
from advisor.conditions import Bound, Value, leaves
from advisor.documents import Mapping, Node
from advisor.explanation.falling import nothing
from advisor.explanation.written_demands import write_demands, write_list, write_test, write_value
from advisor.replay.demanded import told_by
from advisor.replay.docket_compared import bars, recommended, strengths
from advisor.replay.expectations import (
    ASKING,
    INTERVAL_ROW,
    AsksAtLeast,
    AsksFor,
    Bars,
    CodeServes,
    ConflictBetween,
    DemandedBy,
    FactIs,
    FactWithin,
    FillIs,
    IntervalIs,
    KeepsFrom,
    ProductIs,
    Recommends,
    StateIs,
    WithheldIs,
    fill_row,
)
from advisor.shelf import Verdict

Candidate = tuple[tuple[str, ...], str]
"""The keys below the expectation whose value is written otherwise, and what is written."""
_SPREAD = 0.05
"""An interval that was not shown before is expected within this share of what is shown now."""


@singledispatch
def candidates(_expected: object, _advice: Advice, _node: Node) -> Iterator[Candidate]:
    """What could be written instead; nothing where what was expected is there no more, and the expectation goes."""
    yield from ()


@singledispatch
def is_gone(_expected: object, _advice: Advice) -> bool:
    """Whether what was expected is there no more: then it may be withdrawn where nothing can be written instead."""
    return True


@is_gone.register
def _no_demand(expected: AsksAtLeast, advice: Advice) -> bool:
    return not any(each.property == expected.property for run in advice.single for each in run.specification.demands)


def _whole(texts: Iterable[str]) -> Iterator[Candidate]:
    return (((), text) for text in texts)


@candidates.register
def _state(_expected: StateIs, advice: Advice, _node: Node) -> Iterator[Candidate]:
    return _whole([advice.state.value])


@candidates.register
def _withheld(_expected: WithheldIs, advice: Advice, _node: Node) -> Iterator[Candidate]:
    return _whole(["yes" if advice.withheld else "no"])


@candidates.register
def _fact_is(expected: FactIs, advice: Advice, _node: Node) -> Iterator[Candidate]:
    fact = advice.facts.get(expected.name)
    if fact is None or (fact.value is None and fact.origin is not Origin.VOID):
        return _whole([])
    return _whole(["void" if fact.value is None else write_value(fact.value)])


@candidates.register
def _fact_within(expected: FactWithin, advice: Advice, node: Node) -> Iterator[Candidate]:
    fact = advice.facts.get(expected.name)
    value = fact.value if fact is not None else None
    if fact is not None and fact.origin is Origin.VOID:
        yield (), "void"
    if not isinstance(value, float) or not isinstance(node, Mapping):
        return
    if "about" in node:
        yield ("about",), f"{value:.4g}" if abs(value) < 1e4 else f"{value:.0f}"
        yield ("about",), write_value(value)
    else:
        yield ("from",) if value < expected.low else ("to",), write_value(value)


@candidates.register
def _recommends(expected: Recommends, advice: Advice, node: Node) -> Iterator[Candidate]:
    shown = recommended(advice, expected.property)
    if shown:
        yield ("expected",) if isinstance(node, Mapping) else (), write_list(shown)


@candidates.register
def _keeps_from(expected: KeepsFrom, advice: Advice, _node: Node) -> Iterator[Candidate]:
    shown = recommended(advice, expected.property)
    left = [value for value in expected.values if value not in shown]
    return _whole([write_list(left)] if left else [])


@candidates.register
def _bars(expected: Bars, advice: Advice, _node: Node) -> Iterator[Candidate]:
    difference = bars(expected, advice)
    said = difference.got.removeprefix("barred by ") if difference and difference.got.startswith("barred by ") else ""
    return _whole(dict.fromkeys(rule.partition("/")[0] for rule in said.split(", ") if rule))


@candidates.register
def _asks_for(expected: AsksFor, advice: Advice, _node: Node) -> Iterator[Candidate]:
    domain = advice.knowledge.properties[expected.property].domain
    values = [expected.value] if expected.value is not None else [*domain.choices][::-1]
    asking = {each for run in advice.single for value in values for each in strengths(run, expected.property, value)}
    levels = [each for each in ASKING if each[-1].isdigit()] if expected.strength.startswith("should_") else []
    for strength in ("must", *levels, "should"):
        if strength.partition("_")[0] in asking:
            yield from _whole(f"{strength} {_bare(value)}" for value in values)
    if nothing(domain):
        yield from _whole(["unwanted", "allowed"])


def _bare(value: Value) -> str:
    return _bare_text(write_value(value))


def _bare_text(text: str) -> str:
    return text.strip('"')


@candidates.register
def _asks_at_least(expected: AsksAtLeast, advice: Advice, node: Node) -> Iterator[Candidate]:
    """The same test with a limit that the demands have now, the strictest first; else as a demand says it now."""
    knowledge, name = advice.knowledge, expected.property
    demands = [each for run in advice.single for each in run.specification.demands if each.property == name]
    key = next(iter(node)) if isinstance(node, Mapping) and len(node) == 1 else ""
    operator = key or ("" if isinstance(node, Mapping) else str(node).partition(" ")[2].strip().partition(" ")[0])
    limits = {
        term.limit
        for demand in demands
        for term in leaves(demand.test)
        if isinstance(term, Bound) and isinstance(term.limit, float)
    }
    domain = knowledge.properties[name].domain
    said = [write_value(domain.decode(each)) for each in sorted(limits, reverse=operator in {"at_least", "above"})]
    if key:
        yield from (((key,), each) for each in said)
    if operator:
        wishes = sorted({f"should_{each.level}" for each in demands if not each.must})
        others = ("must", *wishes) if expected.strength == "must" else (*wishes, "must")
        for strength in dict.fromkeys((expected.strength, *others)):
            yield from _whole(f"{strength} {operator} {_bare_text(each)}" for each in said)
    yield from _whole(dict.fromkeys(write_test(each.test, knowledge) for each in demands if each.must))


@candidates.register
def _demanded_by(expected: DemandedBy, advice: Advice, _node: Node) -> Iterator[Candidate]:
    """What the rule demands now, in the order in which it does."""
    for run in advice.single:
        found = told_by(expected.rule, run)
        order = [(each.property, each.test, each.level) for each in run.specification.demands]
        yield (), write_demands([each for each in dict.fromkeys(order) if each in found], advice.knowledge)


@candidates.register
def _code(expected: CodeServes, advice: Advice, _node: Node) -> Iterator[Candidate]:
    codes = advice.codes.din if expected.standard == "din" else advice.codes.iso
    return _whole(codes or ["none"])


@candidates.register
def _product(expected: ProductIs, advice: Advice, _node: Node) -> Iterator[Candidate]:
    ranked = next((each for each in advice.shelf if each.item == expected.item), None)
    if ranked is None or advice.judgement is None:
        return
    verdict = ranked.verdict
    if verdict in {Verdict.FALLS_SHORT, Verdict.UNPROVEN}:
        for missed in advice.judgement.shortfalls(ranked.place):
            yield (), f"{verdict.value} by {missed.demand.rule.partition('/')[0]}"
    yield (), verdict.value


@candidates.register
def _conflict(_expected: ConflictBetween, advice: Advice, _node: Node) -> Iterator[Candidate]:
    return _whole(write_list(dict.fromkeys(rule.partition("/")[0] for rule in each.rules)) for each in advice.conflicts)


@candidates.register
def _interval(expected: IntervalIs, advice: Advice, _node: Node) -> Iterator[Candidate]:
    """The same width about the figure that is shown now."""
    line = next((each for each in advice.quantities if each.row == INTERVAL_ROW and not each.skipped), None)
    fact = advice.facts.get(line.facts[0]) if line is not None else None
    value = fact.value if fact is not None else None
    if not isinstance(value, float):
        return _whole(["none"])
    low, high = expected.ends or (0.0, 0.0)
    spread = (high - low) / (high + low) if high > low else _SPREAD
    return _whole([f"{{from: {math.floor(value * (1 - spread))}, to: {math.ceil(value * (1 + spread))}}}"])


@candidates.register
def _fill(expected: FillIs, advice: Advice, _node: Node) -> Iterator[Candidate]:
    line = next((each for each in advice.quantities if each.row == fill_row(expected.part) and not each.skipped), None)
    facts = [advice.facts.get(name) for name in line.facts] if line is not None else []
    values = [fact.value for fact in facts if fact is not None and fact.value is not None]
    return _whole([write_list(values)] if len(values) == 2 else [])
