"""The sheet at both sizes: an interview by keys, every key twice, and texts that look like markup."""

from pathlib import Path

import pytest
from textual.pilot import Pilot
from textual.widgets import OptionList

from advisor.advice import Advisor
from advisor.documents import Unwritable
from advisor.interview import Session, new_interview
from advisor.knowledge import Knowledge
from advisor.screens import reports
from advisor.screens.app import Gudgeon
from advisor.screens.ending import Ending
from advisor.screens.glyphs import ASCII, ONE_FOR_ONE, Glyphs
from advisor.screens.notice import Notice
from advisor.screens.row import Row
from advisor.screens.sheet import Sheet
from advisor.screens.start import Start
from advisor.screens.themes import NIGHT, PAPER

from .driving import KEYS, NARROW, WIDE, ask, begin, drive, fill, lines, text, type_in, until

both_sizes = pytest.mark.parametrize("size", [NARROW, WIDE])


@both_sizes
def test_an_ordinary_motor_bearing_by_keys_alone(knowledge: Knowledge, size: tuple[int, int]) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        while session.question is not None:
            await type_in(pilot, KEYS[session.question.name])
        assert len(session.answered) <= 20
        assert session.finished
        assert session.advice.state.value == "settled"
        assert session.advice.shelf[0].item == "GR-301"
        outcome = app.screen.query_one("#outcome", Row).shown
        assert outcome is not None
        assert "First on the shelf: GR-301, fits." in outcome.plain
        assert "save the case as a scenario" in text(app)

    drive(knowledge, size, script)


@both_sizes
def test_every_key_pressed_twice_at_every_stage_loses_no_answer(knowledge: Knowledge, size: tuple[int, int]) -> None:
    keys = (
        "f2",
        "f3",
        "f4",
        "f5",
        "f8",
        "pageup",
        "pagedown",
        "tab",
        "shift+tab",
        "up",
        "down",
        "home",
        "end",
        "space",
        "left",
        "right",
    )

    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        for stage in ("dangers", "bore_mm", ""):
            await fill(app, pilot, until=stage)
            before = dict(session.case.answers)
            for key in keys:
                await pilot.press(key, key)
                await pilot.pause()
                assert dict(session.case.answers) == before, key
            await pilot.press("ctrl+p")
            await pilot.pause()
            await pilot.press("escape")
            await pilot.pause()
            assert isinstance(app.screen, Sheet)

    drive(knowledge, size, script)


@both_sizes
def test_escape_takes_the_last_answer_back(knowledge: Knowledge, size: tuple[int, int]) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        first = session.question
        await fill(app, pilot, until="site")
        for _ in session.answered:
            await pilot.press("escape")
        await pilot.press("escape")
        await pilot.pause()
        assert not session.answered
        assert session.question is first

    drive(knowledge, size, script)


