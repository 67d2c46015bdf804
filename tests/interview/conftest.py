"""The shipped knowledge, loaded once, and a place of its own for kept interviews."""

from datetime import datetime
from pathlib import Path

import pytest

from advisor.advice import Advisor
from advisor.knowledge import Knowledge, load
from advisor.places import knowledge_folder


@pytest.fixture(scope="session")
def knowledge() -> Knowledge:
    return load(knowledge_folder())


@pytest.fixture(scope="session")
def advisor(knowledge: Knowledge) -> Advisor:
    return Advisor(knowledge)


@pytest.fixture(autouse=True)
def kept(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.setenv("XDG_STATE_HOME", str(tmp_path / "state"))
    return tmp_path / "state" / "gudgeon" / "interviews"


@pytest.fixture
def clock() -> object:
    return lambda: datetime(2025, 12, 1, 14, 2)
