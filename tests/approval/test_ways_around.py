"""Attempts to get around the rules of signing: each is refused, and not one byte is written."""

import os
import shutil
import signal
import socket
import subprocess
import sys
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import pytest
from click.testing import CliRunner, Result

from advisor.advice import Advisor
from advisor.approval import BEGIN, review_of, signature
from advisor.cli import gudgeon
from advisor.mishaps import DONE, NOT_SETTLED, USAGE, Refusal
from advisor.replay import find, replay
from tests.approval.desk import Desk
from tests.conftest import ROOT

REASON = "The limit was agreed after the oven tests"


@pytest.mark.parametrize(
    "name",
    ["", " ", "\t", "\u00a0", ".", "*", "-", "?", "--", "42", "A", "@all", "..", "/", "\u200bAnna", "Anna\nentry 9",
     "Anna\u2028x", "Anna\x1b[31m", "A" * 81, "$USER", "%USERNAME%"],
)  # fmt: skip
def test_nobody_signs(name: str) -> None:
    with pytest.raises(Refusal):
        signature(name, REASON)


@pytest.mark.parametrize(
    "reason",
    ["", " ", "\t\t", ".", "ok", "...", "* * *", "x y z", "ok ok ok", "see above", "1 2 3 4", "\u2003",
     "fine\nentry 9, 2026-01-01", "because because because", "new values\u200b here", "y" * 401],
)  # fmt: skip
def test_no_reason_is_no_reason(reason: str) -> None:
    with pytest.raises(Refusal):
        signature("Anna Example", reason)


@pytest.mark.parametrize(
    "group",
    ["", " ", ".", "*", "all", "ALL", "@", "thickener_steady", "thickener_*", "thickener_steady@", "thickener_steady@*",
     "thickener_steady@0000000000", "?", "[a-z]*", "**", "--all", "hot.yaml", "hot", "rule", "edited/*",
     "new/*", "%", "~"],
)  # fmt: skip
def test_no_word_stands_for_every_group(group: str, desk: Desk) -> None:
    kept = desk.everything()
    with pytest.raises(Refusal):
        desk.sign(group)
    assert desk.everything() == kept


def test_two_groups_at_once(desk: Desk) -> None:
    desk.edit("cool", "60 °C", "62 °C")
    names = desk.names()
    assert len(names) > 1
    for both in (",".join(names), " ".join(names), "\n".join(names)):
        with pytest.raises(Refusal):
            desk.sign(both)


def test_a_group_seen_on_another_knowledge_is_void(desk: Desk) -> None:
    seen = desk.the("thickener_steady")
    other = Advisor(replace(desk.after.knowledge, fingerprint="f" * 16))
    with pytest.raises(Refusal, match="void"):
        desk.sign(seen, other)


def test_a_group_seen_before_a_scenario_changed_is_void(desk: Desk) -> None:
    seen = desk.the("thickener_steady")
    desk.edit("hot", "105 °C", "107 °C")
    with pytest.raises(Refusal, match="void"):
        desk.sign(seen)


def test_a_group_seen_before_another_was_signed_is_void(desk: Desk) -> None:
    desk.edit("cool", "60 °C", "62 °C")
    seen = desk.the("thickener_steady")
    desk.sign(desk.the("edited/cool"))
    with pytest.raises(Refusal, match="void"):
        desk.sign(seen)


def test_the_same_signature_does_not_count_twice(desk: Desk) -> None:
    seen = desk.the("thickener_steady")
    desk.sign(seen)
    kept = desk.everything()
    with pytest.raises(Refusal):
        desk.sign(seen)
    assert desk.everything() == kept


def test_an_expectation_changed_by_hand_shows(desk: Desk) -> None:
    desk.edit("hot", "products: {GR-101: falls_short by thickener_steady}", "products: {GR-101: falls_short}")
    assert any(name.startswith("edited/hot@") for name in desk.names())


def test_a_change_by_hand_is_not_signed_on_the_side(desk: Desk) -> None:
    desk.edit("hot", "  withheld: no   # kept\n", "")
    with pytest.raises(Refusal, match="by hand"):
        desk.sign(desk.the("thickener_steady"))


def test_retiring_a_scenario_does_not_hide_it(desk: Desk) -> None:
    desk.edit("hot", "status: agreed", "status: retired")
    assert any(name.startswith("edited/hot@") for name in desk.names())


