"""Clean knowledge made from a seed: every kind of fact, tables, computations, rules with conclusions of their own."""

import json
import random
from dataclasses import dataclass, field
from itertools import pairwise, product
from pathlib import Path
from typing import Any

from advisor.documents import Problems
from advisor.knowledge import Knowledge, examine

Tree = dict[str, Any]
SOURCE = [{"id": "practice"}]
UNITS = {"°C": (-50, 300), "mm": (1, 500), "1/min": (1, 20000), "%": (0, 100), "h": (0, 40000), "N": (0, 9000)}
OILS = ["mineral", "pao", "ester"]


@dataclass
class Base:
    """The files of a folder as trees, before they are written."""

    files: dict[str, Tree]
    numbers: list[str] = field(default_factory=list)
    terms: dict[str, list[str]] = field(default_factory=dict)

    @property
    def facts(self) -> Tree:
        return self.files["hinge/facts.yaml"]["facts"]  # type: ignore[no-any-return]  # trees of JSON

    @property
    def rules(self) -> list[Tree]:
        return self.files["common/heat.yaml"]["rules"]  # type: ignore[no-any-return]  # trees of JSON

    @property
    def computations(self) -> list[Tree]:
        return self.files["common/heat.yaml"]["computations"]  # type: ignore[no-any-return]  # trees of JSON

    @property
    def tables(self) -> Tree:
        return self.files["tables/all.yaml"]["tables"]  # type: ignore[no-any-return]  # trees of JSON

    def write(self, folder: Path) -> Path:
        for name, tree in self.files.items():
            (folder / name).parent.mkdir(parents=True, exist_ok=True)
            text = json.dumps({"format": 1, **tree}, ensure_ascii=False, indent=1)
            (folder / name).write_text(text, encoding="utf-8")
        return folder

    def load(self, folder: Path) -> tuple[Knowledge | None, Problems]:
        problems = Problems()
        return examine(self.write(folder), "hinge", None, problems), problems


def clean(seed: int) -> Base:
    """A base without any anomaly, by construction: no two rules share a conclusion, all that is made is used."""
    rng = random.Random(seed)  # noqa: S311 - made cases, no secrets
    base = Base(_fixed())
    _facts(base, rng)
    _computations(base, rng)
    _rules(base, rng)
    return base


def _fixed() -> dict[str, Tree]:
    standard = {"title": "D", "written": "how", "need": "n0", "cold": "n0", "nlgi": "vg"}
    letters = {"table": "letters", "letter": "letter", "upper": "top_c", "lower": "top_c"}
    upper = {key: letters[key] for key in ("table", "letter", "upper")}
    return {
        "point_kinds.yaml": {"kinds": {"hinge": {"title": "Hinge", "folder": "hinge"}}},
        "steps.yaml": {
            "steps": {name: {"title": name, "for": "a"} for name in ("heat", "choice", "closing")}
        },
        "sources.yaml": {"sources": {"practice": {"title": "P", "kind": "common practice", "checked": "no source"}}},
        "usual_oils.yaml": {
            "usual_oils": {
                "table": "oils", "family": "base_oil", "from": "from_vg", "to": "to_vg", "index": "vi",
                "ordinary": {"base_oil": "mineral"},
            }
        },
        "designations.yaml": {
            "designations": {
                "din": {
                    **standard, "kind": "K", "water_test": "n0", "water_rating": "vg", "rating_at_most": 1,
                    "upper": {**upper, "water_test": "top_c", "rating_to": "top_c"},
                    "lower": {"table": "letters", "lower": "top_c"},
                    "additive": {"P": {"property": "form", "values": ["grease"]}},
                    "base_oil": {"table": "oils", "property": "base_oil", "letters": "id"},
                },
                "iso": {
                    **standard, "prefix": "X", "water": "n0", "upper": upper,
                    "lower": {"table": "letters", "letter": "letter", "lower": "top_c"},
                    "water_grid": {
                        "table": "letters", "letter": "letter", "environment": "top_c", "rust": "top_c",
                    },
                    "load": {"property": "form", "values": ["grease"], "with": "B", "without": "A"},
                },
            }
        },
        "docket.yaml": {"rows": [{"id": "form", "title": "Form", "recommends": "form"}]},
        "cautions.yaml": {"cautions": {}, "referrals": {"someone": {"to": "someone", "text": "Ask."}}},
        "shelf/demo.yaml": {"shelf": "Shelf", "products": [{"item": "A-1", "title": "A", "form": "grease"}]},
        "facts.yaml": {"facts": {}},
        "hinge/facts.yaml": {"facts": {}},
        "properties.yaml": {
            "properties": {
                "form": {"title": "form", "kind": "choice", "choices": ["grease", "oil"]},
                "thickener": {"title": "thickener", "kind": "choice", "choices": ["soap", "clay"]},
                "base_oil": {"title": "oil", "kind": "choice", "choices_of": "oils"},
                "vg": {"title": "VG", "kind": "number", "unit": "ISO VG", "places": [32, 46, 68]},
                "viscosity_40": {"title": "at 40", "kind": "number", "unit": "mm²/s", "limits": [1, 9000]},
                "viscosity_100": {"title": "at 100", "kind": "number", "unit": "mm²/s", "limits": [1, 900]},
                "kappa": {"title": "kappa", "kind": "number", "unit": "", "limits": [0, 99]},
                "pair": {"title": "pair", "kind": "scale", "choices": ["same", "other"]},
                "speciality": {"title": "special", "kind": "number", "unit": "", "limits": [1, 5]},
            }
        },
        "tables/all.yaml": {
            "tables": {
                "oils": {
                    "title": "Oils", "key": "id",
                    "columns": {"id": {"kind": "choice"}, "vi": {"kind": "number", "unit": ""}, **{
                        each: {"kind": "number", "unit": "ISO VG"} for each in ("from_vg", "to_vg")}},
                    "rows": [{"id": each, "from_vg": 32, "to_vg": 46, "vi": 95} for each in OILS],
                },
                "letters": {
                    "title": "Letters", "key": "letter",
                    "columns": {"letter": {"kind": "choice"}, "top_c": {"kind": "number", "unit": "°C"}},
                    "rows": [{"letter": "A", "top_c": 60}, {"letter": "B", "top_c": 90}],
                },
            }
        },
        "common/heat.yaml": {"computations": [], "rules": []},
        "common/choice.yaml": {"rules": []},
        "hinge/closing.yaml": {"rules": []},
    }


