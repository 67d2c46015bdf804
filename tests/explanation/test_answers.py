"""Structured answers and reports: what they claim about known cases."""

import math
import re
from collections.abc import Callable, Iterator
from dataclasses import replace

import pytest

from advisor import explanation
from advisor.advice import Advice, Advisor
from advisor.advice.model import State
from advisor.case import Origin
from advisor.conditions import Bound, FactRef, holds, leaves
from advisor.explanation.report import report
from advisor.explanation.seeing import record_at
from advisor.explanation.text_report import WIDTH
from advisor.explanation.words import title_of
from advisor.explanation.workings import NotHere, Premise
from advisor.knowledge import Knowledge
from tests.explanation.conftest import NAMES

AdviceOf = Callable[[str], Advice]
ENDS = {
    Origin.ANSWERED,
    Origin.ASSUMED,
    Origin.NOT_ASKED,
    Origin.TUNED,
    Origin.CONCLUDED,
    Origin.UNANSWERED,
    Origin.VOID,
}
FIRST = ("State", "Before you trust this", "What decides", "Docket")


def ends(premise: Premise) -> Iterator[Premise]:
    if not premise.premises:
        yield premise
    for each in premise.premises:
        yield from ends(each)


def flat(text: str) -> str:
    """The text without the wrapping."""
    return " ".join(text.split())


