"""The same rules in five engines; each contender answers which rules of a step fire for a case."""

import collections
import collections.abc
import inspect
import json
from collections.abc import Callable, Iterable, Sequence
from functools import partial
from typing import Any

from advisor.conditions import Bound, Coded, Condition, Domain, FactRef, Member, branches
from advisor.conditions.terms import SIGNS, Term, names
from advisor.inference import Matcher, StepRules
from tests.benchmarks.made_rules import CHOICES, Case

Fired = Callable[[Case], frozenset[int]]
Build = Callable[[Sequence[Condition], dict[str, Domain]], Fired]


def ours_matching(rules: Sequence[Condition], domains: dict[str, Domain]) -> Fired:
    """The matching stage alone."""
    return Matcher(rules, domains).fired


def ours_judged(rules: Sequence[Condition], domains: dict[str, Domain]) -> Fired:
    """The matching stage, the plain judgement with three outcomes, and their comparison."""
    step = StepRules(rules, domains)

    def fired(case: Case) -> frozenset[int]:
        return frozenset([index for index, outcome in enumerate(step.judge(case)) if outcome])

    return fired


def looked_at(rules: Iterable[Condition]) -> list[str]:
    """The facts that a step looks at; no contender is sent more."""
    return sorted({name for rule in rules for name in names(rule)})


def clips_agenda(rules: Sequence[Condition], _domains: dict[str, Domain]) -> Fired:
    """CLIPS: one fact of one template, the agenda read, no action run."""
    environment, template, sent = _clips_step(rules, "")
    owners = {f"r{index}_{place}": index for index, rule in enumerate(rules) for place in range(len(branches(rule)))}

    def fired(case: Case) -> frozenset[int]:
        fact = template.assert_fact(**sent(case))
        found = frozenset([owners[activation.name] for activation in environment.activations()])
        fact.retract()
        return found

    return fired


def clips_run(rules: Sequence[Condition], _domains: dict[str, Domain]) -> Fired:
    """CLIPS: the same, but the rules run and note their number in a global text, which is read once."""
    environment, template, sent = _clips_step(rules, '(bind ?*fired* (str-cat ?*fired* "{index} "))')
    noted = environment.find_global("fired")

    def fired(case: Case) -> frozenset[int]:
        fact = template.assert_fact(**sent(case))
        environment.run()
        found = frozenset(map(int, noted.value.split()))
        noted.value = ""
        fact.retract()
        return found

    return fired


def _clips_step(rules: Sequence[Condition], action: str) -> tuple[Any, Any, Callable[[Case], Case]]:
    """An environment with the rules of a step, its template, and what is sent of a case."""
    import clips  # type: ignore[import-untyped]  # the package is optional

    environment = clips.Environment()
    used = looked_at(rules)
    environment.build('(defglobal ?*fired* = "")')
    environment.build(f"(deftemplate case {' '.join(f'(slot {name})' for name in used)})")
    for index, rule in enumerate(rules):
        for place, branch in enumerate(branches(rule)):
            pattern = _clips_pattern(branch)
            environment.build(f"(defrule r{index}_{place} (case {pattern}) => {action.format(index=index)})")
    symbols: dict[object, Coded] = {choice: clips.Symbol(choice) for choice in CHOICES}

    def sent(case: Case) -> Case:
        return {name: symbols.get(value, value) for name in used if (value := case.get(name)) is not None}

    return environment, environment.find_template("case"), sent


def _clips_pattern(branch: Sequence[Term]) -> str:
    """One constraint per slot; a slot without a value holds `nil`, so thresholds ask for a number first."""
    constraints: dict[str, list[str]] = {}
    ordered: set[str] = set()
    for term in branch:
        own = constraints.setdefault(term.name, [])
        if isinstance(term, Bound):
            ordered.add(term.name)
            if isinstance(term.limit, FactRef):
                ordered.add(term.limit.name)
                constraints.setdefault(term.limit.name, [])
                limit = f"?{term.limit.name}"
            else:
                limit = str(term.limit)
            own.append(f":({term.sign} ?{term.name} {limit})")
        elif isinstance(term, Member):
            own.append("|".join(map(str, term.among)) if term.wanted else "&".join(f"~{each}" for each in term.among))
            own += [] if term.wanted else ["~nil"]
    slots = []
    # A variable may only be used after its slot: what others compare with comes first.
    for name in _limits_first(branch, list(constraints)):
        first = [f"?{name}", f":(numberp ?{name})"] if name in ordered else []
        slots.append(f"({name} {'&'.join([*first, *constraints[name]])})")
    return " ".join(slots)


def _limits_first(branch: Sequence[Term], slots: list[str]) -> list[str]:
    limits = {
        term.name: term.limit.name for term in branch if isinstance(term, Bound) and isinstance(term.limit, FactRef)
    }
    placed: list[str] = []
    while len(placed) < len(slots):
        placed += [name for name in slots if name not in placed and limits.get(name, name) in (*placed, name)]
    return placed


