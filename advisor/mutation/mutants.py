"""Mutants: the agreed written rules, each changed in one place, over all rows of its table at once."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace

from advisor.advice.running import CLOSING
from advisor.conditions import ALWAYS, FactRef
from advisor.knowledge import Asks, Instance, Knowledge, Refers, Sets, Warns
from advisor.knowledge.model import Conclusion
from advisor.mutation.altering import Key, altered
from advisor.mutation.stepping import Stepper

MUST = 0
TASTE = 4
KINDS = ("limit", "operator", "term dropped", "conclusion", "rule deleted")


@dataclass(frozen=True, slots=True)
class Mutant:
    """A written rule changed in one place.

    `changed` holds the instances as they become, by their place in the step; None takes one away.
    """

    rule: str
    step: str
    kind: str
    key: Key
    changed: Mapping[int, Instance | None]

    @property
    def name(self) -> str:
        """What tells it from the others."""
        return f"{self.rule}: {'/'.join(map(str, self.key))}"


def pairs_of(mutant: Mutant, knowledge: Knowledge) -> list[tuple[Instance, Instance | None]]:
    """The changed instances as they were and as they become."""
    return [(knowledge.instances[mutant.step][place], after) for place, after in mutant.changed.items()]


def mutants(knowledge: Knowledge) -> list[Mutant]:
    """All mutants of the agreed rules, step by step in the order of the files."""
    stepper = Stepper(knowledge)
    found: list[Mutant] = []
    for step, instances in knowledge.instances.items():
        rules: dict[str, dict[int, Instance]] = {}
        for place, instance in enumerate(instances):
            if instance.binds:
                rules.setdefault(instance.rule.id, {})[place] = instance
        for rule, written in rules.items():
            found += _of_rule(rule, step, written, stepper)
    return found


def _of_rule(rule: str, step: str, written: Mapping[int, Instance], stepper: Stepper) -> Iterator[Mutant]:
    """The mutants of one written rule; two that come to the same are one."""
    by_key: dict[Key, dict[int, Instance]] = {}
    for place, instance in written.items():
        for key, changed in _variants(instance, stepper):
            if (changed.when, changed.then) != (instance.when, instance.then):
                by_key.setdefault(key, {})[place] = changed
    told: set[object] = set()
    for key, changes in by_key.items():
        sense = tuple((place, each.when, each.then) for place, each in changes.items())
        if sense not in told:
            told.add(sense)
            yield Mutant(rule, step, _kind(key), key, dict(changes))
    yield Mutant(rule, step, "rule deleted", ("deleted",), dict.fromkeys(written))


def _kind(key: Key) -> str:
    if key[0] != "when":
        return "conclusion"
    return "limit" if "limit" in key else "term dropped" if key[-1] == "dropped" or "without" in key else "operator"


def _variants(instance: Instance, stepper: Stepper) -> Iterator[tuple[Key, Instance]]:
    for key, when in altered(instance.when, stepper):
        yield ("when", *key), replace(instance, when=when)
    for place, conclusion in enumerate(instance.then):
        before, after = instance.then[:place], instance.then[place + 1 :]
        if before or after:
            yield ("then", place, "removed"), replace(instance, then=(*before, *after))
        for key, changed in _conclusions(conclusion, instance.rule.step, stepper):
            yield ("then", place, *key), replace(instance, then=(*before, changed, *after))


def _conclusions(conclusion: Conclusion, step: str, stepper: Stepper) -> Iterator[tuple[Key, Conclusion]]:
    if isinstance(conclusion, Refers):
        # By the closing step the advice is made, so withholding means nothing there.
        if step != CLOSING:
            yield ("withhold",), replace(conclusion, withhold=not conclusion.withhold)
        return
    if isinstance(conclusion, Asks):
        yield from _demands(conclusion, stepper)
    elif isinstance(conclusion, Sets) and not isinstance(conclusion.value, FactRef):
        for word, value in stepper.other_choices(stepper.domain(conclusion.name), conclusion.value):
            yield ("value", word), replace(conclusion, value=value)
    yield from _for_whom(conclusion, stepper)


def _for_whom(conclusion: Asks | Sets | Warns, stepper: Stepper) -> Iterator[tuple[Key, Conclusion]]:
    if conclusion.for_ != ALWAYS:
        for key, for_ in altered(conclusion.for_, stepper):
            yield ("for", *key), replace(conclusion, for_=for_)


def _demands(asks: Asks, stepper: Stepper) -> Iterator[tuple[Key, Conclusion]]:
    for level in (asks.level - 1, asks.level + 1):
        if MUST <= level <= TASTE:
            yield ("level", level), replace(asks, level=level)
    for key, test in altered(asks.test, stepper, dropping=False):
        yield ("test", *key), replace(asks, test=test)
