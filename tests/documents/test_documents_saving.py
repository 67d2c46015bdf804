"""A file is replaced in one step or not at all, and a failure is told in a plain sentence."""

import errno
import os
import stat
from collections.abc import Callable
from pathlib import Path

import pytest

from advisor.documents import Unwritable, write_text_safely


def failing(number: int) -> Callable[..., None]:
    def fail(*_: object) -> None:
        raise OSError(number, os.strerror(number))

    return fail


def test_writes_the_text_as_utf8_with_its_line_ends(tmp_path: Path) -> None:
    write_text_safely(tmp_path / "x.yaml", "a: Öl\r\nb: 1\n")
    assert (tmp_path / "x.yaml").read_bytes() == "a: Öl\r\nb: 1\n".encode()
    assert [path.name for path in tmp_path.iterdir()] == ["x.yaml"]


def test_a_new_file_has_the_usual_permissions(tmp_path: Path) -> None:
    (tmp_path / "usual").touch()
    write_text_safely(tmp_path / "x", "a")
    assert (tmp_path / "x").stat().st_mode == (tmp_path / "usual").stat().st_mode


@pytest.mark.skipif(os.name != "posix", reason="permissions are those of POSIX")
def test_keeps_the_permissions(tmp_path: Path) -> None:
    path = tmp_path / "x"
    path.write_text("old")
    path.chmod(0o640)
    write_text_safely(path, "new")
    assert stat.S_IMODE(path.stat().st_mode) == 0o640


def test_follows_a_link(tmp_path: Path) -> None:
    (tmp_path / "real").mkdir()
    (tmp_path / "real" / "x").write_text("old")
    (tmp_path / "link").symlink_to(tmp_path / "real" / "x")
    write_text_safely(tmp_path / "link", "new")
    assert (tmp_path / "link").is_symlink()
    assert (tmp_path / "real" / "x").read_text() == "new"


def test_the_text_is_on_the_disk_before_it_takes_the_place(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    done: list[str] = []
    sync, replace = os.fsync, Path.replace

    def noted_sync(handle: int) -> None:
        done.append("folder" if stat.S_ISDIR(os.fstat(handle).st_mode) else "file")
        sync(handle)

    def noted_replace(path: Path, target: Path) -> Path:
        assert path.suffix == ".tmp"
        assert path.parent == target.parent
        done.append("replace")
        return replace(path, target)

    monkeypatch.setattr(os, "fsync", noted_sync)
    monkeypatch.setattr(Path, "replace", noted_replace)
    write_text_safely(tmp_path / "x", "a")
    assert done == ["file", "replace", "folder"]


@pytest.mark.parametrize(("number", "part"), [
    (errno.ENOSPC, "the disk is full. Make room and save again."),
    (errno.EROFS, "the disk can only be read. Choose another folder."),
    (errno.EACCES, "write-protected. Allow writing"),
    (errno.ENAMETOOLONG, "the name is too long. Choose a shorter one."),
    (errno.EIO, "Choose another place."),
])
def test_a_failure_leaves_the_old_text_and_no_rest(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, number: int, part: str
) -> None:
    path = tmp_path / "x"
    path.write_text("old")
    monkeypatch.setattr(os, "fsync", failing(number))
    with pytest.raises(Unwritable) as refusal:
        write_text_safely(path, "new")
    assert part in str(refusal.value)
    assert path.read_text() == "old"
    assert [each.name for each in tmp_path.iterdir()] == ["x"]


def test_a_missing_folder_is_told(tmp_path: Path) -> None:
    with pytest.raises(Unwritable, match=r"the folder '.*nowhere' does not exist\. Create it or choose another\."):
        write_text_safely(tmp_path / "nowhere" / "x", "a")


def test_a_file_in_place_of_the_folder_is_told(tmp_path: Path) -> None:
    (tmp_path / "file").touch()
    with pytest.raises(Unwritable, match="does not exist"):
        write_text_safely(tmp_path / "file" / "x", "a")


def test_a_folder_is_not_replaced(tmp_path: Path) -> None:
    with pytest.raises(Unwritable, match="a folder of that name is there"):
        write_text_safely(tmp_path, "a")


def test_links_in_a_circle_are_told(tmp_path: Path) -> None:
    (tmp_path / "a").symlink_to(tmp_path / "b")
    (tmp_path / "b").symlink_to(tmp_path / "a")
    with pytest.raises(Unwritable, match="its links lead in a circle"):
        write_text_safely(tmp_path / "a", "x")
    assert sorted(path.name for path in tmp_path.iterdir()) == ["a", "b"]


def test_a_protected_file_is_not_replaced(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    (tmp_path / "x").write_text("old")
    monkeypatch.setattr(os, "access", lambda *_: False)
    with pytest.raises(Unwritable, match="write-protected"):
        write_text_safely(tmp_path / "x", "new")
    assert (tmp_path / "x").read_text() == "old"


def test_half_a_character_is_told_before_anything_is_touched(tmp_path: Path) -> None:
    with pytest.raises(Unwritable, match="half a character"):
        write_text_safely(tmp_path / "x", "\ud83d")
    assert list(tmp_path.iterdir()) == []


def test_where_only_a_new_file_is_wanted_one_that_is_there_stays_however_late_it_came(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    path = tmp_path / "x"
    path.write_text("theirs")
    monkeypatch.setattr(Path, "exists", lambda _: False)  # as if it had been made just after the look
    with pytest.raises(Unwritable, match=r"it exists already\. Choose another name\."):
        write_text_safely(path, "ours", exclusive=True)
    assert path.read_text() == "theirs"
    assert [each.name for each in tmp_path.iterdir()] == ["x"]


def test_a_new_file_wanted_alone_is_written_whole_or_leaves_nothing(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    write_text_safely(tmp_path / "x", "a", exclusive=True)
    assert (tmp_path / "x").read_text() == "a"
    monkeypatch.setattr(os, "fsync", failing(errno.ENOSPC))
    with pytest.raises(Unwritable, match="the disk is full"):
        write_text_safely(tmp_path / "y", "b", exclusive=True)
    assert [each.name for each in tmp_path.iterdir()] == ["x"]
