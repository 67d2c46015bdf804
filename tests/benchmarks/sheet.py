"""How long the sheet takes in a real terminal: to its first text, and from an answer to the last of its repaint.

Run by hand: python -m tests.benchmarks.sheet
"""

import os
import pty
import select
import signal
import statistics
import struct
import subprocess
import sys
import tempfile
import termios
import time
from collections.abc import Iterator
from contextlib import contextmanager
from fcntl import ioctl
from pathlib import Path

from tests.screens.driving import KEYS, NARROW, WIDE

ROOT = Path(__file__).resolve().parent.parent.parent
QUIET_S = 0.25
"""A repaint is over when nothing more came for this long."""
STARTS = 7


@contextmanager
def sheet(size: tuple[int, int]) -> Iterator[int]:
    """The program in a terminal of this size, with a folder of its own for what it keeps; and its other end."""
    with tempfile.TemporaryDirectory() as folder:
        ours, theirs = pty.openpty()
        ioctl(theirs, termios.TIOCSWINSZ, struct.pack("HHHH", size[1], size[0], 0, 0))
        environment = {**os.environ, "XDG_STATE_HOME": folder, "TERM": "xterm-256color", "PYTHONPATH": str(ROOT)}
        running = subprocess.Popen(
            [sys.executable, "-m", "advisor"],
            stdin=theirs,
            stdout=theirs,
            stderr=theirs,
            env=environment,
            cwd=folder,
            start_new_session=True,
        )
        os.close(theirs)
        try:
            yield ours
        finally:
            os.killpg(running.pid, signal.SIGKILL)
            running.wait()
            os.close(ours)


def last_output(terminal: int, start: float, wait_s: float = 10.0) -> tuple[float, bytes]:
    """How long after `start` the last output came, and all of it."""
    seen, last, allowed = b"", start, wait_s
    while select.select([terminal], [], [], allowed)[0]:
        seen += os.read(terminal, 65536)
        last, allowed = time.perf_counter(), QUIET_S
    return last - start, seen


def first_text(size: tuple[int, int]) -> float:
    """Seconds from the start of the program to its first words."""
    start = time.perf_counter()
    with sheet(size) as terminal:
        seen = b""
        while b"GUDGEON" not in seen.upper():
            if not select.select([terminal], [], [], 20)[0]:
                raise TimeoutError("the sheet shows nothing")
            seen += os.read(terminal, 65536)
        return time.perf_counter() - start


def repaints(size: tuple[int, int]) -> list[float]:
    """Seconds from Enter to the end of the repaint, for each question of an ordinary motor bearing."""
    found = []
    with sheet(size) as terminal:
        last_output(terminal, time.perf_counter(), 20)
        os.write(terminal, b"Motor bearing\r")
        last_output(terminal, time.perf_counter())
        for name, keys in KEYS.items():
            if name in {"bearing_type", "bore_mm", "outside_mm", "width_mm"}:
                continue  # the designation fills them in
            os.write(terminal, keys.encode())
            last_output(terminal, time.perf_counter(), 0.5)
            start = time.perf_counter()
            os.write(terminal, b"\r")
            took, seen = last_output(terminal, start, 2)
            if seen:
                found.append(took)
    return found


def main() -> None:
    """Print the medians for the narrow and the wide sheet."""
    write = sys.stdout.write
    for size in (NARROW, WIDE):
        text = statistics.median(first_text(size) for _ in range(STARTS)) * 1000
        painted = [each * 1000 for each in repaints(size)]
        write(
            f"{size[0]}x{size[1]}: first text {text:.0f} ms (median of {STARTS}); answer to the end of the repaint "
            f"{statistics.median(painted):.0f} ms (median of {len(painted)} answers, longest {max(painted):.0f})\n"
        )


if __name__ == "__main__":
    main()
