"""The same advice gives the same bytes, whatever the hash seed; and the room loads light."""

import os
import subprocess
import sys

from tests.conftest import ROOT

WRITE_ALL = """
import hashlib
from pathlib import Path
from advisor import explanation
from advisor.advice import Advisor
from advisor.answers import read_case
from advisor.documents import Problems
from advisor.knowledge import load
knowledge = load(Path("knowledge"))
advisor = Advisor(knowledge)
for name in ("hot_wet_roller_table", "law_against_the_seal", "no_temperature_measured", "oxygen_booster_motor"):
    saved = read_case(Path("scenarios/rolling_bearing") / f"{name}.yaml", knowledge, Problems())
    advice = advisor.advise(saved.case, assume_gaps=saved.assume_gaps, only=saved.only)
    for write in (explanation.as_json, explanation.text, explanation.markdown, explanation.html):
        print(name, write.__name__, hashlib.sha256(write(advice).encode()).hexdigest())
"""


def run(program: str, seed: str = "0") -> str:
    done = subprocess.run(
        [sys.executable, "-c", program], cwd=ROOT, env={**os.environ, "PYTHONHASHSEED": seed}, capture_output=True,
        text=True, check=True)  # fmt: skip
    return done.stdout


def test_all_outputs_are_byte_identical_over_hash_seeds() -> None:
    first = run(WRITE_ALL, "0")
    assert first.count("\n") == 16
    assert run(WRITE_ALL, "1") == first
    assert run(WRITE_ALL, "2") == first


def test_importing_the_room_does_not_load_jinja() -> None:
    assert run("import sys; import advisor.explanation; print('jinja2' in sys.modules)").strip() == "False"
