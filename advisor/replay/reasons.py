"""The part of the trace behind a difference, in short sentences with the numbers."""

from collections.abc import Callable, Iterable, Iterator

from advisor.advice import Advice
from advisor.case import Fact, Origin
from advisor.conditions import VOID, Bound, Coded, Condition, FactRef, Member, Record, Stated, Ticked, failures, leaves, waits_for
from advisor.conditions.terms import Term, Void
from advisor.knowledge import CLOSING_FACTS, Asks, Formed, Instance, Knowledge, Sets
from advisor.quantities import show
from advisor.shelf import Judgement
from advisor.specification import Demand

MOST = 4
"""So many rules are told in full; the rest are counted."""

_SIGNS = {"<": "below", "<=": "at most", ">": "above", ">=": "at least", "=": "", "!=": "other than"}


def shown(knowledge: Knowledge, name: str, coded: Coded | Void | None) -> str:
    """A coded value as scenarios write it, with its unit."""
    if coded is None:
        return "not known"
    if isinstance(coded, Void):
        return "void"
    domain = CLOSING_FACTS.get(name) or knowledge.domain(name)
    value = domain.decode(coded)
    if isinstance(value, float):
        return show(value, domain.unit)
    return ", ".join(value) or "none" if isinstance(value, tuple) else value


def test_words(knowledge: Knowledge, term: Term) -> str:
    """What a term wants, without the name it looks at."""
    if isinstance(term, Stated):
        return "stated" if term.wanted else "not stated"
    if isinstance(term, Bound):
        limit = term.limit
        words = knowledge.title(limit.name) if isinstance(limit, FactRef) else shown(knowledge, term.name, limit)
        return f"{_SIGNS[term.sign]} {words}".strip()
    among = " or ".join(sorted(shown(knowledge, term.name, each) if isinstance(term, Member) else str(each) for each in term.among))
    return among if term.wanted else f"none of {among}"


def of_term(knowledge: Knowledge, term: Term, record: Record) -> str:
    """What is seen where a term looks, and what it wants."""
    seen = record.get(term.name)
    against = ""
    if isinstance(term, Bound) and isinstance(term.limit, FactRef):
        against = f" ({shown(knowledge, term.name, record.get(term.limit.name))})"
    return f"{knowledge.title(term.name)} is {shown(knowledge, term.name, seen)}, wanted {test_words(knowledge, term)}{against}"


def of_instance(advice: Advice, instance: Instance, outcome: bool | None) -> str:  # noqa: FBT001 - the third outcome is None
    """What a rule did, with the numbers."""
    knowledge, record = advice.knowledge, advice.record
    if outcome is None:
        return f"{instance.id} waits for {_titles(knowledge, waits_for(instance.when, record))}."
    if outcome is False:
        told = dict.fromkeys(of_term(knowledge, term, record) for term in failures(instance.when, record))
        return f"{instance.id} stayed silent: {'; '.join(told) or 'its condition failed'}."
    seen = dict.fromkeys(
        f"{knowledge.title(term.name)} {shown(knowledge, term.name, record[term.name])}"
        for term in leaves(instance.when) if record.get(term.name) is not None and record[term.name] is not VOID)
    words = f"{instance.id} fired" + (f" ({', '.join(seen)})." if seen else ".")
    return words if instance.binds else f"{words} It is a {instance.rule.status} rule and concludes nothing."


def _titles(knowledge: Knowledge, names: Iterable[str]) -> str:
    return ", ".join(knowledge.title(name) for name in sorted(names)) or "an answer"


def outcomes(advice: Advice) -> Iterator[tuple[Instance, bool | None]]:
    """Every rule of the steps that were reached, with its outcome."""
    for step in advice.trace:
        yield from zip(step.instances, step.outcomes, strict=True)


