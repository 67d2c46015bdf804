"""The file of one interview, saved after every answer and open for writing in one place at a time."""

import contextlib
import os
import secrets
import socket
import sys
from pathlib import Path

from advisor.documents import to_yaml, write_text_safely
from advisor.documents.writing import Plain
from advisor.interview.typed import whole_number


class Keeper:
    """The file of one interview, and the lock beside it that lets only one process write."""

    def __init__(self, path: Path) -> None:
        self.path = path
        self.holds = False
        self.holder = ""

    @property
    def lock(self) -> Path:
        """The file whose existence says that someone writes."""
        return self.path.with_name(self.path.name + ".lock")

    def take(self) -> bool:
        """Take the lock, also from a process that is no more; False if another holds it."""
        with contextlib.suppress(OSError):
            self.path.parent.mkdir(parents=True, exist_ok=True)
        try:
            self.holds = self._create() or (self._abandoned() and self._create())
        except OSError:
            self.holds = True  # no lock can be made here; saving will say what is wrong with the folder
        return self.holds

    def _create(self) -> bool:
        try:
            with self.lock.open("x", encoding="utf-8") as file:
                file.write(f"{os.getpid()} {socket.gethostname()}")
        except FileExistsError:
            return False
        return True

    def _abandoned(self) -> bool:
        """Whether the lock was left by a process that is no more; it is then moved out of the way."""
        with contextlib.suppress(FileNotFoundError):
            if not self._stale(self.lock):
                return False
            aside = self.lock.with_name(f"{self.lock.name}.{secrets.token_hex(4)}")
            self.lock.rename(aside)
            # Another process may have taken it over in between: then it gets it back.
            if not self._stale(aside):
                with contextlib.suppress(FileExistsError):
                    os.link(aside, self.lock)
            aside.unlink(missing_ok=True)
        return True

    def _stale(self, lock: Path) -> bool:
        self.holder, _, host = lock.read_text(encoding="utf-8", errors="replace").partition(" ")
        pid = whole_number(self.holder)
        if pid is None or host != socket.gethostname():
            return False
        return pid != os.getpid() and not _runs(pid)

    def write(self, data: Plain) -> None:
        """Replace the file in one step.

        Raises:
            Unwritable: with the reason and the mend.
        """
        with contextlib.suppress(OSError):
            self.path.parent.mkdir(parents=True, exist_ok=True)
        write_text_safely(self.path, to_yaml(data))

    def release(self) -> None:
        """Let others write."""
        if self.holds:
            with contextlib.suppress(OSError):
                if self.lock.read_text(encoding="utf-8").startswith(f"{os.getpid()} "):
                    self.lock.unlink()
        self.holds = False


def _runs(pid: int) -> bool:
    """Whether a process runs, as far as can be told without disturbing it."""
    if sys.platform == "win32":
        # Signal 0 is Ctrl+C there and would reach others. Taken as alive: two writers would lose answers, while
        # a lock left behind is named in the notice, to be deleted by hand.
        return True
    try:
        os.kill(pid, 0)
    except ProcessLookupError:
        return False
    except OSError:
        return True
    return True
