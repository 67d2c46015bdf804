"""Faults put into clean knowledge in memory, drawn from the kinds of terms, domains and conclusions that there are."""

import random
from collections.abc import Callable
from dataclasses import replace

from advisor.conditions import ALWAYS, Bound, Condition, Domain, Either, Every, Member, Ticked, branches, leaves
from advisor.conditions.terms import names
from advisor.documents import Mark
from advisor.knowledge import (
    Asks,
    Band,
    Computation,
    Declaration,
    Formed,
    Instance,
    Knowledge,
    Property,
    Row,
    Sets,
    Warns,
)
from advisor.knowledge.model import Concluded, Conclusion, Question

Fault = Callable[[Knowledge, random.Random], tuple[Knowledge, set[str]]]
"""Puts a fault in; gives the knowledge and the words that the finding must name, one of them at least."""

HERE = Mark("seeded.yaml", 1, 1)


def chosen(knowledge: Knowledge, rng: random.Random, but: frozenset[str] = frozenset()) -> Instance:
    """A rule with a condition, of the first step."""
    return rng.choice([each for each in knowledge.instances["heat"] if each.rule.id not in but])


def made(like: Instance, name: str, when: Condition, then: tuple[Conclusion, ...], line: int) -> Instance:
    mark = Mark("seeded.yaml", line, 1)
    return Instance(name, replace(like.rule, id=name, mark=mark, may_conflict={}, because="so"), None, when, then)


def with_rules(knowledge: Knowledge, *added: Instance, without: str = "") -> Knowledge:
    kept = tuple(each for each in knowledge.instances["heat"] if each.rule.id != without)
    rules = {name: each for name, each in knowledge.rules.items() if name != without}
    rules |= {each.rule.id: each.rule for each in added}
    return replace(knowledge, rules=rules, instances={**knowledge.instances, "heat": (*kept, *added)})


def narrower(knowledge: Knowledge, name: str, rng: random.Random) -> tuple[Condition, Condition]:
    """Two conditions on an asked fact that nothing meets both of."""
    domain = knowledge.domain(name)
    if domain.kind == "number":
        low, high = domain.low, domain.high
        first, second = sorted(rng.uniform(low, high) for _ in range(2))
        if rng.random() < 0.3:
            return Bound(name, "<", second), Bound(name, ">=", second)
        return Bound(name, "<", first), Bound(name, ">", second)
    if domain.kind in {"scale", "yes_no"}:
        place = rng.randrange(1, len(domain.choices))
        return Bound(name, "<", float(place)), Bound(name, ">=", float(place))
    some = frozenset(rng.sample(list(domain.choices), rng.randint(1, len(domain.choices) - 1)))
    if domain.kind == "several":
        return Ticked(name, some), Ticked(name, frozenset(domain.choices) | some, wanted=False)
    return (Member(name, some), Member(name, some, wanted=False))


def asked(knowledge: Knowledge, but: set[str]) -> list[str]:
    """Facts that are always asked."""
    questions = {name: each.question for name, each in knowledge.facts.items() if each.question is not None}
    return [name for name, question in questions.items() if question.when == ALWAYS and name not in but]


def contradiction(knowledge: Knowledge, rng: random.Random) -> tuple[Knowledge, set[str]]:
    like = chosen(knowledge, rng)
    name = like.rule.id
    way = rng.choice(["when", "for", "test", "either"])
    one, other = narrower(knowledge, rng.choice(asked(knowledge, set())), rng)
    when, then = like.when, like.then
    if way == "when":
        when = Every((one, like.when, other))
    elif way == "either":
        more, less = narrower(knowledge, rng.choice(asked(knowledge, set())), rng)
        when = Either((Every((one, other)), Every((more, less, like.when))))
    elif way == "for":
        nothing = Every(tuple(Member("form", frozenset({form})) for form in ("oil", "grease")))
        then = (*then, Warns(_caution(then), nothing))
    else:
        low = rng.uniform(1, 60)
        then = (*then, Asks("kappa", Every((Bound("kappa", ">", low), Bound("kappa", "<=", low))), rng.randint(0, 4)))
    return with_rules(knowledge, replace(like, when=when, then=then), without=name), {name}


def _caution(then: tuple[Conclusion, ...]) -> str:
    return next(each.caution for each in then if isinstance(each, Warns))


def rewritten(condition: Condition, rng: random.Random) -> Condition:
    """The same condition in other words."""
    parts = [Every(branch) for branch in branches(condition)]
    rng.shuffle(parts)
    same: Condition = Either(tuple(Every(tuple(rng.sample(each.parts, len(each.parts)))) for each in parts))
    several = any(isinstance(term, Member | Ticked) for term in leaves(condition))
    # The engine takes forty alternatives at most, and saying a choice twice multiplies them.
    return Every((same, condition)) if not several and rng.random() < 0.5 else same


def duplicate(knowledge: Knowledge, rng: random.Random) -> tuple[Knowledge, set[str]]:
    like = chosen(knowledge, rng)
    then = tuple(rng.sample(like.then, len(like.then)))
    return with_rules(knowledge, made(like, "again", rewritten(like.when, rng), then, 1)), {"again", like.rule.id}


