"""An advisor that goes by changed rules: nothing but what the change touches is made anew."""

from collections.abc import Mapping, Sequence
from copy import copy
from dataclasses import replace

from advisor.advice import Advisor
from advisor.advice.advising import setters_of
from advisor.conditions import Condition, Record
from advisor.inference import StepRules
from advisor.inference.judging import judge_of
from advisor.knowledge import Instance, Knowledge
from advisor.mutation.mutants import Mutant


class PlainRules(StepRules):
    """The rules of a step judged plainly, without the engine: for changes that nobody is advised by."""

    def __init__(self, conditions: Sequence[Condition]) -> None:
        self._conditions = tuple(conditions)
        self._judges = [judge_of(condition) for condition in self._conditions]

    def judge(self, record: Record) -> tuple[bool | None, ...]:
        """The outcome of every condition."""
        return tuple([judge(record) for judge in self._judges])

    def close(self) -> None:
        """Nothing to give back."""


def plain(advisor: Advisor) -> Advisor:
    """The same advisor without the engine."""
    instances = advisor.knowledge.instances
    twin = copy(advisor)
    twin.rules = {step: PlainRules([each.when for each in instances.get(step, ())]) for step in advisor.rules}
    return twin


def by_mutant(advisor: Advisor, mutant: Mutant) -> Advisor:
    """A plain advisor that goes by the mutant."""
    return by_instances(advisor, mutant.step, changed(advisor.knowledge.instances[mutant.step], mutant.changed))


def changed(instances: Sequence[Instance], changes: Mapping[int, Instance | None]) -> tuple[Instance, ...]:
    """The instances of a step with these put in for others, or taken away."""
    if not changes:
        return tuple(instances)
    after = [changes.get(place, instance) for place, instance in enumerate(instances)]
    return tuple(each for each in after if each is not None)


def by_instances(advisor: Advisor, step: str, instances: tuple[Instance, ...]) -> Advisor:
    """A plain advisor with other rules in one step."""
    before = advisor.knowledge
    twin = copy(advisor)
    twin.knowledge = _with(before, step, instances)
    if [each.when for each in instances] != [each.when for each in before.instances.get(step, ())]:
        twin.rules = {**advisor.rules, step: PlainRules([each.when for each in instances])}
    twin.setters = setters_of(twin.knowledge)
    return twin


def _with(knowledge: Knowledge, step: str, instances: tuple[Instance, ...]) -> Knowledge:
    return replace(knowledge, instances={**knowledge.instances, step: instances})
