"""The path of one case, from answers to advice."""

import random
from collections.abc import Callable

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from advisor.advice import Advice, Advisor, State
from advisor.case import Case, Origin
from advisor.knowledge import Knowledge

MakeCase = Callable[..., Case]
Advise = Callable[..., Advice]
FIXED = settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])


def test_an_ordinary_motor_bearing_is_settled_with_something_that_fits(advise: Advise) -> None:
    advice = advise()
    assert advice.state is State.SETTLED
    assert advice.fits
    assert advice.line("form").values == ("grease",)


def test_an_oxidiser_is_referred_and_nothing_is_shown(advise: Advise) -> None:
    advice = advise(dangers="oxidiser")
    assert advice.state is State.REFERRED
    assert advice.withheld
    assert (advice.docket, advice.shelf, advice.codes.din, advice.codes.iso, advice.specification.demands) == (
        (),
        (),
        (),
        (),
        (),
    )


@given(data=st.data())
@FIXED
def test_an_oxidiser_is_referred_whatever_else_is_answered(
    data: st.DataObject, advisor: Advisor, make_case: MakeCase
) -> None:
    case = make_case(dangers="oxidiser")
    for name in data.draw(st.lists(st.sampled_from([name for name in case.answers if name != "dangers"]), max_size=12)):
        case = case.without(name)
    advice = advisor.advise(case)
    assert advice.state is State.REFERRED
    assert advice.withheld
    assert not advice.open_questions


def test_every_fact_with_an_assumption_may_be_unknown_and_is_then_listed(
    advisor: Advisor, make_case: MakeCase, knowledge: Knowledge
) -> None:
    with_assumption = [name for name, fact in knowledge.facts.items() if fact.assume is not None]
    assert len(with_assumption) > 10
    case = make_case(**dict.fromkeys(with_assumption, "?"))
    advice = advisor.advise(case)
    asked = [name for name in with_assumption if advice.facts[name].origin is not Origin.NOT_ASKED]
    assert list(advice.assumptions) == asked
    for name in with_assumption:
        alone = advisor.advise(make_case(**{name: "?"}))
        assert name in alone.assumptions or alone.facts[name].origin is Origin.NOT_ASKED


def test_silence_is_not_a_dont_know(advisor: Advisor, make_case: MakeCase, knowledge: Knowledge) -> None:
    """A fact with an assumption is still asked: without an answer nothing is assumed."""
    for name, fact in knowledge.facts.items():
        if fact.assume is None:
            continue
        advice = advisor.advise(make_case(**{name: None}))
        assert name not in advice.assumptions


def test_an_assumption_that_keeps_the_case_open_does(advise: Advise) -> None:
    advice = advise(load_ratio="?")
    assert advice.state is State.OPEN
    assert advice.keeping_open == ("load_ratio",)
    assert advice.facts["load_ratio"].value == pytest.approx(0.12)


def test_no_temperature_is_ever_assumed(advise: Advise) -> None:
    advice = advise(running_temperature_c="?")
    assert advice.state is State.OPEN
    assert "running_temperature_c" in {question.fact for question in advice.open_questions}


def test_a_peak_share_not_known_counts_as_all_of_the_time(advise: Advise) -> None:
    known = {"excursions": "yes", "peak_temperature_c": "100 °C"}
    assert advise(**known, peak_share_percent="?").facts["t_eff_c"].value == 100
    assert advise(**known, peak_share_percent="5 %").facts["t_eff_c"].value == 70
    assert advise(**known, peak_share_percent="5.1 %").facts["t_eff_c"].value == 100


def test_an_answer_that_became_irrelevant_is_kept_aside_and_comes_back(advise: Advise) -> None:
    wet = {"water_exposure": "wash", "salt": "yes", "water_temperature_c": "20 °C"}
    dry = advise(**{**wet, "water_exposure": "humid"})
    assert dry.set_aside == ("salt", "water_temperature_c")
    assert dry.facts["salt"].value == "no"
    assert advise(**wet).facts["salt"].value == "yes"


def test_an_unlabelled_incumbent_is_dismantled_and_cleaned(advise: Advise) -> None:
    advice = advise(incumbent="unlabelled", incumbent_thickener=None, incumbent_base_oil=None)
    assert advice.line("change_over").values == ("dismantle_and_clean",)


def test_the_product_in_use_needs_no_change_over(advise: Advise, knowledge: Knowledge) -> None:
    for product in knowledge.shelf:
        if product.values.get("form") != "grease":
            continue
        advice = advise(incumbent=product.item, incumbent_thickener=None, incumbent_base_oil=None)
        assert advice.judgement is not None
        place = advice.judgement.catalogue.place[product.item]
        domain = knowledge.properties["change_over"].domain
        coded = advice.judgement.columns["change_over"].values[place]
        assert coded is not None
        assert domain.decode(coded) == "nothing_to_do"


