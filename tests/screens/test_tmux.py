"""The sheet in a real terminal: by keys alone, killed and continued, terminated, and its terminal taken away."""

import os
import shutil
import signal
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import TypeVar

import pytest

from advisor.knowledge import Knowledge
from advisor.places import knowledge_folder

from .driving import KEYS

T = TypeVar("T")
TMUX = shutil.which("tmux")
PATIENCE_S = 30.0
pytestmark = [pytest.mark.tmux, pytest.mark.skipif(TMUX is None, reason="tmux is not installed")]


class Terminal:
    """A shell in a tmux server of its own."""

    def __init__(self, folder: Path, size: tuple[int, int]) -> None:
        self.socket, self.sockets = "gudgeon", tempfile.TemporaryDirectory(prefix="gudgeon")
        self.state = folder / "state"
        shell = f"cd '{knowledge_folder().parent}'; exec sh"
        self.environment = {
            **os.environ,
            "XDG_STATE_HOME": str(self.state),
            "TMUX_TMPDIR": self.sockets.name,
            "LC_ALL": "C.UTF-8",
            "PS1": "$ ",
            "ENV": "",
            "TEXTUAL_ANIMATIONS": "none",
        }
        arguments = ["-f", "/dev/null", "new-session", "-d", "-x", str(size[0]), "-y", str(size[1]), shell]
        subprocess.run([str(TMUX), "-L", self.socket, *arguments], check=True, env=self.environment)
        until(lambda: self.seen().strip(), lambda: "no prompt came")

    def tmux(self, *arguments: str) -> str:
        return subprocess.run(
            [str(TMUX), "-L", self.socket, *arguments], capture_output=True, text=True, check=True, env=self.environment
        ).stdout

    def anew(self) -> None:
        """The same pane with a fresh shell, as after 'reset'."""
        self.tmux("respawn-pane", "-k")
        self.tmux("clear-history")
        until(lambda: "Pump" not in (seen := self.seen()) and seen.strip(), lambda: "no fresh prompt came")

    def keys(self, *names: str) -> None:
        self.tmux("send-keys", *names)

    def type(self, text: str) -> None:
        if text:
            self.tmux("send-keys", "-l", text)
        self.keys("Enter")

    def seen(self) -> str:
        return self.tmux("capture-pane", "-p")

    def wait(self, text: str) -> str:
        return until(
            lambda: seen if text in (seen := self.seen()) else "",
            lambda: f"'{text}' never came; the screen shows\n{self.seen()}",
        )

    def start(self, *arguments: str) -> None:
        self.type(" ".join([f"'{sys.executable}'", "-m", "advisor", "interview", *arguments]))

    def sheet(self) -> int:
        """The process of the sheet: the shell's child."""
        shell = self.tmux("display-message", "-p", "#{pane_pid}").strip()
        found = until(
            lambda: Path(f"/proc/{shell}/task/{shell}/children").read_text(encoding="ascii").split(),
            lambda: "no sheet runs",
        )
        return int(found[0])

    def mode(self) -> str:
        return self.tmux("display-message", "-p", "#{alternate_on}#{mouse_any_flag}").strip()

    def kept(self) -> Path:
        return next((self.state / "gudgeon" / "interviews").glob("*.yaml"))


def until(look: Callable[[], T], otherwise: Callable[[], str]) -> T:
    end = time.monotonic() + PATIENCE_S
    while time.monotonic() < end:
        if found := look():
            return found
    raise AssertionError(otherwise())


def gone(pid: int) -> bool:
    try:
        return Path(f"/proc/{pid}/stat").read_text(encoding="utf-8").rpartition(")")[2].split()[0] == "Z"
    except (FileNotFoundError, ProcessLookupError):
        return True


@pytest.fixture
def terminal(tmp_path: Path) -> Iterator[Terminal]:
    opened = Terminal(tmp_path, (80, 24))
    yield opened
    subprocess.run(
        [str(TMUX), "-L", opened.socket, "kill-server"], check=False, capture_output=True, env=opened.environment
    )
    opened.sockets.cleanup()