def subsumed(knowledge: Knowledge, rng: random.Random) -> tuple[Knowledge, set[str]]:
    like = chosen(knowledge, rng)
    free = [each for each in asked(knowledge, related(like.when)) if knowledge.domain(each).kind != "several"]
    more, _ = narrower(knowledge, rng.choice(free), rng)
    then = tuple(rng.sample(like.then, rng.randint(1, len(like.then))))
    weaker = tuple(_weaker(each, rng) for each in then)
    return with_rules(knowledge, made(like, "within", Every((like.when, more)), weaker, 1)), {"within"}


def _weaker(each: Conclusion, rng: random.Random) -> Conclusion:
    """The same, or a must that asks for less."""
    if not isinstance(each, Asks) or each.level or not isinstance(each.test, Bound):
        return each
    less = each.test.limit - rng.randint(0, 20)  # type: ignore[operator]  # demands of the bases are against numbers
    return replace(each, test=replace(each.test, limit=less))


def redundant(knowledge: Knowledge, rng: random.Random) -> tuple[Knowledge, set[str]]:
    like = chosen(knowledge, rng)
    numbers = [each for each in asked(knowledge, related(like.when)) if knowledge.domain(each).kind == "number"]
    name = rng.choice(numbers)
    low, high = knowledge.domain(name).low, knowledge.domain(name).high
    at = [low + share * (high - low) for share in (0.2, 0.45, 0.55, 0.8)]
    caution = Warns(_caution(like.then))
    inner = made(like, "inner", Every((like.when, Bound(name, ">=", at[0]), Bound(name, "<=", at[3]))), (caution,), 1)
    lower = made(like, "lower", Every((like.when, Bound(name, "<=", at[2]))), like.then, 2)
    upper = made(like, "upper", Every((like.when, Bound(name, ">=", at[1]))), like.then, 3)
    return with_rules(knowledge, inner, lower, upper, without=like.rule.id), {"inner"}


def conflict(knowledge: Knowledge, rng: random.Random, level: int = 0) -> tuple[Knowledge, set[str]]:
    demanding = [each for each in knowledge.instances["heat"] if any(isinstance(one, Asks) for one in each.then)]
    like = rng.choice(demanding)
    asks = next(each for each in like.then if isinstance(each, Asks) and bool(each.level) == bool(level))
    free = asked(knowledge, related(like.when))
    when = narrower(knowledge, rng.choice(free), rng)[0] if rng.random() < 0.8 else ALWAYS
    limit = asks.test.limit - rng.randint(1, 30)  # type: ignore[union-attr, operator]  # demands of the bases are thresholds
    for_: Condition = Member("form", frozenset({"grease"})) if rng.random() < 0.5 else ALWAYS
    against = Asks(asks.property, Bound(asks.property, rng.choice(["<", "<="]), limit), asks.level, for_)
    return with_rules(knowledge, made(like, "against", when, (against,), 1)), {"against"}


def opposed(knowledge: Knowledge, rng: random.Random) -> tuple[Knowledge, set[str]]:
    return conflict(knowledge, rng, level=2)


def unused_conclusion(knowledge: Knowledge, rng: random.Random) -> tuple[Knowledge, set[str]]:
    way = rng.choice(["computed", "concluded", "property"])
    domain = rng.choice([Domain("number", "K", 0, 90), Domain("scale", choices={"low": "low", "high": "high"})])
    number = rng.choice([each for each in asked(knowledge, set()) if knowledge.domain(each).kind == "number"])
    if way == "computed":
        how = Formed("total", {"a": number, "b": rng.uniform(1, 9)})
        added = Computation("idle", "idle", Domain("number"), how, "heat", HERE)
        return replace(knowledge, computations={**knowledge.computations, "idle": added}), {"'idle'"}
    start = Concluded(0.0 if domain.kind == "number" else "low", "highest")
    like = chosen(knowledge, rng)
    setting = replace(like, then=(*like.then, Sets("idle", 1.0)))
    base = with_rules(knowledge, setting, without=like.rule.id)
    if way == "concluded":
        fact = Declaration("idle", "idle", domain, HERE, concluded=start)
        return replace(base, facts={**knowledge.facts, "idle": fact}), {"'idle'"}
    prop = Property("idle", "idle", domain, HERE, concluded=start)
    return replace(base, properties={**knowledge.properties, "idle": prop}), {"'idle'"}


def unused_question(knowledge: Knowledge, rng: random.Random) -> tuple[Knowledge, set[str]]:
    domain = rng.choice([each.domain for each in knowledge.facts.values() if each.question])
    fact = Declaration("idle", "idle", domain, HERE, Question("Why?", "", "", "lubricant", ALWAYS))
    return replace(knowledge, facts={**knowledge.facts, "idle": fact}), {"'idle'"}


