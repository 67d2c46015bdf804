"""What an editor's schema sees of a document: scalars as YAML 1.2 (core schema) resolves them."""

import re
from typing import Any

from jsonschema import Draft202012Validator
from jsonschema.validators import extend

from advisor.documents import Mapping, Node, Scalar, Sequence

# YAML 1.2.2, section 10.3.2: tag resolution of the core schema.
_NOTHING = {"", "~", "null", "Null", "NULL"}
_TRUTH = {"true": True, "True": True, "TRUE": True, "false": False, "False": False, "FALSE": False}
_INTEGER = re.compile(r"[-+]?[0-9]+")
_OTHER_BASE = re.compile(r"0o[0-7]+|0x[0-9a-fA-F]+")
_FLOAT = re.compile(r"[-+]?(\.[0-9]+|[0-9]+(\.[0-9]*)?)([eE][-+]?[0-9]+)?")
_ENDLESS = re.compile(r"[-+]?\.(inf|Inf|INF)|\.(nan|NaN|NAN)")


def seen(node: Node) -> Any:
    """The node as an editor's schema sees it."""
    if isinstance(node, Mapping):
        return {str(key): seen(each) for key, each in node.items()}
    if isinstance(node, Sequence):
        return [seen(each) for each in node]
    return str(node) if node.quoted else resolved(str(node))


def resolved(text: str) -> Any:
    if text in _NOTHING:
        return None
    if text in _TRUTH:
        return _TRUTH[text]
    if _INTEGER.fullmatch(text):
        return int(text)
    if _OTHER_BASE.fullmatch(text):
        return int(text, 0)
    if _FLOAT.fullmatch(text):
        return float(text)
    if _ENDLESS.fullmatch(text):
        return float("inf")
    return text


def spelled_otherwise(node: Scalar) -> bool:
    """Whether YAML 1.2 has read the plain text away before a schema can see how it is spelled."""
    meant = resolved(str(node))
    if node.quoted or isinstance(meant, str) or meant is None:
        return False
    if isinstance(meant, bool):
        return str(node) not in {"true", "false"}
    return str(node) != repr(meant) or (isinstance(meant, float) and meant.is_integer())


def _pattern(_validator: Any, pattern: str, instance: Any, _schema: Any) -> Any:
    """ECMA 262 regular expressions, which JSON Schema uses: `$` is the very end, not before a last line break."""
    from jsonschema import ValidationError

    if isinstance(instance, str) and not re.search(re.sub(r"\$$", r"\\Z", pattern), instance):
        yield ValidationError(f"{instance!r} does not match {pattern!r}")


Validator = extend(Draft202012Validator, {"pattern": _pattern})
