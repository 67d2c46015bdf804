"""From files to shapes; what is damaged is told and left out, and the rest can still be read."""

import re
from pathlib import Path
from typing import TypeVar

from pydantic import ValidationError

from advisor.documents import Expected, Mapping, Node, Problem, Problems, Scalar, Sequence, read_document
from advisor.knowledge.files import File
from advisor.knowledge.kinds import ID
from advisor.knowledge.lost import Lost
from advisor.knowledge.misplaced import taken_out
from advisor.knowledge.schema import Shape
from advisor.knowledge.shapes import tell

Shaped = TypeVar("Shaped", bound=Shape)
Filed = TypeVar("Filed", bound=File)
_MAY_REPEAT = frozenset({"limits"})
"""The lists whose entries have each their place."""


def read_file(
    path: Path, shape: type[Filed], problems: Problems, lost: Lost, trees: list[Node]
) -> tuple[Filed, Mapping] | None:
    """One file in its shape, beside its tree, without its damaged entries; nothing where it is damaged as a whole.

    Its tree is added to `trees`, damaged or not.
    """
    tree = read_document(path, problems, expected=Expected(lambda tree: _faults_in(tree, shape), _MAY_REPEAT))
    if tree is not None:
        trees.append(tree)
    if isinstance(tree, Mapping):
        found = _recovered(tree, shape, problems, lost)
        if found is not None:
            return found
    elif tree is not None:
        problems.add(Problem.at(tree.mark, "a mapping (key: value) is expected here", "begin with 'format: 1'"))
    lost.lose_whole(*(space for space in shape.sections.values() if space))
    return None


def shaped(tree: Node, shape: type[Shaped], problems: Problems) -> Shaped | None:
    """The tree as a shape, or None with its faults told."""
    try:
        return shape.model_validate(tree)
    except ValidationError as fault:
        tell(tree, shape, fault, problems)
        return None


def _faults_in(tree: Node, shape: type[File]) -> int:
    """In how many ways a tree departs from its shape."""
    try:
        shape.model_validate(tree)
    except ValidationError as fault:
        return fault.error_count()
    return 0


def _recovered(tree: Mapping, shape: type[Filed], problems: Problems, lost: Lost) -> tuple[Filed, Mapping] | None:
    try:
        return shape.model_validate(tree), tree
    except ValidationError as fault:
        tell(tree, shape, fault, problems)
        errors = fault.errors()
    unknown = [error["loc"] for error in errors if error["type"] == "extra_forbidden"]
    strange = {str(loc[0]) for loc in unknown if len(loc) == 1}
    places = {error["loc"][:2] for error in errors if error["loc"][0] not in strange}
    places |= {before[:2] for before in taken_out(tree, shape, [error["loc"] for error in errors]).values()}
    if any(len(place) < 2 or place[0] not in shape.sections for place in places) or (strange and not shape.sections):
        return None
    for loc in unknown:
        space = shape.sections.get(str(loc[0]))
        if space:
            lost.lose(space, str(loc[-1]))
    lost.lose_whole(*(space for name, space in shape.sections.items() if space and name not in tree))
    if strange:
        names = {name for key in strange for name in (key, *_names_in(tree[key]))}
        for space in shape.sections.values():
            if space:
                lost.lose_all(space, names)
    rest = _without(tree, places, shape, lost)
    for key in strange:
        del rest[key]
    try:
        return shape.model_validate(rest), rest
    except ValidationError:
        return None


def _without(tree: Mapping, places: set[tuple[str | int, ...]], shape: type[File], lost: Lost) -> Mapping:
    """The tree without some entries, which are noted as lost."""
    rest = Mapping(tree.mark)
    rest.key_marks.update(tree.key_marks)
    for section, node in tree.items():
        rest[section] = node
        damaged = {place[1] for place in places if place[0] == section}
        space = shape.sections.get(section)
        if isinstance(node, Mapping) and damaged:
            kept = Mapping(node.mark)
            kept.key_marks.update(node.key_marks)
            kept.update({name: child for name, child in node.items() if name not in damaged})
            rest[section] = kept
            names = {str(name) for name in damaged}
        elif isinstance(node, Sequence) and damaged:
            entries = Sequence(node.mark)
            entries.extend(child for place, child in enumerate(node) if place not in damaged)
            rest[section] = entries
            ids = [_ids_of(child) for place, child in enumerate(node) if place in damaged]
            names = {name for each in ids for name in each}
            if space and not all(ids):
                lost.lose_whole(space)
        else:
            continue
        if space:
            lost.lose_all(space, names)
    return rest


def _ids_of(node: Node) -> set[str]:
    """The id of a damaged entry; where that is damaged too, all that it may have been."""
    for key in ("id", "fact"):
        if isinstance(node, Mapping) and isinstance(known_as := node.get(key), Scalar):
            return {str(known_as)}
    return set() if isinstance(node, Scalar) else _names_in(node)


def _names_in(node: Node) -> set[str]:
    """Every key and value in a part that are names."""
    if isinstance(node, Scalar):
        return {str(node)} if re.fullmatch(ID, node) else set()
    inner = {name for child in (node.values() if isinstance(node, Mapping) else node) for name in _names_in(child)}
    return inner | set(node) if isinstance(node, Mapping) else inner


def mapping_in(node: Node | None, *keys: str) -> Mapping:
    """The mapping below these keys; an empty one where the shape allows that there is none."""
    for key in keys:
        node = node.get(key) if isinstance(node, Mapping) else None
    return node if isinstance(node, Mapping) else Mapping()


def list_in(node: Node | None, key: str) -> Sequence:
    """The list below a key; an empty one where the shape allows that there is none."""
    found = node.get(key) if isinstance(node, Mapping) else None
    return found if isinstance(found, Sequence) else Sequence()
