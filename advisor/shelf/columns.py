"""Columns of a catalogue: one value per item, and sets of items as bit masks.

A condition is judged for all items at once: two masks say for which items it holds and for which it fails;
for the others it is unknown, because they lack a value.
"""

from bisect import bisect_left, bisect_right
from collections.abc import Mapping, Sequence
from functools import cache
from itertools import compress, count

from advisor.conditions import Bound, Coded, Condition, Either, Every, Member, Stated, Ticked, Valueless

_SET = bytes.maketrans(b"01", bytes((0, 1)))


class Column:
    """The coded values of one property: by value the items that have it; None where an item lacks one."""

    __slots__ = ("_edges", "_upto", "_values", "by_value", "present", "size", "waiting")

    def __init__(self, by_value: Mapping[Coded, int], size: int, *, waiting: bool = False) -> None:
        self.by_value = {value: items for value, items in by_value.items() if items}
        self.size = size
        self.waiting = waiting
        present = 0
        for items in self.by_value.values():
            present |= items
        self.present = present
        self._values: Sequence[Coded | None] | None = None
        self._edges: list[float] | None = None
        self._upto: list[int] = []

    @classmethod
    def of(cls, values: Sequence[Coded | None]) -> "Column":
        """The column of these values, item by item."""
        by_value: dict[Coded, int] = {}
        for value, bit in zip(values, _bits(len(values)), strict=True):
            if value is not None:
                by_value[value] = by_value[value] | bit if value in by_value else bit
        column = cls(by_value, len(values))
        column._values = values
        return column

    @property
    def values(self) -> Sequence[Coded | None]:
        """The value of each item."""
        if self._values is None:
            values: list[Coded | None] = [None] * self.size
            for value, items in self.by_value.items():
                for place in places(items):
                    values[place] = value
            self._values = values
        return self._values

    def filled(self, coded: Coded) -> "Column":
        """The column with a value put in where items lack one."""
        lacking = ((1 << self.size) - 1) & ~self.present
        return Column(self.by_value | {coded: self.by_value.get(coded, 0) | lacking}, self.size)

    def below(self, limit: float, *, or_equal: bool) -> int:
        """The items whose value is below (or at) a limit."""
        if self._edges is None:
            self._edges = sorted(self.by_value)  # type: ignore[arg-type]  # thresholds meet numbers only
            gathered = 0
            self._upto = [0]
            for value in self._edges:
                gathered |= self.by_value[value]
                self._upto.append(gathered)
        place = bisect_right(self._edges, limit) if or_equal else bisect_left(self._edges, limit)
        return self._upto[place]


Columns = Mapping[str, Column]


@cache
def _bits(size: int) -> tuple[int, ...]:
    """The masks of single items."""
    return tuple(1 << place for place in range(size))


def judge(condition: Condition, columns: Columns, everything: int) -> tuple[int, int]:
    """The items for which the condition holds, and those for which it fails."""
    if isinstance(condition, Every):
        holding, failing = everything, 0
        for part in condition.parts:
            one, other = judge(part, columns, everything)
            holding &= one
            failing |= other
        return holding, failing
    if isinstance(condition, Either):
        holding, failing = 0, everything
        for part in condition.parts:
            one, other = judge(part, columns, everything)
            holding |= one
            failing &= other
        return holding, failing
    column = columns.get(condition.name)
    if isinstance(condition, Stated | Valueless):
        stated = column.present if column else 0
        wants_it = condition.wanted is isinstance(condition, Stated)
        return (stated, everything & ~stated) if wants_it else (everything & ~stated, stated)
    if column is None:
        return 0, 0
    met = _met(condition, column)
    return met, column.present & ~met


def _met(term: Bound | Member | Ticked, column: Column) -> int:
    if isinstance(term, Bound):
        limit = term.limit
        if not isinstance(limit, float | int):
            raise TypeError("limits are put in before columns are judged")
        if term.sign in {"<", "<="}:
            return column.below(limit, or_equal=term.sign == "<=")
        if term.sign in {">", ">="}:
            return column.present & ~column.below(limit, or_equal=term.sign == ">")
        equal = column.by_value.get(float(limit), 0)
        return equal if term.sign == "=" else column.present & ~equal
    met = 0
    if isinstance(term, Ticked):
        for value, items in column.by_value.items():
            if isinstance(value, frozenset) and not term.among.isdisjoint(value):
                met |= items
    else:
        for value in term.among:
            met |= column.by_value.get(value, 0)
    return met if term.wanted else column.present & ~met


def places(mask: int) -> list[int]:
    """The places of the set bits, low first.

    >>> places(0b10110)
    [1, 2, 4]
    """
    if mask & (mask - 1) == 0:
        return [mask.bit_length() - 1] if mask else []
    return list(compress(count(), bin(mask)[:1:-1].encode().translate(_SET)))
