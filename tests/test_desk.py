"""Which knowledge and which shelf count: the command line, the variables, the settings, what is shipped."""

import gc
from collections.abc import Callable
from pathlib import Path

import pytest
from click.testing import CliRunner, Result

from advisor import desk
from advisor.cli import gudgeon
from advisor.desk import advisors_for, loaded
from advisor.mishaps import DONE, USAGE, Refusal
from advisor.places import knowledge_folder, scenario_folder

CASE = scenario_folder() / "rolling_bearing" / "dry_motor_bearing.yaml"

# Every command that reads knowledge without being told which by its own words.
COMMANDS = {
    "bare": [],
    "interview": ["interview", "--plain"],
    "advise": ["advise", str(CASE)],
    "replay": ["replay", str(CASE)],
    "mutate": ["mutate", str(CASE), "--rule", "drain_open", "--tries", "0"],
    "check": ["check"],
    "facts": ["facts"],
    "rules": ["rules"],
    "rules --show": ["rules", "--show", "drain_open"],
}


@pytest.fixture(autouse=True)
def _own_settings(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    monkeypatch.setenv("XDG_STATE_HOME", str(tmp_path / "state"))
    monkeypatch.delenv("GUDGEON_KNOWLEDGE", raising=False)
    monkeypatch.delenv("GUDGEON_SHELF", raising=False)


def configure(tmp_path: Path, text: str) -> None:
    file = tmp_path / "config" / "gudgeon" / "config.yaml"
    file.parent.mkdir(parents=True)
    file.write_text(text, encoding="utf-8")


def refused(found: Result, words: str) -> bool:
    """Whether the run was refused with these words, and not for something else."""
    said = f"{found.output}\n{found.exception}"
    return (isinstance(found.exception, Refusal) or found.exit_code == USAGE) and words in said


@pytest.mark.parametrize("words", COMMANDS.values(), ids=COMMANDS)
@pytest.mark.parametrize("what", ["knowledge", "shelf"])
@pytest.mark.parametrize("by", ["variable", "settings"])
def test_every_command_keeps_to_what_is_set(
    words: list[str], what: str, by: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    missing = str(tmp_path / "missing.yaml")
    if by == "variable":
        monkeypatch.setenv(f"GUDGEON_{what.upper()}", missing)
    else:
        configure(tmp_path, f"{what}: {missing}\n")
    assert refused(CliRunner().invoke(gudgeon, words), missing)


def test_the_command_line_goes_before_the_variable_and_that_before_the_settings(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    configure(tmp_path, "knowledge: /configured\n")
    words = ["facts", "--knowledge"]
    assert refused(CliRunner().invoke(gudgeon, ["facts"]), "/configured")
    monkeypatch.setenv("GUDGEON_KNOWLEDGE", "/named")
    assert refused(CliRunner().invoke(gudgeon, ["facts"]), "/named")
    assert refused(CliRunner().invoke(gudgeon, [*words, "/told"]), "/told")
    assert CliRunner().invoke(gudgeon, [*words, str(knowledge_folder()), "speed"]).exit_code == DONE


def test_an_empty_variable_names_nothing(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("GUDGEON_KNOWLEDGE", "")
    assert CliRunner().invoke(gudgeon, ["facts", "speed"]).exit_code == DONE


def test_what_is_signed_for_is_the_shipped_knowledge_whatever_is_set(tmp_path: Path) -> None:
    configure(tmp_path, "knowledge: /configured\n")
    few = tmp_path / "few"
    few.mkdir()
    (few / CASE.name).write_bytes(CASE.read_bytes())
    found = CliRunner().invoke(gudgeon, ["approve", "--scenarios", str(few)])
    assert "/configured" not in f"{found.output}{found.exception}"


def test_the_kinds_of_point_are_those_of_the_knowledge_that_counts(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    ours = tmp_path / "ours"
    ours.mkdir()
    (ours / "point_kinds.yaml").write_text("kinds: {hinge: {}}\n", encoding="utf-8")
    configure(tmp_path, f"knowledge: {ours}\n")
    asked: list[str] = []

    def told(_knowledge: Path | None, _shelf: Path | None, kind: str) -> object:
        asked.append(kind)
        raise Refusal(kind)

    monkeypatch.setattr(desk, "loaded", told)
    with pytest.raises(Refusal):
        advisors_for(["hinge"], None, None)
    assert asked == ["hinge"]


def test_a_command_loads_for_good_and_the_sheet_does_not(monkeypatch: pytest.MonkeyPatch) -> None:
    """What the sheet holds when it reads the knowledge must stay within the collector's reach."""
    from advisor import commands
    from advisor.screens import running

    frozen: list[int] = []
    monkeypatch.setattr(gc, "freeze", lambda: frozen.append(1))
    monkeypatch.setattr("sys.stdin", _Terminal())
    monkeypatch.setattr("sys.stdout", _Terminal())
    monkeypatch.setenv("TERM", "xterm")
    read: list[object] = []

    def run(load: Callable[[], object], _file: Path | None, **_: object) -> int:
        read.append(load())
        return DONE

    monkeypatch.setattr(running, "run", run)
    assert commands.interview(None, plain=False, plain_glyphs=False, knowledge=None, shelf=None) == 0
    assert len(read) == 1
    assert not frozen
    loaded(None, None)
    assert frozen == [1]


class _Terminal:
    def isatty(self) -> bool:
        return True
