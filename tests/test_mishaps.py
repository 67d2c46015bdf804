"""How a run ends that goes wrong: with the right code, a sentence, and never a traceback."""

import json
import os
import re
import signal
import stat
import subprocess
import sys
import tempfile
import time
from pathlib import Path

import pytest

from advisor.mishaps import DONE, INTERNAL, INTERRUPTED, NOT_SETTLED, USAGE, guarded, write_log

ROOT = Path(__file__).resolve().parent.parent
CASE = ROOT / "scenarios" / "rolling_bearing" / "hot_wet_roller_table.yaml"
GUDGEON = [sys.executable, "-m", "advisor"]


@pytest.fixture
def surroundings(tmp_path: Path) -> dict[str, str]:
    """An environment of its own: no settings, no kept interviews, output as UTF-8."""
    own = {each: str(tmp_path / each) for each in ("XDG_CONFIG_HOME", "XDG_STATE_HOME")}
    kept = {name: value for name, value in os.environ.items() if not name.startswith(("GUDGEON_", "PYTHON"))}
    return {**kept, **own, "PYTHONPATH": str(ROOT), "PYTHONIOENCODING": "utf-8"}


def run(
    *words: str, env: dict[str, str], given: bytes = b"", before: str = ""
) -> "subprocess.CompletedProcess[bytes]":
    """A run of its own; with `before`, after these statements."""
    start = [sys.executable, "-c", f"{before}\nfrom advisor.cli import main\nmain()"] if before else GUDGEON
    return subprocess.run([*start, *words], input=given, capture_output=True, check=False, env=env)


def test_an_interruption_is_no_outcome(surroundings: dict[str, str]) -> None:
    talk = subprocess.Popen(
        [*GUDGEON, "interview", "--plain"],
        stdin=subprocess.PIPE,
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        env=surroundings,
        preexec_fn=_listen,  # noqa: PLW1509 - no thread is running here
    )
    assert talk.stdout is not None
    prompt = b"What is the point called? "
    assert talk.stdout.read(len(prompt)) == prompt, "now it waits for an answer"
    talk.send_signal(signal.SIGINT)
    _, said = talk.communicate()
    assert talk.returncode == INTERRUPTED
    assert said.decode().strip() == "Interrupted."


def _listen() -> None:
    """Hear an interruption even where the tests run in the background, which ignores it."""
    signal.signal(signal.SIGINT, signal.SIG_DFL)


@pytest.mark.parametrize("command", ["replay", "facts"])
def test_an_interrupted_command_has_found_nothing(command: str, surroundings: dict[str, str]) -> None:
    # Where tests run in the background, Ctrl-C is ignored from the start.
    interrupted = "import signal\nsignal.signal(signal.SIGINT, signal.default_int_handler)\n"
    interrupted += f"from advisor import commands\ncommands.{command} = "
    interrupted += "lambda **_: signal.raise_signal(signal.SIGINT)"
    done = run(command, env=surroundings, before=interrupted)
    assert done.returncode == INTERRUPTED
    assert done.stderr.decode().strip() == "Interrupted."


@pytest.mark.parametrize("words", [["rules", "--json"], ["compute"], ["--help"], ["facts", "--help"], []])
def test_output_that_nobody_reads_is_no_outcome(words: list[str], surroundings: dict[str, str]) -> None:
    reader, writer = os.pipe()
    os.close(reader)
    try:
        done = subprocess.run(
            [*GUDGEON, *words],
            stdin=subprocess.DEVNULL,
            stdout=writer,
            stderr=subprocess.PIPE,
            check=False,
            env=surroundings,
        )
    finally:
        os.close(writer)
    assert done.returncode == INTERRUPTED
    assert done.stderr == b""


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (["replay", "--nonsense"], "No such option"),
        (["advise"], "Missing argument 'FILE'"),
        (["mutate", "--tries", "-1"], "Invalid value for '--tries'"),
        (["nonsense"], "No such command 'nonsense'"),
    ],
)
def test_wrong_usage_ends_with_2_and_says_what_is_wrong(
    words: list[str], said: str, surroundings: dict[str, str]
) -> None:
    done = run(*words, env=surroundings)
    assert done.returncode == USAGE
    assert done.stderr.decode().startswith("Usage: ")
    assert said in done.stderr.decode()


