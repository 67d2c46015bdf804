"""What no case can show: an answer where nobody was asked, and a looked-up value beside other keys than its row's."""

from collections.abc import Iterable, Iterator

from advisor.bending.regions import where
from advisor.boxes import Box
from advisor.conditions import ALWAYS, Bound, Condition, Domain, Either, Every, FactRef, Member, Value, Valueless
from advisor.knowledge import Band, Declaration, FromItem, Knowledge, LookedUp, Row

MOST_BOXES = 400


def possible(boxes: Iterable[Box], knowledge: Knowledge) -> list[Box]:
    """The boxes cut down to what cases can show of the facts that bound them; none where no case leads into them."""
    laws: dict[str, list[Box]] = {}
    found: list[Box] = []
    for box in boxes:
        left = [box]
        for name in sorted(box.names):
            if name not in laws:
                law = _law(name, knowledge)
                laws[name] = where(law, knowledge) if law is not None else []
            if laws[name] and len(left) * len(laws[name]) <= MOST_BOXES:
                left = [met for one in left for other in laws[name] if (met := one.intersect(other)) is not None]
        found += left
    return found


def _law(name: str, knowledge: Knowledge) -> Condition | None:
    """What holds of a fact in every case; nothing where it is not known."""
    if name in knowledge.facts:
        return _of_question(knowledge.facts[name], knowledge)
    computation = knowledge.computations.get(name)
    if computation is None or not isinstance(computation.how, LookedUp):
        return None
    return _of_look_up(name, computation.how, knowledge)


def _of_question(fact: Declaration, knowledge: Knowledge) -> Condition | None:
    """A tuned fact has its value; another has that of those who are not asked, or the case is asked."""
    if fact.tunable is not None:
        return _equal(fact.name, fact.tunable.value, fact.domain)
    if fact.question is None or fact.question.when == ALWAYS or fact.domain.kind == "several":
        return None
    if fact.unasked is None or isinstance(fact.unasked, FactRef | FromItem):
        return None
    return Either((_equal(fact.name, fact.unasked, knowledge.domain(fact.name)), fact.question.when))


def _equal(name: str, value: Value, domain: Domain) -> Condition:
    coded = domain.code(value)
    return Bound(name, "=", coded) if isinstance(coded, float) else Member(name, frozenset({str(coded)}))


def _of_look_up(name: str, how: LookedUp, knowledge: Knowledge) -> Condition | None:
    """A fact has no value, or that of a row whose keys are met."""
    table = knowledge.tables[how.table]
    several = any(knowledge.domain(key).kind == "several" for _, key in how.by)
    if table.matrix or how.combine or how.otherwise is not None or several:
        return None
    rows = [Every(tuple(_row(name, how, row, knowledge))) for row in table.rows if how.column in row.cells]
    return Either((*rows, Valueless(name)))


def _row(name: str, how: LookedUp, row: Row, knowledge: Knowledge) -> Iterator[Condition]:
    value = row.cells[how.column]
    if not isinstance(value, Band):
        yield _equal(name, value, knowledge.domain(name))
    for column, key in how.by:
        cell = row.cells.get(column)
        if isinstance(cell, Band):
            yield Every((Bound(key, ">=", cell.low), Bound(key, "<", cell.high)))
        elif cell is not None:
            yield _equal(key, cell, knowledge.domain(key))
