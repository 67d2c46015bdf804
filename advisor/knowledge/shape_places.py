"""Places in a knowledge file: the nodes on the way to them, and the shapes that the schema gives them."""

from collections.abc import Iterator
from types import UnionType
from typing import Annotated, Any, Union, get_args, get_origin

from advisor.documents import Mapping, Node, Sequence
from advisor.knowledge.schema import Shape

Loc = tuple[str | int, ...]


def fields_of(shape: type[Shape]) -> dict[str, Any]:
    """The keys that a shape knows, in the usual order, with what stands under them."""
    return {field.alias or name: field.annotation for name, field in shape.model_fields.items()}


def shape_at(shape: type[Shape], loc: Loc) -> type[Shape] | None:
    """The shape that the schema gives to the node at a place."""
    annotation: Any = shape
    for part in loc:
        annotation = next(_steps_into(annotation, part), None)
    return annotation if isinstance(annotation, type) and issubclass(annotation, Shape) else _plain(annotation)


def _plain(annotation: Any) -> type[Shape] | None:
    """The shape in an annotation that is no list and no dict of shapes."""
    if get_origin(annotation) in {list, dict}:
        return None
    return shape_of(annotation)


def _steps_into(annotation: Any, part: str | int) -> Iterator[Any]:
    origin, inner = get_origin(annotation), get_args(annotation)
    if origin is Annotated:
        yield from _steps_into(inner[0], part)
    elif origin in {Union, UnionType}:
        for each in inner:
            yield from _steps_into(each, part)
    elif (origin is dict and isinstance(part, str)) or (origin is list and isinstance(part, int)):
        yield inner[-1]
    elif isinstance(annotation, type) and issubclass(annotation, Shape) and part in fields_of(annotation):
        yield fields_of(annotation)[str(part)]


def entry_shape(annotation: Any) -> type[Shape] | None:
    """The shape of the entries of a section."""
    inner = get_args(annotation)
    return shape_of(inner[-1]) if get_origin(annotation) in {list, dict} else None


def shape_of(annotation: Any) -> type[Shape] | None:
    """The shape in an annotation, or the one of its entries."""
    if isinstance(annotation, type):
        return annotation if issubclass(annotation, Shape) else None
    if get_origin(annotation) is dict:
        return None
    return next((found for each in get_args(annotation) if (found := shape_of(each)) is not None), None)


def child_at(tree: Node, loc: Loc) -> Node | None:
    """What stands at a place, if anything."""
    path = list(path_to(tree, loc))
    return path[-1] if len(path) == len(loc) + 1 else None


def path_to(tree: Node, loc: Loc) -> Iterator[Node]:
    """The nodes from the root to the place, as far as there are any."""
    yield tree
    node = tree
    for part in loc:
        if isinstance(node, Mapping) and str(part) in node:
            node = node[str(part)]
        elif isinstance(node, Sequence) and isinstance(part, int) and part < len(node):
            node = node[part]
        else:
            return
        yield node


def trail_to(tree: Node, loc: Loc) -> tuple[str, ...]:
    """The way to the fault by ids rather than by numbers."""
    nodes = list(path_to(tree, loc))[1:]
    return tuple(
        _name_of(node, part) if isinstance(part, int) else str(part) for part, node in zip(loc, nodes, strict=False)
    )


def _name_of(node: Node, place: int) -> str:
    if isinstance(node, Mapping):
        for key in ("id", "fact", "item"):
            if isinstance(node.get(key), str):
                return f"'{node[key]}'"
        if node:
            return next(iter(node))
    return f"entry {place + 1}"
