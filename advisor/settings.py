"""The user's settings: which knowledge folder and which shelf to use where the command line does not say."""

from dataclasses import dataclass
from pathlib import Path

from advisor.documents import Mapping, Problem, Problems, Scalar, nearest, read_document
from advisor.mishaps import Refusal
from advisor.places import config_file

_KEYS = ("knowledge", "shelf")


@dataclass(frozen=True, slots=True)
class Settings:
    """Paths that the configuration file names; relative ones count from its own folder."""

    knowledge: Path | None = None
    shelf: Path | None = None


def settings(file: Path | None = None) -> Settings:
    """Read the configuration file, if there is one."""
    path = file or config_file()
    if not path.is_file():
        return Settings()
    problems = Problems()
    tree = read_document(path, problems)
    entries = tree if isinstance(tree, Mapping) else Mapping()
    if tree is not None and not isinstance(tree, Mapping):
        _fault(problems, tree.mark, "the configuration is a mapping", "knowledge: /path/to/folder")
    for key, value in entries.items():
        if key not in _KEYS:
            _fault(
                problems,
                entries.key_marks[key],
                f"'{key}' is no setting",
                nearest(key, _KEYS) or "known: knowledge, shelf",
            )
        elif not isinstance(value, Scalar) or not value:
            _fault(problems, value.mark, f"'{key}' is one path")
    named = {key: _path(path.parent, value, problems) for key, value in entries.items() if isinstance(value, Scalar)}
    if len(problems):
        raise Refusal("\n".join(map(str, problems)))
    return Settings(*(named.get(key) for key in _KEYS))


def _path(folder: Path, value: Scalar, problems: Problems) -> Path:
    """The path in full; `~` stands for the user's own folder."""
    try:
        return folder / Path(str(value)).expanduser()
    except RuntimeError:
        _fault(problems, value.mark, f"there is no user of '{value}'", "write the folder in full")
        return folder


def _fault(problems: Problems, mark: object, message: str, hint: str = "") -> None:
    problems.add(Problem.at(mark, message, hint.strip()))  # type: ignore[arg-type]  # marks of the tree
