"""Where conditions part company, and what keeps a record out of a box."""

from collections.abc import Iterator, Mapping

from advisor.boxes import Among, Box, Side, Stretch, Ticks, boxes_of
from advisor.boxes.sides import a_value, whole
from advisor.conditions import Coded, Condition, Domain, Every, Record, negated
from advisor.conditions.terms import Void
from advisor.knowledge import CLOSING_FACTS, Knowledge


def domains_seen(knowledge: Knowledge) -> Mapping[str, Domain]:
    """The domains of everything that the conditions of rules see."""
    names = (*knowledge.facts, *knowledge.computations)
    return {**CLOSING_FACTS, **{name: knowledge.domain(name) for name in names}}


def may_lack(knowledge: Knowledge) -> frozenset[str]:
    """What may have no value for good."""
    concluded = (name for name, each in knowledge.facts.items() if each.concluded)
    return frozenset({*knowledge.computations, *concluded, *CLOSING_FACTS})


def apart(one: Condition, other: Condition, knowledge: Knowledge) -> list[Box]:
    """Where the one condition holds and the other fails."""
    voidable = may_lack(knowledge)
    return boxes_of(Every((one, negated(other, voidable))), domains_seen(knowledge), voidable)


def where(condition: Condition, knowledge: Knowledge) -> list[Box]:
    """Where the condition holds."""
    return boxes_of(condition, domains_seen(knowledge), may_lack(knowledge))


def inside(box: Box, record: Record) -> bool:
    """Whether a record lies in the box, facts that are compared with one another included."""
    if unmet(box, record):
        return False
    return all(
        isinstance(side, Among) and _order(record.get(key[0]), record.get(key[1])) in side.values
        for key, side in box.sides.items()
        if isinstance(key, tuple)
    )


def _order(one: Coded | Void | None, other: Coded | Void | None) -> str:
    """How two numbers stand to each other; empty where one of them is lacking."""
    if not isinstance(one, float) or not isinstance(other, float):
        return ""
    return "<" if one < other else ">" if one > other else "="


def unmet(box: Box, record: Record) -> list[str]:
    """The facts that keep a record out of the box."""
    return [name for name, side in box.sides.items() if isinstance(name, str) and not _on(side, record.get(name))]


def _on(side: Side, seen: Coded | Void | None) -> bool:
    if seen is None or isinstance(seen, Void):
        return seen is not None and not isinstance(side, Stretch | Among | Ticks)
    if isinstance(side, Stretch):
        return isinstance(seen, float) and side.has(seen)
    if isinstance(side, Among):
        return (seen in side.values) is side.wanted
    return isinstance(side, Ticks) and isinstance(seen, frozenset) and side.set <= seen and not side.clear & seen


def wanted_on(side: Side, seen: Coded | Void | None, domain: Domain) -> Iterator[Coded]:
    """Values on the side, likely ones first."""
    if isinstance(side, Ticks):
        ticked = seen if isinstance(seen, frozenset) else frozenset()
        yield (ticked | side.set) - side.clear
    elif isinstance(side, Among):
        declared = whole(domain)
        some = [each for each in declared.values if isinstance(declared, Among)] if isinstance(declared, Among) else []
        yield from sorted((each for each in some if (each in side.values) is side.wanted), key=str)
        if domain.open_choices:
            yield from (choice for choice in domain.choices if (choice in side.values) is side.wanted)
    elif isinstance(side, Stretch):
        ends = ((side.low, side.low_open), (side.high, side.high_open))
        yield from (end for end, is_open in ends if not is_open and domain.low < end < domain.high)
        middle = a_value(side, domain)
        if isinstance(middle, float):
            yield middle