def test_help_and_outcomes_keep_their_codes(surroundings: dict[str, str]) -> None:
    assert run("--help", env=surroundings).returncode == DONE
    assert run("advise", str(CASE.with_name("no_temperature_measured.yaml")), env=surroundings).returncode == (
        NOT_SETTLED
    )
    nowhere = run("advise", "nowhere.yaml", env=surroundings)
    assert nowhere.returncode == USAGE
    assert b"nowhere.yaml" in nowhere.stderr


@pytest.mark.parametrize("encoding", ["ascii", "cp1252:strict", "ascii:surrogateescape"])
def test_a_terminal_that_knows_few_signs_gets_the_same_advice(encoding: str, surroundings: dict[str, str]) -> None:
    usual = run("advise", str(CASE), "--json", env=surroundings)
    poor = run("advise", str(CASE), "--json", env={**surroundings, "PYTHONIOENCODING": encoding})
    assert (poor.returncode, poor.stderr) == (usual.returncode, b"")
    assert "≥" in usual.stdout.decode(), "what UTF-8 can say is said"
    told = json.loads(poor.stdout.decode(encoding.partition(":")[0]))
    assert told == json.loads(usual.stdout)


def test_a_greater_sign_is_told_from_a_smaller_one_in_ascii(surroundings: dict[str, str]) -> None:
    said = [
        run("advise", str(CASE), "--full", env={**surroundings, "PYTHONIOENCODING": encoding}).stdout.decode(encoding)
        for encoding in ("utf-8", "ascii")
    ]
    assert {"≥", "≤", "°"} <= set(said[0])
    assert said[1] == "".join(sign if sign.isascii() else f"\\u{ord(sign):04x}" for sign in said[0])


def test_input_that_is_not_utf8_is_taken_with_a_mark(surroundings: dict[str, str], tmp_path: Path) -> None:
    strict = {**surroundings, "PYTHONIOENCODING": "utf-8:strict"}
    done = run("interview", "--plain", env=strict, given=b"Walzgel\xe4nder\nquit\n")
    assert (done.returncode, done.stderr) == (DONE, b"")
    (kept,) = (tmp_path / "XDG_STATE_HOME" / "gudgeon" / "interviews").glob("*.yaml")
    assert re.search("title: .?Walzgel[?\ufffd]nder", kept.read_text(encoding="utf-8"))


def _broken() -> int:
    raise ValueError("not our day")


def test_a_fault_of_ours_leaves_a_log_whatever_the_words_were(
    monkeypatch: pytest.MonkeyPatch, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path))
    monkeypatch.setattr(sys, "argv", ["gudgeon", "advise", "M\udcfcller.yaml"])
    with pytest.raises(SystemExit) as ended:
        guarded(_broken)
    assert ended.value.code == INTERNAL
    (log,) = tmp_path.iterdir()
    assert str(log) in capsys.readouterr().err
    text = log.read_text(encoding="utf-8")
    assert "advise M\\udcfcller.yaml" in text
    assert "ValueError: not our day" in text


def test_a_log_takes_no_name_that_others_can_have_laid_out(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path))
    monkeypatch.setattr(time, "strftime", lambda *_: "20260302-101112")
    other = tmp_path / "of_others.txt"
    other.write_text("precious", encoding="utf-8")
    (tmp_path / f"gudgeon-20260302-101112-{os.getpid()}.log").symlink_to(other)
    log = Path(write_log())
    assert other.read_text(encoding="utf-8") == "precious"
    assert log.is_file()
    assert stat.S_IMODE(log.stat().st_mode) & 0o077 == 0, "nobody else reads it"


def test_without_a_temporary_folder_there_is_no_log_and_no_traceback(
    monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path / "none"))
    assert write_log().startswith("no log")
