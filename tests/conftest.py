"""What all tests share: the shipped knowledge and an advisor on it, made once."""

from collections.abc import Callable
from pathlib import Path

import pytest
from hypothesis import settings

from advisor.advice import Advice, Advisor
from advisor.answers import answer, read_case
from advisor.case import Case
from advisor.documents import Problems
from advisor.knowledge import Knowledge, load

# The same examples are drawn every time, so that a run tells about the change; `--hypothesis-profile new` draws others.
settings.register_profile("same", derandomize=True, deadline=None)
settings.register_profile("new", deadline=None)
settings.load_profile("same")

ROOT = Path(__file__).resolve().parent.parent
SCENARIOS = ROOT / "scenarios" / "rolling_bearing"

# An ordinary pump motor bearing on grease, as a fitter would answer.
ORDINARY = {
    "bearing_type": "deep_groove_ball",
    "dangers": "none",
    "site": "none",
    "supply": "nipple_through",
    "incumbent": "other",
    "incumbent_thickener": "lithium_12OH",
    "incumbent_base_oil": "mineral_II",
    "maker_item": "none_named",
    "bore_mm": "65 mm",
    "outside_mm": "140 mm",
    "speed_rpm": "1480 rpm",
    "motion": "turning",
    "running_temperature_c": "70 °C",
    "measured_where": "outer_ring_probe",
    "excursions": "no",
    "start_temperature_c": "5 °C",
    "load_ratio": "0.06",
    "shock": "none",
    "water_exposure": "humid",
    "dust": "none",
    "seal": "none",
    "width_mm": "33 mm",
}


@pytest.fixture(scope="session")
def knowledge() -> Knowledge:
    return load(ROOT / "knowledge")


@pytest.fixture(scope="session")
def advisor(knowledge: Knowledge) -> Advisor:
    return Advisor(knowledge)


@pytest.fixture(scope="session")
def make_case(knowledge: Knowledge) -> Callable[..., Case]:
    """An ordinary motor bearing with some answers changed; `None` takes an answer away."""

    def make(**changed: str | None) -> Case:
        answers = {**ORDINARY, **changed}
        typed = {name: answer(knowledge.facts[name], text) for name, text in answers.items() if text is not None}
        return Case(
            "rolling_bearing", "made for a test", {name: typed[name] for name in knowledge.facts if name in typed}
        )

    return make


@pytest.fixture(scope="session")
def advise(advisor: Advisor, make_case: Callable[..., Case]) -> Callable[..., Advice]:
    return lambda **changed: advisor.advise(make_case(**changed))


@pytest.fixture(scope="session")
def saved(knowledge: Knowledge) -> Callable[[str], Case]:
    def read(name: str) -> Case:
        problems = Problems()
        found = read_case(SCENARIOS / f"{name}.yaml", knowledge, problems)
        assert found is not None, "\n".join(map(str, problems))
        return found.case

    return read
