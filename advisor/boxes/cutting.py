"""From conditions to the boxes in which they hold."""

import math
from collections.abc import Container, Mapping
from itertools import pairwise

from advisor.boxes.box import Box, Key, Space, made
from advisor.boxes.sides import LACKING, Among, Side, Stretch, Ticks, whole
from advisor.conditions import Bound, Condition, Domain, Either, Every, FactRef, Member, Stated, Ticked, Valueless
from advisor.conditions.terms import Term

_MIRRORED = {"<": ">", "<=": ">=", ">": "<", ">=": "<=", "=": "=", "!=": "!="}
_ORDERS = {"<": ("<",), "<=": ("<=",), ">": (">",), ">=": (">=",), "=": ("=",), "!=": ("<", ">")}
_Sides = dict[Key, Side]


def boxes_of(condition: Condition, domains: Mapping[str, Domain], voidable: Container[str] = ()) -> list[Box]:
    """The boxes that together hold exactly the cases in which the condition holds; none where it never does.

    >>> t = Domain("number", low=-60, high=500)
    >>> [box.witness() for box in boxes_of(Bound("t", ">", 120.0), {"t": t})]
    [{'t': 310.0}]
    >>> boxes_of(Every((Bound("t", ">", 90.0), Bound("t", "<", 70.0))), {"t": t})
    []
    """
    return _boxes(condition, Space(domains, voidable))


def _boxes(condition: Condition, space: Space) -> list[Box]:
    if isinstance(condition, Every):
        found = [Box(space, {})]
        for part in condition.parts:
            more = _boxes(part, space)
            found = [met for box in found for other in more if (met := box.intersect(other)) is not None]
        return _distinct(found)
    if isinstance(condition, Either):
        return _distinct([box for part in condition.parts for box in _boxes(part, space)])
    return [box for sides in _sides_of(condition, space) for box in made(space, sides)]


def _distinct(boxes: list[Box]) -> list[Box]:
    """The boxes without those that lie in another one."""
    kept: list[Box] = []
    for box in boxes:
        if not any(box.within(other) for other in kept):
            kept = [*(other for other in kept if not other.within(box)), box]
    return kept


def _sides_of(term: Term, space: Space) -> list[_Sides]:
    """The sides of the disjoint boxes in which a term holds."""
    domain = space.domains[term.name]
    if isinstance(term, Stated | Valueless):
        has_value = term.wanted is isinstance(term, Stated)
        return [{term.name: whole(domain) if has_value else LACKING}]
    if isinstance(term, Bound) and isinstance(term.limit, FactRef):
        return _compared(term.name, term.sign, term.limit.name, space)
    if isinstance(term, Bound):
        return [{term.name: side} for side in _beyond(term.sign, float(term.limit), domain)]  # type: ignore[arg-type]  # a fact for a limit went above
    if isinstance(term, Ticked):
        return [{term.name: side} for side in _ticked(term)]
    return [{term.name: side} for side in _members(term, domain)]


def _beyond(sign: str, limit: float, domain: Domain) -> list[Side]:
    """The sides on which a threshold holds."""
    stretches = {
        "<": [Stretch(-math.inf, limit, high_open=True)],
        "<=": [Stretch(-math.inf, limit)],
        ">": [Stretch(limit, math.inf, low_open=True)],
        ">=": [Stretch(limit, math.inf)],
        "=": [Stretch(limit, limit)],
        "!=": [Stretch(-math.inf, limit, high_open=True), Stretch(limit, math.inf, low_open=True)],
    }[sign]
    everything = whole(domain)
    if not isinstance(everything, Among):
        return list(stretches)
    met = [each for each in everything.values if any(stretch.has(float(each)) for stretch in stretches)]  # type: ignore[arg-type]  # places are numbers
    return [Among(frozenset(met))]


def _members(term: Member, domain: Domain) -> list[Side]:
    """The sides on which a choice is (or is not) among some; on plain numbers, points and what lies between them."""
    if isinstance(whole(domain), Among):
        return [Among(frozenset(term.among), term.wanted)]
    points = sorted(float(each) for each in term.among)
    if term.wanted:
        return [Stretch(point, point) for point in points]
    ends = [-math.inf, *points, math.inf]
    return [Stretch(low, high, low_open=True, high_open=True) for low, high in pairwise(ends)]


def _ticked(term: Ticked) -> list[Side]:
    """One box per tick that is the first of its list, or one where all are clear."""
    ticks = sorted(term.among)
    if not term.wanted:
        return [Ticks(clear=frozenset(ticks))]
    return [Ticks(frozenset({tick}), frozenset(ticks[:place])) for place, tick in enumerate(ticks)]


def _compared(name: str, sign: str, other: str, space: Space) -> list[_Sides]:
    """Both facts have a value, and these stand in one of the orders that the sign allows."""
    if name == other:
        return [{name: whole(space.domains[name])}] if "=" in sign and sign != "!=" else []
    if other < name:
        name, sign, other = other, _MIRRORED[sign], name
    both: _Sides = {each: whole(space.domains[each]) for each in (name, other)}
    return [{**both, (name, other): Among(frozenset(order))} for order in _ORDERS[sign]]
