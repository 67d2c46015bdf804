"""Rows of a table as boxes on a grid of places: which overlap, and what no row covers, exactly and fast.

Every axis is cut at all ends of all rows, so that a row is a run of whole places on every axis. Sets of rows are
kept as bits of whole numbers, so that one operation asks all rows at once.
"""

from collections.abc import Iterator, Sequence

Run = tuple[int, int]
"""Places from the first to before the second."""

Region = tuple[Run, ...]


class Grid:
    """The rows of a table on their axes; `sizes` counts the places of each axis."""

    def __init__(self, sizes: Sequence[int], rows: Sequence[Region]) -> None:
        self.rows = rows
        self._begun: list[list[int]] = []
        self._ended: list[list[int]] = []
        for axis, size in enumerate(sizes):
            self._begun.append(_counted([row[axis][0] for row in rows], size))
            self._ended.append(_counted([row[axis][1] for row in rows], size))

    def overlaps(self) -> Iterator[tuple[int, int]]:
        """Each row that later rows overlap, with these rows as bits."""
        for number, row in enumerate(self.rows):
            met = self._meeting(row, -1 << (number + 1))
            if met:
                yield number, met

    def gaps(self, whole: Region) -> Iterator[Region]:
        """Disjoint regions that no row covers."""
        waiting = [(whole, self._meeting(whole, -1))]
        while waiting:
            region, rows = waiting.pop()
            if not rows:
                yield region
            elif (split := self._split(region, rows)) is not None:
                axis, place = split
                low, high = region[axis]
                for run in ((low, place), (place, high)):
                    meeting = rows & self._begun[axis][run[1] - 1] & ~self._ended[axis][run[0]]
                    waiting.append(((*region[:axis], run, *region[axis + 1 :]), meeting))

    def _meeting(self, region: Region, rows: int) -> int:
        for axis, (low, high) in enumerate(region):
            rows &= self._begun[axis][high - 1] & ~self._ended[axis][low]
        return rows

    def _split(self, region: Region, rows: int) -> tuple[int, int] | None:
        """Where to cut a region: across the most rows; nothing where one row covers it all."""
        covering, best, chosen = rows, 0, 0
        crossing_best = 0
        for axis, (low, high) in enumerate(region):
            spanning = self._begun[axis][low] & ~self._ended[axis][high - 1]
            covering &= spanning
            crossing = rows & ~spanning
            count = crossing.bit_count()
            if count > best:
                best, chosen, crossing_best = count, axis, crossing
        return None if covering else (chosen, self._end_within(chosen, region[chosen], crossing_best))

    def _end_within(self, axis: int, run: Run, rows: int) -> int:
        """An end of one of the rows inside the run, near its middle."""
        low, high = run
        ends: list[int] = []
        for number in ((rows & -rows).bit_length() - 1, rows.bit_length() - 1):
            ends += [end for end in self.rows[number][axis] if low < end < high]
        return min(ends, key=lambda end: abs(end - (low + high) / 2))


def _counted(places: Sequence[int], size: int) -> list[int]:
    """For each place, the rows whose own place is not beyond it, as bits."""
    at = [0] * (size + 1)
    for number, place in enumerate(places):
        at[place] |= 1 << number
    found, so_far = [], 0
    for bits in at:
        so_far |= bits
        found.append(so_far)
    return found


def joined(regions: Sequence[Region]) -> list[Region]:
    """The same regions with neighbours put together, axis after axis."""
    left = list(regions)
    for axis in range(len(left[0]) if left else 0):
        lines: dict[Region, list[Run]] = {}
        for region in left:
            lines.setdefault((*region[:axis], *region[axis + 1 :]), []).append(region[axis])
        left = [(*rest[:axis], run, *rest[axis:]) for rest, runs in lines.items() for run in _joined(sorted(runs))]
    return left


def _joined(runs: Sequence[Run]) -> list[Run]:
    found: list[Run] = []
    for low, high in runs:
        if found and found[-1][1] == low:
            found[-1] = (found[-1][0], high)
        else:
            found.append((low, high))
    return found


def numbers_in(bits: int) -> Iterator[int]:
    """The rows whose bits are set, the first first."""
    while bits:
        lowest = bits & -bits
        yield lowest.bit_length() - 1
        bits ^= lowest
