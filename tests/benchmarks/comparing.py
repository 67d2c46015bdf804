"""How exact and how fast a comparison is: `python -m tests.benchmarks.comparing [records]`.

The time is that of the whole command, `gudgeon compare OLD NEW`, over all scenarios for an edit of one rule. On a busy
machine the seconds of processor time tell more than those on the clock; both are printed.
"""

import subprocess
import sys
import time
from os import times
from pathlib import Path
from tempfile import TemporaryDirectory

from advisor.comparison import compare
from advisor.knowledge import load
from advisor.places import knowledge_folder
from advisor.replay import find
from tests.comparison.editing import edited
from tests.comparison.test_comparing import EDITS, tally

BAR = 3.0


def main() -> None:
    """Every edit of the tests: the time of the command, and records outside and inside its regions."""
    count = int(sys.argv[1]) if len(sys.argv) > 1 else 100_000
    old = load(knowledge_folder())
    for name, (file, changes) in EDITS.items():
        with TemporaryDirectory() as place:
            new = edited(Path(place), f"rolling_bearing/{file}", *changes)
            clock, processor = _timed(Path(place))
        compared = compare(old, new, find([]))
        inside, same, outside = tally(old, new, count, seed=1)
        share = 100 * (inside - same) / inside if inside else 100.0
        verdict = "met" if clock <= BAR else "MISSED"
        print(
            f"{name}: {clock:.2f} s, bar {BAR:g} s, {verdict}; processor {processor:.2f} s; "
            f"{len(compared.regions)} regions, {len(compared.changed)} scenarios change; "
            f"of {count} records {inside} lie inside ({share:.2f} % differ), {outside} differ outside"
        )


def _timed(new: Path) -> tuple[float, float]:
    """Seconds on the clock and of the processor that the command takes."""
    command = [sys.executable, "-m", "advisor", "compare", str(knowledge_folder()), str(new)]
    used, began = times(), time.perf_counter()
    subprocess.run(command, check=False, stdout=subprocess.DEVNULL)
    clock, now = time.perf_counter() - began, times()
    return clock, now.children_user + now.children_system - used.children_user - used.children_system


if __name__ == "__main__":
    main()
