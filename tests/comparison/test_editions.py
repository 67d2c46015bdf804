"""A revision is laid out in its place and nowhere else, whatever Python unpacks it."""

import io
import subprocess
import tarfile
from pathlib import Path

import pytest

from advisor.comparison import edition, editions
from advisor.mishaps import Refusal


@pytest.fixture(params=["now", "before 3.11.4"])
def _unpacking(request: pytest.FixtureRequest, monkeypatch: pytest.MonkeyPatch) -> None:
    """Python as it is, and as it was before it could filter what it unpacks."""
    if request.param == "now":
        return
    real = tarfile.TarFile.extractall
    monkeypatch.delattr(tarfile, "data_filter")
    monkeypatch.setattr(tarfile.TarFile, "extractall", lambda packed, path: real(packed, path, filter="fully_trusted"))


def packed(*members: tuple[str, bytes], kind: bytes = tarfile.REGTYPE, to: str = "") -> tarfile.TarFile:
    made = io.BytesIO()
    with tarfile.open(fileobj=made, mode="w") as archive:
        for name, text in members:
            member = tarfile.TarInfo(name)
            member.type, member.linkname, member.size = kind, to, len(text)
            archive.addfile(member, io.BytesIO(text))
    return tarfile.open(fileobj=io.BytesIO(made.getvalue()))


@pytest.mark.usefixtures("_unpacking")
def test_an_archive_is_laid_out_as_it_is(tmp_path: Path) -> None:
    editions._lay_out(packed(("knowledge/point_kinds.yaml", b"kinds: {}"), ("knowledge/a/b.yaml", b"")), tmp_path)
    assert (tmp_path / "knowledge" / "point_kinds.yaml").read_bytes() == b"kinds: {}"
    assert (tmp_path / "knowledge" / "a" / "b.yaml").is_file()


@pytest.mark.usefixtures("_unpacking")
@pytest.mark.parametrize(
    "archive",
    [
        packed(("../out.yaml", b"bad")),
        packed(("knowledge/../../out.yaml", b"bad")),
        packed(("out.yaml", b""), kind=tarfile.SYMTYPE, to="/etc/hostname"),
        packed(("out.yaml", b""), kind=tarfile.SYMTYPE, to="../out.yaml"),
        packed(("out.yaml", b""), kind=tarfile.FIFOTYPE),
    ],
    ids=["above", "above from within", "link to a place", "link above", "pipe"],
)
def test_what_leads_out_of_an_archive_is_refused(archive: tarfile.TarFile, tmp_path: Path) -> None:
    place = tmp_path / "place"
    place.mkdir()
    with pytest.raises(tarfile.TarError):
        editions._lay_out(archive, place)
    assert [each.name for each in tmp_path.rglob("*")] == ["place"]


@pytest.mark.usefixtures("_unpacking")
def test_a_revision_that_leads_out_of_itself_is_refused(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    (tmp_path / "knowledge").mkdir()
    (tmp_path / "knowledge" / "point_kinds.yaml").symlink_to("/etc/hostname")
    author = ("-c", "user.name=Anna Example", "-c", "user.email=anna@example.org")
    for words in (["init", "-q"], ["add", "."], [*author, "commit", "-q", "-m", "Knowledge"]):
        subprocess.run(["git", *words], cwd=tmp_path, check=True)
    monkeypatch.chdir(tmp_path)
    with pytest.raises(Refusal, match="cannot be laid out"), edition("HEAD"):
        pass
