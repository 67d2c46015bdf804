"""Copies of the shipped knowledge with one thing damaged, and what the loader says of them."""

import shutil
from dataclasses import dataclass
from pathlib import Path

from advisor.documents import Problem, Problems
from advisor.knowledge import examine

SHIPPED = Path(__file__).resolve().parents[2] / "knowledge"


@dataclass(frozen=True)
class Damage:
    """One text of one file replaced by another; the problem must stand `offset` lines below the text's first line."""

    name: str
    file: str
    seek: str
    put: str
    message: str
    offset: int = 0
    hint: str = ""
    most: int = 1

    def apply(self, folder: Path) -> int:
        """Damage the copy; gives the line on which the problem must stand."""
        path = folder / self.file
        text = path.read_text(encoding="utf-8")
        found = text.count(self.seek)
        assert found == 1, f"{self.name}: '{self.seek}' stands {found} times in {self.file}; mend the case"
        path.write_text(text.replace(self.seek, self.put), encoding="utf-8")
        return text[: text.index(self.seek)].count("\n") + 1 + self.offset


def copied(folder: Path) -> Path:
    """A copy of the shipped knowledge."""
    return Path(shutil.copytree(SHIPPED, folder / "knowledge"))


def told(folder: Path) -> list[Problem]:
    """Every problem that the loader finds."""
    problems = Problems()
    knowledge = examine(folder, "rolling_bearing", None, problems)
    assert (knowledge is None) == bool(len(problems)), "knowledge is handed out where nothing is wrong, and only there"
    return list(problems)


def listing(problems: list[Problem]) -> str:
    return "\n".join(map(str, problems))
