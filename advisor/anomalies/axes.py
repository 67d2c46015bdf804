"""The axes of a table: the values of one column cut into places at every end that a row has."""

import math
from bisect import bisect_left
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from advisor.anomalies.sweeps import Run
from advisor.boxes import Among, Side, Stretch, Ticks, whole
from advisor.conditions import Coded, Domain
from advisor.knowledge import Band
from advisor.knowledge.model import Cell


@dataclass(frozen=True, slots=True)
class Axis:
    """Values that stand one by one (choices, grades, ticks), or a number cut at its ends.

    Of a number with the ends e0 < e1 < ..., place 2k+1 is the end ek itself and place 2k the stretch below it.
    """

    column: str
    name: str
    domain: Domain
    single: tuple[Coded, ...] = ()
    ends: tuple[float, ...] = ()

    @property
    def size(self) -> int:
        """How many places there are."""
        return len(self.single) or 2 * len(self.ends) + 1

    @property
    def everything(self) -> Run:
        """The places inside the declared limits."""
        if self.single or not self.ends:
            return 0, self.size
        low, high = self.domain.low, self.domain.high
        return (self._at(low) if math.isfinite(low) else 0, self._at(high) + 1 if math.isfinite(high) else self.size)

    def run(self, cell: Cell | None) -> Run | None:
        """The places that a cell takes; nothing where it lies outside the axis."""
        if cell is None:
            return self.everything
        first, last = self.everything
        if isinstance(cell, Band):
            low, high = self._at(cell.low) if math.isfinite(cell.low) else 0, self._end(cell.high)
        elif self.single:
            coded = cell if self.domain.kind == "several" and isinstance(cell, str) else self._coded(cell)
            if coded not in self.single:
                return None
            low = self.single.index(coded)
            high = low + 1
        elif isinstance(cell, float | int):
            low, high = self._at(cell), self._at(cell) + 1
        else:
            return None
        low, high = max(low, first), min(high, last)
        return (low, high) if low < high else None

    def side(self, run: Run) -> Side:
        """The values of some places."""
        low, high = run
        if self.domain.kind == "several":
            return Ticks(frozenset({str(self.single[low])}))
        if self.single:
            return Among(frozenset(self.single[low:high]))
        first = self.ends[(low - 1) // 2] if low > 0 else -math.inf
        last = self.ends[(high - 1) // 2] if high < self.size else math.inf
        return Stretch(first, last, low_open=low % 2 == 0, high_open=high % 2 == 1)

    def _at(self, value: float) -> int:
        return 2 * bisect_left(self.ends, value) + 1

    def _end(self, value: float) -> int:
        return self._at(value) if math.isfinite(value) else self.size

    def _coded(self, cell: Cell) -> Coded | None:
        if isinstance(cell, Band) or (self.domain.choices and cell not in self.domain.choices):
            return None
        return self.domain.code(cell)


def axis(column: str, name: str, domain: Domain, cells: Iterable[Cell | None]) -> Axis:
    """The axis of a column, for what is looked up in it."""
    cells = list(cells)
    if domain.kind == "several":
        return Axis(column, name, domain, tuple(domain.choices))
    everything = whole(domain)
    if isinstance(everything, Stretch):
        return Axis(column, name, domain, ends=_ends(domain, cells))
    if isinstance(everything, Among) and everything.wanted:
        return Axis(column, name, domain, tuple(sorted(everything.values, key=lambda each: (str(type(each)), each))))
    said = dict.fromkeys(str(cell) for cell in cells if cell is not None and not isinstance(cell, Band))
    return Axis(column, name, domain, tuple(said))


def _ends(domain: Domain, cells: Sequence[Cell | None]) -> tuple[float, ...]:
    found = {domain.low, domain.high}
    for cell in cells:
        if isinstance(cell, Band):
            found |= {cell.low, cell.high}
        elif isinstance(cell, float | int):
            found.add(float(cell))
    return tuple(sorted(each for each in found if math.isfinite(each)))
