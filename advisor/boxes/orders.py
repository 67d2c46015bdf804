"""Facts compared with one another: whether stretches leave room for an order, and values that keep it."""

from collections.abc import Mapping

from advisor.boxes.sides import Among, Side, Stretch, a_value, meet, whole
from advisor.conditions import Coded, Domain

Pair = tuple[str, str]
"""Two facts that a condition compares, in alphabetical order."""

LESS, EQUAL, MORE = "<", "=", ">"


def narrowed(
    sides: Mapping[str, Side], pairs: Mapping[Pair, frozenset[str]], domains: Mapping[str, Domain]
) -> dict[str, Side] | None:
    """The sides of the compared facts cut down to what the order leaves; nothing where it leaves nothing.

    For any number of facts this is exact unless they form a ring.
    """
    left = {name: sides.get(name, whole(domains[name])) for pair in pairs for name in pair}
    for _ in range(len(left)):
        for (one, other), signs in pairs.items():
            if MORE not in signs and not _below(left, one, other, strict=EQUAL not in signs):
                return None
            if LESS not in signs and not _below(left, other, one, strict=EQUAL not in signs):
                return None
            if signs == {EQUAL} and not _same(left, one, other):
                return None
    return left


def ringed(pairs: Mapping[Pair, frozenset[str]]) -> bool:
    """Whether the compared facts form a ring, so that the sides alone do not tell all."""
    joined: dict[str, str] = {}

    def root(name: str) -> str:
        while name in joined:
            name = joined[name]
        return name

    for one, other in pairs:
        if root(one) == root(other):
            return True
        joined[root(one)] = root(other)
    return False


def values_in_order(
    left: Mapping[str, Side], pairs: Mapping[Pair, frozenset[str]], domains: Mapping[str, Domain]
) -> dict[str, Coded] | None:
    """A value for each compared fact that keeps every order; nothing where rings hide that there is none."""
    here, found = dict(left), dict[str, Coded]()
    for name in left:
        value = a_value(here[name], domains[name])
        if isinstance(value, float):
            here[name] = Stretch(value, value) if isinstance(here[name], Stretch) else Among(frozenset({value}))
            found[name] = value
        cut = narrowed(here, pairs, domains)
        if cut is None:
            return None
        here.update(cut)
    return found


def _below(left: dict[str, Side], one: str, other: str, *, strict: bool) -> bool:
    """Cut both sides so that the one can lie below the other; false where it cannot."""
    high, high_open = _last(left[other])
    low, low_open = _first(left[one])
    cut_one = _cut(left[one], Stretch(float("-inf"), high, high_open=high_open or strict))
    cut_other = _cut(left[other], Stretch(low, float("inf"), low_open=low_open or strict))
    if cut_one is None or cut_other is None:
        return False
    left[one], left[other] = cut_one, cut_other
    return True


def _same(left: dict[str, Side], one: str, other: str) -> bool:
    """Leave both sides what they have in common."""
    first, second = left[one], left[other]
    for name, mine, its in ((one, first, second), (other, second, first)):
        cut = _cut(mine, its) if isinstance(its, Stretch) else _picked(mine, its)
        if cut is None:
            return False
        left[name] = cut
    return True


def _cut(side: Side, stretch: Stretch) -> Side | None:
    if isinstance(side, Among):
        kept = frozenset(each for each in side.values if isinstance(each, float) and stretch.has(each))
        return Among(kept) if kept else None
    return meet(side, stretch)


def _picked(side: Side, wanted: Side) -> Side | None:
    if isinstance(side, Stretch) and isinstance(wanted, Among):
        kept = frozenset(each for each in wanted.values if isinstance(each, float) and side.has(each))
        return Among(kept) if kept else None
    return meet(side, wanted)


def _first(side: Side) -> tuple[float, bool]:
    if isinstance(side, Stretch):
        return side.low, side.low_open
    return min(_numbers(side)), False


def _last(side: Side) -> tuple[float, bool]:
    if isinstance(side, Stretch):
        return side.high, side.high_open
    return max(_numbers(side)), False


def _numbers(side: Side) -> list[float]:
    return [each for each in side.values if isinstance(each, float)] if isinstance(side, Among) else []
