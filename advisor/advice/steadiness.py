"""Whether anything of an advice can change between two values of a number: a proof from declared directions.

Where every figure that moves only rises or only falls from the one value to the other (formulas declare that), a
threshold that is on the same side at both is on it throughout. So if no threshold, no step short and no row of a table
parts the two, nothing between them reads otherwise. Where that cannot be shown the answer is no, and one looks.
"""

from collections.abc import Iterable, Iterator, Mapping
from itertools import chain

from advisor.advice.left_open import standing_for
from advisor.advice.model import Advice
from advisor.advice.readings import readings
from advisor.conditions import Bound, Condition, Either, FactRef, leaves
from advisor.conditions.terms import SIGNS, Term
from advisor.formulas import FORMULAS
from advisor.knowledge import Band, Formed, Instance, Knowledge, LookedUp, Sets, Warns
from advisor.shelf import Judgement, judge, places, steps_short
from advisor.shelf.catalogue import reads
from advisor.specification import Demand

Moving = dict[str, float]
"""What differs between the two ends: +1 where it rises with the number, -1 where it falls."""

_ONE_WAY_ALONE = {"product", "quotient"}
"""Formulas that go one way as long as one input alone moves."""
_KAPPA = "recommended_kappa"
_SEEN_FROM_THE_LIMIT = {"<": ">", "<=": ">=", ">": "<", ">=": "<=", "=": "=", "!=": "!="}


class Steadiness:
    """Judges pairs of advices that differ in one answer only."""

    def __init__(self, knowledge: Knowledge, fact: str) -> None:
        self.knowledge = knowledge
        self.given = standing_for(fact, knowledge)
        self.limits: dict[str, set[tuple[str, float]]] = {}
        self.pairs: set[tuple[str, str, str]] = set()
        self.drawn: dict[str, set[str]] = {}
        for condition in _conditions(knowledge):
            self._note(condition)
        for each in (each for instance in _instances(knowledge) for each in instance.then if isinstance(each, Sets)):
            if isinstance(each.value, FactRef):
                self.drawn.setdefault(each.name, set()).add(each.value.name)

    def _note(self, condition: Condition) -> None:
        for term in leaves(condition):
            if not isinstance(term, Bound):
                continue
            if isinstance(term.limit, FactRef):
                self.pairs.add((term.name, term.sign, term.limit.name))
            else:
                self.limits.setdefault(term.name, set()).add((term.sign, term.limit))

    def __call__(self, one: Advice, other: Advice) -> bool:
        """Whether nothing can read otherwise between the two."""
        if one.judgement is None or other.judgement is None or readings(one) != readings(other):
            return False
        if [each.outcomes for each in one.trace] != [each.outcomes for each in other.trace]:
            return False
        moving = self._moving_facts(one, other)
        if moving is None or self._parted(moving, one, other):
            return False
        columns = self._moving_columns(moving)
        return columns is not None and all(
            self._judged_alike(getattr(one, each), getattr(other, each), columns)
            for each in ("judgement", "oils", "choices")
        )

    def _moving_facts(self, one: Advice, other: Advice) -> Moving | None:
        """The facts that move, each only one way; None where that is not sure."""
        if one.facts.keys() != other.facts.keys() or (one.kappa is None) is not (other.kappa is None):
            return None
        moving: Moving = {}
        for name, fact in one.facts.items():
            before, after = fact.value, other.facts[name].value
            if fact.origin is not other.facts[name].origin:
                return None
            if name not in self.given and not self._goes_one_way(name, moving, one, other):
                return None
            if before != after:
                if not isinstance(before, float) or not isinstance(after, float):
                    return None
                moving[name] = 1.0 if after > before else -1.0
        if one.kappa is not None and other.kappa is not None and one.kappa != other.kappa:
            moving[_KAPPA] = 1.0 if other.kappa > one.kappa else -1.0
        return moving

    def _goes_one_way(self, name: str, moving: Moving, one: Advice, other: Advice) -> bool:
        """Whether a fact that is not answered itself goes one way, or stays as it is."""
        computation = self.knowledge.computations.get(name)
        if computation is None:
            rests = not self.drawn.get(name, set()) & moving.keys()
            return rests and one.facts[name].value == other.facts[name].value
        if isinstance(computation.how, Formed):
            return _one_way(computation.how, moving)
        return one.facts[name].value == other.facts[name].value and self._same_row(computation.how, moving, one, other)

    def _same_row(self, how: LookedUp, moving: Moving, one: Advice, other: Advice) -> bool:
        """Whether no row of the table begins or ends between the two."""
        rows = self.knowledge.tables[how.table].rows
        for column, name in how.by:
            if name not in moving:
                continue
            ends = sorted(float(each.facts[name].value) for each in (one, other))  # type: ignore[arg-type]  # moving ones are numbers
            cells = [row.cells.get(column) for row in rows]
            edges = {edge for cell in cells if isinstance(cell, Band) for edge in (cell.low, cell.high)}
            if any(ends[0] < edge <= ends[1] for edge in edges) or any(isinstance(cell, float) for cell in cells):
                return False
        return True

    def _parted(self, moving: Moving, one: Advice, other: Advice) -> bool:
        """Whether a threshold on a fact parts the two, or facts are compared that both move."""
        for name in moving:
            before, after = one.closing[name], other.closing[name]
            if any(_parts(sign, limit, before, after) for sign, limit in self.limits.get(name, ())):
                return True
        for name, sign, limit in self.pairs:
            if limit in moving and (name in moving or name in self.knowledge.properties):
                return True
            for mover, way, still in ((name, sign, limit), (limit, _SEEN_FROM_THE_LIMIT[sign], name)):
                if mover in moving and _parts(way, one.closing.get(still), one.closing[mover], other.closing[mover]):
                    return True
        return False

    def _moving_columns(self, moving: Moving) -> frozenset[str] | None:
        """The properties of lubricants that move with these facts; None where one may go to and fro."""
        found: Moving = {}
        left = [prop for prop in self.knowledge.properties.values() if prop.how is not None]
        changed = True
        while changed:
            changed = False
            for prop in left:
                moves = moving | found
                if prop.name in found or not any(name in moves for name in reads(prop)):
                    continue
                how = prop.how
                if not isinstance(how, Formed) or how.formula in _ONE_WAY_ALONE or not _sense(how, moves):
                    return None
                found[prop.name] = _sense(how, moves)
                changed = True
        columns = frozenset(found) | ({"kappa"} if _KAPPA in moving else frozenset())
        return None if any(name in columns for name, _, _ in self.pairs) else columns

    def _judged_alike(self, one: Judgement | None, other: Judgement | None, columns: frozenset[str]) -> bool:
        """Whether every item stands to every demand at both ends as it does between them."""
        if one is None or other is None:
            return one is other
        if (one.failing, one.missing) != (other.failing, other.missing):
            return False
        for name in columns & one.columns.keys() & other.columns.keys():
            for sign, limit in self.limits.get(name, ()):
                if _side(Bound(name, sign, limit), one) != _side(Bound(name, sign, limit), other):
                    return False
        return len(one.demands) == len(other.demands) and all(
            _asked_alike(number, one, other, columns) for number in range(len(one.demands))
        )


