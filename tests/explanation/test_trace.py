"""The trace is complete: a verdict on every rule, and every term that failed with what was seen."""

import json
from collections.abc import Callable, Iterator
from typing import Any

import pytest

from advisor import explanation
from advisor.advice import Advice
from advisor.conditions import (
    VOID,
    Bound,
    Condition,
    Either,
    Every,
    FactRef,
    Member,
    Record,
    Stated,
    Ticked,
    Valueless,
    holds,
)
from advisor.explanation.seeing import record_at
from tests.explanation.conftest import NAMES

AdviceOf = Callable[[str], Advice]
TRACE_BYTES_PER_200_RULES = 40_000

COMPARE: dict[str, Callable[[Any, Any], bool]] = {
    "below": lambda seen, limit: seen < limit,
    "at_most": lambda seen, limit: seen <= limit,
    "above": lambda seen, limit: seen > limit,
    "at_least": lambda seen, limit: seen >= limit,
    "is": lambda seen, limit: seen == limit,
    "is_not": lambda seen, limit: seen != limit,
}


@pytest.mark.parametrize("name", NAMES)
def test_every_rule_of_every_visited_step_has_one_verdict(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    for step in explanation.as_data(advice)["trace"]:
        told = [*step["fired"], *step["failed"], *step["undecided"]]
        assert sorted(told) == sorted(instance.id for instance in advice.knowledge.instances.get(step["step"], ()))


def failing(condition: Condition, record: Record) -> Iterator[str]:
    """The names of all terms that fail where the condition fails; written apart from the package's own walk."""
    if isinstance(condition, Every):
        for part in condition.parts:
            yield from failing(part, record)
    elif isinstance(condition, Either):
        parts = [list(failing(part, record)) for part in condition.parts]
        if all(parts):
            yield from (name for part in parts for name in part)
    elif fails(condition, record):
        yield condition.name


def fails(term: Bound | Member | Ticked | Stated | Valueless, record: Record) -> bool:
    seen: Any = record.get(term.name)
    if isinstance(term, Stated):
        return (seen is not None and seen is not VOID) is not term.wanted
    if seen is None:
        return False
    if isinstance(term, Valueless):
        return (seen is VOID) is not term.wanted
    if seen is VOID:
        return True
    if isinstance(term, Bound):
        limit: Any = record.get(term.limit.name) if isinstance(term.limit, FactRef) else term.limit
        signs = {"<": "below", "<=": "at_most", ">": "above", ">=": "at_least", "=": "is", "!=": "is_not"}
        return limit is VOID or (limit is not None and not COMPARE[signs[term.sign]](seen, limit))
    meets = bool(term.among & seen) if isinstance(term, Ticked) else seen in term.among
    return meets is not term.wanted


@pytest.mark.parametrize("name", NAMES)
def test_every_failing_term_appears_with_value_and_limit(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    if advice.withheld:
        return
    instances = {each.id: each for step in advice.trace for each in step.instances}
    for step in explanation.as_data(advice)["trace"]:
        record = record_at(advice, step["step"])
        for rule, terms in step["failed"].items():
            assert sorted(term[0] for term in terms) == sorted(failing(instances[rule].when, record)), rule
            for term in terms:
                assert refuted(*term, advice=advice), (rule, term)


def refuted(name: str, operator: str, limit: Any, seen: Any, *, advice: Advice) -> bool:
    """Whether the value really misses the limit, as the entry claims."""
    if operator in {"stated", "void"} or seen is None or limit is None:
        return True
    if operator in {"any_of", "none_of"}:
        met = not set(limit).isdisjoint(seen) if isinstance(seen, list) else seen in limit
        return met is (operator == "none_of")
    if isinstance(seen, str):
        order = list(advice.knowledge.domain(name).choices)
        return not COMPARE[operator](order.index(seen), order.index(limit))
    return not COMPARE[operator](seen, limit)


@pytest.mark.parametrize("name", NAMES)
def test_the_closing_step_is_explained_by_what_it_really_saw(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    for step in advice.trace:
        record = record_at(advice, step.step)
        assert [holds(instance.when, record) for instance in step.instances] == list(step.outcomes), step.step


@pytest.mark.parametrize("name", NAMES)
def test_every_computed_fact_shows_its_numbers(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    for step in explanation.as_data(advice)["trace"]:
        for computed in step["computed"]:
            if computed["value"] is not None:
                assert ("equation" in computed and "substituted" in computed) or "table" in computed


@pytest.mark.parametrize("name", NAMES)
def test_the_trace_stays_compact(name: str, advice_of: AdviceOf) -> None:
    trace = explanation.as_data(advice_of(name))["trace"]
    rules = sum(len(step["fired"]) + len(step["failed"]) + len(step["undecided"]) for step in trace)
    size = len(json.dumps(trace, ensure_ascii=False, separators=(",", ":")).encode())
    assert size <= TRACE_BYTES_PER_200_RULES * max(rules, 200) / 200


@pytest.mark.parametrize("name", NAMES)
def test_json_and_data_say_the_same(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    assert json.loads(explanation.as_json(advice)) == json.loads(json.dumps(explanation.as_data(advice)))