def of_rules(advice: Advice, concerns: Callable[[Instance], bool]) -> tuple[str, ...]:
    """What the rules of this concern did: those that fired first, then the waiting, then the silent ones."""
    told = [(instance, outcome) for instance, outcome in outcomes(advice) if concerns(instance)]
    told.sort(key=lambda each: (True, None, False).index(each[1]))
    words = [of_instance(advice, instance, outcome) for instance, outcome in told[:MOST]]
    if len(told) > MOST:
        words.append(f"{len(told) - MOST} more of these rules are in the trace.")
    if not told:
        words += sorted({f"The step '{step.title}' was not reached." for step in advice.knowledge.steps
                         if step.id not in {each.step for each in advice.trace}
                         and any(concerns(instance) for instance in advice.knowledge.instances.get(step.id, ()))})
    return tuple(words)


def of_rule(advice: Advice, rule: str, row: str = "") -> tuple[str, ...]:
    """What one rule did; with a row, what it did for that row of its table."""
    mine = {instance.id for instance, _ in outcomes(advice) if rule in {instance.id, instance.rule.id}}
    exact = f"{rule}/{row}"
    return of_rules(advice, lambda instance: instance.id == exact if exact in mine else rule in {instance.id, instance.rule.id})


def of_fact(advice: Advice, name: str) -> tuple[str, ...]:
    """How a fact came to its value."""
    fact = advice.facts.get(name)
    if fact is None:
        return ("The step in which it arises was not reached.",)
    words = [f"It is {fact.origin.value}{f': {fact.note}' if fact.note else ''}."]
    computation = advice.knowledge.computations.get(name)
    if computation is not None:
        how = computation.how
        names = how.inputs.values() if isinstance(how, Formed) else [each for _, each in how.by]
        by = f"formula {how.formula}" if isinstance(how, Formed) else f"table {how.table}"
        words.append(f"It comes by {by} from {', '.join(_input(advice, each) for each in names)}.")
    setting = of_rules(advice, lambda instance: any(isinstance(each, Sets) and each.name == name for each in instance.then))
    return (*words, *setting)


def _input(advice: Advice, name: str | float) -> str:
    if isinstance(name, float):
        return f"{name:g}"
    fact = advice.facts.get(name)
    return f"{advice.knowledge.title(name)} {fact_words(advice, fact)}"


def fact_words(advice: Advice, fact: Fact | None) -> str:
    """The value of a fact, or why it has none."""
    if fact is None:
        return "not reached"
    if fact.value is not None:
        return shown(advice.knowledge, fact.name, advice.record[fact.name])
    return "void" if fact.origin is Origin.VOID else "not answered"


def condition_words(knowledge: Knowledge, condition: Condition) -> str:
    """A test or a `for` in words, term by term."""
    names = {term.name for term in leaves(condition)}
    several = len(names) > 1
    return " and ".join(dict.fromkeys(
        f"{knowledge.title(term.name)} {test_words(knowledge, term)}" if several else test_words(knowledge, term) for term in leaves(condition)))


def of_demand(knowledge: Knowledge, demand: Demand) -> str:
    """A demand in words: how strongly, what, for which, by which rule."""
    strength = "must" if demand.must else f"should (level {demand.level})"
    conditions = "; ".join(f"{knowledge.title(term.name)} {test_words(knowledge, term)}" for term in leaves(demand.for_))
    void = f" It proves nothing: {_titles(knowledge, demand.void)} has no value." if demand.void else ""
    whom = f", for {conditions}" if conditions else ""
    return f"{demand.rule}: {knowledge.title(demand.property)} {strength} be {condition_words(knowledge, demand.test)}{whom}.{void}"


def of_property(advice: Advice, name: str) -> tuple[str, ...]:
    """The demands on a property; where there are none, what the rules did that could make one."""
    found = tuple(of_demand(advice.knowledge, demand) for demand in advice.specification.demands if demand.property == name)
    return found or of_rules(advice, lambda instance: any(isinstance(each, Asks) and each.property == name for each in instance.then))


def of_shortfalls(advice: Advice, judgement: Judgement, place: int) -> tuple[str, ...]:
    """Every demand that an item misses, with what it shows."""
    return tuple(
        f"{of_demand(advice.knowledge, each.demand)} Seen: "
        f"{'not on its sheet' if each.seen is None else shown(advice.knowledge, each.demand.property, each.seen)}."
        for each in judgement.shortfalls(place))


def names_of(condition: Condition) -> set[str]:
    """The facts that a condition looks at."""
    return {term.name for term in leaves(condition)}
