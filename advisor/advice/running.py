"""One case on its way through the steps: facts, fired rules, what they concluded, and what is still waited for."""

from collections.abc import Mapping, Sequence
from copy import copy
from dataclasses import dataclass, field

from advisor.advice.facts import Facts, disagreeing
from advisor.advice.model import OpenQuestion, Referral, StepTrace
from advisor.advice.waiting import Waiting
from advisor.case import Case, Origin
from advisor.conditions import Coded, FactRef, Record
from advisor.inference import StepRules
from advisor.knowledge import Asks, Instance, Knowledge, Refers, Sets, Warns
from advisor.shelf import Judgements, Raise
from advisor.specification import Conflict, Demand, with_limits

CLOSING = "closing"
RESULT_OF = {"maker_verdict": "maker_item", "incumbent_verdict": "incumbent"}
"""The facts that named results of the closing step are about."""


@dataclass(slots=True)
class Drawn:
    """What the fired rules of all steps concluded."""

    asks: list[tuple[Instance, Asks]] = field(default_factory=list)
    raises: list[tuple[Instance, Sets]] = field(default_factory=list)
    warns: list[tuple[Instance, Warns]] = field(default_factory=list)
    refers: list[Referral] = field(default_factory=list)
    sets: dict[str, list[tuple[str, Coded | FactRef]]] = field(default_factory=dict)


