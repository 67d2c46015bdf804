"""The command: 0 where all is as expected, 1 where an advice differs, 2 where a file is at fault."""

import json
from pathlib import Path
from typing import Any

import pytest

from advisor.commands import replay
from advisor.mishaps import DONE, NOT_SETTLED, USAGE, Refusal

HERE = Path(__file__).resolve().parent
ORDINARY = HERE / "failing" / "ordinary.yaml"
DIFFERING = HERE / "failing" / "state.yaml"
FAULTY = HERE / "faulty" / "unknown_fact.yaml"


def run(*files: Path, **options: Any) -> int:
    given = {"as_json": False, "junit": None, "coverage": False, "knowledge": None, "shelf": None} | options
    return replay(files, **given)


def test_all_as_expected(capsys: pytest.CaptureFixture[str]) -> None:
    assert run(ORDINARY) == DONE
    assert capsys.readouterr().out == "1 scenario replayed, all as expected.\n"


def test_a_difference(capsys: pytest.CaptureFixture[str]) -> None:
    assert run(ORDINARY, DIFFERING) == NOT_SETTLED
    assert "expected referred" in capsys.readouterr().out


def test_a_fault_weighs_more_than_a_difference(capsys: pytest.CaptureFixture[str]) -> None:
    assert run(DIFFERING, FAULTY) == USAGE
    told = capsys.readouterr()
    assert told.err.startswith(f"{FAULTY}:8:18: ")
    assert "1 file could not be replayed." in told.out


def test_json_stands_alone_on_stdout(capsys: pytest.CaptureFixture[str]) -> None:
    assert run(DIFFERING, FAULTY, as_json=True, coverage=True) == USAGE
    data = json.loads(capsys.readouterr().out)
    assert data["differing"] == 1
    assert "oxidiser_is_referred" in data["never_fired"]["rules"]


def test_coverage_is_told_by_name(capsys: pytest.CaptureFixture[str]) -> None:
    assert run(ORDINARY, coverage=True) == DONE
    told = capsys.readouterr().out
    assert "rules are fired by no scenario:\n" in told
    assert "\n  oxidiser_is_referred\n" in told


def test_junit_is_written_to_a_file(tmp_path: Path) -> None:
    file = tmp_path / "outcome.xml"
    assert run(DIFFERING, junit=file) == NOT_SETTLED
    assert 'failures="1"' in file.read_text(encoding="utf-8")


def test_a_folder_without_scenarios_is_refused(tmp_path: Path) -> None:
    with pytest.raises(Refusal, match="no scenario"):
        run(tmp_path)


def test_a_kind_of_point_that_is_not_known_is_told_in_the_file(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    file = tmp_path / "gear.yaml"
    file.write_text(ORDINARY.read_text(encoding="utf-8").replace("rolling_bearing", "gear_set"), encoding="utf-8")
    assert run(file) == USAGE
    assert f"{file}:3:13: 'gear_set' is no kind of point here" in capsys.readouterr().err
