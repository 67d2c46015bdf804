"""The part of the trace behind a difference, in short sentences with the numbers."""

from collections.abc import Callable, Iterator

from advisor.advice import Advice
from advisor.case import Fact
from advisor.conditions import ALWAYS, Bound, Coded, Condition, Member, Value, leaves
from advisor.explanation.ruling import verdict_of
from advisor.explanation.seeing import rules_seen
from advisor.explanation.words import say_condition, say_demand, say_fact, say_value, title_of
from advisor.knowledge import Asks, Formed, Instance, Knowledge, Sets
from advisor.quantities import show
from advisor.shelf import Judgement
from advisor.specification import STRONG

MOST = 4
"""So many rules are told in full; the rest are counted."""

Concern = Callable[[Instance], bool]


def written(knowledge: Knowledge, name: str, value: Value) -> str:
    """A value as a scenario writes it, with its unit."""
    if isinstance(value, float):
        return show(value, knowledge.domain(name).unit)
    return (", ".join(value) or "none") if isinstance(value, tuple) else value


def written_fact(advice: Advice, fact: Fact | None) -> str:
    """The value of a fact as a scenario writes it, or why it has none."""
    if fact is None or fact.value is None:
        return say_fact(fact, advice.knowledge)
    return written(advice.knowledge, fact.name, fact.value)


def of_instance(advice: Advice, step: str, instance: Instance, outcome: bool | None) -> str:
    """What a rule did, with the numbers."""
    verdict = verdict_of(advice, step, instance, outcome)
    if outcome is None:
        return f"{verdict.id} waits for {', '.join(verdict.waits)}."
    told = f": {'; '.join(verdict.saw)}" if verdict.saw else ""
    counts = f" It is a {instance.rule.status} rule and concludes nothing." if outcome and verdict.draft else ""
    return f"{verdict.id} {verdict.verdict}{told}.{counts}"


def of_rules(advice: Advice, concerns: Concern) -> tuple[str, ...]:
    """What the rules of this concern did: those that fired first, then the waiting, then the failed ones."""
    told = [each for each in rules_seen(advice) if concerns(each[1])]
    told.sort(key=lambda each: (True, None, False).index(each[2]))
    words = [of_instance(advice, *each) for each in told[:MOST]]
    if len(told) > MOST:
        words.append(f"{len(told) - MOST} more of these rules are in the trace.")
    return tuple(words) if told else tuple(_not_reached(advice, concerns))


def _not_reached(advice: Advice, concerns: Concern) -> Iterator[str]:
    reached = {each.step for each in advice.trace}
    for step in advice.knowledge.steps:
        if step.id not in reached and any(map(concerns, advice.knowledge.instances.get(step.id, ()))):
            yield f"The step '{step.title}' was not reached."


def of_rule(advice: Advice, rule: str, row: str = "") -> tuple[str, ...]:
    """What one rule did; where it goes over a table that has this row, what it did for the row."""
    exact = f"{rule}/{row}"
    if any(instance.id == exact for _, instance, _ in rules_seen(advice)):
        return of_rules(advice, lambda instance: instance.id == exact)
    return of_rules(advice, lambda instance: named((instance.id,), rule))


def named(rules: tuple[str, ...] | list[str], rule: str) -> bool:
    """Whether the rule is among these, as written or for one row of its table."""
    return any(rule in {each, each.partition("/")[0]} for each in rules)


def of_fact(advice: Advice, name: str) -> tuple[str, ...]:
    """How a fact came to its value."""
    fact = advice.facts.get(name)
    if fact is None:
        return ("The step in which it arises was not reached.",)
    note = f": {fact.note}" if fact.note else ""
    words = [f"{title_of(name, advice.knowledge)} is {fact.origin.value}{note}."]
    computation = advice.knowledge.computations.get(name)
    if computation is not None:
        how = computation.how
        by = f"formula {how.formula}" if isinstance(how, Formed) else f"table {how.table}"
        inputs = list(how.inputs.values()) if isinstance(how, Formed) else [each for _, each in how.by]
        words.append(f"It comes by {by} from {', '.join(_input(advice, each) for each in inputs)}.")
    sets = of_rules(advice, lambda rule: any(isinstance(each, Sets) and each.name == name for each in rule.then))
    return (*words, *sets)


def _input(advice: Advice, name: str | float) -> str:
    if isinstance(name, float):
        return f"{name:g}"
    return f"{title_of(name, advice.knowledge)} {say_fact(advice.facts.get(name), advice.knowledge)}"


def of_property(advice: Advice, name: str) -> tuple[str, ...]:
    """The demands on a property; where there are none, what the rules did that could make one."""
    knowledge = advice.knowledge
    demands = [demand for demand in advice.specification.demands if demand.property == name]
    found = tuple(f"{demand.rule}: {say_demand(demand, knowledge)}." for demand in demands)
    return found or of_rules(
        advice, lambda rule: any(isinstance(each, Asks) and each.property == name for each in rule.then)
    )


def of_value(advice: Advice, name: str, value: Value, word: str) -> tuple[str, ...]:
    """Which rules ask for a value that nothing to choose from has, and what they did; or that none does."""
    domain = advice.knowledge.properties[name].domain
    coded = domain.code(value)

    def asking(rule: Instance) -> Condition | None:
        """For which lubricants the rule asks for it."""
        for each in rule.then:
            if isinstance(each, Sets) and each.name == name and each.value == coded:
                return each.for_
            if isinstance(each, Asks) and each.property == name and _names(each.test, coded):
                return each.for_
        return None

    words = []
    for step, rule, outcome in rules_seen(advice):
        for_ = asking(rule)
        if for_ is None:
            continue
        if outcome:
            where = "" if for_ == ALWAYS else f" where this holds: {say_condition(for_, advice.knowledge)}"
            words.append((0, f"{rule.id} asks for {word}{where}."))
        else:
            words.append((1, of_instance(advice, step, rule, outcome)))
    told = [text for _, text in sorted(words, key=lambda each: each[0])]
    more = [f"{len(told) - MOST} more rules that ask for {word} are in the trace."] if len(told) > MOST else []
    return (*told[:MOST], *more) or (f"No rule asks for {word}.",)


def _names(test: Condition, coded: Coded) -> bool:
    """Whether a test asks for this value by name."""
    return any(
        (isinstance(term, Member) and term.wanted and coded in term.among)
        or (isinstance(term, Bound) and term.sign == "=" and term.limit == coded)
        for term in leaves(test)
    )


def of_shortfalls(advice: Advice, judgement: Judgement, place: int) -> tuple[str, ...]:
    """Every demand that an item misses and that its verdict rests on, with what it shows."""
    knowledge = advice.knowledge
    found = []
    for each in judgement.shortfalls(place):
        if each.demand.level > STRONG:
            continue
        domain = knowledge.properties[each.demand.property].domain
        seen = "its sheet does not say" if each.seen is None else f"seen {say_value(domain, each.seen)}"
        found.append(f"{each.demand.rule}: {say_demand(each.demand, knowledge)}; {seen}.")
    return tuple(found)