def test_a_scenario_under_another_name_is_new_and_its_old_name_gone(desk: Desk, advisor: Advisor) -> None:
    desk.file("cool").rename(desk.file("colder"))
    assert [each.kind for each in desk.review(advisor).groups] == ["new", "gone"]


def signed(desk: Desk) -> None:
    """Two entries more, so that there is something to tamper with."""
    desk.sign(desk.the("thickener_steady"))
    desk.edit("cool", "60 °C", "62 °C")
    desk.sign(desk.the("edited/cool"))


def entries(desk: Desk) -> list[str]:
    return desk.log.read_text(encoding="utf-8").removesuffix("\n").split("\n\n")


def write(desk: Desk, blocks: list[str]) -> None:
    desk.log.write_text("\n\n".join(blocks) + "\n", encoding="utf-8")


TAMPERED: dict[str, Callable[[list[str]], list[str]]] = {
    "another name": lambda all_: [all_[0], all_[1], all_[2].replace("Anna", "Otto"), all_[3]],
    "another reason": lambda all_: [all_[0], all_[1], all_[2].replace("oven", "field"), all_[3]],
    "another day": lambda all_: [*all_[:3], all_[3].replace("2026-03-02", "2026-03-01")],
    "another head": lambda all_: [all_[0] + ".", *all_[1:]],
    "the last entry deleted": lambda all_: all_[:3],
    "a middle entry deleted": lambda all_: [*all_[:2], all_[3]],
    "all entries deleted": lambda all_: all_[:1],
    "the first entry deleted": lambda all_: [all_[0], *all_[2:]],
    "two entries changed about": lambda all_: [*all_[:2], all_[3], all_[2]],
    "an entry doubled": lambda all_: [*all_, all_[3]],
    "a blank more": lambda all_: [*all_[:3], all_[3].replace("  because:", "   because:")],
    "an empty entry": lambda all_: [*all_, ""],
}


@pytest.mark.parametrize("how", TAMPERED)
def test_a_log_that_was_tampered_with_is_told_and_signs_nothing(how: str, desk: Desk) -> None:
    signed(desk)
    write(desk, TAMPERED[how](entries(desk)))
    desk.edit("cool", "62 °C", "61 °C")
    outcome = replay(find([desk.root]), desk.advisors())
    _, faults = review_of(find([desk.root]), outcome, desk.advisors())
    assert len(faults)
    assert all(":" in str(each) and each.line >= 1 for each in faults)
    kept = desk.everything()
    with pytest.raises(Refusal):
        desk.review()
    with pytest.raises(Refusal):
        desk.sign("edited/cool@0000000000")
    assert desk.everything() == kept


def test_a_log_with_other_line_ends_is_told(desk: Desk) -> None:
    desk.log.write_bytes(desk.log.read_bytes().replace(b"\n", b"\r\n"))
    with pytest.raises(Refusal, match=r"APPROVALS\.log:1:1: the log has other line ends .*Windows"):
        desk.review()


def test_a_deleted_log_is_missed(desk: Desk) -> None:
    signed(desk)
    desk.log.unlink()
    outcome = replay(find([desk.root]), desk.advisors())
    _, faults = review_of(find([desk.root]), outcome, desk.advisors())
    assert {Path(each.file).stem for each in faults} == {"hot", "hotter", "cool"}
    with pytest.raises(Refusal):
        desk.sign(BEGIN)


def test_the_log_does_not_begin_twice(desk: Desk, advisor: Advisor) -> None:
    with pytest.raises(Refusal, match="begun already"):
        desk.sign(BEGIN, advisor)


def test_the_log_does_not_begin_with_differences(desk: Desk) -> None:
    desk.log.unlink()
    with pytest.raises(Refusal, match="nothing differs"):
        desk.sign(BEGIN)
    assert not desk.log.exists()


def test_nothing_is_signed_without_a_log(desk: Desk) -> None:
    seen = desk.the("thickener_steady")
    desk.log.unlink()
    with pytest.raises(Refusal, match="no log yet"):
        desk.sign(seen)


def test_a_log_that_is_a_link_is_refused(desk: Desk, tmp_path: Path) -> None:
    shutil.move(desk.log, tmp_path / "elsewhere.log")
    desk.log.symlink_to(tmp_path / "elsewhere.log")
    with pytest.raises(Refusal, match="link"):
        desk.review()