def _facts(base: Base, rng: random.Random) -> None:
    for place in range(4):
        unit = "°C" if place == 0 else rng.choice(list(UNITS))
        low, high = UNITS[unit]
        base.facts[f"n{place}"] = {
            "title": f"n{place}", "kind": "number", "unit": unit, "limits": [low, high],
            "step": rng.choice([0.5, 1, 5]), "question": {"ask": "How much?"},
        }
    for place in range(2):
        choices = [f"c{place}_{each}" for each in "abcde"[: rng.randint(3, 5)]]
        base.facts[f"c{place}"] = {"title": "c", "kind": "choice", "choices": choices, "question": {"ask": "Which?"}}
        ticks = [f"m{place}_{each}" for each in "abcd"[: rng.randint(3, 4)]]
        base.facts[f"m{place}"] = {"title": "m", "kind": "several", "choices": ticks, "question": {"ask": "Which?"}}
    places = [f"s_{each}" for each in "abcd"]
    base.facts["s0"] = {"title": "s", "kind": "scale", "choices": places, "question": {"ask": "How bad?"}}
    base.facts["y0"] = {"title": "y", "kind": "yes_no", "question": {"ask": "Is it?"}}
    gate = rng.choice(base.facts["c0"]["choices"])
    base.facts["gated"] = {
        "title": "gated", "kind": "number", "unit": "mm", "limits": [0, 90], "unasked": 0,
        "question": {"ask": "How far?", "when": {"c0": gate}},
    }
    base.facts["raised"] = {
        "title": "raised", "kind": "number", "unit": "K", "limits": [0, 90],
        "concluded": {"otherwise": 0, "combine": rng.choice(["highest", "lowest"])},
    }


def _computations(base: Base, rng: random.Random) -> None:
    facts = base.facts
    limits = facts["n1"]["limits"]
    ends = sorted(rng.sample(range(int(limits[0]) + 1, int(limits[1])), 4))
    rows: list[Tree] = [{"band": {"below": ends[0]}, "factor": 1}]
    rows += [{"band": {"from": a, "below": b}, "factor": 2 + n} for n, (a, b) in enumerate(pairwise(ends))]
    rows.append({"band": {"from": ends[-1]}, "factor": 9})
    number = {"kind": "number", "unit": "K"}
    base.tables["bands"] = {
        "title": "Bands", "policy": "complete",
        "columns": {"band": {"kind": "band", "unit": facts["n1"]["unit"]}, "factor": number}, "rows": rows,
    }
    base.tables["grid"] = {
        "title": "Grid", "policy": "complete",
        "columns": {"c": {"kind": "choice"}, "s": {"kind": "choice"}, "factor": number},
        "rows": [
            {"c": c, "s": s, "factor": rng.randint(1, 9)}
            for c, s in product(facts["c1"]["choices"], facts["s0"]["choices"])
        ],
    }
    base.computations.extend([
        {"fact": "sum", "title": "sum", "formula": "total", "in": {"a": "n0", "b": rng.randint(1, 20)}},
        {"fact": "top", "title": "top", "formula": "highest", "in": {"a": "n0", "b": "sum"}},
        _look_up("banded", "bands", {"band": "n1"}),
        _look_up("gridded", "grid", {"c": "c1", "s": "s0"}),
    ])


