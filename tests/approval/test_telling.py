"""What the reviewer reads before and after signing."""

import shutil
import subprocess
from pathlib import Path

import pytest
from click.testing import CliRunner

from advisor.advice import Advisor
from advisor.approval import BEGIN, as_markdown, as_text
from advisor.cli import gudgeon
from advisor.mishaps import USAGE
from tests.approval.desk import HOT, Desk
from tests.approval.test_approving import differing


def test_a_group_is_named_by_what_its_differences_say_and_not_as_the_cause(desk: Desk) -> None:
    assert "scenarios, that name rule thickener_steady\n" in as_text(desk.review())
    assert desk.sign(desk.the("thickener_steady")).group == "differences that name rule thickener_steady"


def test_each_group_shows_what_was_and_what_is_now(tmp_path: Path, advisor: Advisor) -> None:
    desk = differing("product", tmp_path / "scenarios", advisor)
    line = "product.yaml: line 9, products GR-101: was {}, now fits\n"
    assert line.format("falls_short") in as_text(desk.review())
    assert line.format("falls\\_short") in as_markdown(desk.review())


def test_a_long_group_is_counted_after_six_lines(desk: Desk, advisor: Advisor) -> None:
    for number in range(9):
        text = HOT.partition("  barred:")[0] + "  products: {GR-101: falls_short by thickener_steady}\n"
        desk.file(f"more_{number}").write_text(text, encoding="utf-8")
    while names := [each.name for each in desk.review(advisor).groups]:
        desk.sign(names[0], advisor)
    for each in ("hot", "hotter"):
        desk.file(each).unlink()
    lines = as_text(desk.review()).splitlines()
    at = next(number for number, line in enumerate(lines) if "9 differences" in line)
    assert [line.strip().partition(":")[0] for line in lines[at + 1 : at + 8]] == [
        *(f"more_{number}.yaml" for number in range(6)),
        "3 more",
    ]


@pytest.mark.parametrize(
    ("name", "grave"),
    [
        ("demand_must", True),
        ("demand_test", True),
        ("product", True),
        ("product_withheld", True),
        ("must_not", True),
        ("demand_should", False),
        ("demand_should_test", False),
        ("demand_level", False),
        ("demanded_by", False),
        ("product_by", False),  # it falls short either way, by another rule
        ("recommended", False),
        ("interval", False),
    ],
)
def test_musts_and_what_they_keep_out_bear_on_safety(name: str, grave: bool, tmp_path: Path, advisor: Advisor) -> None:
    desk = differing(name, tmp_path / "scenarios", advisor)
    items = [item for group in desk.review().groups for item in group.items]
    assert [item.safety for item in items] == [grave]


def git(root: Path, *words: str) -> None:
    name = ["-c", "user.name=Anna Example", "-c", "user.email=anna@example.org"]
    subprocess.run(["git", "-C", str(root), *name, *words], check=True, capture_output=True)


@pytest.mark.skipif(shutil.which("git") is None, reason="without git nothing is known of what was")
def test_a_change_by_hand_is_shown_key_by_key(desk: Desk, advisor: Advisor) -> None:
    for words in (("init", "-q"), ("add", "-A"), ("commit", "-q", "-m", "as signed")):
        git(desk.root, *words)
    desk.edit("hot", "falls_short by thickener_steady", "fits")
    desk.edit("hot", "sodium: thickener_steady}", "sodium: any}")
    desk.edit("hot", "105 °C", "60 °C")
    git(desk.root, "commit", "-q", "-a", "-m", "changed without a signature")
    text = as_text(desk.review(advisor))
    assert "hot.yaml: answers running_temperature_c: was 105 °C, now 60 °C\n" in text
    assert "hot.yaml: expect products GR-101: was falls_short by thickener_steady, now fits\n" in text
    assert (
        "hot.yaml: expect barred thickener: was {lithium_12OH: thickener_steady, sodium: thickener_steady}, "
        "now {lithium_12OH: thickener_steady, sodium: any}\n"
    ) in text


def test_where_it_is_not_known_what_was_that_is_said(desk: Desk, advisor: Advisor) -> None:
    desk.edit("cool", "60 °C", "62 °C")
    assert "cool.yaml: what it said is not in the log: see in your version control" in as_text(desk.review(advisor))


def test_the_beginning_is_told_in_short_and_written_in_full(desk: Desk, advisor: Advisor) -> None:
    desk.log.unlink()
    entry = desk.sign(BEGIN, advisor)
    assert "  4 scenarios signed as they are\n" in entry.text()
    assert "scenario: " not in entry.text()
    assert advisor.knowledge.fingerprint in entry.text()
    assert desk.log.read_text(encoding="utf-8").count("\n  scenario: ") == 4


def test_a_replay_beside_a_broken_log_names_no_group(desk: Desk) -> None:
    desk.edit("cool", "GR-101: fits", "GR-101: falls_short")
    desk.log.write_text(desk.log.read_text(encoding="utf-8").replace("oven", "field"), encoding="utf-8")
    found = CliRunner().invoke(gudgeon, ["replay", str(desk.root)])
    assert found.exit_code == USAGE
    assert "is not as it was sealed" in found.stderr
    assert "To be signed" not in found.stdout