def test_a_log_that_is_a_folder_is_refused(desk: Desk) -> None:
    desk.log.unlink()
    desk.log.mkdir()
    with pytest.raises(Refusal, match="no file"):
        desk.review()


def test_a_nearer_log_does_not_count(desk: Desk) -> None:
    (desk.root / "sub").mkdir()
    shutil.copy(desk.log, desk.root / "sub" / desk.log.name)
    with pytest.raises(Refusal, match="second log"):
        desk.review()


def test_a_part_of_the_folder_is_not_signed_for_by_itself(desk: Desk) -> None:
    (desk.root / "sub").mkdir()
    part = Desk(desk.root / "sub", desk.before, desk.after)
    with pytest.raises(Refusal, match="belong to the log"):
        part.sign(BEGIN)


def test_a_record_that_was_removed_is_missed(desk: Desk) -> None:
    signed(desk)
    text = desk.file("hot").read_text(encoding="utf-8")
    desk.file("hot").write_text("\n".join(line for line in text.splitlines() if not line.startswith("approved:")))
    with pytest.raises(Refusal, match="record of its approval is missing"):
        desk.review()


def test_a_record_that_was_made_up_is_refused(desk: Desk) -> None:
    with desk.file("cool").open("a", encoding="utf-8") as file:
        file.write("approved: entry 2, 0123456789abcdef\n")
    with pytest.raises(Refusal, match="no entry of the log has approved"):
        desk.review()


def test_a_copy_does_not_inherit_the_approval(desk: Desk) -> None:
    signed(desk)
    shutil.copy(desk.file("hot"), desk.file("copy"))
    with pytest.raises(Refusal, match="copy"):
        desk.review()


def test_a_scenario_that_is_a_link_is_not_rewritten(desk: Desk, tmp_path: Path) -> None:
    shutil.move(desk.file("hot"), tmp_path / "hot_elsewhere.yaml")
    desk.file("hot").symlink_to(tmp_path / "hot_elsewhere.yaml")
    kept = (tmp_path / "hot_elsewhere.yaml").read_bytes()
    with pytest.raises(Refusal, match="is a link"):
        desk.sign(desk.the("thickener_steady"))
    assert (tmp_path / "hot_elsewhere.yaml").read_bytes() == kept


def test_two_at_once(desk: Desk) -> None:
    seen = desk.the("thickener_steady")
    (desk.root / ".APPROVALS.lock").touch()
    with pytest.raises(Refusal, match="going on"):
        desk.sign(seen)


def test_one_that_still_runs_is_named_and_left_alone(desk: Desk) -> None:
    lock = desk.root / ".APPROVALS.lock"
    lock.write_text(f"{os.getppid()} {socket.gethostname()}", encoding="utf-8")
    seen, kept = desk.the("thickener_steady"), desk.everything()
    with pytest.raises(Refusal, match=rf"going on here \(process {os.getppid()}\)"):
        desk.sign(seen)
    assert desk.everything() == kept


KILLED = """
import os, signal, sys
from pathlib import Path
from advisor.approval import approving, signature
approving.review = lambda *_: os.kill(os.getpid(), signal.SIGKILL)
approving.approve(Path(sys.argv[1]), "any@0", signature("Otto Example", "It was a long day"), "2026-03-02", dict)
"""


@pytest.mark.skipif(sys.platform == "win32", reason="there nobody can tell whether a process runs without harm")
def test_one_that_was_killed_is_not_in_the_way(desk: Desk) -> None:
    seen = desk.the("thickener_steady")
    code = [sys.executable, "-c", KILLED, str(desk.root)]
    killed = subprocess.run(code, check=False, env={**os.environ, "PYTHONPATH": str(ROOT)})
    assert killed.returncode == -signal.SIGKILL
    assert (desk.root / ".APPROVALS.lock").exists()
    desk.sign(seen)
    assert not (desk.root / ".APPROVALS.lock").exists()


@pytest.mark.skipif(not hasattr(os, "geteuid") or os.geteuid() == 0, reason="the superuser may write everything")
def test_a_folder_that_cannot_be_written(desk: Desk) -> None:
    seen, kept = desk.the("thickener_steady"), desk.everything()
    desk.root.chmod(0o555)
    try:
        with pytest.raises(Refusal, match="cannot be written"):
            desk.sign(seen)
    finally:
        desk.root.chmod(0o755)
    assert desk.everything() == kept


