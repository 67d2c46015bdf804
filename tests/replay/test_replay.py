"""The replay itself: every kind of expectation can fail, and no misspelt expectation passes in silence."""

import json
from pathlib import Path
from xml.etree import ElementTree

import pytest

from advisor.advice import Advisor
from advisor.replay import (
    Difference,
    Outcome,
    as_data,
    as_junit,
    as_text,
    coverage,
    find,
    kinds_of,
    replay,
)
from advisor.replay import expectations as kinds

HERE = Path(__file__).resolve().parent
ROOT = HERE.parent.parent
FAILING = sorted(each for each in (HERE / "failing").glob("*.yaml") if each.stem != "ordinary")
FAULTY = sorted((HERE / "faulty").glob("*.yaml"))


def replayed(advisor: Advisor, *files: Path) -> Outcome:
    return replay(files, {"rolling_bearing": advisor})


def headline(path: Path) -> str:
    """What the first line of the file says of it."""
    return path.read_text(encoding="utf-8").splitlines()[0].removeprefix("# ")


def difference(advisor: Advisor, name: str) -> Difference:
    outcome = replayed(advisor, HERE / "failing" / f"{name}.yaml")
    assert not outcome.problems
    (found,) = outcome.played[0].differences
    return found


@pytest.mark.parametrize("path", FAILING, ids=lambda path: path.stem)
def test_each_kind_of_expectation_can_fail_and_says_what_it_got(path: Path, advisor: Advisor) -> None:
    outcome = replayed(advisor, path)
    assert not outcome.problems
    (found,) = outcome.played[0].differences
    assert str(found).startswith(headline(path))
    assert Path(found.mark.file) == path


def test_a_scenario_that_is_met_differs_in_nothing(advisor: Advisor) -> None:
    outcome = replayed(advisor, HERE / "failing" / "ordinary.yaml")
    assert [each.differences for each in outcome.played] == [()]


def test_every_kind_of_expectation_has_a_case_that_fails(advisor: Advisor) -> None:
    outcome = replayed(advisor, *FAILING)
    seen = {type(each) for played in outcome.played for each in played.scenario.expectations}
    assert seen == set(kinds.Expectation.__args__)


def test_only_what_is_seen_in_the_trace_alone_does_not_count_as_read(advisor: Advisor) -> None:
    outcome = replayed(advisor, *FAILING)
    unread = {each.kind for played in outcome.played for each in played.differences if not each.read}
    assert unread == {"rules"}


@pytest.mark.parametrize("path", FAULTY, ids=lambda path: path.stem)
def test_a_faulty_expectation_is_told_with_its_place_and_nothing_is_played(path: Path, advisor: Advisor) -> None:
    word, message = (part.strip() for part in headline(path).split("|"))
    outcome = replayed(advisor, path)
    assert not outcome.played
    first = outcome.problems[0]
    assert message in str(first)
    if word:
        assert (first.file, first.line, first.column) == (str(path), *place_of(word, path))


def place_of(word: str, path: Path) -> tuple[int, int]:
    """Line and column of the last place where the word stands, below the headline."""
    lines = path.read_text(encoding="utf-8").splitlines()
    return next((number, line.rindex(word) + 1) for number, line in reversed(list(enumerate(lines, 1))) if word in line)


def test_all_faults_of_a_file_are_told_at_once(advisor: Advisor) -> None:
    told = [str(each) for each in replayed(advisor, HERE / "faulty" / "two_faults.yaml").problems]
    assert [("t_ef_c" in each, "do_not_mixx" in each) for each in told] == [(True, False), (False, True)]


def test_a_file_that_is_not_there_is_told(advisor: Advisor, tmp_path: Path) -> None:
    outcome = replayed(advisor, tmp_path / "nowhere.yaml")
    assert not outcome.played
    assert "nowhere.yaml" in str(outcome.problems[0])


