"""Advice saved as JSON: the same bytes on the same knowledge, and what has changed on another."""

import json
import os
import subprocess
import sys
from dataclasses import replace
from pathlib import Path

import pytest
from click.testing import CliRunner

from advisor.advice import Advisor
from advisor.answers import read_case
from advisor.cli import gudgeon
from advisor.documents import Problems
from advisor.explanation import as_json
from advisor.knowledge import Knowledge
from advisor.mishaps import DONE, NOT_SETTLED, Refusal
from advisor.replay import saved_advice
from tests.conftest import ROOT, SCENARIOS

ALL = sorted(SCENARIOS.glob("*.yaml"))
FEW = ("hot_wet_roller_table", "oxygen_booster_motor", "sealed_motor_bearing", "no_temperature_measured")


def save(file: Path, folder: Path, advisor: Advisor, *, assume: bool = False) -> Path:
    saved = read_case(file, advisor.knowledge, Problems())
    assert saved is not None
    advice = advisor.advise(saved.case, assume_gaps=assume or saved.assume_gaps, only=saved.only)
    out = folder / f"{file.stem}.json"
    out.write_text(as_json(advice), encoding="utf-8")
    return out


@pytest.mark.parametrize("file", ALL, ids=lambda file: file.stem)
def test_on_the_same_knowledge_the_bytes_are_the_same(file: Path, tmp_path: Path, advisor: Advisor) -> None:
    found = saved_advice.replay(save(file, tmp_path, advisor), lambda _: advisor)
    assert found.identical
    assert found.changes == ()


def test_gaps_taken_as_dont_know_are_replayed_so(tmp_path: Path, advisor: Advisor) -> None:
    file = save(SCENARIOS / "no_temperature_measured.yaml", tmp_path, advisor, assume=True)
    assert json.loads(file.read_text(encoding="utf-8"))["case"]["gaps"] == "dont_know"
    assert saved_advice.replay(file, lambda _: advisor).identical


def test_the_saved_advice_carries_the_fingerprint(tmp_path: Path, advisor: Advisor) -> None:
    file = save(SCENARIOS / "quiet_motor_bearing.yaml", tmp_path, advisor)
    assert json.loads(file.read_text(encoding="utf-8"))["knowledge"]["fingerprint"] == advisor.knowledge.fingerprint


@pytest.fixture(scope="module")
def other(knowledge: Knowledge) -> Advisor:
    """The knowledge without the rule that refers oxygen to a specialist."""
    instances = {
        step: tuple(each for each in of_step if each.rule.id != "oxidiser_is_referred")
        for step, of_step in knowledge.instances.items()
    }
    return Advisor(replace(knowledge, instances=instances, fingerprint="0" * 16))


def test_on_other_knowledge_the_changes_are_told(tmp_path: Path, advisor: Advisor, other: Advisor) -> None:
    found = saved_advice.replay(save(SCENARIOS / "oxygen_booster_motor.yaml", tmp_path, advisor), lambda _: other)
    changes = {each.what: (each.was, each.now) for each in found.changes}
    assert not found.same
    assert changes["state"][0] == "referred"
    assert changes["withheld"] == ("yes", "no")
    assert changes["referral gas_specialist"] == ("made", "none")
    assert "row form" in changes
    assert "code din" in changes
    assert "product GR-101" in changes
    text = saved_advice.as_text([found])
    assert f"saved on knowledge {advisor.knowledge.fingerprint}; now on {'0' * 16}" in text


def test_other_knowledge_that_changes_nothing_is_fine(tmp_path: Path, advisor: Advisor, other: Advisor) -> None:
    found = saved_advice.replay(save(SCENARIOS / "quiet_motor_bearing.yaml", tmp_path, advisor), lambda _: other)
    assert not found.identical
    assert found.same
    assert saved_advice.as_data(found)["knowledge"]["now"] == "0" * 16


def test_a_file_that_was_changed_by_hand_differs(tmp_path: Path, advisor: Advisor) -> None:
    file = save(SCENARIOS / "quiet_motor_bearing.yaml", tmp_path, advisor)
    text = file.read_text(encoding="utf-8")
    file.write_text(text.replace('"state":"', '"state":"un', 1), encoding="utf-8")
    found = saved_advice.replay(file, lambda _: advisor)
    assert not found.same
    assert [each.what for each in found.changes] == ["state"]


@pytest.mark.parametrize(
    "text",
    ["", "no json", "[]", "{}", '{"format": 1}', '{"format": 99}', "[" * 100_000,
     '{"format":1,"program":{},"knowledge":{},"case":{}}',
     ('{"format":1,"program":{"version":"1"},"knowledge":{"fingerprint":"a"},"case":'
      '{"point_kind":"x","title":"y","answers":[]}}')],
)  # fmt: skip
def test_what_is_no_saved_advice_is_refused(text: str, tmp_path: Path, advisor: Advisor) -> None:
    file = tmp_path / "saved.json"
    file.write_text(text, encoding="utf-8")
    with pytest.raises(Refusal):
        saved_advice.replay(file, lambda _: advisor)


def test_a_question_that_is_gone_is_told(tmp_path: Path, advisor: Advisor) -> None:
    file = save(SCENARIOS / "quiet_motor_bearing.yaml", tmp_path, advisor)
    data = json.loads(file.read_text(encoding="utf-8"))
    data["case"]["answers"]["shoe_size"] = {"typed": "44", "value": 44}
    file.write_text(json.dumps(data), encoding="utf-8")
    with pytest.raises(Refusal, match="'shoe_size' is no question"):
        saved_advice.replay(file, lambda _: advisor)


def test_the_commands_together(tmp_path: Path) -> None:
    advised = CliRunner().invoke(gudgeon, ["advise", str(SCENARIOS / "quiet_motor_bearing.yaml"), "--json"])
    file = tmp_path / "saved.json"
    file.write_text(advised.output, encoding="utf-8")
    replayed = CliRunner().invoke(gudgeon, ["replay", str(file)])
    assert (replayed.exit_code, "the same, byte for byte" in replayed.output) == (DONE, True)
    file.write_text(advised.output.replace('"state":"', '"state":"un', 1), encoding="utf-8")
    differing = CliRunner().invoke(gudgeon, ["replay", str(file), "--json"])
    assert differing.exit_code == NOT_SETTLED
    assert json.loads(differing.output)[0]["changes"][0]["what"] == "state"


REPLAY = """
import sys
from pathlib import Path
from advisor.advice import Advisor
from advisor.knowledge import load
from advisor.replay import saved_advice
advisor = Advisor(load(Path("knowledge")))
found = [saved_advice.replay(Path(file), lambda kind: advisor) for file in sys.argv[1:]]
sys.exit(0 if all(each.identical for each in found) else 1)
"""


@pytest.mark.parametrize("seed", ["1", "77"])
def test_the_bytes_are_the_same_over_hash_seeds(seed: str, tmp_path: Path, advisor: Advisor) -> None:
    files = [str(save(SCENARIOS / f"{name}.yaml", tmp_path, advisor)) for name in FEW]
    done = subprocess.run(
        [sys.executable, "-c", REPLAY, *files], cwd=ROOT, env={**os.environ, "PYTHONHASHSEED": seed}, check=False
    )
    assert done.returncode == 0
