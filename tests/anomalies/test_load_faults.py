"""Fifty faults of each class that the loader turns down: each is told by its class, at a line, and nothing else is."""

import random
from pathlib import Path

import pytest

from advisor.anomalies import turned_down
from tests.anomalies.bases import clean
from tests.anomalies.load_faults import LOAD_FAULTS


@pytest.mark.parametrize("kind", LOAD_FAULTS)
@pytest.mark.parametrize("seed", range(50))
def test_the_loader_tells_each_fault_by_its_class(kind: str, seed: int, tmp_path: Path) -> None:
    base = clean(seed)
    word = LOAD_FAULTS[kind](base, random.Random(seed))  # noqa: S311 - made cases, no secrets
    knowledge, problems = base.load(tmp_path)
    assert knowledge is None
    found = turned_down(problems)
    assert len(found) == len(problems), "\n".join(map(str, problems))
    assert {finding.kind for finding in found} == {kind}, "\n".join(map(str, problems))
    assert any(word in finding.message for finding in found)
    assert all(finding.confirmed and finding.where.line > 1 for finding in found)
