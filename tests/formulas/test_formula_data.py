"""What stands beside every formula as data is whole and agrees with the function."""

import doctest
import inspect
import re
from collections.abc import Callable
from importlib import import_module
from pathlib import Path
from types import ModuleType

import pytest

from advisor import formulas
from advisor.formulas import FORMULAS, LOOKUPS, Choice, Formula, Input, Lookup, Named, OutOfRange
from advisor.quantities import UNITS

MODULES = [
    import_module(f"advisor.formulas.{path.stem}")
    for path in sorted(Path(formulas.__file__).parent.glob("*.py"))
    if path.stem not in {"__init__", "formula", "solving"}
]
LOOKED_UP = pytest.mark.parametrize("lookup", LOOKUPS.values(), ids=list(LOOKUPS))
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
    helpers = {"counted_ratio"}  # what both annex A and the life factor take for the viscosity ratio
    public = {
        function.__name__
        for module in MODULES
        for function, signature in _own_functions(module)
        if signature.return_annotation == "float" and _taken(signature) == {"float"}
    }
    assert public - helpers == set(FORMULAS)


def test_every_function_that_takes_or_gives_a_name_is_listed() -> None:
    public = {
        function.__name__
        for module in MODULES
        for function, signature in _own_functions(module)
        if signature.return_annotation == "Named"
        or (signature.return_annotation == "float" and "str" in _taken(signature))
    }
    assert public == set(LOOKUPS)


def _taken(signature: inspect.Signature) -> set[str]:
    return {each.annotation for each in signature.parameters.values()}


def _own_functions(module: ModuleType) -> list[tuple[Callable[..., object], inspect.Signature]]:
    return [
        (function, inspect.signature(function))
        for name, function in inspect.getmembers(module, inspect.isfunction)
        if not name.startswith("_") and function.__module__ == module.__name__
    ]


def test_no_name_is_given_twice() -> None:
    assert len(FORMULAS) == sum(len(getattr(module, "FORMULAS", ())) for module in MODULES)
    assert len(LOOKUPS) == sum(len(getattr(module, "LOOKUPS", ())) for module in MODULES)
    assert not set(FORMULAS) & set(LOOKUPS)


@LOOKED_UP
def test_a_lookup_is_as_whole_as_a_formula(lookup: Lookup) -> None:
    assert lookup.name == lookup.function.__name__
    assert [each.name for each in lookup.inputs] == list(inspect.signature(lookup.function).parameters)
    assert all((lookup.subject, lookup.title, lookup.equation, lookup.source, lookup.result))
    assert lookup.checked in {"yes", "from memory", "common practice"}
    assert not ("no source" in lookup.source and lookup.checked == "yes")
    assert {lookup.result_unit, *(each.unit for each in lookup.inputs if isinstance(each, Input))} <= set(UNITS)
    text = inspect.getdoc(lookup.function) or ""
    assert "Source:" in text
    assert doctest.DocTestParser().get_examples(text)


@LOOKED_UP
def test_a_lookup_answers_for_every_option_and_refuses_another_by_naming_them(lookup: Lookup) -> None:
    middle = {
        each.name: each.options[0] if isinstance(each, Choice) else (each.low + each.high) / 2 for each in lookup.inputs
    }
    for each in lookup.inputs:
        if not isinstance(each, Choice):
            continue
        assert len(set(each.options)) == len(each.options)
        for option in each.options:
            answer = lookup(**{**middle, each.name: option})
            assert answer.text if isinstance(answer, Named) else answer >= 0
        with pytest.raises(OutOfRange, match=re.escape(", ".join(each.options))):
            lookup(**{**middle, each.name: "of no kind"})


@LOOKED_UP
@pytest.mark.parametrize("value", [float("inf"), float("-inf"), float("nan"), 1e300, -1e300, 0.0])
def test_no_number_at_all_brings_another_fault_than_a_refusal(lookup: Lookup, value: float) -> None:
    middle = {
        each.name: each.options[0] if isinstance(each, Choice) else (each.low + each.high) / 2 for each in lookup.inputs
    }
    for each in lookup.inputs:
        if isinstance(each, Input):
            try:
                lookup(**{**middle, each.name: value})
            except OutOfRange as refused:
                assert str(refused)  # noqa: PT017 -- a refusal is one of two good ends


def test_the_list_cannot_be_changed() -> None:
    with pytest.raises(TypeError):
        formulas.FORMULAS["mean_diameter"] = FORMULAS["total"]  # type: ignore[index]  # that is what is tried


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
