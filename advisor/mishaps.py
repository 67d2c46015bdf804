"""What happens when something goes wrong: faults of files are told in a sentence, our own leave a log."""

import os
import sys
import tempfile
import time
import traceback
from collections.abc import Callable
from pathlib import Path

from advisor import __version__

DONE, NOT_SETTLED, USAGE, INTERNAL = 0, 1, 2, 3
INTERRUPTED = 130


class Refusal(Exception):
    """A fault of files or usage; its text is for the user, and the exit code is 2."""


def guarded(command: Callable[[], object]) -> None:
    """Run a command so that nobody sees a traceback."""
    try:
        command()
    except Refusal as fault:
        _say(str(fault))
        sys.exit(USAGE)
    except KeyboardInterrupt:
        _say("Interrupted.")
        sys.exit(INTERRUPTED)
    except BrokenPipeError:
        os.dup2(os.open(os.devnull, os.O_WRONLY), 1)
        sys.exit(INTERRUPTED)
    except Exception:
        _say(f"Something went wrong inside gudgeon. The details are in {write_log()}; send it with your case.")
        sys.exit(INTERNAL)


def write_log() -> str:
    """Write the current exception to a log file and return its path."""
    text = f"gudgeon {__version__}, Python {sys.version}\n{' '.join(sys.argv)}\n\n{traceback.format_exc()}"
    folder = Path(tempfile.gettempdir())
    path = folder / f"gudgeon-{time.strftime('%Y%m%d-%H%M%S')}-{os.getpid()}.log"
    try:
        path.write_text(text, encoding="utf-8")
    except OSError:
        return "no log, since the temporary folder cannot be written"
    return str(path)


def _say(text: str) -> None:
    sys.stderr.write(text.rstrip() + "\n")
