"""What the README promises is so."""

import re
from pathlib import Path

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
