"""A condition is altered in one place at a time, by the declared steps of the facts in it."""

from advisor.conditions import ALWAYS, Bound, Condition, Either, Every, Member, Ticked, Valueless
from advisor.knowledge import Knowledge
from advisor.mutation.altering import altered
from advisor.mutation.stepping import Stepper

COLD = Bound("start_temperature_c", "<", -20.0)
WET = Bound("water_exposure", ">=", 4.0)


def alterations(condition: Condition, knowledge: Knowledge) -> list[Condition]:
    return [each for _, each in altered(condition, Stepper(knowledge))]


def test_a_limit_moves_by_the_declared_step_of_its_fact_either_way(knowledge: Knowledge) -> None:
    found = alterations(Bound("load_ratio", ">=", 0.1), knowledge)
    assert Bound("load_ratio", ">=", 0.099) in found
    assert Bound("load_ratio", ">=", 0.101) in found


def test_a_scale_moves_by_one_place_and_not_past_its_ends(knowledge: Knowledge) -> None:
    assert [each for each in alterations(Bound("shock", ">=", 3.0), knowledge) if isinstance(each, Bound)] == [
        Bound("shock", "<=", 3.0),
        Bound("shock", ">=", 2.0),
    ]


def test_a_computed_fact_borrows_the_step_of_an_answer_in_its_unit(knowledge: Knowledge) -> None:
    assert Bound("t_eff_c", ">", 121.0) in alterations(Bound("t_eff_c", ">", 120.0), knowledge)


def test_at_least_and_above_change_places_and_the_direction_turns(knowledge: Knowledge) -> None:
    found = alterations(COLD, knowledge)
    assert Bound("start_temperature_c", "<=", -20.0) in found
    assert Bound("start_temperature_c", ">", -20.0) in found


def test_each_term_is_dropped_once(knowledge: Knowledge) -> None:
    found = alterations(Every((COLD, WET)), knowledge)
    assert COLD in found
    assert WET in found
    assert alterations(COLD, knowledge)[0] == ALWAYS


def test_an_alternative_that_is_dropped_leaves_the_others(knowledge: Knowledge) -> None:
    assert WET in alterations(Either((COLD, WET)), knowledge)


def test_what_unless_adds_about_lacking_values_is_no_term_of_its_own(knowledge: Knowledge) -> None:
    unless = Either((Bound("speed_ratio", "<", 0.75), Valueless("speed_ratio")))
    found = alterations(Every((unless, WET)), knowledge)
    assert WET in found
    assert Every((Valueless("speed_ratio"), WET)) not in found


def test_choices_and_ticks_are_turned_and_taken_out_one_by_one(knowledge: Knowledge) -> None:
    supply = Member("supply", frozenset({"central", "oil_system"}))
    assert Member("supply", frozenset({"central"})) in alterations(supply, knowledge)
    assert Member("supply", supply.among, wanted=False) in alterations(supply, knowledge)
    assert Ticked("motion", frozenset({"swinging"})) in alterations(
        Ticked("motion", frozenset({"swinging", "vertical"})), knowledge
    )
