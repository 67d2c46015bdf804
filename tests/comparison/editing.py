"""Edited copies of the shipped knowledge, and random records of what a step sees."""

import random
import re
import shutil
from pathlib import Path

from advisor.bending import domains_seen, may_lack
from advisor.conditions import VOID, Bound, Coded, Domain, FactRef, leaves
from advisor.conditions.terms import Void
from advisor.knowledge import Instance, Knowledge, load
from advisor.places import knowledge_folder

HOT_STEEL = ("when: {t_eff_c: {above: 120}}", "when: {t_eff_c: {above: 110}}")
HOT_STEEL_SILENT = ("silent: {t_eff_c: 120}", "silent: {t_eff_c: 110}")


def edited(place: Path, file: str, *changes: tuple[str, str]) -> Knowledge:
    """The shipped knowledge with texts of one file put in for others, each of which stands there once."""
    shutil.copytree(knowledge_folder(), place, dirs_exist_ok=True)
    path = place / file
    text = path.read_text(encoding="utf-8")
    for before, after in changes:
        assert text.count(before) == 1, before
        text = text.replace(before, after)
    path.write_text(text, encoding="utf-8")
    return load(place)


def renamed(place: Path, name: str) -> Knowledge:
    """The shipped knowledge with a fact or a property of another name, wherever it stands."""
    shutil.copytree(knowledge_folder(), place)
    for path in place.rglob("*.yaml"):
        text = path.read_text(encoding="utf-8")
        path.write_text(re.sub(rf"\b{name}\b", f"{name}_renamed", text), encoding="utf-8")
    return load(place)


def random_records(
    instances: list[Instance], knowledge: Knowledge, count: int, seed: int
) -> list[dict[str, Coded | Void]]:
    """Records of everything that these instances look at: limits, their neighbours and anything between."""
    dice = random.Random(seed)  # noqa: S311 - repeatable records, no secrets
    domains, lacking = domains_seen(knowledge), may_lack(knowledge)
    limits: dict[str, list[float]] = {}
    for term in (term for each in instances for term in leaves(each.when)):
        limits.setdefault(term.name, [])
        if isinstance(term, Bound) and isinstance(term.limit, FactRef):
            limits.setdefault(term.limit.name, [])
        elif isinstance(term, Bound):
            limits[term.name].append(float(term.limit))
    return [
        {
            name: VOID if name in lacking and dice.random() < 0.05 else _value(domains[name], near, dice)
            for name, near in limits.items()
        }
        for _ in range(count)
    ]


def _value(domain: Domain, near: list[float], dice: random.Random) -> Coded:
    if domain.kind == "several":
        return frozenset(tick for tick in domain.choices if dice.random() < 0.3)
    if domain.places:
        return dice.choice(domain.places)
    if domain.kind != "number":
        return domain.code(dice.choice(list(domain.choices)))
    if near and dice.random() < 0.6:
        limit = dice.choice(near)
        value = dice.choice([limit, limit + dice.uniform(-1, 1) * max(1.0, abs(limit) / 10)])
    else:
        value = dice.uniform(max(domain.low, -1e6), min(domain.high, 1e6))
    return min(max(value, domain.low), domain.high)
