"""Made-up domains, conditions and records for the property tests, drawn from a seed."""

import random
from collections.abc import Mapping
from typing import Final

from advisor.conditions import (
    VOID,
    Bound,
    Coded,
    Condition,
    Domain,
    Either,
    Every,
    FactRef,
    Member,
    Record,
    Stated,
    Ticked,
    Valueless,
    branches,
    negated,
)
from advisor.conditions.terms import Term, Void

SIGNS: Final = ("<", "<=", ">", ">=", "=", "!=")

NUMBERS: Final = (
    0.0, -0.0, 1.0, -1.0, 0.1 + 0.2, 0.3, 85.0, 84.99999999999999, 70.0, 1e-05, -1e-05, 1.5e-05, 1e16, 1e22, 5e-324,
    2.2250738585072014e-308, 1.7976931348623157e308, -1.7976931348623157e308, float(2**53), float(2**53 - 1), 1e-3,
    1e15, 999999999999999.9, 1e-4, 0.00123,
)  # fmt: skip

TEXTS: Final = (
    "", " ", "a", "a ", "ab", "ab c", 'say "x"', "back\\slash", "\\", "line\nbreak", "tab\t", "äöü", "Öl", "油", "🛢",
    "e\u0301", "\u00e9", "true", "85", "1.5", "null", "{}", '"}', "$m", "a\u0000b", "a\u0000c", "x" * 3000,
)  # fmt: skip

TICKS: Final = ("wet", "dusty", "food", "quote\"'s", "back\\slash")

DOMAINS: Final[Mapping[str, Domain]] = {
    **{f"number_{n}": Domain("number") for n in range(4)},
    **{f"scale_{n}": Domain("scale", choices={f"place_{p}": f"place {p}" for p in range(4)}) for n in range(2)},
    "yes": Domain("yes_no", choices={"no": "no", "yes": "yes"}),
    "choice": Domain("choice", choices={each: each for each in TEXTS[:8]}),
    "item": Domain("item", choices={each: each for each in TEXTS[8:16]}, open_choices=True),
    "text": Domain("text"),
    **{f"several_{n}": Domain("several", choices={each: each for each in TICKS}) for n in range(2)},
    # Names that the engine keeps for itself, and two that it would take for one (equal 32-bit hashes).
    **{name: Domain("number") for name in ("id", "sid", "kind", "probe", "$s", "a0", "p_copfdimzn", "p_sqytkesfn")},
}

ORDERED: Final = tuple(name for name, domain in DOMAINS.items() if domain.ordered)
TEXTUAL: Final = ("choice", "item", "text")
SEVERAL: Final = ("several_0", "several_1")


def seeded(seed: int) -> random.Random:
    return random.Random(seed)  # noqa: S311  # made-up cases are no secrets


def a_value(name: str, draw: random.Random) -> Coded:
    domain = DOMAINS[name]
    if domain.kind == "number":
        return draw.choice(NUMBERS) if draw.random() < 0.8 else draw.uniform(-100.0, 100.0)
    if domain.ordered:
        return float(draw.randrange(len(domain.choices)))
    if domain.kind == "several":
        return frozenset(each for each in TICKS if draw.random() < 0.4)
    return draw.choice(TEXTS)


def a_record(draw: random.Random) -> Record:
    """A record in which a fifth of the facts is unanswered and a tenth void."""
    record: dict[str, Coded | Void] = {}
    for name in DOMAINS:
        chance = draw.random()
        if chance < 0.7:
            record[name] = a_value(name, draw)
        elif chance < 0.8:
            record[name] = VOID
    return record


def a_term(draw: random.Random) -> Term:
    kind = draw.randrange(7)
    wanted = draw.random() < 0.5
    if kind <= 1:
        name = draw.choice(ORDERED)
        if draw.random() < 0.3:
            return Bound(name, draw.choice(SIGNS), FactRef(draw.choice(ORDERED)))
        limit = a_value(name, draw)
        assert isinstance(limit, float)
        return Bound(name, draw.choice(SIGNS), limit)
    if kind == 2:
        return Member(draw.choice(TEXTUAL), frozenset(draw.sample(TEXTS, draw.randrange(4))), wanted)
    if kind == 3:
        name = draw.choice(ORDERED)
        values = {value for _ in range(draw.randrange(4)) if isinstance(value := a_value(name, draw), float)}
        return Member(name, frozenset(values), wanted)
    if kind == 4:
        return Ticked(draw.choice(SEVERAL), frozenset(draw.sample(TICKS, draw.randrange(4))), wanted)
    if kind == 5:
        return Valueless(draw.choice(tuple(DOMAINS)), wanted)
    return Stated(draw.choice(tuple(DOMAINS)), wanted)


def a_condition(draw: random.Random, depth: int = 3) -> Condition:
    """A condition of all kinds of terms, nested and negated, that the engine takes."""
    while True:
        condition = _nested(draw, depth)
        if _branch_count(condition) <= 40:
            return condition


def _nested(draw: random.Random, depth: int) -> Condition:
    if depth == 0 or draw.random() < 0.3:
        return a_term(draw)
    parts = tuple(_nested(draw, depth - 1) for _ in range(draw.choice((0, 1, 2, 2, 3))))
    condition = Every(parts) if draw.random() < 0.6 else Either(parts)
    voidable = DOMAINS if draw.random() < 0.3 else ()
    return negated(condition, voidable) if draw.random() < 0.3 else condition


def _branch_count(condition: Condition) -> int:
    """Branches with every wanted membership spread over its choices."""
    total = 0
    for branch in branches(condition):
        spread = 1
        for term in branch:
            if isinstance(term, Member | Ticked) and term.wanted:
                spread *= len(term.among)
        total += spread
    return total