@pytest.mark.parametrize("name", NAMES)
def test_why_goes_down_to_answers(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    for line in (*advice.docket, *advice.quantities):
        answer = explanation.why(advice, line.row)
        for reason in answer.reasons:
            assert reason.rule.sources, f"{reason.rule.id} names no source"
            assert "{" not in reason.rule.because
            for premise in reason.rule.premises:
                assert all(end.origin in ENDS for end in ends(premise))


def test_without_a_decisive_demand_another_class_would_be_recommended(advice_of: AdviceOf) -> None:
    """For NLGI the wish for cold lines stands against the usual NLGI 2 and the wish of dusty places for 2 or 3."""
    answer = explanation.why(advice_of("hot_wet_roller_table"), "nlgi")
    assert answer.conclusion == "1"
    assert {reason.rule.id for reason in answer.reasons if reason.decides} >= {"central_cold_nlgi"}
    assert {"2", "3"} <= set(next(r for r in answer.reasons if r.rule.id == "central_cold_nlgi").against)


def test_why_of_an_unknown_row_names_the_rows(advice_of: AdviceOf) -> None:
    with pytest.raises(NotHere, match="thickener"):
        explanation.why(advice_of("hot_wet_roller_table"), "colour")


def test_how_computed_puts_the_numbers_in(advice_of: AdviceOf) -> None:
    """Mean diameter of 100 and 180 mm: (100 + 180)/2 = 140 mm, by its definition."""
    working = explanation.how_computed(advice_of("hot_wet_roller_table"), "mean_diameter_mm")
    assert (working.equation, working.substituted, working.result) == (
        "d_m = (d + D)/2",
        "d_m = (100 + 180)/2",
        "140 mm",
    )
    assert [(each.symbol, each.value) for each in working.symbols] == [("d", "100 mm"), ("D", "180 mm")]


def test_how_computed_names_the_standard(advice_of: AdviceOf) -> None:
    """Reference viscosity below 1000 1/min: 45000 n^-0.83 d_m^-0.5, ISO 281:2007, equation (28)."""
    working = explanation.how_computed(advice_of("hot_wet_roller_table"), "reference_viscosity")
    expected = 45000 * 90**-0.83 * 140**-0.5
    assert math.isclose(float(working.result.removesuffix(" mm²/s")), expected, rel_tol=1e-3)
    assert any("ISO 281:2007" in source for source in working.sources)


def test_how_computed_declines_what_was_answered(advice_of: AdviceOf) -> None:
    with pytest.raises(NotHere, match="was not computed"):
        explanation.how_computed(advice_of("hot_wet_roller_table"), "bore_mm")


def test_a_rule_that_failed_says_what_it_saw_and_wanted(advice_of: AdviceOf) -> None:
    """PAO stands 170 °C for a short time in the table; the bearing reaches 130 °C."""
    verdict = explanation.why_not_rule(advice_of("hot_wet_roller_table"), "oil_brief/PAO_SHC")
    assert verdict.verdict == "failed"
    assert verdict.saw == ("needs highest bearing temperature above 170 °C, saw 130 °C (40 K away)",)


def test_a_rule_that_fired_and_one_that_waits(advice_of: AdviceOf) -> None:
    fired = explanation.why_not_rule(advice_of("hot_wet_roller_table"), "humid_bars_sodium")
    assert fired.verdict == "fired"
    waiting = explanation.why_not_rule(advice_of("no_temperature_measured"), "thickener_steady/sodium")
    assert waiting.verdict == "undecided"
    assert waiting.waits == ("steady temperature with margin",)


def test_an_assumption_names_the_rows_that_it_reaches(advice_of: AdviceOf) -> None:
    """The cage decides about copper proofs, not about the thickener."""
    changes = explanation.what_would_change(advice_of("hot_wet_roller_table"))
    cage = next(each for each in changes.assumed if each.fact == "cage")
    assert "Proofs asked for" in cage.rows
    assert "Thickener" not in cage.rows


def test_an_open_question_says_what_waits(advice_of: AdviceOf) -> None:
    changes = explanation.what_would_change(advice_of("no_temperature_measured"))
    temperature = next(each for each in changes.open if each.fact == "running_temperature_c")
    assert temperature.decides == "lubricant"
    assert any("(thickener_steady)" in each for each in temperature.waiting)


@pytest.mark.parametrize("name", NAMES)
def test_a_close_limit_really_turns_its_rules(name: str, advice_of: AdviceOf) -> None:
    """With the fact moved just across one of the rule's limits, the rule judges otherwise."""
    advice = advice_of(name)
    rules = {
        each.id: (step.step, each, outcome)
        for step in advice.trace
        for each, outcome in zip(step.instances, step.outcomes, strict=True)
    }
    close = explanation.what_would_change(advice).near
    assert close or advice.withheld
    for near in close:
        assert near.rules
        for rule in near.rules:
            step, instance, outcome = rules[rule]
            record = record_at(advice, step)
            limits = [
                term.limit for term in leaves(instance.when) if isinstance(term, Bound) and term.name == near.fact
            ]
            numbers = [record[each.name] if isinstance(each, FactRef) else each for each in limits]
            moved = [each + shift for each in numbers if isinstance(each, float) for shift in (-1e-9, 0.0, 1e-9)]
            assert any(holds(instance.when, {**record, near.fact: each}) is not outcome for each in moved)


DECIDED = [
    "hot_wet_roller_table",
    "motor_keeps_its_polyurea",
    "vertical_motor",
    "dusty_slow_roller",
    "washed_down_pump",
]


@pytest.mark.parametrize("name", DECIDED)
def test_without_a_rule_that_decides_the_row_is_another(name: str, advice_of: AdviceOf) -> None:
    """Every demand that is said to decide: the case is advised again on a knowledge without that rule."""
    advice = advice_of(name)
    only = frozenset(each.item for each in advice.shelf)
    decided = 0
    for line in advice.docket:
        if not line.candidates:
            continue
        for reason in explanation.why(advice, line.row).reasons:
            if reason.decides:
                decided += 1
                again = Advisor(without(advice.knowledge, reason.rule.id)).advise(advice.case, only=only)
                assert again.line(line.row).values != line.values, (line.row, reason.rule.id)
    assert decided


def without(knowledge: Knowledge, rule: str) -> Knowledge:
    instances = {step: tuple(each for each in found if each.id != rule) for step, found in knowledge.instances.items()}
    return replace(knowledge, instances=instances)


@pytest.mark.parametrize("name", NAMES)
def test_the_first_screen_shows_all_that_weakens_the_advice(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    sections = {section.title: section for section in report(advice).sections}
    said = repr(sections["Before you trust this"])
    for fact in advice.assumptions:
        assert f"Assumed: {title_of(fact, advice.knowledge)} is" in said
    for fact in advice.facts.values():
        if fact.note == "an estimate":
            assert title_of(fact.name, advice.knowledge) in said
    for each in advice.at_limit:
        assert each.rule in said
    if not advice.withheld:
        assert [section.title for section in report(advice).sections if section.title in FIRST] == list(FIRST)
        assert len(sections["What decides"].blocks[0].nodes) <= 5  # type: ignore[union-attr]  # a tree of reasons


@pytest.mark.parametrize("name", NAMES)
def test_the_terminal_text_is_narrow_plain_and_ends_with_whose_word_comes_first(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    text = explanation.text(advice)
    assert max(map(len, text.splitlines())) <= WIDTH
    assert "\x1b" not in text
    assert f"{advice.state.value}: " in text
    last = flat(text[text.rindex("Whose word comes first") :])
    for caution in ("maker", "sds", "loto"):
        assert flat(advice.knowledge.cautions[caution].text) in last


@pytest.mark.parametrize("name", NAMES)
def test_all_products_and_cautions_are_in_every_report(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    written = flat(explanation.text(advice))
    for ranked in advice.shelf:
        assert ranked.item in written
    for caution in advice.cautions:
        assert flat(advice.knowledge.cautions[caution.caution].text) in written


def test_a_conflict_is_named_with_its_rules_in_words(advice_of: AdviceOf) -> None:
    """The law asks for an ester, and an EPDM seal bears none."""
    advice = advice_of("law_against_the_seal")
    assert advice.state is State.CONFLICT
    text = flat(explanation.text(advice))
    assert "Conflict about usual oils" in text
    for rule in advice.conflicts[0].rules:
        assert f"({rule}): {explanation.why_not_rule(advice, rule).title}" in text or f"({rule})" in text


def test_no_interval_is_printed_where_its_guard_fails(advice_of: AdviceOf) -> None:
    advice = advice_of("hot_wet_roller_table")
    answer = explanation.why(advice, "interval")
    assert answer.conclusion == "no figure for this point"
    assert any("total interval factor at least 0.1" in note for note in answer.notes)
    assert not answer.premises


def test_the_writers_can_be_called_again(advice_of: AdviceOf) -> None:
    advice = advice_of("sealed_motor_bearing")
    for write in (explanation.text, explanation.markdown, explanation.html, explanation.as_json):
        assert write(advice) == write(advice)


def test_the_page_needs_nothing_else_and_describes_its_chart(advice_of: AdviceOf) -> None:
    page = explanation.html(advice_of("hot_wet_roller_table"))
    assert re.findall(r"""(?:src|href)=["'](?!#)""", page) == []
    assert "url(" not in page
    assert "@import" not in page
    assert '<title id="chart-title">' in page
    described = re.search(r'<desc id="chart-desc">(.*?)</desc>', page)
    assert described is not None
    assert "110 °C" in described[1]
    assert "@media print" in page


def test_an_oil_is_a_straight_line_on_the_chart(advice_of: AdviceOf) -> None:
    """On Walther axes, ASTM D341: the line's height at its middle is the mean of its ends."""
    from advisor.explanation.chart import _at, _axes, _oils

    oils = list(_oils(advice_of("hot_wet_roller_table")))
    axes = _axes(110.0, oils)
    _, at_40, at_100 = oils[0]
    points = [(axes.x(each), axes.y(_at(at_40, at_100, each))) for each in (20.0, 60.0, 100.0)]
    (x1, y1), (x2, y2), (x3, y3) = points
    assert math.isclose(y2, y1 + (y3 - y1) * (x2 - x1) / (x3 - x1), abs_tol=0.5)