def never_fires(knowledge: Knowledge, rng: random.Random) -> tuple[Knowledge, set[str]]:
    like = chosen(knowledge, rng)
    gate = knowledge.facts["gated"].question
    ways: list[Condition] = [
        Bound("sum", ">", knowledge.domain("n0").high + rng.uniform(20.5, 300)),
        Bound("top", "<", knowledge.domain("n0").low + 0.5),
        Bound("banded", rng.choice([">", "<"]), rng.choice([9.5, 30.0])),
        Every((Bound("gated", ">", rng.uniform(0, 80)), Member("c0", gate.when.among, wanted=False))),  # type: ignore[union-attr]  # gated has a gate
        Bound("gridded", ">=", rng.uniform(9.1, 30)),
    ]
    when = rng.choice(ways)
    if isinstance(when, Bound) and when.name == "banded":
        when = Bound("banded", ">", 9.5) if rng.random() < 0.5 else Bound("banded", "<", 0.5)
    extra = asked(knowledge, {"n0", "n1", "c0", "c1", "s0"})
    more = narrower(knowledge, rng.choice(extra), rng)[0] if rng.random() < 0.5 else ALWAYS
    caution = made(like, "idle", Every((when, more)), (Warns(_caution(like.then)),), 1)
    return with_rules(knowledge, caution), {"idle"}


def overlap(knowledge: Knowledge, rng: random.Random) -> tuple[Knowledge, set[str]]:
    name = rng.choice(["bands", "grid"])
    table = knowledge.tables[name]
    rows = list(table.rows)
    place = rng.randrange(len(rows) - 1)
    if name == "grid":
        rows.append(replace(rows[place], id="twice", mark=HERE))
    else:
        band = rows[place].cells["band"]
        assert isinstance(band, Band)
        rows[place] = widened(rows[place], rng.uniform(0.01, 3))
    return with_table(knowledge, name, rows), {name}


def widened(row: Row, by: float) -> Row:
    band = row.cells["band"]
    assert isinstance(band, Band)
    return replace(row, cells={**row.cells, "band": Band(band.low, band.high + by)})


def with_table(knowledge: Knowledge, name: str, rows: list[Row]) -> Knowledge:
    table = replace(knowledge.tables[name], rows=tuple(rows))
    return replace(knowledge, tables={**knowledge.tables, name: table})


def gap(knowledge: Knowledge, rng: random.Random) -> tuple[Knowledge, set[str]]:
    name = rng.choice(["bands", "grid"])
    rows = list(knowledge.tables[name].rows)
    highest = max(rows, key=lambda row: row.cells["factor"])  # type: ignore[arg-type, return-value]  # factors are numbers
    # The row with the highest factor stays, for a rule waits for it.
    place = rng.choice([number for number, row in enumerate(rows[:-1]) if row is not highest])
    if name == "grid" or rng.random() < 0.3:
        rows.pop(place)
    else:
        rows[place] = widened(rows[place], -rng.uniform(0.01, 0.9))
    return with_table(knowledge, name, rows), {name}


def beyond_physics(knowledge: Knowledge, rng: random.Random) -> tuple[Knowledge, set[str]]:
    way = rng.choice(["declared", "cell", "demand"])
    cold = -273.15 - rng.uniform(0.01, 500)
    if way == "declared":
        bounds = {"°C": (cold, 300.0), "mm": (-rng.uniform(0.1, 9), 500.0), "%": (0.0, 100 + rng.uniform(0.1, 900))}
        unit = rng.choice(list(bounds))
        prop = Property("odd", "odd", Domain("number", unit, *bounds[unit]), HERE)
        return replace(knowledge, properties={**knowledge.properties, "odd": prop}), {"'odd'"}
    if way == "cell":
        rows = list(knowledge.tables["letters"].rows)
        place = rng.randrange(len(rows))
        rows[place] = replace(rows[place], cells={**rows[place].cells, "top_c": cold})
        return with_table(knowledge, "letters", rows), {"letters"}
    like = chosen(knowledge, rng)
    name = "sum"
    computation = replace(knowledge.computations[name], domain=Domain("number", "°C"))
    instance = replace(like, when=Every((like.when, Bound(name, rng.choice([">", ">="]), cold))))
    base = with_rules(knowledge, instance, without=like.rule.id)
    return replace(base, computations={**knowledge.computations, name: computation}), {like.rule.id}


def related(condition: Condition) -> set[str]:
    """The names of a condition, and those that follow from them or from which they follow."""
    families = [{"n0", "sum", "top"}, {"n1", "banded"}, {"c1", "s0", "gridded"}, {"c0", "gated"}]
    own = set(names(condition))
    return own.union(*(each for each in families if each & own))


FAULTS: dict[str, Fault] = {
    "contradiction": contradiction,
    "duplicate": duplicate,
    "subsumed": subsumed,
    "redundant": redundant,
    "conflict": conflict,
    "opposed shoulds": opposed,
    "unused conclusion": unused_conclusion,
    "unused question": unused_question,
    "never fires": never_fires,
    "overlap": overlap,
    "gap": gap,
    "beyond physics": beyond_physics,
}
