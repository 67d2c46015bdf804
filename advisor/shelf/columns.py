"""Columns of a catalogue: one value per item, and sets of items as bit masks.

A condition is judged for all items at once: two masks say for which items it holds and for which it fails;
for the others it is unknown, because they lack a value.
"""

from bisect import bisect_left, bisect_right
from collections.abc import Mapping, Sequence

from advisor.conditions import Bound, Coded, Condition, Either, Every, Member, Stated, Ticked, Valueless


class Column:
    """The coded values of one property, item by item; None where the item lacks it."""

    __slots__ = ("_edges", "_upto", "by_value", "present", "values", "waiting")

    def __init__(self, values: Sequence[Coded | None], *, waiting: bool = False) -> None:
        self.values = values
        self.waiting = waiting
        by_value: dict[Coded, int] = {}
        present = 0
        bit = 1
        for value in values:
            if value is not None:
                by_value[value] = by_value.get(value, 0) | bit
                present |= bit
            bit <<= 1
        self.by_value = by_value
        self.present = present
        self._edges: list[float] | None = None
        self._upto: list[int] = []

    @classmethod
    def from_masks(cls, masks: Mapping[Coded, int], size: int) -> "Column":
        """The column in which each value stands at the places of its mask."""
        values: list[Coded | None] = [None] * size
        for value, mask in masks.items():
            for place in places(mask):
                values[place] = value
        return cls(values)

    def below(self, limit: float, *, or_equal: bool) -> int:
        """The items whose value is below (or at) a limit."""
        if self._edges is None:
            self._edges = sorted(value for value in self.by_value if isinstance(value, float | int))
            gathered = 0
            self._upto = [0]
            for value in self._edges:
                gathered |= self.by_value[value]
                self._upto.append(gathered)
        place = bisect_right(self._edges, limit) if or_equal else bisect_left(self._edges, limit)
        return self._upto[place]


Columns = Mapping[str, Column]


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
    """The places of the set bits, low first."""
    found = []
    while mask:
        low = mask & -mask
        found.append(low.bit_length() - 1)
        mask ^= low
    return found
