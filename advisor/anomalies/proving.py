"""Witnesses: a record that lies in a region, carried back to a whole case where that works, replayed in the engine."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field

from advisor.advice.advising import setters_of
from advisor.advice.running import CLOSING, Run
from advisor.anomalies.finding import Witness, WitnessIs
from advisor.anomalies.ground import Ground
from advisor.boxes import Box, whole
from advisor.boxes.sides import a_value
from advisor.case import Answer, Case
from advisor.conditions import Coded, Condition, Domain, Either, Every, Record, holds, leaves
from advisor.conditions.terms import Term, Void, names
from advisor.inference import Disagreement, StepRules, UnfitCondition
from advisor.knowledge import Declaration, Knowledge
from advisor.knowledge.crosschecks import inputs_of

_MOST_CASES = 40


def replayed(
    domains: Mapping[str, Domain], conditions: Sequence[Condition], record: Record
) -> tuple[bool | None, ...]:
    """The outcomes of conditions on a record, by the engine; none where it disagrees with the plain judgement.

    What has too many alternatives for the engine is put to it term by term.
    """
    try:
        return _judged(domains, conditions, record)
    except UnfitCondition:
        terms = list(dict.fromkeys(term for each in conditions for term in leaves(each)))
    except Disagreement:
        return ()
    try:
        outcomes = dict(zip(terms, _judged(domains, terms, record), strict=True))
    except (UnfitCondition, Disagreement):
        return ()
    return tuple(_joined(each, outcomes) for each in conditions)


def _judged(domains: Mapping[str, Domain], conditions: Sequence[Condition], record: Record) -> tuple[bool | None, ...]:
    rules = StepRules(conditions, domains)
    try:
        return rules.judge(record)
    finally:
        rules.close()


def _joined(condition: Condition, outcomes: Mapping[Term, bool | None]) -> bool | None:
    if not isinstance(condition, Every | Either):
        return outcomes[condition]
    parts = [_joined(part, outcomes) for part in condition.parts]
    decisive = isinstance(condition, Either)
    return decisive if decisive in parts else None if None in parts else not decisive


@dataclass(slots=True)
class Proving:
    """Makes witnesses on one ground; whole cases run through the steps of the knowledge."""

    ground: Ground
    _rules: dict[str, StepRules] = field(default_factory=dict, init=False)

    def shows(
        self, box: Box, conditions: Sequence[Condition], wanted: Sequence[bool] | None = None, *, case: bool = True
    ) -> Witness:
        """A witness in the box on which the conditions have the wanted outcomes (all hold, where nothing is said)."""
        wanted = [True] * len(conditions) if wanted is None else wanted
        settled = self.ground.calm(box)
        record = settled.witness({name for each in conditions for name in names(each)})
        confirmed = list(replayed(self.ground.declared, conditions, record)) == list(wanted)
        if case and (found := self._case(record, conditions, wanted)) is not None:
            return found
        needed = {name for each in conditions for name in names(each)}
        return self.witness({name: value for name, value in record.items() if name in needed}, confirmed=confirmed)

    def witness(
        self, record: Record, *, confirmed: bool, is_: WitnessIs = "record", about: frozenset[str] = frozenset()
    ) -> Witness:
        """A record in the words of people."""
        values = {n: self.ground.declared[n].decode(v) for n, v in record.items() if not isinstance(v, Void)}
        void = frozenset(name for name, value in record.items() if isinstance(value, Void))
        return Witness(values, is_, confirmed, void, about)

    def _case(self, record: Record, conditions: Sequence[Condition], wanted: Sequence[bool]) -> Witness | None:
        """Answers with which the steps come to facts that have the wanted outcomes, the lubricant as in the record."""
        knowledge = self.ground.knowledge
        matter = frozenset({*record, *(name for each in conditions for name in names(each))})
        lubricant = {name: value for name, value in record.items() if name in knowledge.properties}
        try:
            rules = self._step_rules()
        except UnfitCondition:
            return None
        for answers in _answers(record, self.ground, conditions):
            case = _case_of(answers, knowledge)
            run = Run(knowledge, rules, setters_of(knowledge), case, assume_gaps=True)
            run.steps()
            seen = {**run.facts.record, **lubricant}
            if [holds(each, seen) for each in conditions] == list(wanted):
                confirmed = list(replayed(self.ground.declared, conditions, seen)) == list(wanted)
                shown = {**answers, **lubricant}
                about = frozenset(shown) & (matter | _behind(set(matter), self.ground))
                return self.witness(shown, confirmed=confirmed, is_="case", about=about)
        return None

    def _step_rules(self) -> dict[str, StepRules]:
        if not self._rules:
            for step in self.ground.knowledge.steps:
                if step.id != CLOSING:
                    conditions = [each.when for each in self.ground.knowledge.instances.get(step.id, ())]
                    self._rules[step.id] = StepRules(conditions, self.ground.declared)
        return self._rules


def _case_of(answers: Record, knowledge: Knowledge) -> Case:
    typed = {
        name: Answer(value=(value := knowledge.domain(name).decode(coded)), typed=str(value))
        for name, coded in answers.items()
        if not isinstance(coded, Void)
    }
    return Case(knowledge.point_kind.id, "", typed)


def _answers(record: Record, ground: Ground, conditions: Sequence[Condition]) -> Iterator[dict[str, Coded | Void]]:
    """Answers to try: those of the record, the rest as assumed; then numbers behind formulas moved through a range."""
    asked = [each for each in ground.knowledge.facts.values() if each.question is not None]
    base = {each.name: record.get(each.name, _usual(each)) for each in asked}
    yield base
    needed = {name for each in conditions for name in names(each)}
    behind = [each for each in asked if each.name in _behind(needed, ground) and each.name not in record]
    numbers = [each for each in behind if each.domain.kind == "number" and not each.domain.places]
    tried = 0
    for share in (0.0, 1.0, 0.5, 0.1, 0.9, 0.25, 0.75):
        moved = {each.name: _at(each, share) for each in numbers}
        for chosen in [moved, *({name: value} for name, value in moved.items())] if numbers else ():
            tried += 1
            if tried > _MOST_CASES:
                return
            yield {**base, **chosen}


def _behind(needed: set[str], ground: Ground) -> set[str]:
    """The facts from which formulas get the needed ones."""
    found: set[str] = set()
    waiting = [name for name in needed if name in ground.knowledge.computations]
    while waiting:
        how = ground.knowledge.computations[waiting.pop()].how
        inputs = inputs_of(how)
        waiting += [name for name in inputs if name in ground.knowledge.computations and name not in found]
        found |= set(inputs)
    return found


def _at(declaration: Declaration, share: float) -> float:
    """A number somewhere in the declared range, on its step."""
    low, high = max(declaration.domain.low, -1e6), min(declaration.domain.high, 1e6)
    value = low + share * (high - low)
    size = declaration.domain.step.size if declaration.domain.step and declaration.domain.step.kind == "absolute" else 0
    return min(max(round(value / size) * size, low), high) if size else value


def _usual(declaration: Declaration) -> Coded | Void:
    """The answer that stands for a don't know, or a plain one."""
    domain = declaration.domain
    if declaration.assume is not None:
        return domain.code(declaration.assume.value)
    return a_value(whole(domain), domain)