def answer(terminal: Terminal, knowledge: Knowledge, most: int) -> int:
    """Answer the questions that the screen shows, so many at most; the number answered."""
    asks = {
        each.question.ask: name for name, each in knowledge.facts.items() if each.question is not None and name in KEYS
    }

    def shown() -> str:
        seen = " ".join(terminal.seen().replace("▌", " ").split())
        return next((name for ask, name in asks.items() if ask in seen), "the end" if "MIND" in seen else "")

    for count in range(most):
        name = until(shown, terminal.seen)
        if name == "the end":
            return count
        terminal.type(KEYS[name])
        terminal.wait(f"{count + 1} answered")
    return most


def test_an_ordinary_motor_bearing_is_settled_by_keys_alone(terminal: Terminal, knowledge: Knowledge) -> None:
    terminal.start()
    terminal.wait("What is the point called?")
    terminal.type("Pump 7, drive end")
    terminal.wait("0 answered")
    assert answer(terminal, knowledge, 21) <= 20
    terminal.wait("Settled.")
    terminal.wait("GR-301, fits")
    terminal.keys("F2")
    terminal.wait("● GR-301")
    terminal.keys("C-q")
    terminal.wait("Kept in")
    assert terminal.mode() == "00"


def test_killed_in_the_middle_and_continued_no_answer_is_lost(terminal: Terminal, knowledge: Knowledge) -> None:
    terminal.start()
    terminal.wait("What is the point called?")
    terminal.type("Pump 7")
    terminal.wait("0 answered")
    answer(terminal, knowledge, 6)
    pid = terminal.sheet()
    os.kill(pid, signal.SIGKILL)
    until(lambda: gone(pid), lambda: "the killed sheet still runs")
    kept = terminal.kept()
    assert kept.with_name(kept.name + ".lock").exists()
    terminal.anew()
    terminal.start()
    terminal.wait("What is the point called?")
    terminal.wait("6 answered")
    terminal.keys("Down", "Enter")
    terminal.wait("answers saved")
    terminal.wait("6 answered")
    terminal.keys("C-q")
    terminal.wait("Kept in")


@pytest.mark.parametrize("number", [signal.SIGTERM, signal.SIGHUP])
def test_a_terminated_sheet_restores_the_terminal_and_keeps_the_answers(
    terminal: Terminal, knowledge: Knowledge, number: signal.Signals
) -> None:
    terminal.start()
    terminal.wait("What is the point called?")
    terminal.type("Pump 7")
    terminal.wait("0 answered")
    answer(terminal, knowledge, 2)
    assert terminal.mode() == "11"
    pid = terminal.sheet()
    os.kill(pid, number)
    until(lambda: gone(pid), lambda: "the terminated sheet still runs")
    until(lambda: terminal.mode() == "00", lambda: f"the terminal is left in mode {terminal.mode()}")
    assert "answers:" in terminal.kept().read_text(encoding="utf-8")
    assert not list(terminal.kept().parent.glob("*.lock"))


def test_no_process_outlives_its_terminal(terminal: Terminal, knowledge: Knowledge) -> None:
    terminal.start()
    terminal.wait("What is the point called?")
    terminal.type("Pump 7")
    terminal.wait("0 answered")
    answer(terminal, knowledge, 1)
    pid = terminal.sheet()
    terminal.tmux("kill-server")
    until(lambda: gone(pid), lambda: "the sheet outlived its terminal")


def test_a_terminal_without_unicode_gets_ascii_only(terminal: Terminal) -> None:
    terminal.start("--ascii")
    terminal.wait("What is the point called?")
    terminal.type("Pump 7")
    seen = terminal.wait("0 answered")
    assert seen.isascii()
    terminal.keys("C-q")
    terminal.wait("Kept in")
