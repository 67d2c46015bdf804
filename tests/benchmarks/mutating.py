"""How long the mutation score of the shipped knowledge takes, and what it is: `python -m tests.benchmarks.mutating`.

On a busy machine the seconds of processor time tell more than those on the clock; both are printed.
"""

import json
import subprocess
import sys
import time
from os import times

BAR, LEAST = 90.0, 0.95


def main() -> None:
    """Run `gudgeon mutate` over everything, and print seconds and score beside the bars."""
    began = time.perf_counter()
    done = subprocess.run([sys.executable, "-m", "advisor", "mutate", "--json"], stdout=subprocess.PIPE, check=False)
    clock, used = time.perf_counter() - began, times()
    for each in json.loads(done.stdout):
        lasting = each["mutants"] - each["equivalent"]
        print(
            f"{each['point_kind']}: {each['killed']} of {lasting} mutants killed, {100 * each['score']:.2f} %, "
            f"bar {100 * LEAST:g} %, {'met' if each['score'] >= LEAST else 'MISSED'}"
        )
    print(
        f"{clock:.1f} s, bar {BAR:g} s, {'met' if clock <= BAR else 'MISSED'}; "
        f"processor {used.children_user + used.children_system:.1f} s"
    )


if __name__ == "__main__":
    main()
