"""Faults that the loader itself turns down, put into the files of a clean base."""

import random
from collections.abc import Callable

from tests.anomalies.bases import Base

LoadFault = Callable[[Base, random.Random], str]
"""Puts a fault into the files; gives a word that the problem must name."""


def circular(base: Base, rng: random.Random) -> str:
    """Two to five computations that need one another."""
    count = rng.randint(2, 5)
    names = [f"round_{place}" for place in range(count)]
    made = [
        {"fact": name, "title": name, "formula": "highest", "in": {"a": "n0", "b": names[(place + 1) % count]}}
        for place, name in enumerate(names)
    ]
    rng.shuffle(made)
    base.computations.extend(made)
    return "round_0"


def undefined_name(base: Base, rng: random.Random) -> str:
    """A name misspelt so that nothing has it, in one of the places where names stand."""
    rule = rng.choice(base.rules)
    conclusions = ["caution", "refer", "must", "set"]
    way = rng.choice(["when", "fires", *conclusions, "limit", "because", "table", "column", "input"])
    if way in {"when", "fires"}:
        name = rng.choice(list(rule[way]))
        rule[way]["nowhere"] = rule[way].pop(name)
    elif way in {"caution", "refer"}:
        rule["then"].append({way: "nowhere"})
    elif way in {"must", "set"}:
        rule["then"].append({way: {"nowhere": 1}})
    elif way == "limit":
        rule["when"]["n0"] = {"above": {"fact": "nowhere"}}
    elif way == "because":
        rule["because"] = "so, {nowhere}"
    elif way == "input":
        base.computations[0]["in"]["a"] = "nowhere"
    else:
        rng.choice(base.computations[2:])["looked_up"][way] = "nowhere"
    return "nowhere"


def outside_its_domain(base: Base, rng: random.Random) -> str:
    """A value that the fact, property or column under which it stands cannot have."""
    rule = rng.choice(base.rules)
    way = rng.choice(["number", "choice", "tick", "place", "example", "grade", "unasked", "cell"])
    if way == "number":
        name = rng.choice(["n0", "n1", "n2", "n3"])
        rule["when"][name] = {rng.choice(["above", "below"]): rng.choice([-77777, 77777])}
        return "77777"
    if way in {"choice", "tick", "place"}:
        name = {"choice": "c0", "tick": "m0", "place": "s0"}[way]
        rule["when"][name] = {"any_of": ["stranger"]}
        return "stranger"
    if way == "example":
        rule["silent"]["c1"] = "stranger"
        return "stranger"
    if way == "grade":
        rule["then"].append({"must": {"vg": {"at_most": 47}}})
        return "47"
    if way == "unasked":
        base.facts["gated"]["unasked"] = -rng.randint(1, 99)
        return "-"
    base.tables["bands"]["columns"]["factor"]["limits"] = [0, 8]
    return "9"


LOAD_FAULTS: dict[str, LoadFault] = {
    "circular": circular,
    "undefined name": undefined_name,
    "outside its domain": outside_its_domain,
}
