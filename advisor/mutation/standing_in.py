"""An advisor that goes by changed rules: nothing but what the change touches is made anew."""

from collections.abc import Iterable, Mapping, Sequence
from copy import copy
from dataclasses import dataclass, replace

from advisor.advice import Advice, Advisor
from advisor.advice.advising import setters_of
from advisor.advice.running import Run
from advisor.case import Case
from advisor.conditions import Condition, Record
from advisor.inference import StepRules
from advisor.inference.judging import judge_of
from advisor.knowledge import Instance, Knowledge, Refers, Sets
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
    return by_rules(advisor, replace(before, instances={**before.instances, step: instances}))


def by_rules(advisor: Advisor, knowledge: Knowledge) -> Advisor:
    """A plain advisor by knowledge that differs in rules only."""
    twin = copy(advisor)
    twin.knowledge = knowledge
    twin.rules = {
        step: rules
        if (after := _conditions(knowledge, step)) == _conditions(advisor.knowledge, step)
        else PlainRules(after)
        for step, rules in advisor.rules.items()
    }
    twin.setters = setters_of(knowledge)
    return twin


def _conditions(knowledge: Knowledge, step: str) -> list[Condition]:
    return [each.when for each in knowledge.instances.get(step, ())]


@dataclass(frozen=True, slots=True)
class Advised:
    """A case and its advice; on settled answers with the run behind it, from which other rules can go on."""

    case: Case
    assume_gaps: bool
    only: frozenset[str] | None
    advice: Advice
    run: Run | None

    def by(self, advisor: Advisor, *, same_facts: bool) -> Advice:
        """The advice by another advisor; where its rules conclude the same facts, nothing is computed anew.

        Raises:
            TooOpen: where too much is left open at once.
        """
        if self.run is None or not same_facts:
            return advisor.advise(self.case, assume_gaps=self.assume_gaps, only=self.only)
        return advisor.advice_of(self.run.again(advisor.knowledge, advisor.rules), self.only)


def advised(advisor: Advisor, case: Case, *, assume_gaps: bool, only: frozenset[str] | None) -> Advised:
    """The case with its advice.

    Raises:
        TooOpen: where too much is left open at once.
    """
    run = advisor.run_if_settled(case, assume_gaps=assume_gaps)
    if run is None:
        return Advised(case, assume_gaps, only, advisor.advise(case, assume_gaps=assume_gaps, only=only), None)
    return Advised(case, assume_gaps, only, advisor.advice_of(run, only), run)


def keeps_facts(pairs: Iterable[tuple[Instance | None, Instance | None]], knowledge: Knowledge) -> bool:
    """Whether none of these rules, old and new, concludes a fact or withholds: what others see stays the same."""
    conclusions = [each for pair in pairs for instance in pair if instance is not None for each in instance.then]
    return not any(
        (isinstance(each, Sets) and each.name in knowledge.facts) or (isinstance(each, Refers) and each.withhold)
        for each in conclusions
    )