def _conditions(knowledge: Knowledge) -> Iterator[Condition]:
    """Every condition that rules, questions, contested points and rows look at, but for what demands ask."""
    for instance in _instances(knowledge):
        yield instance.when
        yield from (each.for_ for each in instance.then if isinstance(each, Sets | Warns))
    yield from (each.question.when for each in knowledge.facts.values() if each.question is not None)
    yield from (row.shown_if for row in knowledge.docket)
    yield from (fork.when for fork in knowledge.forks.values())
    yield knowledge.usual_oils.ordinary


def _instances(knowledge: Knowledge) -> Iterable[Instance]:
    return chain.from_iterable(knowledge.instances.values())


def _one_way(how: Formed, moving: Mapping[str, float]) -> bool:
    """Whether a formula's result goes one way while these inputs go theirs."""
    return _sense(how, moving) != 0 or not any(each in moving for each in how.inputs.values())


def _sense(how: Formed, moving: Mapping[str, float]) -> float:
    """The way in which a formula's result goes; 0 where it may go to and fro."""
    declared = {each.name: each.direction for each in FORMULAS[how.formula].inputs}
    movers = [(name, moving[each]) for name, each in how.inputs.items() if isinstance(each, str) and each in moving]
    if len(movers) == 1 and how.formula in _ONE_WAY_ALONE:
        return 1.0
    senses = {sense * {"up": 1.0, "down": -1.0, "none": 0.0}[declared[name]] for name, sense in movers}
    return senses.pop() if len(senses) == 1 else 0.0


def _parts(sign: str, limit: object, before: object, after: object) -> bool:
    """Whether a threshold, or the one value of an equality, parts two values; one without a value does not."""
    if not isinstance(limit, float):
        return False
    if not isinstance(before, float) or not isinstance(after, float):
        return True
    if sign in {"=", "!="}:
        return min(before, after) <= limit <= max(before, after)
    return SIGNS[sign](before, limit) is not SIGNS[sign](after, limit)


def _side(term: Bound, judgement: Judgement) -> tuple[int, int]:
    """The items that meet a threshold, and those that do not."""
    return judge(term, judgement.columns, judgement.catalogue.everything)


def _asked_alike(number: int, one: Judgement, other: Judgement, columns: frozenset[str]) -> bool:
    """Whether a demand asks alike at both ends, and each item misses it by as many steps."""
    first, second = one.demands[number], other.demands[number]
    terms, twins = list(_terms(first)), list(_terms(second))
    if _head(first) != _head(second) or len(terms) != len(twins):
        return False
    moved = [(term, twin) for term, twin in zip(terms, twins, strict=True) if term != twin or term.name in columns]
    for term, twin in moved:
        if not isinstance(term, Bound) or not isinstance(twin, Bound) or term.sign in {"=", "!="}:
            return False
        if (term.name, term.sign) != (twin.name, twin.sign) or (term != twin and term.name in columns):
            return False
        if _side(term, one) != _side(twin, other):
            return False
    return not moved or _short_alike(first, second, one, other, one.failing[number])


def _head(demand: Demand) -> tuple[object, ...]:
    return (demand.property, demand.level, demand.rule, demand.void)


def _terms(demand: Demand) -> Iterator[Term]:
    yield from leaves(demand.test)
    yield from leaves(demand.for_)


def _short_alike(first: Demand, second: Demand, one: Judgement, other: Judgement, failing: int) -> bool:
    """Whether the items that miss a should do so by as many steps at both ends."""
    if first.must or not failing:
        return True
    if isinstance(first.test, Either):
        return False
    domain = one.domains[first.property]
    before, after = one.columns[first.property].values, other.columns[first.property].values
    return all(
        steps_short(first.test, before[place], domain) == steps_short(second.test, after[place], domain)  # type: ignore[arg-type]  # what fails has a value
        for place in places(failing)
    )