@pytest.mark.skipif(not hasattr(os, "geteuid") or os.geteuid() == 0, reason="the superuser may write everything")
def test_a_write_protected_log(desk: Desk) -> None:
    seen = desk.the("thickener_steady")
    desk.log.chmod(0o444)
    kept = desk.everything()
    with pytest.raises(Refusal, match="write-protected"):
        desk.sign(seen)
    assert desk.everything() == kept


def test_where_the_log_cannot_be_written_the_scenarios_are_put_back(
    desk: Desk, monkeypatch: pytest.MonkeyPatch
) -> None:
    from advisor.approval import approving
    from advisor.documents import Unwritable

    def full(path: Path, text: str) -> None:
        if path == desk.log:
            raise Unwritable(f"'{path}' was not written: the disk is full.")
        path.write_text(text, encoding="utf-8")

    seen, kept = desk.the("thickener_steady"), desk.everything()
    monkeypatch.setattr(approving, "write_text_safely", full)
    with pytest.raises(Refusal, match="Nothing was approved"):
        desk.sign(seen)
    assert desk.everything() == kept


def run(*words: str, **env: str) -> Result:
    return CliRunner().invoke(gudgeon, ["approve", *words], env=env)


def test_nothing_comes_from_the_environment(desk: Desk, tmp_path: Path) -> None:
    every = {
        f"GUDGEON_{name}": value
        for name, value in (
            ("BY", "Anna Example"), ("BECAUSE", REASON), ("APPROVE", "1"), ("APPROVE_BY", "Anna Example"),
            ("APPROVE_BECAUSE", REASON), ("APPROVE_GROUP", "all"), ("KNOWLEDGE", str(tmp_path / "none")),
            ("SHELF", str(tmp_path / "none.yaml")), ("APPROVE_ALL", "1"),
        )
    }  # fmt: skip
    kept = desk.everything()
    listed = run("--scenarios", str(desk.root), **every)
    assert listed.exit_code == DONE, "the shipped knowledge is used, whatever the environment names"
    assert isinstance(run("thickener_steady@0123456789", "--scenarios", str(desk.root), **every).exception, Refusal)
    assert desk.everything() == kept


@pytest.mark.parametrize("words", [["--all"], ["--yes"], ["-y"], ["--force"], ["a@1", "b@2"], ["--shelf", "x.yaml"]])
def test_no_option_approves_everything(words: list[str], desk: Desk) -> None:
    kept = desk.everything()
    assert run(*words, "--scenarios", str(desk.root)).exit_code == 2
    assert desk.everything() == kept


def test_a_name_without_a_group_is_refused(desk: Desk) -> None:
    assert isinstance(
        run("--by", "Anna Example", "--because", REASON, "--scenarios", str(desk.root)).exception, Refusal
    )


def test_the_command_counts_as_not_settled_while_something_is_to_be_signed(desk: Desk) -> None:
    desk.edit("cool", "60 °C", "62 °C")
    found = run("--scenarios", str(desk.root))
    assert found.exit_code == NOT_SETTLED
    assert "gudgeon approve edited/cool@" in found.output


def test_the_shipped_scenarios_are_not_touched_by_these_tests() -> None:
    assert not (ROOT / "scenarios" / ".APPROVALS.lock").exists()


def test_the_replay_ends_with_2_and_names_the_line(desk: Desk) -> None:
    signed(desk)
    text = desk.log.read_text(encoding="utf-8")
    desk.log.write_text(text.replace("oven tests", "field tests", 1), encoding="utf-8")
    found = CliRunner().invoke(gudgeon, ["replay", str(desk.root)])
    assert found.exit_code == USAGE
    assert f"{desk.log}:3:1: entry 1 is not as it was sealed" in found.stderr


def test_a_replay_without_a_log_says_nothing_of_signing(desk: Desk) -> None:
    desk.log.unlink()
    found = CliRunner().invoke(gudgeon, ["replay", str(desk.root)])
    assert found.exit_code == DONE, found.output
    assert "signed" not in found.output


def test_a_folder_that_is_none_is_told(tmp_path: Path) -> None:
    assert "no folder of scenarios" in str(run("--scenarios", str(tmp_path / "none")).exception)
