"""Which columns of a table the rules over its rows compare: two rows that agree in them speak of the same case."""

from collections.abc import Iterator

from advisor.documents import Mapping, Node, Scalar, Sequence
from advisor.knowledge.reading import list_in


def matched_columns(tree: Mapping) -> tuple[str, ...]:
    """The columns that a rule compares: in its conditions, and in what its demands exclude."""
    found = [column for key in ("when", "unless") if key in tree for column in _columns_in(tree[key])]
    for conclusion in list_in(tree, "then"):
        if isinstance(conclusion, Mapping):
            found += _columns_in(conclusion["for"]) if "for" in conclusion else ()
            found += [column for verb in ("must", "should") for column in _excluded(conclusion.get(verb))]
    return tuple(dict.fromkeys(found))


def _excluded(test: Node | None) -> Iterator[str]:
    """The columns in the lists of what must not be."""
    for child in test.values() if isinstance(test, Mapping) else ():
        if isinstance(child, Mapping) and "none_of" in child:
            yield from _columns_in(child["none_of"])


def _columns_in(node: Node) -> Iterator[str]:
    """The columns that stand as {row: column} anywhere in a tree."""
    if isinstance(node, Mapping):
        for key, child in node.items():
            if key == "row" and isinstance(child, Scalar):
                yield str(child)
            else:
                yield from _columns_in(child)
    elif isinstance(node, Sequence):
        for child in node:
            yield from _columns_in(child)
