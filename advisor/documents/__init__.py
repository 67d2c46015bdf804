"""Read and write YAML documents; every fault is a `Problem` with its place and its mend, all told at once."""

from advisor.documents.problems import Faulty, Mark, Problem, Problems, closest, nearest
from advisor.documents.reading import Expected, read_document, read_text
from advisor.documents.saving import Unwritable, write_text_safely
from advisor.documents.scalars import as_number, as_yes_no
from advisor.documents.slips import CURLY
from advisor.documents.spans import Uneditable, removed, replaced
from advisor.documents.tree import Mapping, Node, Scalar, Sequence, locate, trail
from advisor.documents.writing import to_yaml

__all__ = [
    "CURLY", "Expected", "Faulty", "Mapping", "Mark", "Node", "Problem", "Problems", "Scalar", "Sequence", "Uneditable",
    "Unwritable", "as_number", "as_yes_no", "closest", "locate", "nearest", "read_document", "read_text", "removed",
    "replaced", "to_yaml", "trail", "write_text_safely",
]
