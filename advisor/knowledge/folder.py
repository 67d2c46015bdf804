"""The files of a knowledge folder, read into shapes; and the folder's fingerprint."""

import hashlib
from collections.abc import Collection, Iterator
from collections.abc import Mapping as Map
from dataclasses import dataclass, field
from pathlib import Path
from typing import Generic, TypeVar

from advisor.documents import Mapping, Node, Problem, Problems, closest, nearest
from advisor.knowledge.files import (
    MAY_HAVE,
    SHAPES,
    FactsFile,
    File,
    PointKindsFile,
    PropertiesFile,
    ShelfFile,
    StepFile,
    StepsFile,
    TablesFile,
)
from advisor.knowledge.lost import Lost
from advisor.knowledge.reading import list_in, mapping_in, read_file
from advisor.knowledge.schema import (
    ComputationShape,
    FactShape,
    PointKindShape,
    PropertyShape,
    RuleShape,
    Shape,
    TableShape,
)

T = TypeVar("T", bound=Shape)
Filed = TypeVar("Filed", bound=File)
DEMO = "demo.yaml"
"""The shelf that is read where no other is named."""


@dataclass(frozen=True, slots=True)
class Placed(Generic[T]):
    """A shape with its tree, the mapping that holds it, and the step and kind of point it belongs to."""

    shape: T
    tree: Mapping
    parent: Mapping
    step: str = ""
    point_kind: str = ""


@dataclass(slots=True)
class Folder:
    """Everything read from a folder, before names are resolved; what is damaged is told, and noted as lost."""

    root: Path
    problems: Problems
    lost: Lost = field(default_factory=Lost)
    trees: list[Node] = field(default_factory=list)
    files: dict[str, tuple[File, Mapping]] = field(default_factory=dict)
    kinds: dict[str, PointKindShape] = field(default_factory=dict)
    steps: tuple[str, ...] = ()
    tables: dict[str, Placed[TableShape]] = field(default_factory=dict)
    facts: dict[str, Placed[FactShape]] = field(default_factory=dict)
    properties: dict[str, Placed[PropertyShape]] = field(default_factory=dict)
    computations: list[Placed[ComputationShape]] = field(default_factory=list)
    rules: list[Placed[RuleShape]] = field(default_factory=list)
    shelf: tuple[ShelfFile, Mapping] | None = None

    def kept(self, name: str, shape: type[Filed]) -> tuple[Filed, Mapping] | None:
        """A file that was read, with its tree."""
        read, tree = self.files.get(name, (None, None))
        return (read, tree) if isinstance(read, shape) and tree is not None else None

    def keep(self, name: str, shape: type[Filed]) -> tuple[Filed, Mapping] | None:
        """Read a file and keep it."""
        found = read_file(self.root / name, shape, self.problems, self.lost, self.trees)
        if found is not None:
            self.files[name] = found
        return found


def fingerprint(root: Path) -> str:
    """A short digest over every knowledge file: names and contents, line ends normalised."""
    digest = hashlib.sha256()
    for path in sorted(root.rglob("*.yaml"), key=lambda path: path.relative_to(root).as_posix()):
        if path.is_file():
            digest.update(path.relative_to(root).as_posix().encode() + b"\0")
            digest.update(path.read_bytes().replace(b"\r\n", b"\n") + b"\0")
    return digest.hexdigest()[:16]


def read_folder(root: Path, point_kind: str, shelf: Path | None, problems: Problems) -> Folder | None:
    """Read every file of the folder that concerns the point kind; nothing where there is no such folder or kind."""
    if not root.is_dir():
        problems.add(Problem(str(root), 1, 1, (), "this is no folder", "name a knowledge folder"))
        return None
    folder = Folder(root, problems)
    for name, shape in {**SHAPES, **MAY_HAVE}.items():
        if name in SHAPES or (root / name).exists():
            folder.keep(name, shape)
    _read_tables(folder)
    _read_properties(folder)
    _read_facts(folder, "facts.yaml")
    _read_kind(folder, point_kind)
    folder.shelf = read_file(shelf or root / "shelf" / DEMO, ShelfFile, problems, folder.lost, folder.trees)
    if folder.shelf is None:
        folder.lost.lose_whole("items")
    if shelf is None:
        _unread_shelves(folder)
    return folder