@given(order=st.randoms(use_true_random=False))
@FIXED
def test_the_order_of_answers_does_not_matter(order: random.Random, advisor: Advisor, make_case: MakeCase) -> None:
    case = make_case()
    names = list(case.answers)
    order.shuffle(names)
    shuffled = advisor.advise(Case(case.point_kind, case.title, {name: case.answers[name] for name in names}))
    straight = advisor.advise(case)
    assert shuffled.state is straight.state
    assert [line.values for line in shuffled.docket] == [line.values for line in straight.docket]
    assert [(each.item, each.verdict, each.steps) for each in shuffled.shelf] == [
        (each.item, each.verdict, each.steps) for each in straight.shelf
    ]


@given(data=st.data())
@FIXED
def test_any_part_of_the_answers_gives_advice_and_names_what_is_missing(
    data: st.DataObject, advisor: Advisor, make_case: MakeCase
) -> None:
    case = make_case()
    for name in data.draw(st.lists(st.sampled_from(sorted(case.answers)), min_size=1, max_size=20, unique=True)):
        case = case.without(name)
    advice = advisor.advise(case)
    missing = {question.fact for question in advice.open_questions}
    assert missing.isdisjoint(case.answers)
    if any(question.decides == "lubricant" for question in advice.open_questions):
        assert advice.state is not State.SETTLED


@given(low=st.integers(20, 230), rise=st.integers(0, 60))
@FIXED
def test_a_hotter_bearing_never_admits_another_thickener(low: int, rise: int, advise: Advise) -> None:
    def barred(celsius: int) -> set[str]:
        return {str(value) for value in advise(running_temperature_c=f"{celsius} °C").line("thickener").barred or {}}

    assert barred(low) <= barred(low + rise)


@given(water=st.sampled_from(["humid", "splash", "rain", "wash", "jet", "immersed"]), celsius=st.integers(20, 100))
@FIXED
def test_moisture_never_leaves_sodium_soap(water: str, celsius: int, advise: Advise) -> None:
    advice = advise(water_exposure=water, running_temperature_c=f"{celsius} °C", salt="no", water_temperature_c="20 °C")
    assert "sodium" in (advice.line("thickener").barred or {})
    assert advice.judgement is not None
    for ranked in advice.shelf:
        if advice.judgement.catalogue.items[ranked.place].values.get("thickener") == "sodium":
            assert ranked.verdict.value == "falls_short"


def test_every_advice_carries_the_standing_cautions(advise: Advise) -> None:
    for changed in ({}, {"dangers": "oxidiser"}, {"supply": "sealed_no_fitting"}, {"running_temperature_c": "180 °C"}):
        assert {"maker", "sds", "loto"} <= {caution.caution for caution in advise(**changed).cautions}


def test_demands_that_cannot_be_had_together_are_a_conflict_with_their_rules(advise: Advise) -> None:
    """The law asks for an ester where nothing is declared, and a caustic bath saponifies every ester."""
    advice = advise(site="eal_required, chemicals", chemical="caustic")
    assert advice.state is State.CONFLICT
    rules = {rule for conflict in advice.conflicts for rule in conflict.rules}
    assert any(rule.startswith("law_needs_eal") for rule in rules)
    assert any(rule.startswith("caustic") for rule in rules)


@given(celsius=st.integers(-40, 220), rpm=st.integers(1, 20_000), bore=st.integers(5, 900))
@settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
def test_no_size_speed_or_temperature_breaks_the_advice(celsius: int, rpm: int, bore: int, advise: Advise) -> None:
    advice = advise(
        running_temperature_c=f"{celsius} °C", speed_rpm=f"{rpm} rpm", bore_mm=f"{bore} mm", outside_mm=f"{bore * 2} mm"
    )
    interval = advice.facts["interval_shown"].value == "yes"
    if interval:
        assert isinstance(advice.facts["interval_h"].value, float)
        assert advice.facts["interval_h"].value >= 100
        assert "interval_formula_source" in {caution.caution for caution in advice.cautions}


def test_a_demand_for_thin_films_waits_until_the_film_is_known(advisor: Advisor, make_case: MakeCase) -> None:
    """EP is asked of a spherical roller only where kappa is below 1: until kappa is known nothing falls short of it."""
    whole = make_case(bearing_type="spherical_roller", cage="pressed_steel")
    advice = advisor.advise(Case(whole.point_kind, "", {"bearing_type": whole.answers["bearing_type"]}))
    assert advice.judgement is not None
    out = [each.place for each in advice.shelf if each.verdict.value != "still_in"]
    missed = {each.demand.property for place in out for each in advice.judgement.shortfalls(place) if each.demand.must}
    assert "load_additive" not in missed
    assert len(out) < len(advice.shelf) / 2
    assert "speed_rpm" in advice.line("additive").waits


def test_an_own_answer_that_differs_from_the_table_is_told(advise: Advise) -> None:
    """6313 is 65 x 140 x 33 (ISO 15 boundary plan, from memory); an own bore of 60 mm goes before it and is said."""
    assert advise(designation="6313").overridden == {}
    assert advise(designation="6313", bore_mm="60 mm").overridden == {"bore_mm": 65}
