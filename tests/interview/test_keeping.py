"""Nothing answered is lost: saved after every answer, locked, readable as a case, and never deleted."""

import os
import socket
import subprocess
import sys
from pathlib import Path

import pytest

from advisor.advice import Advisor
from advisor.answers import Unsuitable, read_case
from advisor.case import Case
from advisor.documents import Problems, Unwritable, read_document
from advisor.interview import Damaged, Keeper, Session, kept_interviews, new_interview, open_interview
from advisor.places import scenario_folder

HOSTILE = "Fan [b]3[/b] 'drive' \"end\" # : [$accent] \u202e ü"


def values(case: Case) -> dict[str, object]:
    return {name: (each.value, each.span) for name, each in case.answers.items()}


def test_after_every_answer_the_file_reads_as_a_saved_case(advisor: Advisor) -> None:
    session = new_interview(advisor, HOSTILE)
    assert session.keeper is not None
    typed = {
        "bearing_type": "cylindrical_roller",
        "axially_loaded": "?",
        "cage": "machined_brass",
        "dangers": "people_rail_aircraft, explosive",
        "site": "",
        "supply": "nipple_through",
        "incumbent": "?",
        "bore_mm": "65",
        "outside_mm": "140.5 mm",
        "speed_rpm": "2,5 1/s",
        "running_temperature_c": "70..80 °C",
    }
    for name, text in typed.items():
        session.revise(name)
        session.answer(text)
        problems = Problems()
        saved = read_case(session.keeper.path, advisor.knowledge, problems)
        assert not list(problems)
        assert saved is not None
        assert values(saved.case) == values(session.case)
    session.close()


@pytest.mark.parametrize("typed", ["1 450 rpm", "1.450,5 rpm", "1450", "24 1/s", "1 450 1/min"])
def test_numbers_are_kept_as_typed_and_read_back_to_the_same_value(advisor: Advisor, typed: str) -> None:
    session = new_interview(advisor, "Fan")
    session.revise("speed_rpm")
    session.answer(typed)
    assert session.keeper is not None
    session.close()
    again = open_interview(advisor, session.keeper.path)
    assert again.case.answers["speed_rpm"] == session.case.answers["speed_rpm"]
    assert again.case.answers["speed_rpm"].typed == typed
    again.close()


def test_a_resumed_interview_goes_on_where_it_was_and_can_still_undo(advisor: Advisor) -> None:
    session = new_interview(advisor, "Fan 3, drive end")
    for name, text in (("site", "converter_fed"), ("dangers", "")):
        session.revise(name)
        session.answer(text)
    session.close()
    assert session.keeper is not None
    again = open_interview(advisor, session.keeper.path)
    assert again.answered == session.answered
    assert again.history == session.history
    assert again.undo()
    assert again.question is not None
    assert again.question.name == "dangers"
    assert len(again.history) == 3
    again.close()


def test_the_file_is_named_after_the_point_and_listed(advisor: Advisor, kept: Path) -> None:
    session = new_interview(advisor, "Fan 3, drive end")
    session.dont_know()
    listed = kept_interviews()
    assert [(each.title, each.answered) for each in listed] == [("Fan 3, drive end", 1)]
    assert listed[0].path.parent == kept
    assert listed[0].path.name.startswith("fan-3-drive-end-")
    session.close()
    assert not list(kept.glob("*.lock"))


def test_a_second_opener_looks_only(advisor: Advisor) -> None:
    session = new_interview(advisor, "Fan")
    assert session.keeper is not None
    text = session.keeper.path.read_text(encoding="utf-8")
    code = (
        "import sys; from pathlib import Path; from advisor.advice import Advisor; from advisor.knowledge import load; "
        "from advisor.interview import open_interview; from advisor.places import knowledge_folder\n"
        "s = open_interview(Advisor(load(knowledge_folder())), Path(sys.argv[1])); s.dont_know(); s.close()\n"
        "print(s.notices[0])"
    )
    done = subprocess.run(
        [sys.executable, "-c", code, str(session.keeper.path)], capture_output=True, text=True, check=True
    )
    assert f"open elsewhere (process {os.getpid()})" in done.stdout
    assert session.keeper.path.read_text(encoding="utf-8") == text
    assert session.keeper.lock.exists()
    session.close()


def test_the_lock_of_a_dead_process_is_taken_over(tmp_path: Path) -> None:
    gone = subprocess.run(
        [sys.executable, "-c", "import os; print(os.getpid())"], capture_output=True, text=True, check=True
    )
    keeper = Keeper(tmp_path / "fan.yaml")
    keeper.take()
    host = keeper.lock.read_text(encoding="utf-8").split()[1]
    keeper.lock.write_text(f"{gone.stdout.strip()} {host}", encoding="utf-8")
    other = Keeper(keeper.path)
    assert other.take()
    assert other.lock.read_text(encoding="utf-8").startswith(f"{os.getpid()} ")
    other.release()
    assert not other.lock.exists()


