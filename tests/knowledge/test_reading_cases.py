"""Saved cases: every fault on its line in plain words, and the same case whatever units it was typed in."""

from collections.abc import Callable
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.answers import Saved, Unsuitable, answer, read_case
from advisor.documents import Problem, Problems
from advisor.knowledge import Knowledge

GOOD = """\
format: 1
title: Pump motor
point_kind: rolling_bearing
answers:
  bearing_type: deep_groove_ball
  speed_rpm: 1480 rpm
  dangers: []
  incumbent: GR-101
  cage: dont_know
"""

Read = Callable[[str], tuple[Saved | None, list[Problem]]]


@pytest.fixture
def read(knowledge: Knowledge, tmp_path: Path) -> Read:
    def _read(text: str) -> tuple[Saved | None, list[Problem]]:
        path = tmp_path / "case.yaml"
        path.write_text(text, encoding="utf-8")
        problems = Problems()
        return read_case(path, knowledge, problems), list(problems)

    return _read


def test_a_sound_case_is_read(read: Read) -> None:
    saved, problems = read(GOOD)
    assert not problems
    assert saved is not None
    answers = saved.case.answers
    assert answers["speed_rpm"].value == 1480
    assert answers["speed_rpm"].typed == "1480 rpm"
    assert answers["dangers"].value == ()
    assert answers["cage"].value is None
    assert not saved.assume_gaps
    assert saved.only is None


BROKEN = [
    ("speed_rpm:", "sped_rpm:", 6, "'sped_rpm' is no question of this kind of point. Did you mean 'speed_rpm'?"),
    (
        "speed_rpm:",
        "t_eff_c:",
        6,
        "'t_eff_c' is no question of this kind of point. It is computed or concluded, not asked.",
    ),
    ("speed_rpm:", "film_floor:", 6, "It is computed or concluded, not asked"),
    ("1480 rpm", "1480000 rpm", 6, "1 480 000 1/min lies outside 0.01 1/min to 200 000 1/min. Check the unit"),
    ("1480 rpm", "1,450", 6, "'1,450' can be read in two ways. Is it 1450 or 1.450?"),
    ("1480 rpm", "1480 mm", 6, "'mm' measures a length, but a speed of rotation is asked for"),
    ("1480 rpm", "fast", 6, "'fast' does not begin with a number"),
    ("1480 rpm", "[1480]", 6, "One answer is expected here, not a list or a mapping"),
    ("1480 rpm", "{value: 1480}", 6, "One answer is expected here, not a list or a mapping"),
    ("1480 rpm", "", 6, "The answer is missing. Write it, dont_know or unanswered"),
    ("dangers: []", "dangers:", 7, "The answer is missing"),
    ("dangers: []", "dangers: [vacum]", 7, "'vacum' is not one of the choices of dangers. Did you mean 'vacuum'?"),
    ("dangers: []", "dangers: [[vacuum]]", 7, "A list of ticks holds single words"),
    ("GR-101", "GR-1O1", 8, "'GR-1O1' is not one of the choices of lubricant in use. Did you mean"),
    ("cage: dont_know", "cage: wood", 9, "'wood' is not one of the choices of cage"),
    ("title:", "titel:", 2, "'titel' is not known in a saved case. Did you mean 'title'?"),
    ("Pump motor", "[Pump, motor]", 2, "the title is text"),
    ("format: 1\n", "", 1, "the format of the case is missing or unknown. format: 1."),
    ("format: 1", "format: 2", 1, "the format of the case is missing or unknown"),
    ("rolling_bearing", "plain_bearing", 3, "'plain_bearing' is no kind of point here. point_kind: rolling_bearing."),
    ("point_kind: rolling_bearing\n", "", 1, "the kind of point is missing"),
    ("title: Pump motor", "gaps: closed", 2, "'closed' is not known here. gaps: open, or gaps: dont_know."),
    ("title: Pump motor", "shelf: [GR-999X]", 2, "'GR-999X' is no product of the shelf"),
    ("title: Pump motor", "shelf: GR-101", 2, "the products are a list of item codes"),
    ("title: Pump motor", "like: case", 2, "'case' leads back to this file. Break the circle."),
    ("title: Pump motor", "like: nobody", 2, "'nobody' is no scenario beside this file"),
    ("title: Pump motor", "like: ../case", 2, "'../case' is no scenario beside this file"),
]


@pytest.mark.parametrize(("old", "new", "line", "message"), BROKEN, ids=lambda part: str(part)[:30])
def test_a_broken_case_is_told_on_its_line(old: str, new: str, line: int, message: str, read: Read) -> None:
    assert GOOD.count(old) >= 1
    saved, problems = read(GOOD.replace(old, new, 1))
    assert saved is None
    assert len(problems) == 1, problems
    assert problems[0].line == line, problems
    assert message in str(problems[0])


