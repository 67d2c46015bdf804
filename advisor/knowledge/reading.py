"""From a document tree to a shape: pydantic's faults become problems on the damaged line."""

from collections.abc import Sequence
from pathlib import Path
from typing import TypeVar

from pydantic import BaseModel, ValidationError
from pydantic_core import ErrorDetails

from advisor.documents import Mapping, Mark, Node, Problem, Problems, locate, nearest, read_document
from advisor.knowledge.schema import Shape

Shaped = TypeVar("Shaped", bound=BaseModel)


def read_file(path: Path, shape: type[Shaped], problems: Problems) -> tuple[Shaped | None, Node | None]:
    """Read one file into its shape; every fault is collected, and then there is no shape."""
    tree = read_document(path, problems)
    if tree is None:
        return None, None
    return shaped(tree, shape, problems), tree


def shaped(tree: Node, shape: type[Shaped], problems: Problems) -> Shaped | None:
    """The tree as a shape, or None with its faults collected."""
    try:
        return shape.model_validate(tree)
    except ValidationError as fault:
        told: set[tuple[Mark, str]] = set()
        for error in fault.errors():
            problem, mark = _problem(tree, error)
            if (mark, problem.message) not in told:
                told.add((mark, problem.message))
                problems.add(problem)
        return None


def _problem(tree: Node, error: ErrorDetails) -> tuple[Problem, Mark]:
    loc = tuple(error["loc"])
    unknown = error["type"] == "extra_forbidden"
    mark = locate(tree, loc, key=unknown)
    message, hint = _words(tree, error, loc)
    return Problem(mark.file, mark.line, mark.column, _trail(tree, loc), message, hint), mark


def _words(tree: Node, error: ErrorDetails, loc: tuple[str | int, ...]) -> tuple[str, str]:
    kind, seen = error["type"], str(loc[-1]) if loc else ""
    if kind == "extra_forbidden":
        near = nearest(seen, _known_keys())
        return f"'{seen}' is not known here", near.strip() or "take it out, or move it to where it belongs"
    if kind == "missing":
        return f"'{seen}' is missing here", _elsewhere(tree, loc, seen) or f"add a line '{seen}:'"
    if kind == "value_error":
        return _split(str(error["msg"]).removeprefix("Value error, "))
    if kind == "literal_error":
        return f"'{error['input']}' is none of {error['ctx']['expected']}", nearest(
            str(error["input"]), [each.strip("'") for each in str(error["ctx"]["expected"]).split(", ")]
        ).strip()
    if kind == "string_pattern_mismatch":
        return f"'{error['input']}' is no id", "use letters, digits and underscores, beginning with a small letter"
    if kind in {"model_type", "dict_type", "model_attributes_type"}:
        return "a mapping (key: value) is expected here", "indent the lines below it, each as 'key: value'"
    if kind == "list_type":
        return "a list is expected here", "begin each entry with '- ', or write [a, b]"
    if kind == "too_short":
        return "more entries are expected here", "add what is missing"
    return str(error["msg"]), ""


def _split(message: str) -> tuple[str, str]:
    """Messages of our own validators may carry their hint after ': '."""
    head, _, hint = message.partition("; ")
    return head, hint


def _known_keys() -> list[str]:
    return sorted({field.alias or name for shape in _all_shapes(Shape) for name, field in shape.model_fields.items()})


def _all_shapes(shape: type[Shape]) -> list[type[Shape]]:
    return [shape, *(below for child in shape.__subclasses__() for below in _all_shapes(child))]


def _elsewhere(tree: Node, loc: Sequence[str | int], key: str) -> str:
    """Says so where the missing key stands one level away."""
    around: list[tuple[str, Node]] = []
    node: Node | None = tree
    path: list[Node] = [tree]
    for part in loc[:-1]:
        node = _step_into(node, part)
        if node is None:
            break
        path.append(node)
    if len(path) > 1:
        around.append(("above", path[-2]))
    if isinstance(path[-1], Mapping):
        around += [("below", child) for child in path[-1].values()]
    for where, near in around:
        if isinstance(near, Mapping) and key in near:
            line = near.key_marks[key].line
            return f"a '{key}' stands one level {where}, in line {line}: is its indentation wrong?"
    return ""


def _step_into(node: Node | None, part: str | int) -> Node | None:
    if isinstance(node, Mapping):
        return node.get(str(part))
    return node[part] if isinstance(node, list) and isinstance(part, int) and part < len(node) else None


def _trail(tree: Node, loc: tuple[str | int, ...]) -> tuple[str, ...]:
    """The way to the fault by ids rather than by numbers."""
    trail: list[str] = []
    node: Node | None = tree
    for part in loc:
        if isinstance(node, Mapping):
            if part not in node:
                continue
            node = node[str(part)]
            trail.append(str(part))
        elif isinstance(node, list) and isinstance(part, int) and part < len(node):
            node = node[part]
            trail.append(_name_of(node, part))
        else:
            break
    return tuple(trail)


def _name_of(node: Node, place: int) -> str:
    if isinstance(node, Mapping):
        for key in ("id", "fact", "item"):
            if isinstance(node.get(key), str):
                return f"'{node[key]}'"
        if len(node) >= 1:
            return f"{next(iter(node))}"
    return f"entry {place + 1}"