def test_a_lock_of_another_machine_is_respected(tmp_path: Path) -> None:
    keeper = Keeper(tmp_path / "fan.yaml")
    keeper.lock.write_text("1 some-other-host", encoding="utf-8")
    assert not keeper.take()
    keeper.release()
    assert keeper.lock.exists()


@pytest.mark.parametrize("content", ["", "answers: [", "\0\0", "- a list", "title: no format"])
def test_an_unreadable_kept_file_is_moved_aside_with_a_sentence(advisor: Advisor, kept: Path, content: str) -> None:
    kept.mkdir(parents=True)
    path = kept / "fan-1.yaml"
    for _ in range(2):
        path.write_text(content, encoding="utf-8")
        with pytest.raises(Damaged, match="nothing was deleted"):
            open_interview(advisor, path)
    assert not path.exists()
    assert [each.read_text(encoding="utf-8") for each in kept.glob("fan-1.yaml.broken-*")] == [content, content]


def test_an_unreadable_file_elsewhere_stays_where_it_is(advisor: Advisor, tmp_path: Path) -> None:
    path = tmp_path / "mine.yaml"
    path.write_text("answers: [", encoding="utf-8")
    with pytest.raises(Damaged, match="Nothing was changed"):
        open_interview(advisor, path)
    assert path.exists()


def test_answers_that_the_knowledge_no_longer_takes_are_left_out_and_told(advisor: Advisor, kept: Path) -> None:
    kept.mkdir(parents=True)
    path = kept / "fan.yaml"
    path.write_text(
        "format: 1\ntitle: Fan\npoint_kind: rolling_bearing\n"
        "answers: {bearing_type: wooden, colour: brown, bore_mm: '65'}\n",
        encoding="utf-8",
    )
    session = open_interview(advisor, path)
    assert list(session.case.answers) == ["bore_mm"]
    told = " ".join(session.notices)
    assert "bearing_type was left out" in told
    assert "colour was left out" in told
    session.close()


def test_a_changed_knowledge_is_told_with_the_rows_that_read_differently(advisor: Advisor) -> None:
    session = new_interview(advisor, "Fan")
    session.dont_know()
    assert session.keeper is not None
    session.close()
    path = session.keeper.path
    text = path.read_text(encoding="utf-8").replace(advisor.knowledge.fingerprint, "0000")
    first = session.advice.docket[0]
    lines = [f"    {first.row}: oil" if line.startswith(f"    {first.row}:") else line for line in text.splitlines()]
    path.write_text("\n".join(lines) + "\n", encoding="utf-8")
    again = open_interview(advisor, path)
    assert again.notices == (
        f"The knowledge has changed since; these rows of the docket read differently: {first.title}.",
    )
    again.close()


def test_where_saving_fails_the_interview_says_so_and_goes_on(advisor: Advisor, tmp_path: Path) -> None:
    blocked = tmp_path / "a_file"
    blocked.write_text("in the way", encoding="utf-8")
    session = new_interview(advisor, "Fan", blocked / "fan.yaml")
    assert session.trouble.startswith("Not saved.")
    session.dont_know()
    assert len(session.answered) == 1
    blocked.unlink()
    session.dont_know()
    assert not session.trouble
    assert session.keeper is not None
    assert session.keeper.path.exists()


def test_a_scenario_is_never_written_over_by_an_interview_that_starts_from_it(advisor: Advisor, kept: Path) -> None:
    path = scenario_folder() / "rolling_bearing" / "hot_wet_roller_table.yaml"
    text = path.read_text(encoding="utf-8")
    session = open_interview(advisor, path)
    session.revise("bore_mm")
    session.answer("120")
    assert path.read_text(encoding="utf-8") == text
    assert session.keeper is not None
    assert session.keeper.path.parent == kept
    session.close()


def test_a_case_saved_as_a_scenario_reads_as_one_and_replaces_nothing(advisor: Advisor, tmp_path: Path) -> None:
    session = new_interview(advisor, "Fan")
    session.revise("dangers")
    session.answer("oxidiser")
    path = tmp_path / "fan.yaml"
    session.save_scenario(path, HOSTILE, "Oxygen beside a fan.")
    tree = read_document(path, Problems())
    assert "draft" in str(tree.get("status"))  # type: ignore[union-attr]  # a mapping, or the test fails
    problems = Problems()
    saved = read_case(path, advisor.knowledge, problems)
    assert saved is not None
    assert saved.case.title == HOSTILE
    assert values(saved.case) == values(session.case)
    with pytest.raises(Unwritable, match="exists already"):
        session.save_scenario(path, "Fan", "again")
    session.close()


def test_a_file_that_leaves_too_much_open_is_opened_without_its_last_range(advisor: Advisor, tmp_path: Path) -> None:
    path = tmp_path / "open.yaml"
    path.write_text(
        "format: 1\ntitle: made by hand\npoint_kind: rolling_bearing\n"
        "answers: {running_temperature_c: 70..90 °C, load_ratio: 0.1..0.2}\n",
        encoding="utf-8",
    )
    session = open_interview(advisor, path)
    assert list(session.case.answers) == ["running_temperature_c"]
    assert any("load_ratio was left out. Too much is left open at once" in each for each in session.notices)
    session.close()


