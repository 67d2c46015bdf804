"""Changing over is told for what is recommended and for every product; the codes say where they name no base oil."""

from collections.abc import Callable

import pytest

from advisor.advice import Advice, Advisor
from advisor.answers import answer
from advisor.case import Case
from advisor.explanation import as_data, text
from advisor.explanation.changing_over import change_overs, differ_from_the_classes
from advisor.explanation.findings import base_oil_letters
from advisor.formulas import FORMULAS
from advisor.formulas.formula import put_in
from advisor.interview.outcome import product_reasons
from advisor.knowledge import Knowledge

Advise = Callable[..., Advice]


def test_a_product_that_does_not_mix_brings_its_own_steps(advise: Advise) -> None:
    # Lithium is in the bearing and lithium is recommended; polyurea does not mix with it (table compat_encoded).
    advice = advise()
    assert change_overs(advice)["GR-101"] == "purge"
    assert change_overs(advice)["GR-301"] == "dismantle_and_clean"
    written = text(advice, full=False)
    steps = written[written.index("\nChange-over\n") :]
    assert "Purge (the recommended classes, and " in steps
    clean = steps[steps.index("Dismantle and clean (") :]
    assert "GR-301" in clean[: clean.index(":")]


def test_the_shelf_and_the_data_say_it_beside_the_product(advise: Advise) -> None:
    advice = advise()
    assert differ_from_the_classes(advice)
    by_item = dict(zip((each.item for each in advice.shelf), product_reasons(advice), strict=True))
    assert by_item["GR-301"].startswith("dismantle and clean; ")
    assert by_item["GR-101"].startswith("purge; ")
    told = {each["item"]: each.get("change_over") for each in as_data(advice)["shelf"]}
    assert told["GR-301"] == "dismantle_and_clean"


def test_nothing_is_changed_over_where_nothing_is_in_the_bearing(advise: Advise) -> None:
    advice = advise(incumbent="none", incumbent_thickener=None, incumbent_base_oil=None)
    assert set(change_overs(advice).values()) == {"nothing_to_do"}
    assert not differ_from_the_classes(advice)


def test_steps_that_lead_to_others_bring_them_along(advise: Advise, knowledge: Knowledge) -> None:
    assert knowledge.procedures["test_or_clean"].leads_to == ("purge", "dismantle_and_clean")
    # Aluminium complex is in the bearing: with lithium it is to be tested first (table compat_encoded).
    advice = advise(incumbent_thickener="aluminium_complex")
    assert change_overs(advice)["GR-101"] == "test_or_clean"
    steps = text(advice, full=False).partition("\nChange-over\n")[2]
    assert "Purge" in steps
    assert "Dismantle and clean" in steps


def test_where_mineral_oil_is_ruled_out_the_letter_of_the_base_oil_is_asked_for(advise: Advise) -> None:
    # EPDM swells in every hydrocarbon; DIN 51502 knows polyglycol by PG.
    advice = advise(seal="EPDM")
    assert set(base_oil_letters(advice).values()) == {"PG"}
    assert "PG for polyglycol" in text(advice, full=False)


def test_where_mineral_oil_would_do_no_letter_is_asked_for(advise: Advise) -> None:
    assert not base_oil_letters(advise())


def test_no_input_is_left_standing_in_an_equation_with_its_numbers() -> None:
    for formula in FORMULAS.values():
        left = {each.symbol: "" for each in formula.inputs}
        written = put_in(formula.equation, {each.symbol: "7" for each in formula.inputs})
        assert put_in(written, left) == written, formula.name


@pytest.mark.parametrize(
    ("name", "typed", "span"),
    [
        ("bore_mm", "1e1..2e1 in", (254.0, 508.0)),
        ("bore_mm", "1..2'", (304.8, 609.6)),
        ("bore_mm", "1/2..3/4 in", (12.7, 19.05)),
        ("speed_rpm", "10..20 1/s", (600.0, 1200.0)),
        ("running_temperature_c", "160 °F..90 °C", (pytest.approx(71.1, abs=0.05), 90.0)),
        ("running_temperature_c", "70..90", (70.0, 90.0)),
    ],
)
def test_the_unit_of_the_end_serves_for_both_ends(
    name: str, typed: str, span: tuple[float, float], knowledge: Knowledge
) -> None:
    assert answer(knowledge.facts[name], typed).span == span


def test_what_is_asked_of_grease_is_shown_while_the_form_is_open(
    advisor: Advisor, saved: Callable[[str], Case]
) -> None:
    # Without the type of bearing grease and oil are both open; the heat asks its margin of any grease all the same.
    advice = advisor.advise(saved("designation_that_is_in_no_table"))
    assert set(advice.line("form").values) == {"grease", "oil"}
    assert {each.property for each in advice.line("hot").demands} >= {"upper_service_c", "dropping_point_c"}
    assert {each.property for each in advice.line("cold").demands} == {"lower_service_c"}


def test_grease_only_rows_do_not_apply_to_oil(advisor: Advisor, make_case: Callable[..., Case]) -> None:
    advice = advisor.advise(make_case(supply="oil_system", incumbent="none"))
    assert advice.line("solids").skipped
    assert "share of solid lubricant" not in text(advice, full=False)
