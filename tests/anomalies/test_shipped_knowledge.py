"""The shipped knowledge holds nothing against itself that would have to be mended, and every finding replays."""

from pathlib import Path

import pytest

from advisor.anomalies import examine_meaning, examine_together
from advisor.commands import check
from advisor.knowledge import load
from advisor.mishaps import DONE, USAGE

SHIPPED = Path(__file__).resolve().parents[2] / "knowledge"
SMALL = Path(__file__).resolve().parents[1] / "knowledge" / "small"


def test_nothing_is_to_be_mended_and_every_witness_is_confirmed() -> None:
    found = examine_meaning(load(SHIPPED))
    assert [str(finding) for finding in found if finding.must_be_mended] == []
    assert all(finding.confirmed for finding in found)


def test_check_ends_well_where_findings_are_only_to_be_weighed(capsys: pytest.CaptureFixture[str]) -> None:
    assert check(SHIPPED, None) == DONE
    assert "Accepted:" not in capsys.readouterr().out
    assert check(SHIPPED, None, everything=True) == DONE
    assert "Accepted: A polyamide cage" in capsys.readouterr().out


def test_check_ends_badly_where_something_is_to_be_mended(capsys: pytest.CaptureFixture[str]) -> None:
    assert check(SMALL, None) == USAGE
    shown = capsys.readouterr()
    assert "hinge/facts.yaml:13:3: finding, unused question: the answer to 'again'" in shown.out
    assert "4 to be mended" in shown.err


def test_what_one_kind_of_point_leaves_unused_and_another_uses_is_no_finding() -> None:
    knowledge = load(SMALL, "hinge")
    unused = {finding.message for finding in examine_together([knowledge])}
    assert unused == {finding.message for finding in examine_together([knowledge, knowledge])}
