"""The interview line by line: the same session, without a terminal."""

import io
import re
from pathlib import Path

import pytest

from advisor.advice import Advisor
from advisor.interview import kept_interviews, new_interview
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


def finished(knowledge: Knowledge) -> Path:
    """A kept interview with nothing left to ask: what may flow with oxygen goes to a person."""
    session = new_interview(Advisor(knowledge), "Pump 7")
    session.revise("dangers")
    session.answer("oxidiser")
    session.close()
    assert session.finished
    assert session.keeper is not None
    return session.keeper.path


@pytest.mark.parametrize("typed", ["²", "٣", "9" * 5000])
def test_a_sign_that_is_no_number_of_the_list_is_asked_again(knowledge: Knowledge, typed: str) -> None:
    said = talk(knowledge, "Pump 7", "other", typed, "quit")
    assert f"! '{typed}' is not one of the choices of bearing type." in said


def test_a_byte_that_is_no_text_is_asked_again(knowledge: Knowledge) -> None:
    lines = b"Pump 7\n6208 \xff\n6208\nquit\n"
    source = io.TextIOWrapper(io.BytesIO(lines), encoding="utf-8", errors="surrogateescape")
    said = io.StringIO()
    assert plain.run(lambda: knowledge, None, source, said) == 0
    assert "! '6208 ?' holds half a character. Type the answer again without it." in said.getvalue()
    assert kept_interviews()[0].answered == 1


def test_a_long_list_names_its_entries_that_are_no_products(knowledge: Knowledge) -> None:
    path = new_kept(knowledge, "incumbent")
    said = talk(knowledge, "quit", file=path)
    line = next(line for line in said.splitlines() if "Type a part of the name" in line)
    for label in ("something without a label", "known, but not on this shelf", "nothing yet (new and cleaned)"):
        assert label in line


def test_an_entry_is_found_by_a_part_of_its_own_name_too(knowledge: Knowledge) -> None:
    said = talk(knowledge, "unlab", "quit", file=new_kept(knowledge, "incumbent"))
    assert f"{knowledge.title('incumbent')}: something without a label" in said


def test_every_question_says_what_a_question_mark_does(knowledge: Knowledge) -> None:
    told = talk(knowledge, "Pump 7", *["?"] * 60)
    said = re.split(r"\nQuestion \d+: ", told)[1:]
    assert said
    for each in said:
        assert "\n  ?  don't know: t" in each
    assert any("\n  ?  don't know: this stays open\n" in each for each in said)


def test_a_finished_interview_offers_to_save_report_change_or_leave(knowledge: Knowledge, tmp_path: Path) -> None:
    path = finished(knowledge)
    said = talk(knowledge, "1", "", "", "because", "2", "pump.md", "3", "", "3", "", "5", file=path)
    assert "a gas or oxygen specialist" in said
    for written in ("pump_7.yaml", "pump.md", "pump_7.html"):
        assert f"Written: {written}" in said
        assert (tmp_path / written).stat().st_size > 0
    assert "! 'pump_7.html' was not written: it exists already. Choose another name." in said
    assert said.rstrip().endswith(f"Go on with: gudgeon interview --plain '{path}'")


def test_an_answer_is_changed_at_the_end_and_the_questions_go_on(knowledge: Knowledge) -> None:
    ask = knowledge.facts["dangers"].question
    assert ask is not None
    said = talk(knowledge, "4", "1", "", "4", "1", "none", "quit", file=finished(knowledge))
    assert said.count(ask.ask) == 2
    assert "What next?" in said.split(ask.ask)[1], "an empty line leaves the answer and returns to the end"
    assert "Question 2: " in said.split(ask.ask)[2]


def test_undo_at_the_end_opens_the_last_question_again(knowledge: Knowledge) -> None:
    path = finished(knowledge)
    assert "Question 1: " in talk(knowledge, "undo", "quit", file=path)
    assert kept_interviews()[0].answered == 0


def test_at_the_end_of_the_input_a_finished_interview_just_ends(knowledge: Knowledge) -> None:
    path = finished(knowledge)
    said = io.StringIO()
    assert plain.run(lambda: knowledge, path, io.StringIO(""), said) == 0
    assert "Kept in " in said.getvalue().splitlines()[-2]


@pytest.mark.parametrize("typed", ["0", "99", "²", "?", "x"])
def test_what_is_no_next_step_is_told_and_asked_again(knowledge: Knowledge, typed: str) -> None:
    said = talk(knowledge, typed, "quit", file=finished(knowledge))
    assert "! Type a number from 1 to 5; an empty line leaves." in said


def test_the_reason_of_a_referral_is_told_when_it_arises(knowledge: Knowledge) -> None:
    """A bore of 110 mm does not fit into an outside diameter of 50 mm."""
    said = talk(knowledge, "50", "quit", file=new_kept(knowledge, "outside_mm", bore_mm="110"))
    assert f"{knowledge.referrals['look_again'].text}" in said


def new_kept(knowledge: Knowledge, until: str, **answers: str) -> Path:
    """A kept interview with the question in place."""
    session = new_interview(Advisor(knowledge), "Pump 7")
    for name, typed in answers.items():
        session.revise(name)
        session.answer(typed)
    session.go_on()
    while session.question is not None and session.question.name != until:
        session.answer({**VALUES, "designation": "other", **answers}[session.question.name])
    session.close()
    assert session.keeper is not None
    return session.keeper.path
