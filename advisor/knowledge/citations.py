"""Sources and the places cited in them."""

from collections.abc import Mapping as Map
from dataclasses import dataclass

from advisor.documents import Mapping, Mark, Node, Scalar
from advisor.knowledge.model import Citation, Source
from advisor.knowledge.reading import shaped
from advisor.knowledge.schema import CitationShape, SourceShape
from advisor.knowledge.values import Scope

_STRENGTH = {"yes": 2, "from memory": 1, "no source": 0}


@dataclass(frozen=True, slots=True)
class Citations:
    """Reads citations against the known sources."""

    sources: Map[str, Source]

    def read(self, shapes: list[CitationShape], owner: Node, scope: Scope) -> tuple[Citation, ...]:
        """The citations of an owner; faults stand at the citation's own place."""
        nodes = owner.get("source") if isinstance(owner, Mapping) else None
        return tuple(
            self._one(shape, nodes[place] if isinstance(nodes, list) else owner, scope)
            for place, shape in enumerate(shapes)
        )

    def read_tree(self, node: Node | None, scope: Scope) -> tuple[Citation, ...]:
        """Citations that were not shaped yet."""
        if node is None:
            return ()
        if not isinstance(node, list):
            scope.problem(node.mark, "a source is a list", "source: [{id: ..., where: ...}]")
            return ()
        shapes = [(shaped(each, CitationShape, scope.problems), each) for each in node]
        return tuple(self._one(shape, each, scope) for shape, each in shapes if shape is not None)

    def _one(self, shape: CitationShape, node: Node, scope: Scope) -> Citation:
        source = self.sources.get(shape.id)
        if source is None:
            scope.unknown(
                _mark(node, "id"),
                "sources",
                shape.id,
                f"'{shape.id}' is no source",
                self.sources,
                "add it to sources.yaml",
            )
            return Citation(shape.id, shape.where, "no source")
        checked = shape.checked or source.checked
        if _STRENGTH[checked] > _STRENGTH[source.checked]:
            scope.problem(
                _mark(node, "checked"),
                f"'{shape.id}' is marked '{source.checked}' in sources.yaml, and a citation cannot be surer",
                "read the source, then change its 'checked' there",
            )
            checked = source.checked
        return Citation(shape.id, shape.where, checked)


def _mark(node: Node, key: str) -> Mark:
    child = node.get(key) if isinstance(node, Mapping) else None
    return child.mark if isinstance(child, Scalar) else node.mark


def read_sources(shapes: Map[str, SourceShape]) -> dict[str, Source]:
    """All sources."""
    return {
        name: Source(name, shape.title, shape.publisher, shape.year, shape.kind, shape.checked)
        for name, shape in shapes.items()
    }
