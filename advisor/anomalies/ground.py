"""The ground on which rules are compared: the domains, the regions in which they speak, and what a case can reach."""

import math
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field

from advisor.anomalies.ranges import reachable
from advisor.boxes import Box, boxes_of
from advisor.conditions import (
    ALWAYS,
    Bound,
    Coded,
    Condition,
    Domain,
    Either,
    Every,
    FactRef,
    Member,
    Ticked,
    Value,
    Valueless,
    branches,
    negated,
)
from advisor.knowledge import (
    CLOSING_FACTS,
    Band,
    Declaration,
    Formed,
    Instance,
    Knowledge,
    LookedUp,
    Refers,
    Row,
    Rule,
    Sets,
)

_MOST_ROWS = 60
_MOST_TRIES = 2000
_MOST_ALTERNATIVES = 60


@dataclass(frozen=True, slots=True)
class Spoken:
    """One conclusion of one instance, and the regions in which it is drawn."""

    instance: Instance
    place: int
    region: Condition

    @property
    def rule(self) -> Rule:
        """The written rule."""
        return self.instance.rule


@dataclass(slots=True)
class Ground:
    """Domains as declared and as reachable; boxes made once."""

    knowledge: Knowledge
    declared: Mapping[str, Domain] = field(init=False)
    possible: Mapping[str, Domain] = field(init=False)
    voidable: frozenset[str] = field(init=False)
    _boxes: dict[tuple[Condition, bool], list[Box]] = field(default_factory=dict, init=False)
    _ways: dict[str, list[Box] | None] = field(default_factory=dict, init=False)
    _calm: list[Box] | None = field(default=None, init=False)

    def __post_init__(self) -> None:
        knowledge = self.knowledge
        names = (*knowledge.facts, *knowledge.computations, *knowledge.properties)
        self.declared = {**{name: knowledge.domain(name) for name in names}, **CLOSING_FACTS}
        self.possible = {**self.declared, **reachable(knowledge)}
        concluded = {name for name, each in knowledge.facts.items() if each.concluded}
        self.voidable = frozenset({*knowledge.computations, *concluded, *CLOSING_FACTS, *knowledge.properties})

    def instances(self) -> Iterator[Instance]:
        """All instances whose conclusions count, in the order of the steps."""
        for instances in self.knowledge.instances.values():
            yield from (each for each in instances if each.binds)

    def spoken(self) -> Iterator[Spoken]:
        """All conclusions that count."""
        for instance in self.instances():
            for place, each in enumerate(instance.then):
                for_ = getattr(each, "for_", ALWAYS)
                yield Spoken(instance, place, instance.when if for_ == ALWAYS else Every((instance.when, for_)))

    def boxes(self, condition: Condition, *, as_declared: bool = False) -> list[Box]:
        """The boxes in which a condition holds, within what a case can reach (or within what is declared)."""
        key = (condition, as_declared)
        if key not in self._boxes:
            domains = self.declared if as_declared else self.possible
            self._boxes[key] = boxes_of(condition, domains, self.voidable)
        return self._boxes[key]

    def reached(self, box: Box) -> Box | None:
        """The part of a box that answers can lead to, with the facts behind its facts; nothing where none can.

        Questions that are not asked, look-ups and conclusions are followed; formulas count with their range only.
        """
        return _Following(self).first(box, frozenset())

    def calm(self, box: Box) -> Box:
        """The part of a box in which no referral ends the case early, where there is any."""
        if self._calm is None:
            ends = [
                each.when
                for each in self.instances()
                if any(isinstance(one, Refers) and one.withhold for one in each.then)
            ]
            self._calm = self.boxes(Every(tuple(negated(each, self.voidable) for each in ends)))
        met = (met for each in self._calm if (met := box.intersect(each)) is not None)
        return next((found for each in met if (found := self.reached(each)) is not None), self.reached(box) or box)

    def ways(self, name: str) -> list[Box] | None:
        """The boxes in which a fact gets its values; nothing where it may have any."""
        if name not in self._ways:
            condition = self._ways_of(name)
            self._ways[name] = None if condition is None else self.boxes(condition)
        return self._ways[name]

    def _ways_of(self, name: str) -> Condition | None:
        if name in self.knowledge.computations:
            how = self.knowledge.computations[name].how
            return self._looked_up(name, how) if isinstance(how, LookedUp) else _picked(name, how)
        if name in self.knowledge.properties:
            how_property = self.knowledge.properties[name].how
            return self._looked_up(name, how_property) if isinstance(how_property, LookedUp) else None
        declaration = self.knowledge.facts.get(name)
        if declaration is None:
            return None
        return self._asked(declaration) if declaration.question else self._concluded(declaration)

    def _asked(self, declaration: Declaration) -> Condition | None:
        question, unasked = declaration.question, declaration.unasked
        if question is None or question.when == ALWAYS or unasked is None:
            return None
        stands: Condition = ALWAYS
        if isinstance(unasked, FactRef):
            stands = Bound(declaration.name, "=", unasked) if declaration.domain.ordered else ALWAYS
        elif isinstance(unasked, float | int | str | tuple):
            stands = equals(declaration.name, unasked, declaration.domain)
        return Either((question.when, Every((negated(question.when), stands))))

    def _concluded(self, declaration: Declaration) -> Condition | None:
        """No rule speaks, or one does and none that speaks as well outdoes it."""
        if declaration.concluded is None:
            return None
        name, domain, how = declaration.name, declaration.domain, declaration.concluded
        setters = [
            (instance.when, each.value)
            for instance in self.instances()
            for each in instance.then
            if isinstance(each, Sets) and each.name == name
        ]
        silent = tuple(negated(when, self.voidable) for when, _ in setters)
        exactly = math.prod(len(branches(each)) for each in silent) <= _MOST_ALTERNATIVES
        silent = silent if exactly else ()
        ways: list[Condition] = [Every((equals(name, how.otherwise, domain), *silent))]
        for when, value in setters:
            above = [_outdone(name, how.combine, value, *other, self.voidable) for other in setters] if exactly else []
            ways.append(Every((_set_to(name, value, domain), when, *above)))
        return Either((*ways, Valueless(name)))

    def _looked_up(self, name: str, how: LookedUp) -> Condition | None:
        table = self.knowledge.tables[how.table]
        if table.matrix or len(table.rows) > _MOST_ROWS:
            return None
        ways: list[Condition] = []
        for row in table.rows:
            cell = row.cells.get(how.column)
            if cell is not None and not isinstance(cell, Band):
                ways.append(Every((equals(name, cell, self.declared[name]), self.meets(row, how.by))))
        otherwise = Valueless(name) if how.otherwise is None else equals(name, how.otherwise, self.declared[name])
        return Either((*ways, otherwise))

    def meets(self, row: Row, by: tuple[tuple[str, str], ...]) -> Condition:
        """The condition that facts meet a row of a table; a blank cell takes everything."""
        cells = [(name, row.cells[column]) for column, name in by if column in row.cells]
        return Every(tuple(cell_met(name, cell, self.declared[name]) for name, cell in cells))


