"""Two editions of the knowledge: folders, or revisions of the repository that the current folder lies in."""

import io
import subprocess
import tarfile
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from tempfile import TemporaryDirectory

from advisor.mishaps import Refusal

_MARKER = "point_kinds.yaml"
_WITHIN = "knowledge"


@contextmanager
def edition(named: str) -> Iterator[Path]:
    """The knowledge folder of an edition, for as long as it is needed.

    Raises:
        Refusal: where the name is neither a knowledge folder nor a revision that holds one.
    """
    folder = Path(named)
    if folder.is_dir():
        yield _knowledge_in(folder)
        return
    with TemporaryDirectory(prefix="gudgeon-") as place:
        _unpack(named, Path(place))
        yield _knowledge_in(Path(place))


def _knowledge_in(folder: Path) -> Path:
    for each in (folder, folder / _WITHIN):
        if (each / _MARKER).is_file():
            return each
    raise Refusal(f"{folder} holds no knowledge: there is no {_MARKER} in it. Name the folder that has that file.")


def _unpack(revision: str, place: Path) -> None:
    top = _git("rev-parse", "--show-toplevel")
    if top is None:
        raise Refusal(f"'{revision}' is no folder, and the current folder lies in no git repository. Name a folder.")
    root = Path(top.decode().strip())
    if revision.startswith("-") or _git("rev-parse", "--verify", "--quiet", f"{revision}^{{commit}}") is None:
        raise Refusal(f"'{revision}' is neither a folder nor a revision of {root}. 'git log --oneline' lists them.")
    archive = _git("-C", str(root), "archive", "--format=tar", revision, "--", _WITHIN)
    if archive is None:
        raise Refusal(f"Revision {revision} of {root} has no folder '{_WITHIN}'. Name a later one.")
    try:
        with tarfile.open(fileobj=io.BytesIO(archive)) as packed:
            _lay_out(packed, place)
    except tarfile.TarError as fault:
        raise Refusal(f"Revision {revision} of {root} cannot be laid out: {fault}. Name a folder.") from None


def _lay_out(packed: tarfile.TarFile, place: Path) -> None:
    """Unpack into the place and nowhere else."""
    if hasattr(tarfile, "data_filter"):
        packed.extractall(place, filter="data")
        return
    # Python before 3.11.4 cannot refuse by itself what leads out of the place: only plain files and folders are taken.
    for member in packed.getmembers():
        path = Path(member.name)
        if not (member.isfile() or member.isdir()) or path.is_absolute() or ".." in path.parts:
            raise tarfile.TarError(f"'{member.name}' is no file or folder within it")
    packed.extractall(place)  # noqa: S202 - every member was looked at above


def _git(*words: str) -> bytes | None:
    """What git says; nothing where it fails or is not there."""
    try:
        done = subprocess.run(["git", *words], capture_output=True, check=False)  # noqa: S603, S607 - the user's own git, no shell
    except OSError:
        return None
    return done.stdout if done.returncode == 0 else None
