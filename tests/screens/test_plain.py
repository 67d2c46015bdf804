"""The interview line by line: the same session, without a terminal."""

import io

import pytest

from advisor.interview import kept_interviews
from advisor.knowledge import Knowledge
from advisor.mishaps import Refusal
from advisor.screens import plain

from .driving import VALUES


def talk(knowledge: Knowledge, *typed: str, file: object = None) -> str:
    said = io.StringIO()
    code = plain.run(lambda: knowledge, file, io.StringIO("\n".join(typed) + "\n"), said)  # type: ignore[arg-type]  # a path or none
    assert code == 0
    return said.getvalue()


def test_a_whole_interview_ends_with_the_advice_and_where_it_is_kept(knowledge: Knowledge) -> None:
    lines = ["Pump 7"]
    said = talk(knowledge, *lines, *["?"] * 60)
    assert "Question 1:" in said
    assert "Kept in " in said
    kept = kept_interviews()
    assert [each.title for each in kept] == ["Pump 7"]


def test_numbers_stand_for_choices_and_what_is_read_is_said_back(knowledge: Knowledge) -> None:
    lines, wanted, values = ["Pump 7"], "", {**VALUES, "designation": "other"}
    for name, each in knowledge.facts.items():
        if each.question is not None and name in VALUES:
            lines.append({"bearing_type": "1", "dangers": "6, 7"}.get(name, values[name]))
            if name == "dangers":
                labels = list(each.domain.choices.values())
                wanted = f"{each.title}: {labels[5]}, {labels[6]}"
                break
    said = talk(knowledge, *lines, "quit")
    first = next(iter(knowledge.facts["bearing_type"].domain.choices.values()))
    assert f"bearing type: {first}" in said
    assert wanted in said


def test_an_unsuitable_answer_is_asked_again(knowledge: Knowledge) -> None:
    name = next(name for name, each in knowledge.facts.items() if each.question is not None)
    ask = knowledge.facts[name].question
    assert ask is not None
    said = talk(knowledge, "Pump 7", "no such thing", "quit")
    assert said.count(ask.ask) == 2
    assert "! 'no such thing' is not one of the choices" in said


def test_back_later_and_undo(knowledge: Knowledge) -> None:
    said = talk(knowledge, "Pump 7", "?", "<", "", "undo", "undo", "undo", "quit")
    assert "An empty line leaves it so." in said
    assert "Nothing is left to take back." in said
    assert kept_interviews()[0].answered == 0


def test_an_interview_left_by_the_end_of_the_input_goes_on_later(knowledge: Knowledge) -> None:
    talk(knowledge, "Pump 7", "?", "?")
    kept = kept_interviews()[0]
    assert kept.answered == 2
    said = talk(knowledge, "?", "quit", file=kept.path)
    assert "Question 3:" in said
    assert kept_interviews()[0].answered == 3


def test_what_cannot_be_read_is_refused_with_a_sentence(knowledge: Knowledge, tmp_path: object) -> None:
    path = tmp_path / "mine.yaml"  # type: ignore[operator]  # a path
    path.write_text("answers: [", encoding="utf-8")
    with pytest.raises(Refusal, match="Nothing was changed"):
        talk(knowledge, file=path)


def test_no_line_holds_boxes_colours_or_cursor_motion(knowledge: Knowledge) -> None:
    said = talk(knowledge, "Pump \x1b[31m7", *["?"] * 60)
    assert all(sign == "\n" or sign.isprintable() for sign in said)
    assert not any(0x2500 <= ord(sign) < 0x2580 or 0x2800 <= ord(sign) < 0x2900 for sign in said)
