"""Where an expected value is not among those to choose from, the rules that ask for it are told, or that none does."""

from dataclasses import replace
from pathlib import Path

import pytest

from advisor.advice import Advisor
from advisor.knowledge import Instance, Knowledge, Sets
from advisor.replay import replay
from tests.conftest import SCENARIOS

PUMP = "critical_pump_is_tested"


@pytest.fixture
def uncritical(tmp_path: Path) -> Path:
    """The scenario of the critical pump, on a machine of which nothing is said."""
    for path in SCENARIOS.glob("*.yaml"):
        (tmp_path / path.name).symlink_to(path)
    pump = tmp_path / f"{PUMP}.yaml"
    text = pump.read_text(encoding="utf-8")
    assert text.count("site: [critical]") == 1
    pump.unlink()
    pump.write_text(text.replace("site: [critical]", "site: []"), encoding="utf-8")
    return pump


def because(pump: Path, knowledge: Knowledge) -> str:
    (played,) = replay([pump], {"rolling_bearing": Advisor(knowledge)}).played
    (found,) = (each for each in played.differences if each.what == "change_over")
    assert found.expected == "test_or_clean"
    return " ".join(found.because)


def test_the_rule_that_would_ask_for_it_is_told(uncritical: Path, knowledge: Knowledge) -> None:
    told = because(uncritical, knowledge)
    assert "critical_point_is_tested failed: needs " in told
    assert "pair_decides_change_over/T asks for test_or_clean where this holds: " in told
    assert "no candidate" not in told


def test_where_no_rule_asks_for_it_that_is_said(uncritical: Path, knowledge: Knowledge) -> None:
    coded = knowledge.properties["change_over"].domain.code("test_or_clean")

    def asks(rule: Instance) -> bool:
        return any(isinstance(each, Sets) and (each.name, each.value) == ("change_over", coded) for each in rule.then)

    steps = {step: tuple(each for each in found if not asks(each)) for step, found in knowledge.instances.items()}
    assert "No rule asks for test_or_clean." in because(uncritical, replace(knowledge, instances=steps))
