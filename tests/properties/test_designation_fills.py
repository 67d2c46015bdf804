"""A designation fills type and dimensions in; what the person answers goes before, and what is unknown is asked."""

from collections.abc import Callable

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.advice import Advice
from advisor.answers import answer
from advisor.case import Origin
from tests.properties.whole_cases import ASKED

Advise = Callable[..., Advice]
FILLED = [name for name, fact in ASKED.items() if fact.filled is not None]
SIZES = ("bore_mm", "outside_mm", "width_mm")
UNTYPED = dict.fromkeys(("bearing_type", *SIZES))

# ISO 15: bore, outside diameter and width of some basic designations, in mm; from memory.
KNOWN = {
    "6308": ("deep_groove_ball", 40, 90, 23),
    "NU208": ("cylindrical_roller", 40, 80, 18),
    "7208": ("angular_contact_ball", 40, 80, 18),
    "22220": ("spherical_roller", 100, 180, 46),
    "1205": ("self_aligning_ball", 25, 52, 15),
}


@pytest.mark.parametrize("designation", KNOWN)
def test_a_designation_answers_type_and_sizes(designation: str, advise: Advise) -> None:
    advice = advise(designation=designation, **UNTYPED)
    kind, *numbers = KNOWN[designation]
    assert advice.facts["bearing_type"].value == kind
    assert [advice.facts[name].value for name in SIZES] == numbers
    for name in ("bearing_type", *SIZES):
        assert advice.facts[name].origin is Origin.LOOKED_UP
        assert designation in advice.facts[name].note
    assert not {"bearing_type", *SIZES} & {each.fact for each in advice.open_questions}


@pytest.mark.parametrize(
    ("typed", "basic"),
    [
        ("6308-2RS C3", "6308"),
        ("6308-2Z/C3", "6308"),
        ("NU 208 ECP", "NU208"), ("6308 2Z/C3", "6308"),
        ("nu208", "NU208"),
        ("7208 BECBP", "7208"),
        ("22220 EK", "22220"),
        ("60/22", "60/22"),
        ("60/22-2RS", "60/22"),
    ],
)
def test_blanks_and_suffixes_do_not_matter(typed: str, basic: str) -> None:
    assert answer(ASKED["designation"], typed).value == basic


@pytest.mark.parametrize("designation", ["other", "?"])
def test_a_designation_that_is_not_known_asks_for_type_and_sizes(designation: str, advise: Advise) -> None:
    advice = advise(designation=designation, **UNTYPED)
    assert {"bearing_type", *SIZES} <= {each.fact for each in advice.open_questions}
    assert all(advice.facts[name].value is None for name in FILLED)


def test_an_own_answer_goes_before_the_designation(advise: Advise) -> None:
    advice = advise(designation="6308", **{**UNTYPED, "outside_mm": "95 mm", "bearing_type": "four_point_contact_ball"})
    assert advice.facts["outside_mm"].value == 95
    assert advice.facts["outside_mm"].origin is Origin.ANSWERED
    assert advice.facts["bearing_type"].value == "four_point_contact_ball"
    assert advice.facts["bore_mm"].value == 40


def test_a_dont_know_about_a_size_is_filled_in_from_the_designation(advise: Advise) -> None:
    advice = advise(designation="6308", **{**UNTYPED, "bore_mm": "?"})
    assert advice.facts["bore_mm"].value == 40
    assert advice.facts["bore_mm"].origin is Origin.LOOKED_UP


@given(designation=st.sampled_from(sorted(ASKED["designation"].domain.choices)))
@settings(max_examples=100, deadline=None)
def test_a_designation_gives_the_advice_of_its_type_and_sizes(designation: str, advise: Advise) -> None:
    """The same point, once by designation and once answered by hand."""
    filled = advise(designation=designation, **UNTYPED)
    if filled.facts["bearing_type"].value is None:
        assert designation == "other"
        return
    typed = {name: str(filled.facts[name].value) for name in ("bearing_type", *SIZES)}
    by_hand = advise(**typed)
    assert filled.state is by_hand.state
    assert [line.values for line in filled.docket] == [line.values for line in by_hand.docket]
    assert [(each.item, each.verdict) for each in filled.shelf] == [(each.item, each.verdict) for each in by_hand.shelf]