def zen_collect(rules: Sequence[Condition], _domains: dict[str, Domain]) -> Fired:
    """A decision table of zen-engine that collects every row that holds; one row per branch."""
    import zen  # the package is optional

    used = looked_at(rules)
    rows = [
        {"_id": f"{index}_{place}", **_zen_cells(branch), "fired": str(index)}
        for index, rule in enumerate(rules)
        for place, branch in enumerate(branches(rule))
    ]
    table = {
        "hitPolicy": "collect",
        "inputs": [{"id": name, "name": name, "field": name} for name in used],
        "outputs": [{"id": "fired", "name": "fired", "field": "fired"}],
        "rules": rows,
    }
    nodes = [
        {"id": "in", "name": "in", "type": "inputNode", "content": {}},
        {"id": "table", "name": "table", "type": "decisionTableNode", "content": table},
        {"id": "out", "name": "out", "type": "outputNode", "content": {}},
    ]
    edges = [
        {"id": "e1", "type": "edge", "sourceId": "in", "targetId": "table"},
        {"id": "e2", "type": "edge", "sourceId": "table", "targetId": "out"},
    ]
    decision = zen.ZenEngine().create_decision(json.dumps({"nodes": nodes, "edges": edges}))

    def fired(case: Case) -> frozenset[int]:
        answer: Any = decision.evaluate({name: case[name] for name in used if name in case})
        return frozenset([int(row["fired"]) for row in answer["result"]])

    return fired


def _zen_cells(branch: Sequence[Term]) -> dict[str, str]:
    cells: dict[str, list[str]] = {}
    for term in branch:
        own = cells.setdefault(term.name, [])
        if isinstance(term, Bound):
            limit = term.limit.name if isinstance(term.limit, FactRef) else f"{term.limit}"
            own.append(f"$ {term.sign} {limit}")
        elif isinstance(term, Member):
            listed = ", ".join(f"'{each}'" for each in sorted(map(str, term.among)))
            own.append(f"$ in [{listed}]" if term.wanted else f"$ not in [{listed}] and $ != null")
    return {name: " and ".join(parts) for name, parts in cells.items()}


def experta_agenda(rules: Sequence[Condition], _domains: dict[str, Domain]) -> Fired:
    """experta: one fact, the agenda read, no action run."""
    for moved in ("Mapping", "MutableMapping", "Iterable", "Callable", "Hashable"):
        # experta and frozendict still look for these where Python kept them until 3.9.
        setattr(collections, moved, getattr(collections.abc, moved))
    import experta  # type: ignore[import-untyped]  # the package is optional

    used = looked_at(rules)
    methods: dict[str, object] = {}
    owners: dict[str, int] = {}
    for index, rule in enumerate(rules):
        for place, branch in enumerate(branches(rule)):
            name = f"r{index}_{place}"
            owners[name] = index
            methods[name] = _experta_rule(experta, branch, name)
    engine = type("Step", (experta.KnowledgeEngine,), methods)()
    engine.reset()

    def fired(case: Case) -> frozenset[int]:
        fact = engine.declare(experta.Fact(**{name: case[name] for name in used if name in case}))
        found = frozenset([owners[each.rule._wrapped.__name__] for each in engine.agenda.activations])
        engine.retract(fact)
        return found

    return fired


def _experta_rule(experta: Any, branch: Sequence[Term], name: str) -> object:
    tests: dict[str, Callable[[float], bool]] = {}
    matched: set[str] = set()
    joins: list[object] = []
    for term in branch:
        if isinstance(term, Bound) and isinstance(term.limit, FactRef):
            matched |= {term.name, term.limit.name}
            joins.append(_experta_join(experta, term.name, term.limit.name, SIGNS[term.sign]))
        elif isinstance(term, Bound) and not isinstance(term.limit, FactRef):
            tests[term.name] = partial(_beyond, SIGNS[term.sign], term.limit)
        elif isinstance(term, Member):
            tests[term.name] = partial(_among, term.among, term.wanted)
    fields = {each: experta.P(test) for each, test in tests.items()}
    for each in matched:
        captured = getattr(experta.MATCH, each)
        fields[each] = captured & fields[each] if each in fields else captured

    def method(_self: object, **_matched: object) -> None: ...

    method.__name__ = name
    return experta.Rule(experta.Fact(**fields), *joins)(method)


def _beyond(sign: Callable[[float, float], bool], limit: float, seen: float) -> bool:
    return sign(seen, limit)


def _among(choices: frozenset[str] | frozenset[float], wanted: bool, seen: object) -> bool:
    return (seen in choices) is wanted


def _experta_join(experta: Any, first: str, second: str, sign: Callable[[float, float], bool]) -> object:
    def compare(**seen: float) -> bool:
        return sign(seen[first], seen[second])

    # experta reads from the names of the parameters which values it is to pass.
    parameters = [inspect.Parameter(name, inspect.Parameter.KEYWORD_ONLY) for name in (first, second)]
    compare.__signature__ = inspect.Signature(parameters)  # type: ignore[attr-defined]  # functions may carry one
    return experta.TEST(compare)
