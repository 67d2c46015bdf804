from pathlib import Path

import pytest

from advisor.advice import Advisor
from advisor.knowledge import Knowledge
from tests.approval.desk import Desk, edited, laid_out


@pytest.fixture(scope="session")
def after(knowledge: Knowledge) -> Advisor:
    return Advisor(edited(knowledge))


@pytest.fixture
def desk(tmp_path: Path, advisor: Advisor, after: Advisor) -> Desk:
    return laid_out(tmp_path / "scenarios", advisor, after)
