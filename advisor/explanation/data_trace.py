"""The trace as plain data: what each step computed, which rules fired, what the others saw, and what some wait for."""

from typing import Any

from advisor.advice import Advice
from advisor.advice.model import StepTrace
from advisor.conditions import Bound, Domain, FactRef, Record, Stated, Valueless, failures, waits_for
from advisor.conditions.terms import Term, Void
from advisor.explanation.data_terms import OPERATORS, in_order, number
from advisor.explanation.seeing import hides, record_at
from advisor.explanation.words import domain_of
from advisor.explanation.workings import HIDDEN, how_computed, with_numbers
from advisor.formulas import FORMULAS
from advisor.knowledge import Computation, Formed

Data = dict[str, Any]


def trace_data(advice: Advice) -> list[Data]:
    """Every step that the case went through."""
    return [_step(advice, step) for step in advice.trace]


def _step(advice: Advice, step: StepTrace) -> Data:
    """Computed facts, and every rule: fired, failed with what it saw, or undecided with what it waits for."""
    record = record_at(advice, step.step)
    say = _Saying(advice, record)
    fired, failed, undecided = [], {}, {}
    for instance, outcome in zip(step.instances, step.outcomes, strict=True):
        if outcome:
            fired.append(instance.id)
        elif outcome is None:
            undecided[instance.id] = sorted(waits_for(instance.when, record))
        else:
            failed[instance.id] = [say.failed(term) for term in failures(instance.when, record)]
    drafts = [instance.id for instance in step.instances if not instance.binds]
    data: Data = {
        "step": step.step,
        "computed": [_computed(advice, name) for name in step.computed if not hides(advice, name)],
        "fired": fired,
        "failed": failed,
        "undecided": undecided,
    }
    return data | ({"drafts": drafts} if drafts else {})


class _Saying:
    """Failed terms of one step as data: [name, operator, limit, what was seen]; each is made once."""

    def __init__(self, advice: Advice, record: Record) -> None:
        self.advice, self.record = advice, record
        self.said: dict[int, list[Any]] = {}
        self.seen: dict[str, tuple[Domain, Any]] = {}

    def failed(self, term: Term) -> list[Any]:
        """The term with what was seen."""
        said = self.said.get(id(term))
        if said is None:
            said = self.said[id(term)] = self._say(term)
        return said

    def _say(self, term: Term) -> list[Any]:
        name = term.name
        if name not in self.seen:
            self.seen[name] = self._see(name)
        domain, value = self.seen[name]
        if value == HIDDEN:
            return [name, HIDDEN]
        if isinstance(term, Bound):
            return [name, OPERATORS[term.sign], self._limit(term, domain), value]
        if isinstance(term, Stated | Valueless):
            return [name, "stated" if isinstance(term, Stated) else "void", term.wanted, value]
        return [name, "any_of" if term.wanted else "none_of", in_order(term.among, domain), value]

    def _see(self, name: str) -> tuple[Domain, Any]:
        domain, seen = domain_of(name, self.advice.knowledge), self.record.get(name)
        if hides(self.advice, name):
            return domain, HIDDEN
        if seen is None or isinstance(seen, Void):
            return domain, None
        meant = domain.decode(seen)
        return domain, list(meant) if isinstance(meant, tuple) else number(meant)

    def _limit(self, term: Bound, domain: Domain) -> Any:
        limit = self.record.get(term.limit.name) if isinstance(term.limit, FactRef) else term.limit
        return number(domain.decode(float(limit))) if isinstance(limit, float | int) else None


def _computed(advice: Advice, name: str) -> Data:
    computation = advice.knowledge.computations[name]
    fact = advice.facts.get(name)
    if fact is None or fact.value is None:
        return {"fact": name, "value": None} | ({"void": fact.note} if fact is not None and fact.note else {})
    value = list(fact.value) if isinstance(fact.value, tuple) else number(fact.value)
    return {"fact": name, "value": value} | _how(advice, computation)


def _how(advice: Advice, computation: Computation) -> Data:
    how = computation.how
    if not isinstance(how, Formed):
        return {"table": how.table, "column": how.column, "by": dict(how.by)}
    formula = FORMULAS[how.formula]
    numbers = {
        each: float(value)
        for each, bound in how.inputs.items()
        if isinstance(value := advice.facts[bound].value if isinstance(bound, str) else bound, float | int)
    }
    data: Data = {"equation": formula.equation, "substituted": with_numbers(formula, numbers)}
    warnings = how_computed(advice, computation.fact).warnings if formula.outside(numbers) else ()
    return data | ({"warnings": list(warnings)} if warnings else {})
