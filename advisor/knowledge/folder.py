"""The files of a knowledge folder, read into shapes; and the folder's fingerprint."""

import hashlib
from collections.abc import Mapping as Map
from dataclasses import dataclass, field
from pathlib import Path
from typing import Generic, TypeVar

from advisor.documents import Mapping, Node, Problem, Problems, nearest
from advisor.knowledge.reading import read_file
from advisor.knowledge.schema import (
    CautionsFile,
    ComputationShape,
    DesignationsFile,
    DocketFile,
    FactsFile,
    FactShape,
    File,
    PointKindsFile,
    PointKindShape,
    PropertiesFile,
    PropertyShape,
    RuleShape,
    ShelfFile,
    SourcesFile,
    StepFile,
    StepsFile,
    TablesFile,
    TableShape,
    UsualOilsFile,
)

SHAPES: dict[str, type[File]] = {
    "sources.yaml": SourcesFile,
    "point_kinds.yaml": PointKindsFile,
    "steps.yaml": StepsFile,
    "facts.yaml": FactsFile,
    "properties.yaml": PropertiesFile,
    "usual_oils.yaml": UsualOilsFile,
    "docket.yaml": DocketFile,
    "cautions.yaml": CautionsFile,
    "designations.yaml": DesignationsFile,
}


T = TypeVar("T", FactShape, PropertyShape, ComputationShape, RuleShape)


@dataclass(frozen=True, slots=True)
class Placed(Generic[T]):
    """A shape with its tree, the mapping that holds it, and where it belongs."""

    shape: T
    tree: Mapping
    parent: Mapping
    where: str = ""


@dataclass(slots=True)
class Folder:
    """Everything read from a folder, before names are resolved."""

    root: Path
    problems: Problems
    files: dict[str, tuple[File, Mapping]] = field(default_factory=dict)
    kinds: dict[str, PointKindShape] = field(default_factory=dict)
    tables: dict[str, tuple[TableShape, Mapping]] = field(default_factory=dict)
    facts: dict[str, Placed[FactShape]] = field(default_factory=dict)
    properties: dict[str, Placed[PropertyShape]] = field(default_factory=dict)
    computations: list[Placed[ComputationShape]] = field(default_factory=list)
    rules: list[Placed[RuleShape]] = field(default_factory=list)
    shelf: tuple[ShelfFile, Mapping] | None = None
    complete: bool = True


def fingerprint(root: Path) -> str:
    """A short digest over every knowledge file: names and contents, line ends normalised."""
    digest = hashlib.sha256()
    for path in sorted(root.rglob("*.yaml")):
        digest.update(path.relative_to(root).as_posix().encode() + b"\0")
        digest.update(path.read_bytes().replace(b"\r\n", b"\n") + b"\0")
    return digest.hexdigest()[:16]


def read_folder(root: Path, point_kind: str, shelf: Path | None, problems: Problems) -> Folder:
    """Read every file of the folder that concerns the point kind."""
    folder = Folder(root, problems)
    if not root.is_dir():
        problems.add(Problem(str(root), 1, 1, (), "this is no folder", "name a knowledge folder"))
        folder.complete = False
        return folder
    for name, shape in SHAPES.items():
        _keep(folder, name, shape)
    _kinds(folder)
    _tables(folder)
    _facts(folder, "facts.yaml")
    if point_kind in folder.kinds:
        _facts(folder, f"{folder.kinds[point_kind].folder}/facts.yaml")
    _properties(folder)
    _steps(folder, point_kind)
    _shelf(folder, shelf)
    _strays(folder)
    return folder


def _keep(folder: Folder, name: str, shape: type[File]) -> tuple[File, Mapping] | None:
    if name in folder.files:
        return folder.files[name]
    read, tree = read_file(folder.root / name, shape, folder.problems)
    if read is None or not isinstance(tree, Mapping):
        folder.complete = False
        return None
    folder.files[name] = read, tree
    return read, tree


def _kinds(folder: Folder) -> None:
    kept = folder.files.get("point_kinds.yaml")
    if kept and isinstance(kept[0], PointKindsFile):
        folder.kinds = kept[0].kinds


def _clash(folder: Folder, known: Map[str, object], name: str, parent: Mapping) -> bool:
    if name not in known:
        return False
    mark = parent.key_marks[name]
    folder.problems.add(
        Problem(mark.file, mark.line, mark.column, (), f"'{name}' is declared twice", "give each its own id")
    )
    return True


