"""What stands beside every formula as data is whole and agrees with the function."""

import doctest
import inspect

import pytest

from advisor import formulas
from advisor.formulas import FORMULAS, Formula, Input, OutOfRange, arithmetic, bearings, density, grades, grease
from advisor.formulas import viscosity as viscosity_room
from advisor.formulas import viscosity_index as index_room
from advisor.quantities import UNITS

MODULES = [arithmetic, bearings, density, grades, grease, viscosity_room, index_room]
EACH = pytest.mark.parametrize("formula", FORMULAS.values(), ids=list(FORMULAS))


@EACH
def test_a_formula_goes_by_the_name_of_its_function(formula: Formula) -> None:
    assert FORMULAS[formula.name] is formula
    assert formula.name == formula.function.__name__


@EACH
def test_the_inputs_are_the_parameters_of_the_function_in_order(formula: Formula) -> None:
    assert [each.name for each in formula.inputs] == list(inspect.signature(formula.function).parameters)


@EACH
def test_a_formula_says_where_it_comes_from(formula: Formula) -> None:
    assert all((formula.subject, formula.title, formula.equation, formula.source, formula.result))
    assert formula.checked in {"yes", "from memory", "common practice"}
    if "no source" in formula.source:
        assert formula.checked != "yes"


@EACH
def test_units_are_known_and_ranges_are_not_empty(formula: Formula) -> None:
    assert {formula.result_unit, *(each.unit for each in formula.inputs)} <= set(UNITS)
    for each in formula.inputs:
        assert each.low < each.high
        assert each.text
        assert all(each.low <= joint <= each.high for joint in each.joints)


@EACH
def test_the_equation_shows_every_input_and_the_result(formula: Formula) -> None:
    for symbol in (formula.result_symbol, *(each.symbol for each in formula.inputs)):
        assert symbol in formula.equation


@EACH
def test_a_formula_has_a_worked_example_with_range_and_source(formula: Formula) -> None:
    text = inspect.getdoc(formula.function) or ""
    assert "Source:" in text
    assert doctest.DocTestParser().get_examples(text)


def test_every_function_of_numbers_is_listed() -> None:
    public = {
        name
        for module in MODULES
        for name, function in inspect.getmembers(module, inspect.isfunction)
        if not name.startswith("_") and function.__module__ == module.__name__
        and inspect.signature(function).return_annotation == "float"
    }
    assert public == set(FORMULAS)


def test_no_name_is_given_twice() -> None:
    assert len(FORMULAS) == sum(len(module.FORMULAS) for module in MODULES)


def test_the_list_cannot_be_changed() -> None:
    with pytest.raises(TypeError):
        formulas.FORMULAS["mean_diameter"] = FORMULAS["total"]  # type: ignore[index]


def test_a_value_outside_its_range_is_told_with_the_range_and_the_value() -> None:
    (sentence,) = FORMULAS["viscosity_at"].outside({"viscosity_40": 68, "viscosity_100": 8.6, "temperature_c": -30})
    assert "-30 °C" in sentence
    assert "-20 to 200 °C" in sentence


@EACH
def test_both_ends_of_a_range_belong_to_it(formula: Formula) -> None:
    assert formula.outside({each.name: each.low for each in formula.inputs}) == ()
    assert formula.outside({each.name: each.high for each in formula.inputs}) == ()
    assert len(formula.outside({each.name: float("nan") for each in formula.inputs})) == len(formula.inputs)


def _halve(a: float) -> float:
    return 1e308 * 10 if a > 1 else 1 / a


@pytest.mark.parametrize("value", [0.0, 2.0])
def test_where_arithmetic_breaks_down_the_range_is_named(value: float) -> None:
    inputs = (Input("a", "a", "mm", 1, 2, "up", "a"),)
    formula = Formula("x", "x", "Half", _halve, inputs, "x", "x", "", "x = a", "x", "yes")
    with pytest.raises(OutOfRange, match="1 to 2 mm"):
        formula(a=value)