class Run:
    """Runs the steps of one case; what the advice is made of is read from it afterwards."""

    def __init__(
        self,
        knowledge: Knowledge,
        rules: Mapping[str, StepRules],
        setters: Mapping[str, Sequence[str]],
        case: Case,
        *,
        assume_gaps: bool,
    ) -> None:
        self.knowledge, self.rules, self.setters, self.case = knowledge, rules, setters, case
        self.assume_gaps = assume_gaps
        self.facts = Facts(case, knowledge, assume_gaps=assume_gaps)
        self.drawn = Drawn()
        self.trace: list[StepTrace] = []
        self.undecided: list[tuple[Instance, frozenset[str]]] = []
        self.waiting = Waiting(knowledge.facts)
        self.judgements = Judgements(self.facts.facts)

    def steps(self) -> bool:
        """Run all steps but the closing one; False where a withheld referral ended the case."""
        for step in self.knowledge.steps:
            if step.id == CLOSING:
                continue
            self.step(step.id)
            if self.withheld:
                return False
        return True

    @property
    def withheld(self) -> bool:
        """Whether a referral hides products and grades, which ends the case."""
        return any(referral.withhold for referral in self.drawn.refers)

    def step(self, step: str) -> None:
        """Compute the facts of a step, then fire its rules, then combine what they concluded."""
        computed = []
        for computation in self.knowledge.computations.values():
            if computation.step == step:
                self.facts.compute(computation)
                computed.append(computation.fact)
        self.fire(step, tuple(computed), self.facts.record)
        for name in self.setters.get(step, ()):
            undecided = frozenset().union(
                *(
                    questions
                    for instance, questions in self.undecided
                    if any(isinstance(each, Sets) and each.name == name for each in instance.then)
                )
            )
            self.facts.conclude(self.knowledge.facts[name], self.drawn.sets.get(name, []), undecided)

    def again(self, knowledge: Knowledge, rules: Mapping[str, StepRules]) -> "Run":
        """The run by other rules where they conclude the same facts and withhold the same: nothing is computed anew."""
        twin = copy(self)
        twin.knowledge, twin.rules = knowledge, rules
        twin.drawn, twin.trace, twin.undecided, twin.waiting = Drawn(), [], [], Waiting(knowledge.facts)
        twin.judgements = self.judgements.again()
        for each in self.trace:
            if each.step != CLOSING:
                same = rules[each.step] is self.rules[each.step]
                outcomes = each.outcomes if same else rules[each.step].judge(self.facts.record)
                twin.draw(each.step, each.computed, outcomes, self.facts.record)
        return twin

    def fire(self, step: str, computed: tuple[str, ...], record: Record) -> None:
        """Judge the rules of a step on what is known; draw the conclusions of those that fire."""
        self.draw(step, computed, self.rules[step].judge(record), record)

    def draw(self, step: str, computed: tuple[str, ...], outcomes: tuple[bool | None, ...], record: Record) -> None:
        """Draw the conclusions of the rules of a step that were judged so."""
        instances = self.knowledge.instances.get(step, ())
        self.trace.append(StepTrace(step, computed, instances, outcomes))
        for place, (instance, outcome) in enumerate(zip(instances, outcomes, strict=True)):
            if outcome is False or not instance.binds:
                continue
            if outcome is None:
                waits = {RESULT_OF.get(name, name) for name in self.rules[step].waits(place, record)}
                self.undecided.append((instance, self.facts.questions_behind(waits)))
            else:
                self._draw(instance)

    def _draw(self, instance: Instance) -> None:
        for each in instance.then:
            if isinstance(each, Asks):
                self.drawn.asks.append((instance, each))
            elif isinstance(each, Warns):
                self.drawn.warns.append((instance, each))
            elif isinstance(each, Refers):
                self.drawn.refers.append(Referral(each.to, instance.id, each.withhold))
            elif each.name in self.knowledge.facts:
                self.drawn.sets.setdefault(each.name, []).append((instance.id, each.value))
            else:
                self.drawn.raises.append((instance, each))

    def demands(self) -> list[Demand]:
        """All demands with facts put in for limits; those that still wait are kept aside."""
        found: list[Demand] = []
        record = self.facts.record
        for instance, each in self.drawn.asks:
            if not each.refers:
                found.append(Demand(each.property, each.test, each.level, each.for_, instance.id))
                continue
            test, waits, void = with_limits(each.test, record)
            for_, more, void_too = with_limits(each.for_, record)
            if waits | more:
                self.undecided.append((instance, self.facts.questions_behind(waits | more)))
            else:
                found.append(Demand(each.property, test, each.level, for_, instance.id, frozenset(void | void_too)))
        return found

    def raises(self) -> list[Raise]:
        """Conclusions on concluded properties, ready for a catalogue."""
        found = []
        for instance, each in self.drawn.raises:
            for_, waits, void = with_limits(each.for_, self.facts.record)
            value = each.value
            if not waits and not void and not isinstance(value, FactRef):
                found.append(Raise(each.name, value, for_, instance.id))
        return found

    def note_waiting(self, read_by: Mapping[str, frozenset[str]]) -> None:
        """Note which demands on which properties wait for which questions; `read_by` are properties' facts."""
        if not self.facts.basis:
            return
        for instance, questions in self.undecided:
            names = {each.property for each in instance.then if isinstance(each, Asks)}
            names |= {
                each.name for each in instance.then if isinstance(each, Sets) and each.name in self.knowledge.properties
            }
            self.waiting.add(names, questions)
        for name, needed in read_by.items():
            questions = self.facts.questions_behind(needed)
            if questions and self.knowledge.properties[name].how is not None:
                self.waiting.add({name}, questions)

    def open_questions(self, read_by: Mapping[str, frozenset[str]]) -> tuple[OpenQuestion, ...]:
        """Questions without a value that rules, computations or product properties still wait for."""
        if not self.facts.basis:
            return ()
        waiting: dict[str, list[str]] = {}
        for instance, questions in self.undecided:
            for name in questions:
                waiting.setdefault(name, []).append(instance.id)
        for computation in self.knowledge.computations.values():
            for name in self.facts.basis.get(computation.fact, ()):
                waiting.setdefault(name, []).append(computation.fact)
        for name, needed in read_by.items():
            for question in self.facts.questions_behind(needed):
                waiting.setdefault(question, []).append(name)
        found = []
        for name, declaration in self.knowledge.facts.items():
            if name in waiting and declaration.question is not None:
                found.append(
                    OpenQuestion(
                        name,
                        declaration.question.decides,
                        tuple(dict.fromkeys(waiting[name])),
                        name in self.case.answers,
                    )
                )
        return tuple(found)

    def assumptions(self) -> tuple[tuple[str, ...], tuple[str, ...]]:
        """The facts that an assumption stands for, and those of them that keep the case open."""
        assumed = tuple(fact.name for fact in self.facts.facts.values() if fact.origin is Origin.ASSUMED)
        keeping = []
        for name in assumed:
            declared = self.knowledge.facts[name].assume
            if declared is not None and declared.keeps_open:
                keeping.append(name)
        return assumed, tuple(keeping)

    def disagreements(self) -> tuple[Conflict, ...]:
        """Concluded facts on which rules disagree."""
        names = disagreeing(self.facts.facts, self.knowledge)
        return tuple(
            Conflict(name, tuple(sorted({rule for rule, _ in self.drawn.sets.get(name, [])}))) for name in names
        )