def _unread_shelves(folder: Folder) -> None:
    """Tell the shelves beside the one that is read; a site may keep several and name one."""
    for path in sorted((folder.root / "shelf").glob("*.yaml")):
        if path.name != DEMO:
            message, hint = f"this file is not read: the shelf is {DEMO}", "name another with --shelf, or take it out"
            folder.problems.add(Problem(str(path), 1, 1, (), message, hint, "finding"))


def _read_kind(folder: Folder, point_kind: str) -> None:
    """Read what belongs to the kind of point: its facts, and the steps."""
    kinds, steps = folder.kept("point_kinds.yaml", PointKindsFile), folder.kept("steps.yaml", StepsFile)
    if kinds is None or steps is None or not _kind_known(folder, *kinds, point_kind):
        folder.lost.lose_whole("names", "rules")
        return
    folder.kinds, folder.steps = kinds[0].kinds, tuple(steps[0].steps)
    place = folder.kinds[point_kind].folder
    _read_facts(folder, f"{place}/facts.yaml")
    for step in folder.steps:
        for where, kind in (("common", ""), (place, point_kind)):
            if (folder.root / where / f"{step}.yaml").exists():
                _read_step(folder, f"{where}/{step}.yaml", step, kind)
    _strays(folder)


def _kind_known(folder: Folder, shape: PointKindsFile, tree: Mapping, point_kind: str) -> bool:
    """Whether the kind is declared, and every kind has its folder."""
    kinds, problems = mapping_in(tree, "kinds"), folder.problems
    if point_kind not in shape.kinds:
        mark = next(iter(kinds.key_marks.values()), tree.mark)
        hint = nearest(point_kind, kinds).strip() or "declare it, or name one of these"
        problems.add(Problem.at(mark, f"'{point_kind}' is no kind of point here", hint, ("kinds",)))
        return False
    for name, kind in shape.kinds.items():
        if not (folder.root / kind.folder).is_dir():
            near = nearest(kind.folder, [each.name for each in folder.root.iterdir() if each.is_dir()])
            mark = mapping_in(kinds, name)["folder"].mark
            message = f"there is no folder '{kind.folder}'"
            problems.add(Problem.at(mark, message, near.strip() or "check its name", ("kinds", name)))
            return False
    return True


def _clash(folder: Folder, known: Map[str, object], name: str, parent: Mapping) -> bool:
    if name in known:
        folder.problems.add(Problem.at(parent.key_marks[name], f"'{name}' is declared twice", "give each its own id"))
    return name in known


def _declared(shapes: Map[str, T], parent: Mapping) -> Iterator[tuple[str, Placed[T]]]:
    """Named shapes beside the trees they were read from."""
    for name, shape in shapes.items():
        yield name, Placed(shape, mapping_in(parent, name), parent)


def _read_tables(folder: Folder) -> None:
    for path in sorted((folder.root / "tables").glob("*.yaml")):
        if kept := folder.keep(f"tables/{path.name}", TablesFile):
            for name, placed in _declared(kept[0].tables, mapping_in(kept[1], "tables")):
                if not _clash(folder, folder.tables, name, placed.parent):
                    folder.tables[name] = placed


def _read_facts(folder: Folder, name: str) -> None:
    read = folder.kept if name in SHAPES else folder.keep
    if kept := read(name, FactsFile):
        for fact, placed in _declared(kept[0].facts, mapping_in(kept[1], "facts")):
            if not _clash(folder, folder.facts, fact, placed.parent):
                folder.facts[fact] = placed