def test_what_another_answers_just_before_the_lock_is_taken_is_not_written_over(
    advisor: Advisor, monkeypatch: pytest.MonkeyPatch
) -> None:
    session = new_interview(advisor, "Fan")
    session.close()
    assert session.keeper is not None
    path, take = session.keeper.path, Keeper.take

    def take_after_another(keeper: Keeper) -> bool:
        monkeypatch.setattr(Keeper, "take", take)
        other = open_interview(advisor, path)
        other.revise("bore_mm")
        other.answer("65")
        other.close()
        return keeper.take()

    monkeypatch.setattr(Keeper, "take", take_after_another)
    late = open_interview(advisor, path)
    late.revise("outside_mm")
    late.answer("140")
    late.close()
    again = open_interview(advisor, path)
    assert {name: each.typed for name, each in again.case.answers.items()} == {"bore_mm": "65", "outside_mm": "140"}
    again.close()


def test_an_interview_begun_in_a_file_that_another_has_just_begun_goes_on_with_its_answers(
    advisor: Advisor, tmp_path: Path
) -> None:
    path = tmp_path / "fan.yaml"
    other = new_interview(advisor, "Fan", path)
    other.revise("bore_mm")
    other.answer("65")
    other.close()
    session = new_interview(advisor, "Fan", path)
    assert list(session.case.answers) == ["bore_mm"]
    session.close()


def test_a_damaged_file_and_a_scenario_are_left_without_a_lock(advisor: Advisor, tmp_path: Path) -> None:
    path = tmp_path / "mine.yaml"
    path.write_text("answers: [", encoding="utf-8")
    with pytest.raises(Damaged):
        open_interview(advisor, path)
    path.write_text("format: 1\ntitle: a\npoint_kind: rolling_bearing\nexpect: {state: open}\n", encoding="utf-8")
    session = open_interview(advisor, path)
    assert [each.name for each in tmp_path.glob("mine*")] == ["mine.yaml"]
    session.close()


def test_a_damaged_file_that_another_process_holds_is_not_moved_from_under_it(advisor: Advisor, kept: Path) -> None:
    kept.mkdir(parents=True)
    path = kept / "fan-1.yaml"
    path.write_text("answers: [", encoding="utf-8")
    Keeper(path).lock.write_text("1 some-other-host", encoding="utf-8")
    with pytest.raises(Damaged, match="Nothing was changed"):
        open_interview(advisor, path)
    assert path.exists()
    assert Keeper(path).lock.exists()


@pytest.mark.parametrize("number", ["²", "9" * 5000, "99999999999", ""])
def test_a_lock_that_names_no_process_is_respected(tmp_path: Path, number: str) -> None:
    keeper = Keeper(tmp_path / "fan.yaml")
    keeper.lock.write_text(f"{number} {socket.gethostname()}", encoding="utf-8")
    assert not keeper.take()
    assert keeper.lock.exists()


def test_on_windows_no_process_is_sent_a_signal_and_its_lock_is_respected(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    sent: list[int] = []
    monkeypatch.setattr(os, "kill", lambda pid, _: sent.append(pid))
    monkeypatch.setattr(sys, "platform", "win32")
    keeper = Keeper(tmp_path / "fan.yaml")
    keeper.lock.write_text(f"{os.getppid()} {socket.gethostname()}", encoding="utf-8")
    assert not keeper.take()
    assert not sent


def test_half_a_character_in_an_answer_is_refused_and_what_was_answered_stays_kept(advisor: Advisor) -> None:
    session = new_interview(advisor, "Fan \udcff")
    session.revise("bore_mm")
    session.answer("65")
    told = r"^'6208 \?' holds half a character\. Type the answer again without it\.$"
    for name in ("designation", "bearing_type", "speed_rpm", "dangers"):
        session.revise(name)
        with pytest.raises(Unsuitable, match=told):
            session.answer("6208 \udcff")
    session.close()
    assert session.keeper is not None
    again = open_interview(advisor, session.keeper.path)
    assert list(again.case.answers) == ["bore_mm"]
    assert again.case.title == session.case.title == "Fan ?"
    again.close()


def test_a_scenario_with_half_a_character_in_its_words_is_written(advisor: Advisor, tmp_path: Path) -> None:
    Session(advisor).save_scenario(tmp_path / "fan.yaml", "Fan \ud83d", "why \ud83d")
    saved = read_case(tmp_path / "fan.yaml", advisor.knowledge, Problems())
    assert saved is not None
    assert saved.case.title == "Fan ?"


def test_a_scenario_replaces_no_file_however_late_that_came(
    advisor: Advisor, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    path = tmp_path / "fan.yaml"
    path.write_text("theirs", encoding="utf-8")
    session = Session(advisor)
    monkeypatch.setattr(Path, "exists", lambda _: False)  # as if it had been made just after the look
    with pytest.raises(Unwritable, match="exists already"):
        session.save_scenario(path, "Fan", "ours")
    assert path.read_text(encoding="utf-8") == "theirs"