def _set_to(name: str, value: Coded | FactRef, domain: Domain) -> Condition:
    """The condition that a fact has the value that a rule sets."""
    if not isinstance(value, FactRef):
        return equals(name, domain.decode(value), domain)
    return Bound(name, "=", value) if domain.ordered else ALWAYS


def _outdone(
    name: str, combine: str, value: Coded | FactRef, when: Condition, other: Coded | FactRef, voidable: frozenset[str]
) -> Condition:
    """The condition that another conclusion does not outdo this one."""
    if combine == "one" or value == other:
        return ALWAYS
    sign = ">=" if combine == "highest" else "<="
    if isinstance(other, FactRef):
        return Either((negated(when, voidable), Bound(name, sign, other)))
    if isinstance(value, FactRef):
        return Either((negated(when, voidable), Bound(name, sign, _number(other))))
    kept = _number(value) >= _number(other) if combine == "highest" else _number(value) <= _number(other)
    return ALWAYS if kept else negated(when, voidable)


def _picked(name: str, how: Formed) -> Condition | None:
    """The highest or the lowest of two is one of the two; other formulas are not followed."""
    if how.formula not in {"highest", "lowest"}:
        return None
    sign = ">=" if how.formula == "highest" else "<="
    one, other = how.inputs.values()
    ways = [_is_first(name, sign, *pair) for pair in ((one, other), (other, one))]
    return Either((*ways, Valueless(name)))


def _is_first(name: str, sign: str, one: str | float, other: str | float) -> Condition:
    limits = [FactRef(each) if isinstance(each, str) else each for each in (one, other)]
    return Every((Bound(name, "=", limits[0]), Bound(name, sign, limits[1])))


def cell_met(name: str, cell: Value | Band, domain: Domain) -> Condition:
    """The condition that a fact meets one cell."""
    if isinstance(cell, Band):
        ends = ((">=", cell.low), ("<", cell.high))
        return Every(tuple(Bound(name, sign, end) for sign, end in ends if abs(end) != float("inf")))
    return equals(name, cell, domain)


def equals(name: str, value: Value, domain: Domain) -> Condition:
    """The condition that a fact has a value; of a tick list, exactly these ticks, or this one among others."""
    if domain.kind == "several":
        if not isinstance(value, tuple):
            return Ticked(name, frozenset({str(value)}))
        clear = frozenset(domain.choices) - set(value)
        ticked = tuple(Ticked(name, frozenset({each})) for each in value)
        return Every((*ticked, Ticked(name, clear, wanted=False))) if clear else Every(ticked)
    if domain.ordered:
        known = domain.kind == "number" or value in domain.choices
        return Bound(name, "=", _number(domain.code(value))) if known else Either(())
    return Member(name, frozenset({str(value)}))


def _number(coded: Coded) -> float:
    return coded if isinstance(coded, float | int) else float("nan")


class _Following:
    """Follows the facts of a box back to answers, one after the other; gives up in favour of the box."""

    def __init__(self, ground: Ground) -> None:
        self.ground, self.left = ground, _MOST_TRIES

    def first(self, box: Box, done: frozenset[str]) -> Box | None:
        """The first way that leads to a part of the box."""
        name = next((each for each in sorted(box.names - done) if self.ground.ways(each)), None)
        if name is None or self.left <= 0:
            return box
        for way in self.ground.ways(name) or ():
            self.left -= 1
            met = box.intersect(way)
            found = self.first(met, done | {name}) if met is not None else None
            if found is not None:
                return found
        return None
