"""The outcome as Markdown for a merge request."""

from pathlib import Path

from advisor.advice import Advisor
from advisor.replay import Outcome, as_markdown, coverage, replay

FAILING = Path(__file__).resolve().parent / "failing"


def outcome(advisor: Advisor, *names: str) -> Outcome:
    return replay([FAILING / f"{name}.yaml" for name in names], {"rolling_bearing": advisor})


def test_a_differing_scenario_is_a_table(advisor: Advisor) -> None:
    text = as_markdown(outcome(advisor, "ordinary", "state"))
    assert text.startswith("## Replay of the scenarios\n\n2 scenarios replayed, 1 of them differs (1 difference).\n")
    assert "| line | what | expected | got | why |\n|---:|---|---|---|---|\n" in text
    assert "| state | referred | settled |" in text


def test_nothing_of_a_scenario_is_read_as_markdown(advisor: Advisor, tmp_path: Path) -> None:
    text = (FAILING / "state.yaml").read_text(encoding="utf-8").replace('title: "state"', 'title: "a | b <i> *c* `d`"')
    (tmp_path / "odd.yaml").write_text(text, encoding="utf-8")
    (tmp_path / "ordinary.yaml").write_text((FAILING / "ordinary.yaml").read_text(encoding="utf-8"), encoding="utf-8")
    told = as_markdown(replay([tmp_path / "odd.yaml"], {"rolling_bearing": advisor}))
    assert r"### a \| b \<i\> \*c\* \`d\`" in told


def test_what_no_scenario_fires_is_listed(advisor: Advisor) -> None:
    found = outcome(advisor, "ordinary")
    text = as_markdown(found, coverage(found, [advisor.knowledge]))
    assert "### Fired by no scenario" in text
    assert "- `oxidiser_is_referred`" in text


def test_why_it_differs_stands_beside_it(advisor: Advisor) -> None:
    line = next(each for each in as_markdown(outcome(advisor, "product_by")).splitlines() if "GR-161" in each)
    assert r"thickener\_steady" in line.split(" | ")[4]
