"""Why-not lists every demand that a product misses: compared with judging it demand by demand."""

import json
from collections.abc import Callable

import pytest

from advisor import explanation
from advisor.advice import Advice
from advisor.conditions import Coded, holds, leaves
from advisor.explanation.workings import NotHere
from tests.explanation.conftest import NAMES

AdviceOf = Callable[[str], Advice]


def missed(advice: Advice, place: int) -> list[tuple[str, int, bool]]:
    """The demands that a product misses, one condition at a time: its rule, its level, whether the sheet is silent."""
    judgement = advice.judgement
    assert judgement is not None
    record: dict[str, Coded] = {}
    waiting = set()
    for name, column in judgement.columns.items():
        value = column.values[place]
        if column.waiting:
            waiting.add(name)
        elif value is not None:
            domain = advice.knowledge.properties[name].domain
            record[name] = domain.code(domain.decode(value))
    found = []
    for demand in advice.specification.demands:
        awaited = waiting & {term.name for term in leaves(demand.for_)}
        if awaited or holds(demand.for_, record) is False:
            continue  # while it is open whom a demand is for, or where it is for others, it says nothing
        if demand.void:
            found.append((demand.rule, demand.level, True))
        elif demand.property not in waiting and (outcome := holds(demand.test, record)) is not True:
            found.append((demand.rule, demand.level, outcome is None))
    return sorted(found)


@pytest.mark.parametrize("name", NAMES)
def test_the_list_is_what_judging_one_by_one_gives(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    demands = advice.specification.demands
    said = {} if advice.withheld else {each["item"]: each["misses"] for each in explanation.as_data(advice)["shelf"]}
    for ranked in advice.shelf:
        if advice.runs:
            expected = missed(next(run for run in advice.single if ranked in run.shelf), ranked.place)
            in_json = [(each["rule"], each["level"], each["seen"] is None) for each in said[ranked.item]]
        else:
            expected = missed(advice, ranked.place)
            in_json = [(demands[each["demand"]].rule, demands[each["demand"]].level, each["seen"] is None)
                       for each in said[ranked.item]]  # fmt: skip
        assert sorted(in_json) == expected


@pytest.mark.parametrize("name", ["hot_wet_roller_table", "law_against_the_seal", "no_temperature_measured"])
def test_the_words_list_the_same(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    for ranked in advice.shelf:
        answer = explanation.why_not(advice, ranked.item)
        told = sorted((miss.rule.id, miss.level) for miss in answer.misses)
        assert told == sorted((rule, level) for rule, level, _ in missed(advice, ranked.place))


def test_margins_and_numbers_of_a_product(advice_of: AdviceOf) -> None:
    """The sheet of GR-102 says 125 °C; the bearing reaches 130 °C."""
    answer = explanation.why_not(advice_of("hot_wet_roller_table"), "GR-102")
    miss = next(each for each in answer.misses if each.rule.id == "declared_upper")
    assert (miss.demand, miss.seen, miss.margin) == ("upper service temperature at least 130 °C", "125 °C", "5 K")
    assert answer.verdict == "falls short"


def test_a_silent_sheet_is_said_to_be_silent(advice_of: AdviceOf) -> None:
    answer = explanation.why_not(advice_of("hot_wet_roller_table"), "GR-401")
    miss = next(each for each in answer.misses if each.rule.id == "wash_bars_silica_and_bare_clay")
    assert miss.seen == "its sheet does not say"


@pytest.mark.parametrize("subject", ["sodium", "thickener=sodium", "thickener:sodium", "Sodium soap"])
def test_a_class_is_found_by_any_of_its_names(subject: str, advice_of: AdviceOf) -> None:
    answer = explanation.why_not(advice_of("hot_wet_roller_table"), subject)
    rules = {miss.rule.id for miss in answer.misses if miss.level == 0}
    assert answer.verdict.startswith("barred")
    assert rules == {"humid_bars_sodium", "thickener_steady/sodium", "thickener_brief/sodium"}
    steady = next(miss.rule for miss in answer.misses if miss.rule.id == "thickener_steady/sodium")
    assert "80 °C" in steady.because
    assert "120 °C" in steady.because


def test_a_class_that_is_allowed_says_how_far_it_falls_behind(advice_of: AdviceOf) -> None:
    answer = explanation.why_not(advice_of("hot_wet_roller_table"), "NLGI 2")
    assert "1 step short at level 1" in answer.verdict
    assert [miss.rule.id for miss in answer.misses if not miss.shared] == ["central_cold_nlgi"]


def test_a_recommended_class_has_nothing_against_it(advice_of: AdviceOf) -> None:
    assert explanation.why_not(advice_of("hot_wet_roller_table"), "form=grease").verdict == "recommended"


def test_every_barred_class_is_explained_by_its_rules(advice_of: AdviceOf) -> None:
    advice = advice_of("hot_wet_roller_table")
    assert any(line.barred for line in advice.docket)
    for line in advice.docket:
        row = next(row for row in advice.knowledge.docket if row.id == line.row)
        for value, rules in (line.barred or {}).items():
            said = f"{value:g}" if isinstance(value, float) else value
            answer = explanation.why_not(advice, f"{row.recommends}={said}")
            told = {miss.rule.id for miss in answer.misses if miss.level == 0}
            assert told
            assert told <= set(rules)


def test_an_unknown_subject_names_the_nearest(advice_of: AdviceOf) -> None:
    with pytest.raises(NotHere, match="Nearest: GR-"):
        explanation.why_not(advice_of("hot_wet_roller_table"), "GR-1O2")


def test_misses_number_the_demands_of_the_specification(advice_of: AdviceOf) -> None:
    data = json.loads(explanation.as_json(advice_of("hot_wet_roller_table")))
    numbered = {
        each["number"]: each for each in data["specification"]["demands"] + data["specification"]["conditional"]
    }
    product = next(each for each in data["shelf"] if each["item"] == "GR-102")
    rules = {numbered[miss["demand"]]["rule"] for miss in product["misses"]}
    assert {"declared_upper", "ep_copper", "thickener_steady/lithium_12OH"} <= rules
