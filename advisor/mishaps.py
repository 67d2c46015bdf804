"""What happens when something goes wrong: faults of files are told in a sentence, our own leave a log."""

import codecs
import errno
import io
import os
import sys
import time
import traceback
from collections.abc import Callable
from contextlib import suppress

from advisor import __version__

DONE, NOT_SETTLED, USAGE, INTERNAL = 0, 1, 2, 3
INTERRUPTED = 130  # also where nobody reads the output any more: either way the outcome is not known


class Refusal(Exception):
    """A fault of files or usage; its text is for the user, and the exit code is 2."""


class Unheard(Exception):
    """Nobody reads the output any more; that says nothing of what the command found."""


def guarded(command: Callable[[], int]) -> None:
    """Run a command so that nobody sees a traceback, and end with the code that it comes to."""
    try:
        speak_to_any_terminal()
        code = command()
        if sys.stdout is not None:
            sys.stdout.flush()
    except Refusal as fault:
        _say(str(fault))
        code = USAGE
    except KeyboardInterrupt:
        _say("Interrupted.")
        code = INTERRUPTED
    except (BrokenPipeError, Unheard):
        _say_no_more()
        code = INTERRUPTED
    except Exception as fault:
        if isinstance(fault, OSError) and fault.errno == errno.ENOSPC:
            _say(f"There is no room left to write to: {fault.strerror}. Make room and run it again.")
            _say_no_more()
            code = USAGE
        else:
            _say(f"Something went wrong inside gudgeon. The details are in {write_log()}; send it with your case.")
            code = INTERNAL
    sys.exit(code)


def speak_to_any_terminal() -> None:
    """Let every text be written whatever the terminal's signs are, and every input be read.

    A sign that the terminal lacks is written as JSON would escape it: ≥ and ≤ stay apart, and JSON stays JSON.
    """
    codecs.register_error("gudgeon.escaped", _escaped)
    for stream, errors in ((sys.stdin, "replace"), (sys.stdout, "gudgeon.escaped"), (sys.stderr, "gudgeon.escaped")):
        if isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(errors=errors)


def _escaped(fault: UnicodeError) -> tuple[str, int]:
    if not isinstance(fault, UnicodeEncodeError):
        raise fault
    units = fault.object[fault.start : fault.end].encode("utf-16-be", "surrogatepass")
    return "".join(f"\\u{units[place : place + 2].hex()}" for place in range(0, len(units), 2)), fault.end


def write_log() -> str:
    """Write the current exception to a log file of its own and return its path."""
    import tempfile

    text = f"gudgeon {__version__}, Python {sys.version}\n{' '.join(sys.argv)}\n\n{traceback.format_exc()}"
    try:
        # A name that nobody can foresee, made anew: no link of others is followed, and only the user reads it.
        handle, path = tempfile.mkstemp(".log", f"gudgeon-{time.strftime('%Y%m%d-%H%M%S')}-")
        with os.fdopen(handle, "w", encoding="utf-8", errors="backslashreplace") as file:
            file.write(text)
    except OSError:
        return "no log, since the temporary folder cannot be written"
    return path


def _say(text: str) -> None:
    with suppress(OSError, AttributeError):  # where even this cannot be heard, the exit code still tells
        sys.stderr.write(text.rstrip() + "\n")


def _say_no_more() -> None:
    """Send what is still held back nowhere, so that the end of the process does not stumble over it."""
    os.dup2(os.open(os.devnull, os.O_WRONLY), 1)
