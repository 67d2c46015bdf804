"""What nothing uses: questions without a reader, conclusions and computations that end nowhere."""

import re
from collections.abc import Iterator
from collections.abc import Mapping as Map

from advisor.anomalies.finding import Finding, Kind, Witness
from advisor.anomalies.ground import Ground
from advisor.anomalies.proving import Proving, replayed
from advisor.boxes import Side, whole
from advisor.boxes.sides import Among, Stretch, Ticks, a_value
from advisor.conditions import ALWAYS, Coded, Condition, FactRef
from advisor.conditions.terms import names
from advisor.documents import Mark
from advisor.knowledge import Asks, FromItem, Instance, Knowledge, Property, Sets, WorstOf
from advisor.knowledge.crosschecks import inputs_of

_NAMED_IN_TEXT = re.compile(r"\{([a-z][a-z0-9_]*)\}")

# The closing step makes these verdicts from the product that the fact names.
_VERDICT_ON = {"maker_verdict": "maker_item", "incumbent_verdict": "incumbent"}


def uses(ground: Ground, proving: Proving) -> Iterator[Finding]:
    """Questions that nothing uses, and conclusions and computations that nothing uses."""
    knowledge = ground.knowledge
    read = _read(knowledge)
    shown = read | {name for rule in knowledge.rules.values() for name in _NAMED_IN_TEXT.findall(rule.because)}
    for name, declaration in knowledge.facts.items():
        if declaration.question is not None and name not in read:
            message = f"the answer to '{name}' is used by no rule, computation, property or row of the docket"
            yield _finding("unused question", name, declaration.mark, message, ground, proving)
        if declaration.concluded is not None and name not in shown:
            message = f"'{name}' is concluded, and nothing uses it"
            yield _finding("unused conclusion", name, declaration.mark, message, ground, proving)
    for name, computation in knowledge.computations.items():
        if name not in shown:
            message = f"'{name}' is computed, and nothing uses it"
            yield _finding("unused conclusion", name, computation.mark, message, ground, proving)
    for name, prop in knowledge.properties.items():
        if prop.concluded is not None and name not in read:
            message = f"the property '{name}' is concluded, and nothing uses it"
            yield _finding("unused conclusion", name, prop.mark, message, ground, proving)


def _finding(kind: Kind, name: str, mark: Mark, message: str, ground: Ground, proving: Proving) -> Finding:
    witness = _indifferent(name, ground, proving)
    hint = f"use '{name}' in a rule, or take it out"
    return Finding(kind, mark, message, hint, witness)


def _indifferent(name: str, ground: Ground, proving: Proving) -> Witness:
    """A value of the fact; with it, with another, and without any, the engine gives every condition one outcome."""
    conditions = list(dict.fromkeys(_conditions(ground.knowledge)))
    one, other = _two(whole(ground.declared[name]), name, ground)
    outcomes = {replayed(ground.declared, conditions, {**record}) for record in ({name: one}, {name: other}, {})}
    return proving.witness({name: one}, confirmed=len(outcomes) == 1)


def _two(side: Side, name: str, ground: Ground) -> tuple[Coded, Coded]:
    """Two values, different where there are two."""
    domain = ground.declared[name]
    one = a_value(side, domain)
    if isinstance(side, Ticks):
        return frozenset(), frozenset(domain.choices)
    rest: Side = side
    if isinstance(side, Among):
        rest = next((each for each in side.without(Among(frozenset({one}))) if not each.empty), side)  # type: ignore[arg-type]  # a choice is no void
    elif isinstance(side, Stretch):
        pieces = side.without(Stretch(one, one))  # type: ignore[arg-type]  # a stretch holds numbers
        rest = next((each for each in pieces if not each.empty), side)
    return one, a_value(rest, domain)  # type: ignore[return-value]  # neither side is void


def _conditions(knowledge: Knowledge) -> Iterator[Condition]:
    for instances in knowledge.instances.values():
        for instance in instances:
            yield instance.when
            for each in instance.then:
                yield getattr(each, "for_", ALWAYS)
                if isinstance(each, Asks):
                    yield each.test


def _read(knowledge: Knowledge) -> set[str]:
    """Every name that something reads."""
    found = {name for instances in knowledge.instances.values() for each in instances for name in _by_rule(each)}
    found |= {fact for verdict, fact in _VERDICT_ON.items() if verdict in found}
    for computation in knowledge.computations.values():
        found |= set(inputs_of(computation.how))
    for prop in knowledge.properties.values():
        found |= set(_by_property(prop))
    for name, declaration in knowledge.facts.items():
        found |= set(names(declaration.question.when)) - {name} if declaration.question else set()
        if isinstance(declaration.unasked, FactRef):
            found.add(declaration.unasked.name)
        if isinstance(declaration.unasked, FromItem):
            found |= {declaration.unasked.fact, declaration.unasked.property}
        found |= set(inputs_of(declaration.filled)) if declaration.filled else set()
    for row in knowledge.docket:
        found |= {row.recommends, *row.demands, *row.facts, *names(row.shown_if)}
    for fork in knowledge.forks.values():
        found |= set(names(fork.when)) | {fork.fact}
    return found | set(names(knowledge.usual_oils.ordinary)) | set(_texts(knowledge.designations))


def _by_rule(instance: Instance) -> Iterator[str]:
    yield from names(instance.when)
    for each in instance.then:
        yield from names(getattr(each, "for_", ALWAYS))
        if isinstance(each, Asks):
            yield each.property
            yield from names(each.test)
        elif isinstance(each, Sets) and isinstance(each.value, FactRef):
            yield each.value.name


def _by_property(prop: Property) -> Iterator[str]:
    if prop.same_item:
        yield prop.same_item
    if isinstance(prop.how, WorstOf):
        for part in prop.how.parts:
            yield from inputs_of(part)
    elif prop.how is not None:
        yield from inputs_of(prop.how)


def _texts(tree: object) -> Iterator[str]:
    """Every word of a tree, keys included: the codes name facts and properties."""
    if isinstance(tree, Map):
        for key, child in tree.items():
            yield str(key)
            yield from _texts(child)
    elif isinstance(tree, list | tuple):
        for child in tree:
            yield from _texts(child)
    else:
        yield str(tree)
