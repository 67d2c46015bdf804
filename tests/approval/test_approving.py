"""From an edit to a signed change: the group is shown, signed, written, and nothing beside it changes."""

import difflib
import hashlib
from itertools import pairwise
from pathlib import Path

import pytest

from advisor.advice import Advisor
from advisor.approval import NAME, Entry, read_log
from advisor.approval.standing import fingerprint
from advisor.documents import Mapping, Problems, read_document
from advisor.knowledge import Knowledge
from advisor.mishaps import Refusal
from advisor.replay import find, replay
from tests.approval.desk import DAY, Desk

FAILING = Path(__file__).resolve().parents[1] / "replay" / "failing"


def test_before_the_edit_nothing_is_to_be_signed(desk: Desk, advisor: Advisor) -> None:
    assert desk.review(advisor).groups == ()


def test_an_edit_makes_a_group_of_the_rule(desk: Desk) -> None:
    groups = desk.review().groups
    assert groups[0].about == "thickener_steady"
    assert set(groups[0].paths) == {"hot.yaml", "hotter.yaml"}


def test_a_signed_group_is_written_and_differs_no_more(desk: Desk, knowledge: Knowledge) -> None:
    before = {name: desk.file(name).read_text(encoding="utf-8") for name in ("hot", "hotter", "cool", "ordinary")}
    while names := desk.names():
        entry = desk.sign(names[0])
    assert desk.review().outcome.differing == ()
    for name in ("cool", "ordinary"):
        assert desk.file(name).read_text(encoding="utf-8") == before[name]
    changed = [
        line
        for line in difflib.ndiff(before["hot"].splitlines(), desk.file("hot").read_text(encoding="utf-8").splitlines())
        if line[:2] in {"- ", "+ "}
    ]
    assert not any("#" in line for line in changed), "comments stay"
    assert sum(line.startswith("+ approved: entry ") for line in changed) == 1
    assert entry.by == "Anna Example"
    log = desk.review().standing.log
    assert log is not None
    assert log.entries[1].knowledge_before == knowledge.fingerprint
    assert entry.knowledge == "e" * 16


def test_an_entry_is_plain_text_that_says_everything(desk: Desk, knowledge: Knowledge) -> None:
    hot = desk.file("hot")
    old = print_of(hot)
    entry = desk.sign(desk.the("thickener_steady"))
    text = desk.log.read_text(encoding="utf-8")
    block = text.split("\n\n")[-1].removesuffix("\n").splitlines()
    assert block[0] == f"entry 2, {DAY}, signed by Anna Example"
    assert block[1] == "  accepts: differences that name rule thickener_steady"
    assert block[2] == "  because: The limit was agreed after the oven tests"
    assert block[3] == f"  knowledge: before {knowledge.fingerprint}, after {'e' * 16}"
    assert block[4] == f"  scenario: hot.yaml, before {old}, after {print_of(hot)}"
    assert any(line.startswith("    line ") and "GR-101" in line for line in block)
    assert block[-1] == f"  seal: {hashlib.sha256(chr(10).join(block[:-1]).encode()).hexdigest()}"
    assert f"approved: entry 2, {entry.seal[:16]}\n" in hot.read_text(encoding="utf-8")


def print_of(file: Path) -> str:
    tree = read_document(file, Problems())
    assert isinstance(tree, Mapping)
    return fingerprint(tree)


def test_the_log_is_only_appended_to(desk: Desk) -> None:
    texts = [desk.log.read_text(encoding="utf-8")]
    while names := desk.names():
        desk.sign(names[0])
        texts.append(desk.log.read_text(encoding="utf-8"))
    assert len(texts) > 1
    assert all(longer.startswith(shorter) for shorter, longer in pairwise(texts))


def test_comments_and_layout_are_no_change(desk: Desk, advisor: Advisor) -> None:
    desk.edit("hot", "# A comment that stays.", "# Another comment.")
    assert desk.review(advisor).groups == ()


def test_a_change_by_hand_is_signed_by_itself(desk: Desk, advisor: Advisor) -> None:
    desk.edit("cool", "60 °C", "62 °C")
    (group,) = desk.review(advisor).groups
    assert group.name.startswith("edited/cool@")
    desk.sign(group.name, advisor)
    assert desk.review(advisor).groups == ()


def test_a_new_scenario_is_never_taken_in_silence(desk: Desk, advisor: Advisor) -> None:
    desk.file("warm").write_text(desk.file("cool").read_text(encoding="utf-8"), encoding="utf-8")
    (group,) = desk.review(advisor).groups
    assert group.name.startswith("new/warm@")
    desk.sign(group.name, advisor)
    assert desk.review(advisor).groups == ()


def test_a_scenario_that_is_gone_is_missed(desk: Desk, advisor: Advisor) -> None:
    text = desk.file("cool").read_text(encoding="utf-8")
    desk.file("cool").unlink()
    (group,) = desk.review(advisor).groups
    assert group.name.startswith("gone/cool@")
    desk.sign(group.name, advisor)
    assert desk.review(advisor).groups == ()
    desk.file("cool").write_text(text, encoding="utf-8")
    assert [each.kind for each in desk.review(advisor).groups] == ["new"]


@pytest.mark.parametrize("name", sorted(path.stem for path in FAILING.glob("*.yaml") if path.stem != "ordinary"))
def test_every_kind_of_expectation_is_rewritten(name: str, tmp_path: Path, advisor: Advisor) -> None:
    more = "" if "\n  facts:" in text_of(name) else "  facts: {bore_mm: 65}\n"
    desk = differing(name, tmp_path / "scenarios", advisor, more)
    (group,) = desk.review().groups
    desk.sign(group.name)
    assert desk.review().groups == ()
    assert replay(find([desk.root]), desk.advisors()).problems == ()


@pytest.mark.parametrize("name", ["caution", "barred", "assumption"])
def test_the_last_expectation_is_left_to_a_person(name: str, tmp_path: Path, advisor: Advisor) -> None:
    desk = differing(name, tmp_path / "scenarios", advisor)
    kept = desk.everything()
    (group,) = desk.review().groups
    with pytest.raises(Refusal, match="by hand"):
        desk.sign(group.name)
    assert desk.everything() == kept


def text_of(name: str) -> str:
    return (FAILING / f"{name}.yaml").read_text(encoding="utf-8")


def differing(name: str, root: Path, advisor: Advisor, more: str = "") -> Desk:
    """A scenario that differs in one thing."""
    root.mkdir()
    for each, added in ((name, more), ("ordinary", "")):
        text = text_of(each).rstrip() + "\n" + added
        (root / f"{each}.yaml").write_text(text, encoding="utf-8")
    desk = Desk(root, advisor, advisor)
    begun(desk)
    return desk


def begun(desk: Desk) -> None:
    """A log that signs for scenarios which differ already, as an older knowledge would have it."""
    from advisor.approval.log import BEGIN, HEAD, NOTHING, Signed

    signed = tuple(Signed(path.name, NOTHING, print_of(path)) for path in find([desk.root]))
    entry = Entry(1, DAY, "Anna Example", BEGIN, "As it was agreed", NOTHING, "0" * 16, signed, NOTHING)
    desk.log.write_text(f"{HEAD}\n\n{entry.sealed()}\n", encoding="utf-8")
    assert read_log(desk.root / NAME, Problems()) is not None
