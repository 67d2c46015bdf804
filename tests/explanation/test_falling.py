"""What demands ask for: together, on scales, on choices and on numbers."""

import pytest

from advisor.conditions import ALWAYS, Bound, Condition, Domain, Member
from advisor.explanation.falling import asks, nothing, say_at_least, turns_against
from advisor.specification import Demand

ADDITIVE = Domain("scale", choices={"none": "none", "anti_wear": "anti-wear", "ep": "EP"})
COPPER = Domain("scale", choices={"1a": "1a", "1b": "1b", "2a": "2a"})
SOLIDS = Domain("choice", choices={"none": "none", "mos2": "MoS2", "graphite": "graphite", "other": "other"})
GRADES = Domain("number", places=(68.0, 100.0, 150.0))
HEAT = Domain("number", "°C")


def demand(test: Condition, level: int = 0) -> Demand:
    return Demand("p", test, level, ALWAYS, "some_rule")


AT_LEAST_AW, AT_LEAST_EP = demand(Bound("p", ">=", 1.0)), demand(Bound("p", ">=", 2.0))
AT_MOST_AW = demand(Bound("p", "<=", 1.0))


def test_the_lowest_value_that_is_left_is_asked_for() -> None:
    assert asks([AT_LEAST_AW], "anti_wear", ADDITIVE)
    assert not asks([AT_LEAST_AW], "ep", ADDITIVE)


def test_demands_are_taken_together() -> None:
    assert asks([AT_LEAST_AW, AT_LEAST_EP], "ep", ADDITIVE)
    assert not asks([AT_LEAST_AW, AT_LEAST_EP], "anti_wear", ADDITIVE)
    assert asks([AT_LEAST_AW, AT_MOST_AW], "anti_wear", ADDITIVE)


def test_a_cap_asks_for_nothing_where_there_may_be_none_of_it() -> None:
    assert not asks([AT_MOST_AW], "anti_wear", ADDITIVE)
    assert turns_against(AT_MOST_AW, ADDITIVE)
    assert not turns_against(AT_LEAST_AW, ADDITIVE)


def test_a_cap_asks_for_its_limit_where_there_is_always_a_value() -> None:
    assert asks([demand(Bound("p", "<=", 1.0))], "1b", COPPER)
    assert not asks([demand(Bound("p", "<=", 1.0))], "1a", COPPER)


def test_any_of_several_choices_asks_for_each_of_them() -> None:
    either = demand(Member("p", frozenset({"mos2", "graphite"})))
    assert asks([either], "mos2", SOLIDS)
    assert asks([either], "graphite", SOLIDS)
    assert not asks([either], "other", SOLIDS)


def test_a_choice_that_is_turned_down_alone_does_not_turn_against_the_rest() -> None:
    no_other = demand(Member("p", frozenset({"other"}), wanted=False))
    assert not turns_against(no_other, SOLIDS)
    assert turns_against(demand(Member("p", frozenset({"none"}))), SOLIDS)
    assert not asks([no_other], "mos2", SOLIDS)


def test_nothing_is_asked_by_no_demand() -> None:
    assert not any(asks([], choice, ADDITIVE) for choice in ADDITIVE.choices)
    assert not say_at_least([], Bound("p", ">=", 130.0), HEAT)


@pytest.mark.parametrize(
    ("limit", "says"),
    [(130.0, True), (140.0, True), (129.0, False)],
)
def test_a_bound_says_at_least_a_weaker_one(limit: float, says: bool) -> None:
    assert say_at_least([demand(Bound("p", ">=", limit))], Bound("p", ">=", 130.0), HEAT) is says


def test_an_open_bound_is_weaker_than_equality_asks() -> None:
    assert not say_at_least([demand(Bound("p", ">=", 130.0))], Bound("p", ">", 130.0), HEAT)
    assert say_at_least([demand(Bound("p", ">", 130.0))], Bound("p", ">=", 130.0), HEAT)


def test_grades_are_compared_place_by_place() -> None:
    assert say_at_least([demand(Bound("p", ">", 68.0))], Bound("p", ">=", 100.0), GRADES)


def test_the_choice_for_nothing() -> None:
    assert (nothing(ADDITIVE), nothing(COPPER)) == ("none", "")
    assert nothing(Domain("yes_no", choices={"no": "no", "yes": "yes"})) == "no"
