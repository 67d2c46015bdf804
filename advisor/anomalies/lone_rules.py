"""What is wrong with a rule by itself: it contradicts itself, or no case can make it fire."""

from collections.abc import Iterator, Sequence

from advisor.anomalies.finding import Finding, Witness
from advisor.anomalies.ground import Ground
from advisor.anomalies.proving import Proving, replayed
from advisor.boxes import Box
from advisor.conditions import ALWAYS, Condition, Every, branches, holds
from advisor.conditions.terms import Term
from advisor.conditions.terms import names as names_of
from advisor.knowledge import Asks, Instance, Rule


def lone_rules(ground: Ground, proving: Proving) -> Iterator[Finding]:
    """Contradictions, and rules that no case can fire."""
    by_rule: dict[str, list[Instance]] = {}
    for instances in ground.knowledge.instances.values():
        for instance in instances:
            by_rule.setdefault(instance.rule.id, []).append(instance)
    for instances_of in by_rule.values():
        found = _condition(instances_of, ground, proving)
        yield from [found] if found is not None else _conclusions(instances_of, ground, proving)


def _condition(instances: Sequence[Instance], ground: Ground, proving: Proving) -> Finding | None:
    """The finding where the condition of no instance can hold."""
    rule = instances[0].rule
    if not any(ground.boxes(each.when, as_declared=True) for each in instances):
        return _contradiction(rule, "when", instances[0].when, ground, proving)
    if any(ground.reached(box) for each in instances for box in ground.boxes(each.when)):
        return None
    boxes = [box for each in instances for box in ground.boxes(each.when, as_declared=True)]
    return _never(rule, boxes, ground, proving)


def _conclusions(instances: Sequence[Instance], ground: Ground, proving: Proving) -> Iterator[Finding]:
    """Findings on a 'for' or a demand that nothing can meet."""
    for place, conclusion in enumerate(instances[0].then):
        same = [each.then[place] for each in instances]
        fors = [getattr(each, "for_", ALWAYS) for each in same]
        if not any(ground.boxes(each, as_declared=True) for each in fors):
            yield _contradiction(instances[0].rule, "for", fors[0], ground, proving)
        elif isinstance(conclusion, Asks):
            tests = [each.test for each in same if isinstance(each, Asks)]
            if not any(ground.boxes(each, as_declared=True) for each in tests):
                verb = "should" if conclusion.level else "must"
                yield _contradiction(instances[0].rule, verb, tests[0], ground, proving)


def _contradiction(rule: Rule, key: str, condition: Condition, ground: Ground, proving: Proving) -> Finding:
    """The witness meets every term of one branch but the last that clashes; the whole still fails in the engine."""
    branch = branches(condition)[0] if branches(condition) else ()
    met, clashing = _met(branch, ground)
    around = {term.name for term in branch} & {name for term in clashing for name in names_of(term)}
    boxes = ground.boxes(Every(met), as_declared=True)
    witness = _failing(boxes[0] if boxes else None, condition, met, ground, proving)
    about = ", ".join(sorted(around)) or "the condition"
    return Finding(
        "contradiction",
        rule.mark,
        f"rule '{rule.id}': what stands under '{key}' can never hold, for {about}",
        "correct one of the limits, or take the rule out",
        witness,
        (rule.id,),
    )


def _met(branch: Sequence[Term], ground: Ground) -> tuple[tuple[Term, ...], list[Term]]:
    """The terms of a branch that can hold together, taken in order, and those that clash with them."""
    met: tuple[Term, ...] = ()
    clashing: list[Term] = []
    for term in branch:
        if ground.boxes(Every((*met, term)), as_declared=True):
            met = (*met, term)
        else:
            clashing.append(term)
    return met, clashing


def _failing(box: Box | None, condition: Condition, met: Sequence[Term], ground: Ground, proving: Proving) -> Witness:
    record = box.witness(names_of(condition)) if box is not None else {}
    outcomes = replayed(ground.declared, [Every(tuple(met)), condition], record)
    return proving.witness(record, confirmed=outcomes == (True, False))


def _never(rule: Rule, boxes: Sequence[Box], ground: Ground, proving: Proving) -> Finding:
    """The witness is a record on which the engine fires the rule, and which no case gives."""
    box = boxes[0]
    record = box.witness()
    instances = [each for each in ground.knowledge.instances[rule.step] if each.rule.id == rule.id]
    when = next(each.when for each in instances if holds(each.when, record))
    witness = proving.witness(record, confirmed=replayed(ground.declared, [when], record) == (True,))
    reasons = [_bounds(name, ground) for name in sorted(box.names) if _outside(name, box, ground)]
    return Finding(
        "never fires",
        rule.mark,
        f"rule '{rule.id}' can never fire: no case gives facts like those of the witness"
        + (f" ({'; '.join(reasons)})" if reasons else ""),
        "check the limits against the facts, the tables and the questions they come from",
        witness,
        (rule.id,),
    )


def _outside(name: str, box: Box, ground: Ground) -> bool:
    alone = Box(box.space, {name: box.sides[name]}) if name in box.sides else None
    return alone is not None and not any(alone.intersect(each) for each in _everything(name, ground))


def _everything(name: str, ground: Ground) -> list[Box]:
    ways = ground.ways(name)
    domain = ground.possible[name]
    if ways is not None:
        return ways
    return [Box(box.space, {name: side}) for box in ground.boxes(ALWAYS) for side in box.space.all_of(name) if domain]


def _bounds(name: str, ground: Ground) -> str:
    domain = ground.possible[name]
    if domain.kind == "number":
        return f"{name} runs from {domain.low:g} to {domain.high:g} {domain.unit}".rstrip()
    return f"{name} is never that" if not domain.choices else f"{name} is one of {', '.join(domain.choices)}"
