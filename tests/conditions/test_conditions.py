"""Conditions with three outcomes: holds, fails, undecided; and what they wait for."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.conditions import (
    VOID,
    Bound,
    Domain,
    Either,
    Every,
    FactRef,
    Member,
    Record,
    Stated,
    Step,
    Ticked,
    Valueless,
    failures,
    holds,
    negated,
    waits_for,
)

HOT, FAST = Bound("t", ">", 70.0), Bound("n", ">", 1000.0)


@pytest.mark.parametrize(
    ("condition", "record", "outcome"),
    [
        (HOT, {"t": 70.0}, False),
        (Bound("t", ">=", 70.0), {"t": 70.0}, True),
        (HOT, {}, None),
        (HOT, {"t": VOID}, False),
        (Bound("t", "!=", 70.0), {"t": VOID}, False),
        (Bound("t", ">", FactRef("limit")), {"t": 80.0}, None),
        (Bound("t", ">", FactRef("limit")), {"t": 80.0, "limit": 70.0}, True),
        (Bound("t", ">", FactRef("limit")), {"t": 80.0, "limit": VOID}, False),
        (Every((HOT, FAST)), {"t": 60.0}, False),
        (Every((HOT, FAST)), {"t": 80.0}, None),
        (Either((HOT, FAST)), {"t": 80.0}, True),
        (Either((HOT, FAST)), {"t": 60.0}, None),
        (Every(), {}, True),
        (Either(()), {}, False),
        (Member("cage", frozenset({"brass"})), {"cage": "steel"}, False),
        (Member("cage", frozenset({"brass"}), wanted=False), {"cage": "steel"}, True),
        (Ticked("site", frozenset({"wet"})), {"site": frozenset({"wet", "hot"})}, True),
        (Ticked("site", frozenset({"wet"})), {"site": frozenset()}, False),
        (Ticked("site", frozenset({"wet"}), wanted=False), {"site": frozenset()}, True),
        (Stated("dropping_point_c"), {}, False),
        (Stated("dropping_point_c"), {"dropping_point_c": 180.0}, True),
        (Valueless("interval_h"), {}, None),
        (Valueless("interval_h"), {"interval_h": VOID}, True),
        (Valueless("interval_h"), {"interval_h": 1.0}, False),
    ],
)
def test_outcomes(condition: Every, record: Record, outcome: bool | None) -> None:
    assert holds(condition, record) is outcome


def test_an_undecided_condition_waits_only_for_what_still_matters() -> None:
    condition = Either((Every((HOT, FAST)), Bound("d", ">", 100.0)))
    assert waits_for(condition, {}) == {"t", "n", "d"}
    assert waits_for(condition, {"t": 60.0}) == {"d"}
    assert waits_for(condition, {"t": 80.0, "d": 50.0}) == {"n"}
    assert waits_for(condition, {"t": 80.0, "n": 2000.0}) == set()


def test_a_failure_names_the_terms_that_made_it() -> None:
    assert failures(Every((HOT, FAST)), {"t": 60.0, "n": 2000.0}) == (HOT,)
    assert failures(Either((HOT, FAST)), {"t": 60.0, "n": 10.0}) == (HOT, FAST)
    assert failures(Every((HOT, FAST)), {"t": 80.0, "n": 2000.0}) == ()


VALUES = st.one_of(st.none(), st.just(VOID), st.floats(-10, 10))


@given(VALUES, VALUES)
def test_unless_holds_exactly_where_its_condition_fails_void_facts_included(
    one: float | None, other: float | None
) -> None:
    record = {name: value for name, value in (("a", one), ("b", other)) if value is not None}
    for condition in (
        Bound("a", ">=", 1.0),
        Bound("a", "<", FactRef("b")),
        Every((Bound("a", ">", 0.0), Bound("b", ">", 0.0))),
    ):
        outcome = holds(condition, record)
        opposite = holds(negated(condition, {"a", "b"}), record)
        assert opposite is (None if outcome is None else not outcome)


@given(st.floats(0.01, 1e4), st.floats(0.01, 1e4))
def test_steps_are_the_rounded_up_number_of_ratios(value: float, limit: float) -> None:
    steps = Domain("number", step=Step("ratio", 1.5)).steps_between(value, limit)
    high, low = max(value, limit), min(value, limit)
    assert high <= low * 1.5**steps * (1 + 1e-6)
    assert steps == 1 or high > low * 1.5 ** (steps - 1) * (1 - 1e-6)


@pytest.mark.parametrize("value", [math.nan, math.inf, -math.inf, 300.0, "warm", ("a",)])
def test_a_number_outside_its_domain_is_not_accepted(value: float) -> None:
    assert not Domain("number", "°C", -80, 250).accepts(value)
