"""What an expectation could say instead, so that the advice meets it: tried in this order, checked by who rewrites."""

import math
from collections.abc import Iterable, Iterator
from functools import singledispatch

from advisor.advice import Advice
from advisor.conditions import Bound, Value, leaves
from advisor.documents import Mapping, Node
from advisor.replay.docket_compared import bars
from advisor.replay.expectations import (
    INTERVAL_ROW,
    AsksAtLeast,
    AsksFor,
    Bars,
    CodeServes,
    ConflictBetween,
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
    """What could be written instead; nothing where the expectation can only be withdrawn."""
    yield from ()


def _whole(texts: Iterable[str]) -> Iterator[Candidate]:
    return (((), text) for text in texts)


def _written(value: Value) -> str:
    """A value as a scenario writes it."""
    if isinstance(value, tuple):
        return _list(value)
    if isinstance(value, float):
        return f"{value:.0f}" if value.is_integer() and abs(value) < 1e15 else repr(value)
    return value if value[:1].isalpha() and value.replace("_", "a").replace("-", "a").isalnum() else f'"{value}"'


def _list(values: Iterable[Value]) -> str:
    return f"[{', '.join(map(_written, values))}]"


@candidates.register
def _state(_expected: StateIs, advice: Advice, _node: Node) -> Iterator[Candidate]:
    return _whole([advice.state.value])


@candidates.register
def _withheld(_expected: WithheldIs, advice: Advice, _node: Node) -> Iterator[Candidate]:
    return _whole(["yes" if advice.withheld else "no"])


@candidates.register
def _fact_is(expected: FactIs, advice: Advice, _node: Node) -> Iterator[Candidate]:
    fact = advice.facts.get(expected.name)
    return _whole([] if fact is None else ["void" if fact.value is None else _written(fact.value)])


@candidates.register
def _fact_within(expected: FactWithin, advice: Advice, node: Node) -> Iterator[Candidate]:
    fact = advice.facts.get(expected.name)
    value = fact.value if fact is not None else None
    if not isinstance(value, float) or not isinstance(node, Mapping):
        return
    if "about" in node:
        yield ("about",), f"{value:.4g}" if abs(value) < 1e4 else f"{value:.0f}"
        yield ("about",), _written(value)
    else:
        yield ("from",) if value < expected.low else ("to",), _written(value)


@candidates.register
def _recommends(expected: Recommends, advice: Advice, node: Node) -> Iterator[Candidate]:
    shown = _recommended(advice, expected.property)
    if shown:
        yield ("expected",) if isinstance(node, Mapping) else (), _list(shown)


def _recommended(advice: Advice, name: str) -> tuple[Value, ...]:
    rows = {row.id for row in advice.knowledge.docket if row.recommends == name}
    return tuple(value for line in advice.docket if line.row in rows and not line.skipped for value in line.values)


@candidates.register
def _keeps_from(expected: KeepsFrom, advice: Advice, _node: Node) -> Iterator[Candidate]:
    shown = _recommended(advice, expected.property)
    left = [value for value in expected.values if value not in shown]
    return _whole([_list(left)] if left else [])


@candidates.register
def _bars(expected: Bars, advice: Advice, _node: Node) -> Iterator[Candidate]:
    difference = bars(expected, advice)
    said = difference.got.removeprefix("barred by ") if difference and difference.got.startswith("barred by ") else ""
    return _whole(dict.fromkeys(rule.partition("/")[0] for rule in said.split(", ") if rule))


@candidates.register
def _asks_for(expected: AsksFor, _advice: Advice, _node: Node) -> Iterator[Candidate]:
    value = [] if expected.value is None else [_bare(expected.value)]
    said = [f"{strength} {each}" for strength in ("must", "should") for each in value]
    return _whole([*said, "unwanted", "allowed"])


def _bare(value: Value) -> str:
    return _written(value).strip('"')


@candidates.register
def _asks_at_least(expected: AsksAtLeast, advice: Advice, node: Node) -> Iterator[Candidate]:
    """The same test with a limit that the demands have now, the strictest first."""
    key = next(iter(node)) if isinstance(node, Mapping) and len(node) == 1 else ""
    domain = advice.knowledge.properties[expected.property].domain
    limits = {
        term.limit
        for demand in advice.specification.demands
        if demand.property == expected.property
        for term in leaves(demand.test)
        if isinstance(term, Bound) and isinstance(term.limit, float)
    }
    for limit in sorted(limits, reverse=key in {"at_least", "above"}):
        meant = domain.decode(limit)
        yield ((key,) if key else ()), _written(float(meant) if isinstance(meant, int) else meant)


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
    return _whole(_list(dict.fromkeys(rule.partition("/")[0] for rule in each.rules)) for each in advice.conflicts)


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
    return _whole([_list(values)] if len(values) == 2 else [])