def _read_properties(folder: Folder) -> None:
    if kept := folder.kept("properties.yaml", PropertiesFile):
        folder.properties = dict(_declared(kept[0].properties, mapping_in(kept[1], "properties")))


def _read_step(folder: Folder, name: str, step: str, kind: str) -> None:
    if kept := folder.keep(name, StepFile):
        shape, tree = kept
        folder.computations += _listed(shape.computations, tree, "computations", step, kind)
        folder.rules += _listed(shape.rules, tree, "rules", step, kind)


def _listed(shapes: list[T], tree: Mapping, section: str, step: str, kind: str) -> list[Placed[T]]:
    """Listed shapes beside the trees they were read from."""
    pairs = zip(shapes, list_in(tree, section), strict=True)
    return [Placed(shape, node, tree, step, kind) for shape, node in pairs if isinstance(node, Mapping)]


def _strays(folder: Folder) -> None:
    """Files that nothing reads: a misspelt name would otherwise drop its rules silently."""
    places = {"common", *(kind.folder for kind in folder.kinds.values())}
    stems, misspelt, asked = [*folder.steps, "facts"], dict[str, Path](), set[str]()
    for path in sorted(folder.root.rglob("*")):
        parts = path.relative_to(folder.root).parts
        if not path.is_file() or path.name == "README.md" or any(part.startswith(".") for part in parts):
            continue
        place = parts[0] if len(parts) == 2 else ""
        known = (
            parts[0] in SHAPES or parts[0] in MAY_HAVE
            if len(parts) == 1
            else path.suffix == ".yaml" and (place in {"tables", "shelf"} or (place in places and path.stem in stems))
        )
        if not known:
            near = closest(path.stem, stems) if place in places else ""
            if place in places or place == "tables":
                folder.lost.lose_whole("tables" if place == "tables" else "names", "rules")
            if step := _misspelt_step(folder, path.stem, near, places):
                misspelt.setdefault(step, path)
                continue
            asked.add(near)
            hint = f"Did you mean '{near}'?" if near else "rename it, or take it out"
            folder.problems.add(Problem(str(path), 1, 1, (), "nothing reads this file", hint))
    for step, path in misspelt.items():
        mark = mapping_in(folder.files["steps.yaml"][1], "steps").key_marks[step]
        message = f"no file holds the step '{step}', while nothing reads {path}"
        folder.problems.add(Problem.at(mark, message, f"Is '{path.stem}' meant here?", ("steps",)))
    _empty_steps(folder, places, {*misspelt, *asked})


def _empty_steps(folder: Folder, places: Collection[str], told: Collection[str]) -> None:
    """Steps of which no folder has a file: their rules are gone, and what only they use would be told instead."""
    for step in folder.steps:
        if step not in told and not any((folder.root / place / f"{step}.yaml").exists() for place in places):
            mark = mapping_in(folder.files["steps.yaml"][1], "steps").key_marks[step]
            files = " or ".join(f"{place}/{step}.yaml" for place in sorted(places, key=lambda each: each == "common"))
            hint = f"put {files} back, with 'rules: []' if it has none, or take the step out"
            folder.problems.add(Problem.at(mark, f"no file holds the step '{step}'", hint, ("steps",)))
            folder.lost.lose_whole("names", "rules")


def _misspelt_step(folder: Folder, stem: str, near: str, places: Collection[str]) -> str:
    """The step without a file that is misspelt, if a file that nothing reads shows how it should be called.

    Its title says so, or the same name on several files.
    """
    steps = folder.kept("steps.yaml", StepsFile)
    own, files = (sum((folder.root / each / f"{name}.yaml").exists() for each in places) for name in (near, stem))
    if steps is None or near not in folder.steps or own:
        return ""
    return near if files > 1 or steps[0].steps[near].title.lower().replace(" ", "_") == stem else ""
