"""The trace as plain data: what each step computed, which rules fired, what the others saw, and what some wait for."""

from typing import Any

from advisor.advice import Advice
from advisor.advice.model import StepTrace
from advisor.conditions import Bound, FactRef, Record, Stated, Valueless, failures, waits_for
from advisor.conditions.terms import Term, Void
from advisor.explanation.data_terms import OPERATORS, number
from advisor.explanation.seeing import hides, record_at
from advisor.explanation.words import domain_of
from advisor.explanation.workings import how_computed, put_in
from advisor.formulas import FORMULAS
from advisor.knowledge import Computation, Formed

Data = dict[str, Any]


def trace_data(advice: Advice) -> list[Data]:
    """Every step that the case went through."""
    return [_step(advice, step) for step in advice.trace]


def _step(advice: Advice, step: StepTrace) -> Data:
    """Computed facts, and a verdict on every rule: fired, failed with what it saw, or undecided with what it waits for."""
    record = record_at(advice, step.step)
    terms: dict[Term, Any] = {}
    fired, failed, undecided = [], {}, {}
    for instance, outcome in zip(step.instances, step.outcomes, strict=True):
        if outcome:
            fired.append(instance.id)
        elif outcome is None:
            undecided[instance.id] = sorted(waits_for(instance.when, record))
        else:
            failed[instance.id] = [
                terms[term] if term in terms else terms.setdefault(term, _saw(advice, term, record))
                for term in dict.fromkeys(failures(instance.when, record))]  # fmt: skip
    drafts = [instance.id for instance in step.instances if not instance.binds]
    data: Data = {
        "step": step.step,
        "computed": [_computed(advice, name) for name in step.computed if not hides(advice, name)],
        "fired": fired, "failed": failed, "undecided": undecided}  # fmt: skip
    return data | ({"drafts": drafts} if drafts else {})


def _saw(advice: Advice, term: Term, record: Record) -> list[Any]:
    """A term that failed: [name, operator, limit, what was seen]."""
    if hides(advice, term.name):
        return [term.name, "withheld"]
    domain, seen = domain_of(term.name, advice.knowledge), record.get(term.name)
    value: Any = None
    if seen is not None and not isinstance(seen, Void):
        meant = domain.decode(seen)
        value = list(meant) if isinstance(meant, tuple) else number(meant)
    if isinstance(term, Stated | Valueless):
        return [term.name, "stated" if isinstance(term, Stated) else "void", term.wanted, value]
    if isinstance(term, Bound):
        return [term.name, OPERATORS[term.sign], _limit(advice, term, record), value]
    order = {choice: place for place, choice in enumerate(domain.choices)}
    among = sorted((domain.decode(each) for each in term.among), key=lambda each: (order.get(str(each), 0), str(each)))
    return [term.name, "any_of" if term.wanted else "none_of", [number(each) for each in among], value]


def _limit(advice: Advice, term: Bound, record: Record) -> Any:
    limit = record.get(term.limit.name) if isinstance(term.limit, FactRef) else term.limit
    if not isinstance(limit, float | int):
        return None
    return number(domain_of(term.name, advice.knowledge).decode(float(limit)))


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
        each: float(value) for each, bound in how.inputs.items()
        if isinstance(value := advice.facts[bound].value if isinstance(bound, str) else bound, float | int)}  # fmt: skip
    data: Data = {"equation": formula.equation, "substituted": put_in(formula, numbers)}
    warnings = how_computed(advice, computation.fact).warnings if formula.outside(numbers) else ()
    return data | ({"warnings": list(warnings)} if warnings else {})