def test_escape_in_a_view_returns_to_the_interview_first(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await fill(app, pilot, until="dangers")
        answered = session.answered
        await pilot.press("f3", "escape")
        await pilot.pause()
        assert session.answered == answered
        assert "Does any of these apply at the point?" in text(app)

    drive(knowledge, NARROW, script)


@both_sizes
def test_brackets_in_titles_and_answers_are_shown_as_they_are(knowledge: Knowledge, size: tuple[int, int]) -> None:
    hostile = "Fan [/b] [$accent] [@click]"

    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        session.case = type(session.case)(session.case.point_kind, hostile, session.case.answers)
        sheet = app.screen
        assert isinstance(sheet, Sheet)
        for key in ("f2", "f3", "f4", "f5", "f5"):
            await pilot.press(key)
            await pilot.pause()
            assert hostile in text(app)
        await ask(app, pilot, "bore_mm")
        await type_in(pilot, "[/b]")
        await ask(app, pilot, "incumbent")
        await type_in(pilot, "[$x]")
        assert "[$x]" in text(app)
        assert hostile in lines(app)[0]

    drive(knowledge, size, script)


def test_a_number_echoes_what_it_reads_as_in_the_unit_asked_for(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await ask(app, pilot, "running_temperature_c")
        await pilot.press("1", "8", "0", "down")
        await pilot.pause()
        assert "reads as 82.22 °C" in text(app)
        await pilot.press("x", "enter")
        await pilot.pause()
        assert "! The unit 'x' is not known here" in text(app)
        assert "running_temperature_c" not in session.case.answers
        await pilot.press("backspace", "enter")
        await pilot.pause()
        assert session.case.answers["running_temperature_c"].typed == "180 °F"

    drive(knowledge, NARROW, script)


def test_a_question_mark_says_that_nobody_knows_but_is_a_letter_in_a_name(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot, "Fan?")
        assert session.case.title == "Fan?"
        await ask(app, pilot, "bearing_type")
        await pilot.press("question_mark")
        await pilot.pause()
        assert not session.case.answers["bearing_type"].known
        for name in ("bore_mm", "incumbent"):
            await ask(app, pilot, name)
            await pilot.press("question_mark")
            await pilot.pause()
            assert not session.case.answers[name].known

    drive(knowledge, NARROW, script)


def test_digits_space_and_enter_in_a_tick_list(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await ask(app, pilot, "site")
        await pilot.press("1", "3")
        await pilot.press("down", "up", "up", "space", "enter")
        await pilot.pause()
        choices = list(knowledge.facts["site"].domain.choices)
        assert session.case.answers["site"].value == (choices[11], choices[12])

    drive(knowledge, NARROW, script)


def test_a_long_list_is_narrowed_by_typing(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await ask(app, pilot, "incumbent")
        assert "something without a label" in text(app)
        await type_in(pilot, "no such product")
        assert not session.answered
        assert "'no such product' is not one of the choices" in " ".join(text(app).split())
        await pilot.press(*["backspace"] * len("no such product"))
        await type_in(pilot, "gr-301")
        assert session.case.answers["incumbent"].value == "GR-301"

    drive(knowledge, NARROW, script)


@both_sizes
def test_a_withheld_referral_names_the_person_and_no_product_or_grade(
    knowledge: Knowledge, size: tuple[int, int]
) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await ask(app, pilot, "dangers")
        await type_in(pilot, "1")
        assert session.advice.withheld
        seen = text(app)
        for key in ("f2", "f2", "f3", "f3", "f4", "f4"):
            await pilot.press(key)
            await pilot.pause()
            seen += text(app)
        assert "a gas or oxygen specialist" in seen
        assert "ISO VG 1" not in seen
        for product in knowledge.shelf:
            assert product.item not in seen

    drive(knowledge, size, script)


@both_sizes
def test_docket_rows_never_move(knowledge: Knowledge, size: tuple[int, int]) -> None:
    titles = [row.title for row in knowledge.docket if row.section == "docket"]

    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        await begin(app, pilot)
        places = []
        for stage in ("bearing_type", "site", "bore_mm", ""):
            await fill(app, pilot, until=stage)
            await pilot.press("f2")
            await pilot.pause()
            shown = lines(app)
            places.append([next(place for place, line in enumerate(shown) if f" {title} " in line) for title in titles])
            await pilot.press("f2")
            await pilot.pause()
        assert all(each == places[0] for each in places)

    drive(knowledge, size, script)


def test_the_map_jumps_to_any_answered_question(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await fill(app, pilot, until="bore_mm")
        await pilot.press("f5", "home", "enter")
        await pilot.pause()
        assert session.question is not None
        assert session.question.name == session.answered[0]
        await ask(app, pilot, "bearing_type")
        await type_in(pilot, "8")
        assert session.case.answers["bearing_type"].value == list(knowledge.facts["bearing_type"].domain.choices)[7]

    drive(knowledge, NARROW, script)


def test_a_kept_interview_is_offered_and_resumed(knowledge: Knowledge) -> None:
    answered: list[str] = []

    async def first(app: Gudgeon, pilot: Pilot[None]) -> None:
        await begin(app, pilot, "Pump 7")
        await fill(app, pilot, until="supply")
        assert app.session is not None
        answered.extend(app.session.answered)

    async def second(app: Gudgeon, pilot: Pilot[None]) -> None:
        await until(pilot, lambda: app.screen.query_one("#kept", OptionList).option_count == 1)
        assert "Pump 7" in text(app)
        assert f"{len(answered)} answered" in text(app)
        await pilot.press("down", "enter")
        await until(pilot, lambda: isinstance(app.screen, Sheet))
        assert app.session is not None
        assert list(app.session.answered) == answered

    drive(knowledge, NARROW, first)
    drive(knowledge, NARROW, second)


def test_saving_as_a_scenario_from_the_keys(knowledge: Knowledge, tmp_path: Path) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        await begin(app, pilot)
        await pilot.press("ctrl+s")
        await pilot.pause()
        await pilot.press("enter", "enter")
        await type_in(pilot, "because")
        assert "Written: fan_3_drive_end.yaml" in text(app)
        await pilot.press("ctrl+s")
        await pilot.pause()
        await pilot.press("enter", "enter", "enter")
        await pilot.pause()
        assert "exists already" in text(app)

    drive(knowledge, NARROW, script)
    assert (tmp_path / "fan_3_drive_end.yaml").exists()


def test_reports_are_written_from_the_end(knowledge: Knowledge, tmp_path: Path) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        await begin(app, pilot)
        await fill(app, pilot)
        for digit in "23":
            await type_in(pilot, digit)
            await pilot.press("enter")
            await pilot.pause()

    drive(knowledge, WIDE, script)
    assert (tmp_path / "fan_3_drive_end.md").read_text(encoding="utf-8").strip()
    assert "<html" in (tmp_path / "fan_3_drive_end.html").read_text(encoding="utf-8")


def test_one_enter_too_many_does_not_say_that_no_danger_applies(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await fill(app, pilot, until="dangers")
        await pilot.press("enter")
        await pilot.pause()
        assert "dangers" not in session.case.answers
        await pilot.press("enter")
        await pilot.pause()
        assert session.case.answers["dangers"].value == ()

    drive(knowledge, NARROW, script)


def test_one_may_stop_before_the_questions_about_quantity(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await fill(app, pilot, until="seal", designation="other")
        assert "F8 Stop" not in text(app)
        await type_in(pilot, "0")
        assert session.only_quantities_left
        assert "F8 Stop" in lines(app)[-1]
        await pilot.press("f8")
        await pilot.pause()
        assert "go on with the questions left" in text(app)
        await pilot.press("5", "enter")
        await pilot.pause()
        assert "How wide is the bearing" in text(app)

    drive(knowledge, WIDE, script)


@pytest.mark.parametrize("size", [(59, 24), (80, 17)])
def test_a_window_too_small_asks_for_a_larger_one_and_keeps_what_is_typed(
    knowledge: Knowledge, size: tuple[int, int]
) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await ask(app, pilot, "bore_mm")
        await pilot.press("6", "5")
        await pilot.resize_terminal(*size)
        await pilot.pause()
        assert "make the window larger" in text(app)
        assert "bore" not in text(app)
        await pilot.resize_terminal(*NARROW)
        await pilot.pause()
        await pilot.press("enter")
        await pilot.pause()
        assert session.case.answers["bore_mm"].value == 65

    drive(knowledge, NARROW, script)


def test_the_chart_stays_from_34_rows(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        await begin(app, pilot)
        for height, stays in ((33, False), (34, True)):
            await pilot.resize_terminal(120, height)
            await pilot.pause()
            assert ("CHART" in text(app)) is stays

    drive(knowledge, WIDE, script)


@both_sizes
def test_in_ascii_nothing_else_is_shown(knowledge: Knowledge, size: tuple[int, int]) -> None:
    drawn_by_the_screen = {chr(code) for code in ONE_FOR_ONE}

    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        await begin(app, pilot)
        await fill(app, pilot, until="width_mm")
        for key in ("f2", "f4", "f5", "f5"):
            await pilot.press(key)
            await pilot.pause()
            parts = "".join(text(app).split())
            assert all(sign.isascii() or sign in drawn_by_the_screen for sign in parts), key

    drive(knowledge, size, script, glyphs=ASCII)


def test_state_is_told_by_a_sign_and_a_word_in_both_themes(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        await begin(app, pilot)
        await fill(app, pilot, until="width_mm")
        for theme in ("night", "paper"):
            app.theme = theme
            await pilot.pause()
            shown = text(app)
            assert f"{Glyphs().fits} GR-301  fits" in shown
            assert Glyphs().changed in shown

    drive(knowledge, WIDE, script)


def test_no_theme_has_a_hue_of_its_own_for_good_or_bad() -> None:
    for theme in (NIGHT, PAPER):
        neutral = {theme.primary, theme.foreground}
        assert {theme.success, theme.warning, theme.error, theme.secondary, theme.accent} <= neutral


def test_a_fault_of_our_own_ends_in_a_sentence_a_log_and_kept_answers(
    knowledge: Knowledge, kept: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr("tempfile.tempdir", str(tmp_path))

    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await ask(app, pilot, "bore_mm")
        monkeypatch.setattr(session, "helps_settle", lambda: 1 / 0)
        await type_in(pilot, "65")

    with pytest.raises(ZeroDivisionError):
        drive(knowledge, NARROW, script)
    assert [path.suffix for path in tmp_path.glob("gudgeon-*")] == [".log"]
    assert "bore_mm" in next(kept.glob("*.yaml")).read_text(encoding="utf-8")


@both_sizes
def test_the_variants_of_a_range_are_stepped_through_by_one_key(knowledge: Knowledge, size: tuple[int, int]) -> None:
    """DIN 51825: G reaches 100 °C, 20 K above the steady temperature; so the code changes after 80 °C."""

    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await fill(app, pilot, until="running_temperature_c")
        await pilot.press("7", "0", "full_stop", "full_stop", "9", "0")
        await pilot.pause()
        assert "reads as a range, 70 °C to 90 °C" in text(app)
        assert "F7" not in text(app)
        await pilot.press("enter")
        await pilot.pause()
        await fill(app, pilot)
        count = len(session.advice.branches)
        assert 1 < count <= 6
        assert "F7 Variant" in text(app)
        codes = []
        for number in range(1, count + 1):
            await pilot.press("f7")
            await pilot.pause()
            assert f"variant {number} of {count}: " in text(app)
            codes += [line.split("Code")[1].split()[0] for line in lines(app) if " Code  " in line]
        assert (codes[0], codes[-1]) == ("K2G-10,", "K2K-10,")
        await pilot.press("f3")
        await pilot.pause()
        assert f"Variant {count}: running temperature" in text(app)
        await pilot.press("f3", "f7")
        await pilot.pause()
        assert f"what {count} variants share" in text(app)
        await pilot.press("f3")
        await pilot.pause()
        assert "Variant 1: running temperature 70 °C" in text(app)

    drive(knowledge, size, script)


def test_the_variant_key_does_nothing_where_nothing_was_left_open(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await fill(app, pilot)
        before = text(app)
        await pilot.press("f7")
        await pilot.pause()
        assert text(app) == before
        assert session.variant == 0

    drive(knowledge, NARROW, script)


@pytest.mark.parametrize("name", ["bearing_type", "site", "incumbent", "bore_mm"])
def test_a_raised_two_is_no_number_of_a_list(knowledge: Knowledge, name: str) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await ask(app, pilot, name)
        await pilot.press("²", "²")
        await pilot.pause()
        assert isinstance(app.screen, Sheet)
        assert not session.answered

    drive(knowledge, NARROW, script)


def test_a_raised_two_picks_nothing_at_the_end(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        await begin(app, pilot)
        await fill(app, pilot)
        await pilot.press("²")
        await pilot.pause()
        assert app.screen.query_one(Ending).query_one(OptionList).highlighted == 0

    drive(knowledge, NARROW, script)


def test_enter_pressed_twice_on_the_first_screen_begins_one_interview(knowledge: Knowledge, kept: Path) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        app.post_message(Start.Named("Fan"))
        app.post_message(Start.Named("Fan"))
        await until(pilot, lambda: isinstance(app.screen, Sheet))
        await pilot.pause()
        assert app.session is not None
        assert app.session.keeper is not None
        assert list(kept.glob("*.yaml")) == [app.session.keeper.path]
        assert len(list(kept.glob("*.lock"))) == 1

    drive(knowledge, NARROW, script)
    assert not list(kept.glob("*.lock"))


def test_a_session_shown_in_place_of_another_closes_that(knowledge: Knowledge, kept: Path) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        first = await begin(app, pilot)
        assert app.opening.advisor is not None
        app.opening.show(new_interview(app.opening.advisor, "Fan 4"))
        await pilot.pause()
        assert first.keeper is not None
        assert not first.keeper.lock.exists()
        assert app.session is not first

    drive(knowledge, NARROW, script)
    assert not list(kept.glob("*.lock"))


def test_a_part_of_the_own_name_of_an_entry_finds_it(knowledge: Knowledge) -> None:
    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        session = await begin(app, pilot)
        await ask(app, pilot, "incumbent")
        await pilot.press(*"unlab")
        await pilot.pause()
        assert "something without a label" in text(app)
        assert "Enter takes it as typed" not in text(app)
        await pilot.press("enter")
        await pilot.pause()
        assert session.case.answers["incumbent"].value == "unlabelled"

    drive(knowledge, NARROW, script)


@both_sizes
def test_the_reason_of_a_referral_is_shown_when_it_arises_and_stays_on_the_docket(
    knowledge: Knowledge, size: tuple[int, int]
) -> None:
    """A bore of 110 mm does not fit into an outside diameter of 50 mm."""

    async def script(app: Gudgeon, pilot: Pilot[None]) -> None:
        await begin(app, pilot)
        for name, typed in (("bore_mm", "110"), ("outside_mm", "50")):
            await ask(app, pilot, name)
            assert "Referral" not in text(app)
            await type_in(pilot, typed)
        notice = app.screen.query_one(Notice)
        assert notice.display
        assert notice.shown is not None
        assert knowledge.referrals["look_again"].text in notice.shown.plain
        await ask(app, pilot, "speed_rpm")
        await type_in(pilot, "1480")
        assert not notice.display
        await pilot.press("f2")
        await pilot.pause()
        assert any(" Referral " in line and "Two answers do not go together" in line for line in lines(app))

    drive(knowledge, size, script)


def test_a_report_replaces_no_file_however_late_that_came(
    knowledge: Knowledge, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    path = tmp_path / "fan.md"
    path.write_text("theirs", encoding="utf-8")
    advice = Session(Advisor(knowledge)).advice
    monkeypatch.setattr(Path, "exists", lambda _: False)  # as if it had been made just after the look
    with pytest.raises(Unwritable, match="exists already"):
        reports.write(advice, "markdown", path)
    assert path.read_text(encoding="utf-8") == "theirs"
