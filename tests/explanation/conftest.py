"""Advice for every shipped scenario, made once."""

from collections.abc import Callable
from functools import cache

import pytest

from advisor.advice import Advice, Advisor
from advisor.answers import read_case
from advisor.documents import Problems
from advisor.knowledge import Knowledge
from tests.conftest import SCENARIOS

NAMES = sorted(path.stem for path in SCENARIOS.glob("*.yaml"))


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