def test_a_retired_scenario_is_passed_over(advisor: Advisor, tmp_path: Path) -> None:
    text = (HERE / "failing" / "state.yaml").read_text(encoding="utf-8").replace("like: ordinary\n", "")
    file = tmp_path / "old.yaml"
    file.write_text(text.replace("status: agreed", "status: retired"), encoding="utf-8")
    outcome = replayed(advisor, file)
    assert (outcome.played, outcome.problems) == ((), ())


def test_a_difference_names_the_rule_with_its_numbers(advisor: Advisor) -> None:
    found = difference(advisor, "barred_by_another")
    assert len(found.because) == 1
    assert found.because[0].startswith("thickener_steady/sodium failed")
    assert "80 °C" in found.because[0]


def test_a_difference_of_a_computed_fact_names_formula_and_inputs(advisor: Advisor) -> None:
    because = " ".join(difference(advisor, "fact_about").because)
    assert "mean_diameter" in because
    assert "bore 65 mm" in because
    assert "140 mm" in because


def test_files_and_folders_are_found_once_and_in_order() -> None:
    folder = HERE / "failing"
    assert find([folder / "state.yaml", folder]) == sorted(folder.glob("*.yaml"))


def test_without_paths_the_scenarios_of_the_checkout_are_found() -> None:
    assert ROOT / "scenarios" / "rolling_bearing" / "hot_wet_roller_table.yaml" in find([])


def test_the_kind_of_point_is_read_from_the_files() -> None:
    assert kinds_of(FAILING) == ["rolling_bearing"]


def test_the_text_tells_the_differing_scenarios_and_counts_all(advisor: Advisor) -> None:
    text = as_text(replayed(advisor, HERE / "failing" / "ordinary.yaml", HERE / "failing" / "state.yaml"))
    assert "failing/state.yaml: state" in text
    assert "    expected referred\n    got      settled\n" in text
    assert "ordinary.yaml" not in text
    assert text.endswith("2 scenarios replayed, 1 of them differs (1 difference).")


def test_the_text_of_a_replay_without_differences_is_one_line(advisor: Advisor) -> None:
    assert as_text(replayed(advisor, HERE / "failing" / "ordinary.yaml")) == "1 scenario replayed, all as expected."


def test_the_data_can_be_written_as_json_and_hold_every_scenario(advisor: Advisor) -> None:
    outcome = replayed(advisor, HERE / "failing" / "state.yaml", HERE / "faulty" / "two_faults.yaml")
    data = json.loads(json.dumps(as_data(outcome)))
    assert data["format"] == 1
    assert (data["replayed"], data["differing"], len(data["problems"])) == (1, 1, 2)
    (found,) = data["scenarios"][0]["differences"]
    assert (found["expected"], found["got"], found["trace_only"]) == ("referred", "settled", False)


def test_junit_counts_failures_and_errors_and_escapes_what_xml_cannot_hold(advisor: Advisor, tmp_path: Path) -> None:
    text = (HERE / "failing" / "ordinary.yaml").read_text(encoding="utf-8")
    odd = tmp_path / "a<b>&c.yaml"
    odd.write_text(text.replace("state: settled", "state: open"), encoding="utf-8")
    outcome = replayed(advisor, odd, HERE / "failing" / "ordinary.yaml", HERE / "faulty" / "two_faults.yaml")
    suite = ElementTree.fromstring(as_junit(outcome).encode())  # noqa: S314 - our own output
    assert [suite.get(key) for key in ("tests", "failures", "errors")] == ["3", "1", "1"]
    assert suite[0].get("name") == "a<b>&c"
    assert suite[0].find("failure") is not None
    assert suite[1].find("failure") is None
    assert suite[2].find("error") is not None


def test_coverage_names_agreed_rules_that_no_scenario_fires(advisor: Advisor) -> None:
    found = coverage(replayed(advisor, HERE / "failing" / "ordinary.yaml"), [advisor.knowledge])
    assert "oxidiser_is_referred" in found.rules
    assert "drain_open" not in found.rules
    assert not any(row.partition("/")[0] in found.rules for row in found.rows)


def test_the_same_replay_tells_the_same(advisor: Advisor) -> None:
    once, twice = (as_text(replayed(advisor, *FAILING)) for _ in range(2))
    assert once == twice
