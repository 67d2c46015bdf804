"""Whether knowledge hangs together: every name that a part of it reads is declared, with the values that are meant."""

from collections.abc import Iterator, Mapping
from itertools import chain

from advisor.conditions import Bound, Condition, Domain, FactRef, Member, Ticked, leaves
from advisor.conditions.terms import Term, names
from advisor.explanation.words import domain_of
from advisor.knowledge import CLOSING_FACTS, Instance, Knowledge, Refers, Sets, Warns
from advisor.knowledge.model import Asks, Formed, FromItem, LookedUp, Table, WorstOf


def stands(knowledge: Knowledge, declared: frozenset[str]) -> bool:
    """Whether an advisor can go by a mixture of two editions, which may name what only the other of them declares.

    `declared` are the names that either edition declares.
    """
    read = chain(
        chain.from_iterable(_read_by(each, knowledge) for found in knowledge.instances.values() for each in found),
        _read_by_declared(knowledge),
        _read_by_lists(knowledge),
        _read_by_codes(knowledge.designations, knowledge, declared),
    )
    return all(read)


def names_of(knowledge: Knowledge) -> frozenset[str]:
    """The names of facts and properties."""
    return frozenset({*knowledge.facts, *knowledge.computations, *knowledge.properties})


def suits(condition: Condition, knowledge: Knowledge) -> bool:
    """Whether the knowledge declares every name of a condition, with the values that it asks for."""
    known = all(_known(name, knowledge) for name in names(condition))
    return known and all(_meant(term, domain_of(term.name, knowledge)) for term in leaves(condition))


def unknown(condition: Condition, knowledge: Knowledge) -> Iterator[str]:
    """The names of a condition that do not suit the knowledge."""
    for term in leaves(condition):
        for name in names(term):
            if not _known(name, knowledge):
                yield name
        if _known(term.name, knowledge) and not _meant(term, domain_of(term.name, knowledge)):
            yield term.name


def _known(name: str, knowledge: Knowledge) -> bool:
    return (
        name in knowledge.facts
        or name in knowledge.computations
        or name in knowledge.properties
        or name in CLOSING_FACTS
    )


def _meant(term: Term, domain: Domain) -> bool:
    """Whether the values of a term exist in the domain."""
    if isinstance(term, Bound):
        return isinstance(term.limit, FactRef) or _has(term.limit, domain)
    return not isinstance(term, Member | Ticked) or all(_has(each, domain) for each in term.among)


def _has(value: object, domain: Domain) -> bool:
    if isinstance(value, frozenset | tuple):
        return all(_has(each, domain) for each in value)
    if isinstance(value, str):
        return domain.kind in {"text", "item"} or domain.open_choices or value in domain.choices
    return domain.kind == "number" or (isinstance(value, float) and value < len(domain.choices))


def _read_by(instance: Instance, knowledge: Knowledge) -> Iterator[bool]:
    yield suits(instance.when, knowledge)
    for each in instance.then:
        if isinstance(each, Refers):
            yield each.to in knowledge.referrals
            continue
        yield suits(each.for_, knowledge)
        if isinstance(each, Asks):
            yield each.property in knowledge.properties
            yield suits(each.test, knowledge)
        elif isinstance(each, Warns):
            yield each.caution in knowledge.cautions
        elif isinstance(each, Sets):
            yield _known(each.name, knowledge)
            yield _sets(each, knowledge)


def _sets(each: Sets, knowledge: Knowledge) -> bool:
    if isinstance(each.value, FactRef):
        return _known(each.value.name, knowledge)
    return _known(each.name, knowledge) and _has(each.value, domain_of(each.name, knowledge))


def _read_by_declared(knowledge: Knowledge) -> Iterator[bool]:
    """What facts, computations and properties read."""
    for fact in knowledge.facts.values():
        yield fact.question is None or suits(fact.question.when, knowledge)
        yield fact.filled is None or _found(fact.filled, knowledge)
        if isinstance(fact.unasked, FactRef):
            yield _known(fact.unasked.name, knowledge)
        elif isinstance(fact.unasked, FromItem):
            yield fact.unasked.fact in knowledge.facts and fact.unasked.property in knowledge.properties
    for computed in knowledge.computations.values():
        yield _found(computed.how, knowledge)
    for prop in knowledge.properties.values():
        yield prop.how is None or _found(prop.how, knowledge)
        yield not prop.same_item or _known(prop.same_item, knowledge)


def _found(how: Formed | LookedUp | WorstOf, knowledge: Knowledge) -> bool:
    if isinstance(how, WorstOf):
        return all(_found(each, knowledge) for each in how.parts)
    if isinstance(how, Formed):
        return all(_known(each, knowledge) for each in how.inputs.values() if isinstance(each, str))
    table = knowledge.tables.get(how.table)
    return table is not None and _in_table(how, table) and all(_known(name, knowledge) for _, name in how.by)


def _in_table(how: LookedUp, table: Table) -> bool:
    return bool(table.matrix) or all(each in table.columns for each in (how.column, *(column for column, _ in how.by)))


def _read_by_lists(knowledge: Knowledge) -> Iterator[bool]:
    """What the docket, the forks, the usual oils and the shelf read."""
    for row in knowledge.docket:
        named = (*filter(None, (row.recommends,)), *row.demands, *row.facts)
        yield all(_known(each, knowledge) for each in named) and suits(row.shown_if, knowledge)
    for fork in knowledge.forks.values():
        yield fork.fact in knowledge.facts and suits(fork.when, knowledge)
    usual = knowledge.usual_oils
    yield usual.table in knowledge.tables and suits(usual.ordinary, knowledge)
    yield usual.family in knowledge.properties
    for product in knowledge.shelf:
        yield _stored(product.values, knowledge)


def _stored(values: Mapping[str, object], knowledge: Knowledge) -> bool:
    return all(name in knowledge.properties for name in values) and all(
        isinstance(value, float) or _has(value, knowledge.properties[name].domain) for name, value in values.items()
    )


def _read_by_codes(tree: Mapping[str, object], knowledge: Knowledge, declared: frozenset[str]) -> Iterator[bool]:
    """What the designations read: their tables with the columns, and facts and properties by name."""
    written = [str(each) for each in tree.values() if isinstance(each, str)]
    yield not any(each in declared and not _known(each, knowledge) for each in written)
    if "table" in tree:
        table = knowledge.tables.get(str(tree["table"]))
        columns = [each for each in written if each != str(tree["table"])]
        yield table is not None and all(_is_column(each, table, knowledge) for each in columns)
    for branch in tree.values():
        if isinstance(branch, Mapping):
            yield from _read_by_codes(branch, knowledge, declared)


def _is_column(name: str, table: Table, knowledge: Knowledge) -> bool:
    return name in table.columns or name == table.key or _known(name, knowledge)
