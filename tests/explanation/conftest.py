"""Advice for every shipped scenario, made once."""

import re
from collections.abc import Callable
from functools import cache

import pytest

from advisor.advice import Advice, Advisor
from advisor.answers import read_case
from advisor.documents import Problems
from advisor.knowledge import Knowledge
from tests.conftest import SCENARIOS

NAMES = sorted(path.stem for path in SCENARIOS.glob("*.yaml") if not re.search(r"_rule_by_rule$|_\d+$", path.stem))
"""The scenarios, without those that put one of them again rule by rule or just beside a limit."""


@pytest.fixture(scope="session")
def advice_of(advisor: Advisor, knowledge: Knowledge) -> Callable[[str], Advice]:
    """The advice for a shipped scenario."""

    @cache
    def made(name: str) -> Advice:
        problems = Problems()
        saved = read_case(SCENARIOS / f"{name}.yaml", knowledge, problems)
        assert saved is not None, "\n".join(map(str, problems))
        return advisor.advise(saved.case, assume_gaps=saved.assume_gaps, only=saved.only)

    return made