def _look_up(name: str, table: str, by: dict[str, str]) -> Tree:
    return {"fact": name, "title": name, "looked_up": {"table": table, "by": by, "column": "factor"}}


def _rules(base: Base, rng: random.Random) -> None:
    names = [*base.facts, "sum", "top", "banded", "gridded"]
    names.remove("raised")
    for place, name in enumerate(names):
        others = rng.sample([each for each in names if each != name], rng.randint(0, 2))
        others = [each for each in others if not {name, *others} & _kin(each)]
        rule = _rule(base, f"rule_{place}", [name, *others], rng)
        rule["then"] = [{"caution": f"caution_{place}"}]
        base.files["cautions.yaml"]["cautions"][f"caution_{place}"] = {"text": "Careful."}
        if place % 3 == 0:
            prop = f"p{place}"
            base.files["properties.yaml"]["properties"][prop] = {
                "title": prop, "kind": "number", "unit": "°C", "limits": [0, 200]}
            rule["then"].append({"must": {prop: {"at_least": rng.randint(50, 100)}}})
            rule["then"].append({"should": {prop: {"at_least": rng.randint(101, 150)}}, "level": 2})
            rule["then"].append({"set": {"raised": 10 + place}})
        base.rules.append(rule)
    reading = _rule(base, "reads_raised", ["raised"], rng)
    reading["then"] = [{"refer": "someone"}]
    base.files["common/choice.yaml"]["rules"].append(reading)


def _kin(name: str) -> set[str]:
    """Facts that follow from a fact, or from which it follows: no clean rule asks for two of them."""
    families = [{"n0", "sum", "top"}, {"n1", "banded"}, {"c1", "s0", "gridded"}, {"c0", "gated"}]
    return set().union(*(each for each in families if name in each)) - {name}


def _rule(base: Base, rule: str, names: list[str], rng: random.Random) -> Tree:
    terms = {name: term(base, name, rng) for name in names}
    base.terms[rule] = names
    fires = {name: each[1] for name, each in terms.items()}
    silent = {**fires, names[0]: terms[names[0]][2]}
    return {
        "id": rule, "title": rule, "status": "agreed", "when": {name: each[0] for name, each in terms.items()},
        "because": "so", "source": SOURCE, "fires": fires, "silent": silent,
    }


def term(base: Base, name: str, rng: random.Random) -> tuple[Any, Any, Any]:
    """A test on a fact, a value that meets it and one that does not; both ends of the range stay possible."""
    fact = base.facts.get(name, {})
    if name in {"banded", "gridded"}:
        rows = base.tables["bands" if name == "banded" else "grid"]["rows"]
        values = sorted({row["factor"] for row in rows})
        return {"at_least": values[-1]}, values[-1], values[0] - 1
    if name == "raised":
        return {"at_least": 10}, 10, 0
    if fact.get("kind") in {"choice", "several"}:
        choices = fact["choices"]
        met = rng.sample(choices, rng.randint(1, len(choices) - 1))
        left = [each for each in choices if each not in met]
        several = fact["kind"] == "several"
        if several or rng.random() < 0.6:
            return {"any_of": met}, met[:1] if several else met[0], left[:1] if several else left[0]
        return {"none_of": left}, met[0], left[0]
    if fact.get("kind") == "scale":
        return {"at_least": fact["choices"][2]}, fact["choices"][3], fact["choices"][0]
    if fact.get("kind") == "yes_no":
        return "yes", "yes", "no"
    low, high = (fact or base.facts["n0"])["limits"]
    limit = round(low + (high - low) * rng.uniform(0.3, 0.7))
    if rng.random() < 0.5 or name == "gated":
        return {rng.choice(["above", "at_least"]): limit}, high, low
    return {rng.choice(["below", "at_most"]): limit}, low, high