def test_answers_that_are_no_mapping(read: Read) -> None:
    saved, problems = read("format: 1\npoint_kind: rolling_bearing\nanswers: [1, 2]\n")
    assert saved is None
    assert "answers are written 'fact: value'" in str(problems[0])


def test_all_faults_of_a_case_are_told_at_once(read: Read) -> None:
    text = (
        GOOD.replace("1480 rpm", "fast").replace("title", "titel").replace("GR-101", "GR-1O1").replace("cage", "kage")
    )
    _, problems = read(text)
    assert [problem.line for problem in problems] == [2, 6, 8, 9]


def test_a_circle_over_two_files_is_told(knowledge: Knowledge, tmp_path: Path) -> None:
    for name, other in (("one", "two"), ("two", "one")):
        (tmp_path / f"{name}.yaml").write_text(GOOD.replace("title: Pump motor", f"like: {other}"), encoding="utf-8")
    problems = Problems()
    assert read_case(tmp_path / "one.yaml", knowledge, problems) is None
    assert [problem.message for problem in problems] == ["'one' leads back to this file"]


def test_like_takes_answers_over_and_away(knowledge: Knowledge, tmp_path: Path) -> None:
    (tmp_path / "base.yaml").write_text(GOOD, encoding="utf-8")
    path = tmp_path / "other.yaml"
    path.write_text("format: 1\nlike: base\nanswers: {speed_rpm: unanswered, cage: polyamide}\n", encoding="utf-8")
    problems = Problems()
    saved = read_case(path, knowledge, problems)
    assert not len(problems)
    assert saved is not None
    assert "speed_rpm" not in saved.case.answers
    assert saved.case.answers["cage"].value == "polyamide"
    assert saved.case.answers["bearing_type"].value == "deep_groove_ball"
    assert saved.taken_away == {"speed_rpm"}


def test_answers_stand_in_the_order_of_asking(read: Read, knowledge: Knowledge) -> None:
    head, *rest = GOOD.split("answers:\n")
    saved, _ = read(head + "answers:\n" + "".join(reversed(rest[0].splitlines(keepends=True))))
    assert saved is not None
    asked = [name for name in knowledge.facts if name in saved.case.answers]
    assert list(saved.case.answers) == asked


# One value in two units. The factors are exact by definition: 1 in = 25.4 mm, 1 Hz = 60 1/min, °F = °C x 9/5 + 32.
UNITS = [
    ("running_temperature_c", lambda value: f"{value * 9 / 5 + 32:.6f} °F", 0, 200),
    ("running_temperature_c", lambda value: f"{value + 273.15:.2f} K", 0, 200),
    ("bore_mm", lambda value: f"{value / 25.4:.9f} in", 10, 500),
    ("bore_mm", lambda value: f"{value / 10:.4f} cm", 10, 500),
    ("speed_rpm", lambda value: f"{value / 60:.9f} Hz", 1, 20_000),
    ("speed_rpm", lambda value: f"{value / 60:.9f} 1/s", 1, 20_000),
]


@pytest.mark.parametrize(("name", "written", "low", "high"), UNITS, ids=lambda part: str(part)[:25])
@settings(deadline=None)
@given(share=st.floats(0, 1))
def test_any_unit_gives_the_same_case(
    name: str, written: Callable[[float], str], low: float, high: float, share: float, knowledge: Knowledge
) -> None:
    fact = knowledge.facts[name]
    value = round(low + share * (high - low), 1)
    plain = answer(fact, f"{value:.1f} {fact.domain.unit}", strict=False)
    other = answer(fact, written(value), strict=False)
    assert isinstance(plain.value, float)
    assert other.value == pytest.approx(plain.value, rel=1e-7, abs=1e-6)
    assert plain.value == value


@settings(deadline=None)
@given(data=st.data())
def test_an_answer_shown_and_typed_back_is_the_same(data: st.DataObject, knowledge: Knowledge) -> None:
    """What the sheet prints of a choice or a tick list can be typed back; a number to the digits shown."""
    asked = [
        each for each in knowledge.facts.values() if each.question and each.domain.kind in {"choice", "scale", "yes_no"}
    ]
    fact = data.draw(st.sampled_from(asked))
    choice = data.draw(st.sampled_from(sorted(fact.domain.choices)))
    assert answer(fact, choice).value == choice
    assert answer(fact, fact.domain.label(choice)).value == choice


@pytest.mark.parametrize("typed", ["?", "dont_know", "don't know"])
def test_dont_know_is_an_answer_to_any_question(typed: str, knowledge: Knowledge) -> None:
    for fact in knowledge.facts.values():
        if fact.question:
            assert answer(fact, typed).value is None


def test_a_typed_dot_of_thousands_is_asked_back(knowledge: Knowledge) -> None:
    """A person may mean 1450 by 1.450; a file writes the dot for decimals only."""
    fact = knowledge.facts["speed_rpm"]
    with pytest.raises(Unsuitable, match="two ways"):
        answer(fact, "1.450")
    assert answer(fact, "1.450", strict=False).value == 1.45
