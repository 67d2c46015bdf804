"""Rules of a case in words: why one fired, or why it did not."""

from collections.abc import Iterator
from dataclasses import dataclass, replace

from advisor.advice import Advice
from advisor.conditions import Condition, Either, Every, FactRef, Record, failures, holds, waits_for
from advisor.conditions.terms import Term, names
from advisor.explanation.seeing import hides, instances_of, record_at, rules_seen
from advisor.explanation.words import fill_in, say_failure, say_source, say_term, title_of
from advisor.explanation.workings import HIDDEN, NotHere, Premise, premise
from advisor.knowledge import Asks, Instance, Sets
from advisor.knowledge.rules import PLACEHOLDER


@dataclass(frozen=True, slots=True)
class RuleReason:
    """A rule of this case in words: its reason with the numbers, what it saw, its limits, its sources, its premises."""

    id: str
    rule: str
    title: str
    step: str
    because: str
    limits: str
    saw: tuple[str, ...]
    sources: tuple[str, ...]
    premises: tuple[Premise, ...]


@dataclass(frozen=True, slots=True)
class RuleVerdict:
    """What became of a rule: fired, failed (with every term that failed), or undecided (with what it waits for)."""

    id: str
    title: str
    step: str
    verdict: str
    saw: tuple[str, ...]
    waits: tuple[str, ...]
    draft: bool


def why_not_rule(advice: Advice, rule_id: str) -> RuleVerdict:
    """Whether a rule fired; else what it saw against what it wanted, or the facts that it waits for.

    Raises:
        NotHere: where no visited step has that rule.
    """
    found = instances_of(advice).get(rule_id)
    if found is None:
        raise NotHere(f"'{rule_id}' is no rule of a step that this case went through.")
    return verdict_of(advice, *found)


def verdict_of(advice: Advice, step: str, instance: Instance, outcome: bool | None) -> RuleVerdict:
    """The verdict on one rule whose outcome is known."""
    record, knowledge = record_at(advice, step), advice.knowledge
    saw: tuple[str, ...] = ()
    waits: tuple[str, ...] = ()
    if outcome is True:
        saw = tuple(_term(advice, term, record) for term in holding(instance.when, record))
        verdict = "fired"
    elif outcome is False:
        saw = tuple(_failure(advice, term, record) for term in dict.fromkeys(failures(instance.when, record)))
        verdict = "failed"
    else:
        waits = tuple(title_of(name, knowledge) for name in sorted(waits_for(instance.when, record)))
        verdict = "undecided"
    return RuleVerdict(instance.id, instance.rule.title, step, verdict, saw, waits, not instance.binds)


def _term(advice: Advice, term: Term, record: Record) -> str:
    return (
        f"{title_of(term.name, advice.knowledge)}: {HIDDEN}"
        if hides(advice, term.name)
        else say_term(term, advice.knowledge, record)
    )


def _failure(advice: Advice, term: Term, record: Record) -> str:
    return (
        f"{title_of(term.name, advice.knowledge)}: {HIDDEN}"
        if hides(advice, term.name)
        else say_failure(term, advice.knowledge, record)
    )


class Rules:
    """The rules that a case went through, each put into words once."""

    def __init__(self, advice: Advice) -> None:
        self.advice = advice
        self.seen = instances_of(advice)
        self._said: dict[str, RuleReason] = {}
        self._premises: dict[str, Premise] = {}
        self._of_runs: dict[str, Rules] = {}

    def reason(self, rule_id: str) -> RuleReason:
        """A rule of this case in words, from the first run in which it fired where something was left open.

        Raises:
            NotHere: where no visited step has that rule.
        """
        if rule_id not in self._said:
            label = self._fired_for(rule_id)
            if label:
                said = self._of_runs[label].reason(rule_id)
                self._said[rule_id] = replace(said, saw=(f"for {label}", *said.saw))
            elif rule_id in self.seen:
                step, instance, _ = self.seen[rule_id]
                self._said[rule_id] = self._say(step, instance)
            else:
                raise NotHere(f"'{rule_id}' is no rule of a step that this case went through.")
        return self._said[rule_id]

    def _fired_for(self, rule_id: str) -> str:
        """The label of another run in which a rule fired that did not fire in this one; empty if there is none."""
        if rule_id in self.seen and self.seen[rule_id][2] is True:
            return ""
        for label, run in self.advice.runs:
            if any(outcome is True and instance.id == rule_id for _, instance, outcome in rules_seen(run)):
                self._of_runs.setdefault(label, Rules(run))
                return label
        return ""

    def _say(self, step: str, instance: Instance) -> RuleReason:
        advice, knowledge = self.advice, self.advice.knowledge
        record = record_at(advice, step)
        sources = (*instance.rule.source, *(instance.row.source if instance.row else ()))
        return RuleReason(
            instance.id,
            instance.rule.id,
            instance.rule.title,
            step,
            self._fill(instance.rule.because, instance, record),
            self._fill(instance.rule.limits, instance, record),
            tuple(_term(advice, term, record) for term in holding(instance.when, record)),
            tuple(dict.fromkeys(say_source(each, knowledge) for each in sources)),
            tuple(self._premise(name, record) for name in _used(instance, advice)),
        )

    def _fill(self, text: str, instance: Instance, record: Record) -> str:
        hidden = {name: fact for name, fact in self.advice.facts.items() if not hides(self.advice, name)}
        return fill_in(
            text, instance, hidden if self.advice.withheld else self.advice.facts, record, self.advice.knowledge
        )

    def _premise(self, name: str, record: Record) -> Premise:
        if name not in self._premises:
            self._premises[name] = premise(self.advice, name, record)
        return self._premises[name]


def holding(condition: Condition, record: Record) -> Iterator[Term]:
    """The terms that made a condition hold."""
    if isinstance(condition, Every | Either):
        for part in condition.parts:
            if holds(part, record):
                yield from holding(part, record)
    elif holds(condition, record):
        yield condition


def _used(instance: Instance, advice: Advice) -> list[str]:
    """The facts that a rule looks at, its limits and its reason included, each once."""
    used = list(names(instance.when))
    for each in instance.then:
        if isinstance(each, Asks):
            used += [name for name in (*names(each.test), *names(each.for_)) if name not in advice.knowledge.properties]
        elif isinstance(each, Sets) and isinstance(each.value, FactRef):
            used.append(each.value.name)
    used += [name for of_row, name in PLACEHOLDER.findall(instance.rule.because) if not of_row]
    return list(dict.fromkeys(used))
