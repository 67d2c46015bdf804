"""How exact and how fast a comparison is: `python -m tests.benchmarks.comparing [records]`."""

import sys
import time
from pathlib import Path
from tempfile import TemporaryDirectory

from advisor.comparison import compare
from advisor.knowledge import load
from advisor.places import knowledge_folder
from advisor.replay import find
from tests.comparison.editing import edited
from tests.comparison.test_comparing import EDITS, tally


def main() -> None:
    """Every edit of the tests: records outside and inside its regions, and the time of a whole comparison."""
    count = int(sys.argv[1]) if len(sys.argv) > 1 else 100_000
    old = load(knowledge_folder())
    for name, (file, changes) in EDITS.items():
        with TemporaryDirectory() as place:
            new = edited(Path(place), f"rolling_bearing/{file}", *changes)
        began = time.process_time()
        compared = compare(old, new, find([]))
        took = time.process_time() - began
        inside, same, outside = tally(old, new, count, seed=1)
        share = 100 * (inside - same) / inside if inside else 100.0
        print(
            f"{name}: {len(compared.regions)} regions, {len(compared.changed)} scenarios change, "
            f"{took:.2f} s of processor; "
            f"of {count} records {inside} lie inside ({share:.2f} % differ), {outside} differ outside"
        )


if __name__ == "__main__":
    main()
