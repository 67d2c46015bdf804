"""How long overlaps and gaps of 1,500 rows x 5 columns take: a partition with 20 rows spoilt, and rows at random.

    python -m tests.benchmarks.tables
"""

import random
import sys
import time
from collections.abc import Callable
from itertools import islice

from advisor.anomalies.sweeps import Grid, Region, joined

ROWS, COLUMNS, PLACES = 1500, 5, 3000


def partition(rng: random.Random) -> list[Region]:
    """The whole, cut at random again and again: no overlap, no gap."""
    rows: list[Region] = [((0, PLACES),) * COLUMNS]
    while len(rows) < ROWS:
        place, axis = rng.randrange(len(rows)), rng.randrange(COLUMNS)
        row = rows[place]
        low, high = row[axis]
        if high - low > 1:
            cut = rng.randint(low + 1, high - 1)
            rows[place] = (*row[:axis], (low, cut), *row[axis + 1 :])
            rows.append((*row[:axis], (cut, high), *row[axis + 1 :]))
    rng.shuffle(rows)
    return rows


def spoilt(rng: random.Random) -> list[Region]:
    """A partition without its last 20 rows, and with 20 rows made wider."""
    rows = partition(rng)[:-20]
    for place in range(20):
        axis, (low, high) = 0, rows[place][0]
        rows[place] = ((low, min(PLACES, high + rng.randint(1, 200))), *rows[place][axis + 1 :])
    return rows


def scattered(rng: random.Random) -> list[Region]:
    """Rows anywhere, each of 2 to 30 % of every column; the first 2,000 gaps are looked for."""
    rows = []
    for _ in range(ROWS):
        widths = [int(PLACES * rng.uniform(0.02, 0.3)) for _ in range(COLUMNS)]
        lows = [rng.randint(0, PLACES - width) for width in widths]
        rows.append(tuple((low, low + width) for low, width in zip(lows, widths, strict=True)))
    return rows


def measure(make: Callable[[random.Random], list[Region]]) -> str:
    rows = make(random.Random(7))
    begun = time.perf_counter()
    grid = Grid([PLACES] * COLUMNS, rows)
    overlapping = sum(1 for _ in grid.overlaps())
    between = time.perf_counter()
    gaps = joined(list(islice(grid.gaps(((0, PLACES),) * COLUMNS), 2000)))
    ended = time.perf_counter()
    return (
        f"{make.__name__:10} {len(rows)} rows: {overlapping} rows overlap, {between - begun:.3f} s; "
        f"{len(gaps)} gaps, {ended - between:.3f} s"
    )


if __name__ == "__main__":
    for make in (partition, spoilt, scattered):
        sys.stdout.write(measure(make) + "\n")
