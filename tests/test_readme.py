"""What the README promises is so."""

import re
from collections.abc import Callable
from pathlib import Path

from click.testing import CliRunner

from advisor.advice import Advisor
from advisor.case import Case
from advisor.cli import gudgeon
from advisor.explanation import text
from advisor.knowledge import Knowledge
from advisor.listing import rule_rows, rules_text

ROOT = Path(__file__).resolve().parent.parent
README = (ROOT / "README.md").read_text(encoding="utf-8")


def test_the_first_two_commands_are_one_line_each_under_their_headings() -> None:
    blocks = re.findall(r"^```sh\n(.*?)^```$", README, re.M | re.S)
    assert len(blocks) >= 2
    assert all(len(block.splitlines()) == 1 for block in blocks[:2])
    headings = [README.rindex("\n## ", 0, README.index(block)) for block in blocks[:2]]
    assert [README[at + 4 :].split("\n", 1)[0] for at in headings] == ["Run it", "Test it"]


def test_the_standing_of_the_rules_is_stated_as_it_is(knowledge: Knowledge) -> None:
    stated = " ".join(rules_text(rule_rows(knowledge)).splitlines()[-2:])
    assert stated in " ".join(README.split()), f"the README should say: Of its {stated}"


def captured(command: str) -> list[str]:
    """The lines that the README shows below a command, without its cuts and without what every edit changes."""
    blocks = re.findall(r"^```\n(.*?)^```$", README, re.M | re.S)
    block = next(each for each in blocks if each.startswith(f"$ {command}"))
    return [_steady(line) for line in block.splitlines()[1:] if line.strip() not in {"", "..."}]


def _steady(line: str) -> str:
    return re.sub(r"[0-9a-f]{16}", "(fingerprint)", line).rstrip()


def stands_in(shown: list[str], written: str) -> str:
    """The first shown line that the output does not have, in the order shown; empty if it has all."""
    lines = iter([_steady(line) for line in written.splitlines()])
    return next((line for line in shown if line not in lines), "")


def test_the_report_looks_as_shown(advisor: Advisor, saved: Callable[[str], Case]) -> None:
    advice = advisor.advise(saved("hot_wet_roller_table"))
    assert stands_in(captured("gudgeon advise"), text(advice, full=False)) == ""


def test_a_computation_looks_as_shown() -> None:
    typed = ["compute", "reference_viscosity", "speed_rpm=1450 rpm", "mean_diameter_mm=80 mm"]
    found = CliRunner().invoke(gudgeon, typed)
    assert stands_in(captured("gudgeon compute"), found.output) == ""
