"""The shipped knowledge, loaded once, and a place of its own for kept interviews."""

from pathlib import Path

import pytest

from advisor.knowledge import Knowledge, load
from advisor.places import knowledge_folder


@pytest.fixture(scope="session")
def knowledge() -> Knowledge:
    return load(knowledge_folder())


@pytest.fixture(autouse=True)
def kept(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.setenv("XDG_STATE_HOME", str(tmp_path / "state"))
    monkeypatch.setenv("TEXTUAL_ANIMATIONS", "none")
    monkeypatch.chdir(tmp_path)
    return tmp_path / "state" / "gudgeon" / "interviews"
