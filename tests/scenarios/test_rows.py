"""A rule over the rows of a table can fire for each of them: a record is made that meets the condition of every row."""

from collections.abc import Iterator
from itertools import pairwise, product

import pytest

from advisor.advice import Advisor
from advisor.conditions import Bound, Coded, Condition, Domain, Every, FactRef, Member, Record, Ticked, branches, holds
from advisor.conditions.terms import Term, names
from advisor.knowledge import CLOSING_FACTS, Instance, Knowledge, load
from advisor.places import knowledge_folder

# Loaded once more here, since the ids of parametrized tests are needed before any fixture is made.
KNOWLEDGE = load(knowledge_folder())
OVER_ROWS = [rule.id for rule in KNOWLEDGE.rules.values() if rule.table and rule.status != "retired"]


def domain_of(name: str, knowledge: Knowledge) -> Domain:
    return CLOSING_FACTS[name] if name in CLOSING_FACTS else knowledge.domain(name)


def tried(name: str, terms: tuple[Term, ...], domain: Domain) -> list[Coded]:
    """Values of a fact that are worth trying, all inside its domain."""
    if domain.kind == "number":
        return [each for each in numbers(name, terms, domain) if domain.accepts(each)]
    if domain.kind == "several":
        wanted = [term for term in terms if isinstance(term, Ticked) and term.name == name and term.wanted]
        together: frozenset[str] = frozenset().union(*(term.among for term in wanted))
        return [frozenset(), *(frozenset({choice}) for choice in domain.choices), together]
    return [domain.code(choice) for choice in domain.choices]


def numbers(name: str, terms: tuple[Term, ...], domain: Domain) -> list[float]:
    """Places of a list, or numbers at, between and beyond the limits, and at the ends of the domain."""
    if domain.places:
        return list(domain.places)
    about = [term for term in terms if isinstance(term, Bound) and term.name == name]
    limits = {term.limit for term in about if isinstance(term.limit, float)}
    known = sorted(limits | ({domain.low, domain.high} - {float("-inf"), float("inf")}) or {0.0})
    return [*known, *((low + high) / 2 for low, high in pairwise(known)), known[0] - 1, known[-1] + 1]


def records(branch: tuple[Term, ...], knowledge: Knowledge) -> Iterator[Record]:
    """Records that meet every term of the branch taken alone; thresholds between facts are left to the judge."""
    looked_at = sorted({name for term in branch for name in names(term)})
    alone = [term for term in branch if not (isinstance(term, Bound) and isinstance(term.limit, FactRef))]
    fitting = [
        [
            value
            for value in tried(name, branch, domain_of(name, knowledge))
            if all(holds(term, {name: value}) for term in alone if term.name == name)
        ]
        for name in looked_at
    ]
    for values in product(*fitting):
        yield dict(zip(looked_at, values, strict=True))


def witness(condition: Condition, knowledge: Knowledge) -> Record | None:
    """A record inside the domains that meets the condition."""
    for branch in branches(condition):
        for record in records(branch, knowledge):
            if holds(condition, record):
                return record
    return None


def instances_of(rule: str, knowledge: Knowledge) -> list[tuple[str, int, Instance]]:
    return [
        (step, place, each)
        for step, found in knowledge.instances.items()
        for place, each in enumerate(found)
        if each.rule.id == rule
    ]


@pytest.mark.parametrize("rule", OVER_ROWS)
def test_a_rule_can_fire_for_every_row_of_its_table(rule: str, advisor: Advisor) -> None:
    knowledge = advisor.knowledge
    found = instances_of(rule, knowledge)
    assert found, "the rule has no row at all"
    for step, place, instance in found:
        record = witness(instance.when, knowledge)
        assert record is not None, f"no record meets the condition of {instance.id}"
        assert advisor.rules[step].judge(record)[place] is True, f"{instance.id} does not fire on {record}"


@pytest.mark.parametrize("rule", OVER_ROWS)
def test_no_row_fires_where_nothing_is_known(rule: str, advisor: Advisor) -> None:
    for step, place, _ in instances_of(rule, advisor.knowledge):
        assert advisor.rules[step].judge({})[place] is None


def test_a_record_is_made_for_choices_scales_ticks_and_numbers(knowledge: Knowledge) -> None:
    assert witness(Bound("t_eff_c", ">", 110.0), knowledge) == {"t_eff_c": 111.0}
    assert witness(Bound("dust", ">=", 2.0), knowledge) == {"dust": 2.0}
    ticked = Ticked("seal", frozenset({"NBR"}))
    assert witness(ticked, knowledge) == {"seal": frozenset({"NBR"})}
    member = Member("supply", frozenset({"central"}))
    assert witness(member, knowledge) == {"supply": "central"}


def test_no_record_is_made_for_what_contradicts_itself(knowledge: Knowledge) -> None:
    assert witness(Every((Bound("t_eff_c", ">", 110.0), Bound("t_eff_c", "<", 100.0))), knowledge) is None
