"""Fifty faults of every class, put into clean bases: each is found, nothing else is told, and each witness replays."""

import random
from collections.abc import Iterator, Mapping
from functools import cache
from pathlib import Path
from tempfile import TemporaryDirectory

import pytest

from advisor.advice import Advisor
from advisor.anomalies import Finding, examine_meaning
from advisor.case import Answer, Case
from advisor.conditions import VOID, Coded
from advisor.conditions.terms import Void
from advisor.inference import StepRules
from advisor.knowledge import Knowledge
from tests.anomalies.bases import clean
from tests.anomalies.faults import FAULTS

BASES = 10
EACH = 50


@cache
def base(seed: int) -> Knowledge:
    with TemporaryDirectory() as folder:
        knowledge, problems = clean(seed).load(Path(folder))
    assert knowledge is not None, "\n".join(map(str, problems))
    return knowledge


@pytest.mark.parametrize("seed", range(BASES))
def test_clean_bases_raise_no_alarm(seed: int) -> None:
    assert examine_meaning(base(seed)) == []


@pytest.mark.parametrize("kind", FAULTS)
@pytest.mark.parametrize("seed", range(EACH))
def test_each_fault_is_found_alone_with_a_witness_that_replays(kind: str, seed: int) -> None:
    rng = random.Random(1000 * seed + len(kind))  # noqa: S311 - made cases, no secrets
    knowledge, named = FAULTS[kind](base(seed % BASES), rng)
    found = examine_meaning(knowledge)
    assert found, f"a seeded {kind} was not found"
    for finding in found:
        assert finding.kind == kind, f"{finding}\n{finding.shown(knowledge)}"
        assert named & set(finding.rules) or any(each in finding.message for each in named), str(finding)
        assert finding.confirmed, f"{finding}\n{finding.shown(knowledge)}"
        if kind in REPLAYED:
            both = fired(knowledge, finding)
            assert set(finding.rules[:1]) <= both, f"{finding}\n{finding.shown(knowledge)}"
            assert len(set(finding.rules) & both) >= REPLAYED[kind], f"{finding}\n{finding.shown(knowledge)}"


REPLAYED = {"duplicate": 2, "subsumed": 2, "redundant": 2, "conflict": 2, "opposed shoulds": 2, "never fires": 1}
"""Classes whose witness makes rules fire, and how many of those named."""


def fired(knowledge: Knowledge, finding: Finding) -> set[str]:
    """The rules that fire: of a whole case in the trace of its advice, of a record in the engine alone."""
    if finding.witness_is == "case":
        typed = {
            name: Answer(value=value, typed=str(value))
            for name, value in finding.witness.values.items()
            if name in knowledge.facts
        }
        advice = Advisor(knowledge).advise(Case(knowledge.point_kind.id, "", typed))
        outcomes = [pair for step in advice.trace for pair in zip(step.instances, step.outcomes, strict=True)]
        return {one.rule.id for one, holds in outcomes if holds}
    instances = [one for step in knowledge.instances.values() for one in step]
    domains = {name: knowledge.domain(name) for name in (*knowledge.facts, *knowledge.computations)}
    record = dict(coded(finding.witness.values, knowledge), **dict.fromkeys(finding.witness.void, VOID))
    judged = StepRules([one.when for one in instances], domains).judge(record)
    return {one.rule.id for one, holds in zip(instances, judged, strict=True) if holds}


def coded(values: Mapping[str, object], knowledge: Knowledge) -> dict[str, Coded | Void]:
    return {name: knowledge.domain(name).code(value) for name, value in values.items()}  # type: ignore[arg-type]  # values of people


def test_most_witnesses_of_rules_are_whole_cases() -> None:
    found = list(_some("conflict"))
    cases = sum(finding.witness_is == "case" for finding in found)
    assert cases >= 0.8 * len(found)


def _some(kind: str) -> Iterator[Finding]:
    for seed in range(BASES):
        knowledge, _ = FAULTS[kind](base(seed), random.Random(seed))  # noqa: S311 - made cases, no secrets
        yield from examine_meaning(knowledge)
