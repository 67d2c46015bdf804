"""A document as a tree in which every scalar is text and every node knows its place."""

from collections.abc import Iterable, Iterator
from typing import Self, TypeAlias

from advisor.documents.problems import Mark

_NOWHERE = Mark("", 1, 1)


class Scalar(str):
    """A text as written, without its quotes."""

    __slots__ = ("mark", "quoted")
    mark: Mark
    quoted: bool

    def __new__(cls, text: str, mark: Mark = _NOWHERE, *, quoted: bool = False) -> Self:
        """The text with its place and whether it stood in quotes or in a block of its own."""
        scalar = super().__new__(cls, text)
        scalar.mark = mark
        scalar.quoted = quoted
        return scalar


class Mapping(dict[str, "Node"]):
    """Keys and their values in the order written."""

    def __init__(self, mark: Mark = _NOWHERE) -> None:
        super().__init__()
        self.mark = mark
        self.key_marks: dict[str, Mark] = {}


class Sequence(list["Node"]):
    """A list."""

    def __init__(self, mark: Mark = _NOWHERE) -> None:
        super().__init__()
        self.mark = mark


Node: TypeAlias = Scalar | Mapping | Sequence


def locate(tree: Node, loc: Iterable[str | int], *, key: bool = False) -> Mark:
    """Where the value at `loc` stands, or its nearest ancestor where there is none.

    Args:
        tree: the document.
        loc: keys and indices from the root; those that lead nowhere (names of alternatives) are passed over.
        key: the place of the key rather than of its value, as for a key that should not be there.
    """
    steps = tuple(loc)
    mark = tree.mark
    for parent, step, node in _path(tree, steps):
        wanted = key or steps[-1] == "[key]"
        mark = parent.key_marks[str(step)] if wanted and isinstance(parent, Mapping) else node.mark
    return mark


def trail(tree: Node, loc: Iterable[str | int]) -> tuple[str, ...]:
    """What the value at `loc` sits in, outermost first: keys, and the members of lists by their id.

    A member without an id is not named: its line tells it.
    """
    names: list[str] = []
    for parent, step, node in _path(tree, loc):
        if isinstance(parent, Mapping):
            names.append(str(step))
        elif isinstance(node, Mapping) and isinstance(known_as := node.get("id"), Scalar):
            names[-1:] = [f"{_singular(name)} '{known_as}'" for name in names[-1:]] or [f"'{known_as}'"]
    return tuple(names)


def _path(tree: Node, loc: Iterable[str | int]) -> Iterator[tuple[Node, str | int, Node]]:
    """The steps of `loc` that lead somewhere: the parent, the step, the node reached."""
    node = tree
    for step in loc:
        if (child := _child(node, step)) is not None:
            yield node, step, child
            node = child


def _child(node: Node, step: str | int) -> Node | None:
    """What the step leads to, if anything."""
    match node, step:
        case Mapping(), str():
            return node.get(step)
        case Sequence(), int() if 0 <= step < len(node):
            return node[step]
    return None


def _singular(name: str) -> str:
    """The name of one member of a list named in the plural."""
    return f"{name[:-3]}y" if name.endswith("ies") else name.removesuffix("s")
