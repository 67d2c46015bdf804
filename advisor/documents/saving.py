"""Save a file so that a crash leaves either the old text or the new one, never half of it."""

import contextlib
import errno
import os
import secrets
import stat
from pathlib import Path


class Unwritable(Exception):
    """A file that could not be written; the message says why and what to do."""


def write_text_safely(path: Path, text: str, *, exclusive: bool = False) -> None:
    """Replace the file by one with this text, in one step; a link is followed, the permissions are kept.

    Where it is to be `exclusive`, only a new file is written and one that is there already stays as it is.

    Raises:
        Unwritable: the file could not be written; what stood there before still does.
    """
    try:
        raw = text.encode("utf-8")
    except UnicodeEncodeError as error:
        message = f"'{path}' was not written: the text holds half a character. Delete it and save again."
        raise Unwritable(message) from error
    try:
        (_create if exclusive else _replace)(_followed(path), raw)
    except OSError as error:
        raise Unwritable(f"'{path}' was not written: {_why(path, error)}") from error


def _followed(path: Path) -> Path:
    """What the path leads to; raises an OSError where links lead in a circle."""
    circle = OSError(errno.ELOOP, "its links lead in a circle")
    try:
        target = path.resolve()
    except RuntimeError as error:  # Python 3.11 and 3.12; 3.13 gives back a link of the circle
        raise circle from error
    if target.is_symlink():
        raise circle
    return target


def _replace(target: Path, raw: bytes) -> None:
    """Write beside the target, make sure that it is on the disk, and put it in the target's place."""
    mode = _mode_to_keep(target)
    beside = target.parent / f".{target.name[:80]}.{secrets.token_hex(4)}.tmp"
    try:
        with beside.open("xb") as file:
            file.write(raw)
            file.flush()
            os.fsync(file.fileno())
        if mode is not None:
            beside.chmod(mode)
        beside.replace(target)
    finally:
        beside.unlink(missing_ok=True)
    _sync_folder(target.parent)


def _create(target: Path, raw: bytes) -> None:
    """Take the name, which only one of several writers gets, and then write as if to replace."""
    with target.open("xb"):
        pass
    try:
        _replace(target, raw)
    except BaseException:
        target.unlink(missing_ok=True)
        raise


def _mode_to_keep(target: Path) -> int | None:
    """The permissions of the file that is there, if one is and may be replaced."""
    if target.is_dir():
        raise IsADirectoryError
    if not target.exists():
        return None
    if not os.access(target, os.W_OK):
        raise PermissionError(errno.EACCES, "write-protected")
    return stat.S_IMODE(target.stat().st_mode)


def _sync_folder(folder: Path) -> None:
    """Make the new name itself outlast a power cut, where the system can do so."""
    with contextlib.suppress(OSError):
        handle = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)


def _why(path: Path, error: OSError) -> str:
    """What kept the file from being written, and the mend."""
    match error:
        case FileNotFoundError() | NotADirectoryError():
            why, mend = f"the folder '{path.parent}' does not exist", "Create it or choose another"
        case FileExistsError():
            why, mend = "it exists already", "Choose another name"
        case IsADirectoryError():
            why, mend = "a folder of that name is there", "Choose another name"
        case PermissionError():
            why, mend = "the file or its folder is write-protected", "Allow writing or choose another folder"
        case OSError(errno=errno.ENOSPC | errno.EDQUOT):
            why, mend = "the disk is full", "Make room and save again"
        case OSError(errno=errno.EROFS):
            why, mend = "the disk can only be read", "Choose another folder"
        case OSError(errno=errno.ENAMETOOLONG):
            why, mend = "the name is too long", "Choose a shorter one"
        case _:
            why, mend = error.strerror or str(error), "Choose another place"
    return f"{why}. {mend}."