def _tables(folder: Folder) -> None:
    for path in sorted((folder.root / "tables").glob("*.yaml")):
        kept = _keep(folder, f"tables/{path.name}", TablesFile)
        if kept and isinstance(kept[0], TablesFile):
            parent = kept[1]["tables"]
            assert isinstance(parent, Mapping)  # noqa: S101 - by the shape
            for name, shape in kept[0].tables.items():
                node = parent[name]
                if not _clash(folder, folder.tables, name, parent) and isinstance(node, Mapping):
                    folder.tables[name] = shape, node


def _facts(folder: Folder, name: str) -> None:
    kept = _keep(folder, name, FactsFile)
    if not kept or not isinstance(kept[0], FactsFile):
        return
    parent = kept[1].get("facts")
    for fact, shape in kept[0].facts.items():
        node = parent[fact] if isinstance(parent, Mapping) else None
        if isinstance(parent, Mapping) and isinstance(node, Mapping) and not _clash(folder, folder.facts, fact, parent):
            folder.facts[fact] = Placed(shape, node, parent)


def _properties(folder: Folder) -> None:
    kept = folder.files.get("properties.yaml")
    if not kept or not isinstance(kept[0], PropertiesFile):
        return
    parent = kept[1]["properties"]
    for name, shape in kept[0].properties.items():
        node = parent[name] if isinstance(parent, Mapping) else None
        if isinstance(parent, Mapping) and isinstance(node, Mapping):
            folder.properties[name] = Placed(shape, node, parent)


def step_ids(folder: Folder) -> list[str]:
    """The steps in order."""
    kept = folder.files.get("steps.yaml")
    return list(kept[0].steps) if kept and isinstance(kept[0], StepsFile) else []


def _steps(folder: Folder, point_kind: str) -> None:
    places = [("common", "")]
    if point_kind in folder.kinds:
        places.append((folder.kinds[point_kind].folder, point_kind))
    for step in step_ids(folder):
        for place, kind in places:
            if (folder.root / place / f"{step}.yaml").exists():
                _step(folder, f"{place}/{step}.yaml", step, kind)


def _step(folder: Folder, name: str, step: str, kind: str) -> None:
    kept = _keep(folder, name, StepFile)
    if not kept or not isinstance(kept[0], StepFile):
        return
    shape, tree = kept
    assert isinstance(shape, StepFile)  # noqa: S101 - just asked
    where = f"{step} {kind}"
    folder.computations += [
        Placed(one, node, tree, where) for one, node in _entries(shape.computations, tree.get("computations"))
    ]
    folder.rules += [Placed(one, node, tree, where) for one, node in _entries(shape.rules, tree.get("rules"))]


def _entries(shapes: list[T], nodes: Node | None) -> list[tuple[T, Mapping]]:
    """Shapes beside the trees they were read from."""
    pairs = zip(shapes, nodes if isinstance(nodes, list) else (), strict=True)
    return [(shape, node) for shape, node in pairs if isinstance(node, Mapping)]


def _shelf(folder: Folder, shelf: Path | None) -> None:
    path = shelf or folder.root / "shelf" / "demo.yaml"
    read, tree = read_file(path, ShelfFile, folder.problems)
    if read is None or not isinstance(tree, Mapping):
        folder.complete = False
        return
    folder.shelf = read, tree


def _strays(folder: Folder) -> None:
    """Files that nothing reads: a misspelt name would otherwise drop its rules silently."""
    steps = step_ids(folder)
    places = {"common", *(kind.folder for kind in folder.kinds.values())}
    if not steps:
        return
    for path in sorted(folder.root.rglob("*")):
        if not path.is_file() or path.name == "README.md" or path.name.startswith("."):
            continue
        parts = path.relative_to(folder.root).parts
        known = (
            (len(parts) == 1 and parts[0] in SHAPES)
            or (len(parts) == 2 and parts[0] in {"tables", "shelf"} and path.suffix == ".yaml")
            or (len(parts) == 2 and parts[0] in places and path.stem in {*steps, "facts"} and path.suffix == ".yaml")
        )
        if not known:
            near = nearest(path.stem, [*steps, "facts"]) if len(parts) == 2 and parts[0] in places else ""
            folder.problems.add(
                Problem(str(path), 1, 1, (), "nothing reads this file", near.strip() or "rename it, or take it out")
            )
