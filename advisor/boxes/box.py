"""Boxes: regions of cases, given by one side per fact, with exact set operations on them."""

from collections.abc import Container, Iterable, Mapping
from dataclasses import dataclass, field
from functools import reduce

from advisor.boxes.orders import Pair, narrowed, ringed, values_in_order
from advisor.boxes.sides import LACKING, Among, Lacking, Side, a_value, meet, whole, without
from advisor.conditions import Coded, Domain
from advisor.conditions.terms import Void

Key = str | Pair
"""What a side belongs to: a fact, or two facts that are compared."""

_ANY_ORDER = Among(frozenset({"<", "=", ">"}))


@dataclass(frozen=True, slots=True)
class Space:
    """The declared domains, and the facts that may have no value for good."""

    domains: Mapping[str, Domain]
    voidable: Container[str] = ()

    def all_of(self, key: Key) -> list[Side]:
        """Everything that a fact (or an order of two) can be, as disjoint sides."""
        if isinstance(key, tuple):
            return [_ANY_ORDER]
        everything = [whole(self.domains[key])]
        return [*everything, LACKING] if key in self.voidable else everything


@dataclass(frozen=True, slots=True)
class Box:
    """A region that is not empty; a fact without a side is free, having no value included."""

    space: Space = field(compare=False, repr=False)
    sides: Mapping[Key, Side]

    def __hash__(self) -> int:
        return hash(frozenset(self.sides.items()))

    @property
    def names(self) -> set[str]:
        """The facts that bound the region."""
        return {name for key in self.sides for name in ((key,) if isinstance(key, str) else key)}

    @property
    def may_be_wider(self) -> bool:
        """Whether compared facts form a ring, so that the box may hold fewer cases than its sides say."""
        return ringed(_pairs(self.sides))

    def intersect(self, other: "Box") -> "Box | None":
        """What lies in both; nothing where that is empty."""
        sides = dict(self.sides)
        for key, side in other.sides.items():
            met = meet(sides[key], side) if key in sides else side
            if met is None:
                return None
            sides[key] = met
        return _box(self.space, sides)

    def minus(self, other: "Box") -> list["Box"]:
        """Disjoint boxes that make up what lies in this one and not in the other."""
        if self.intersect(other) is None:
            return [self]
        left: list[Box] = []
        rest = dict(self.sides)
        # Facts come before the orders between them: where a fact lacks its value there is no order.
        for key, side in sorted(other.sides.items(), key=lambda item: isinstance(item[0], tuple)):
            here = [rest[key]] if key in rest else self.space.all_of(key)
            for piece in (each for part in here for each in without(part, side)):
                left += [found for each in _split(key, piece) if (found := _box(self.space, {**rest, key: each}))]
            rest[key] = next(met for part in here if (met := meet(part, side)) is not None)
        return left

    def covers(self, other: "Box") -> bool:
        """Whether the other lies wholly in this one."""
        return not other.minus(self)

    def within(self, other: "Box") -> bool:
        """Whether side by side this one lies in the other: quick, and sure where it says yes."""
        mine = self.sides
        return all(key in mine and not without(mine[key], side) for key, side in other.sides.items())

    def witness(self, names: Iterable[str] = ()) -> dict[str, Coded | Void]:
        """A case of the region: a value for each of its own facts and for the names given."""
        pairs = _pairs(self.sides)
        found: dict[str, Coded | Void] = {}
        for name in sorted({*names, *self.names}):
            domain = self.space.domains[name]
            found[name] = a_value(self.sides.get(name) or whole(domain), domain)
        if pairs:
            left = narrowed(_named(self.sides), pairs, self.space.domains)
            found |= (values_in_order(left, pairs, self.space.domains) or {}) if left else {}
        return found


def uncovered(box: Box, by: Iterable[Box]) -> list[Box]:
    """Disjoint boxes that make up what none of the others covers."""
    return reduce(lambda left, other: [piece for each in left for piece in each.minus(other)], by, [box])


def covered(box: Box, by: Iterable[Box]) -> bool:
    """Whether the others together cover the box."""
    others = list(by)
    for place, other in enumerate(others):
        if box.intersect(other) is not None:
            return all(covered(piece, others[place + 1 :]) for piece in box.minus(other))
    return False


def made(space: Space, sides: Mapping[Key, Side]) -> list[Box]:
    """The boxes with these sides, each cut to the declared domain; none where a side leaves nothing."""
    cut: dict[Key, Side] = {}
    for key, side in sides.items():
        met = next((met for part in space.all_of(key) if (met := meet(part, side)) is not None), None)
        if met is None:
            return []
        cut[key] = met
    box = _box(space, cut)
    return [box] if box else []


def _box(space: Space, sides: Mapping[Key, Side]) -> Box | None:
    """The box, unless the orders between its facts leave nothing."""
    pairs = _pairs(sides)
    if pairs and narrowed(_named(sides), pairs, space.domains) is None:
        return None
    return Box(space, sides)


def _split(key: Key, side: Side) -> list[Side]:
    """Two facts that differ are two regions: the one below, the one above."""
    if isinstance(key, tuple) and isinstance(side, Among) and side.values == {"<", ">"}:
        return [Among(frozenset({"<"})), Among(frozenset({">"}))]
    return [side]


def _named(sides: Mapping[Key, Side]) -> dict[str, Side]:
    return {key: side for key, side in sides.items() if isinstance(key, str) and not isinstance(side, Lacking)}


def _pairs(sides: Mapping[Key, Side]) -> dict[Pair, frozenset[str]]:
    return {
        key: frozenset(str(each) for each in side.values)
        for key, side in sides.items()
        if isinstance(key, tuple) and isinstance(side, Among)
    }
