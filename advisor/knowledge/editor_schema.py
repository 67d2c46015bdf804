"""JSON Schema (draft 2020-12) of every knowledge file, for editors: it accepts what the shapes accept.

Only spellings differ that YAML 1.2 has read before a schema sees them: 01, .5 or 0x1 as numbers, True as yes,
1.0 as a level or as the format. An editor passes them, the loader says how to write them.
"""

import json
from collections.abc import Mapping
from pathlib import PurePosixPath
from typing import Any

from pydantic.json_schema import GenerateJsonSchema
from pydantic_core import core_schema

from advisor.knowledge.files import MAY_HAVE, SHAPES, File, ShelfFile, StepFile, TablesFile
from advisor.knowledge.hints import HINTS
from advisor.knowledge.schema import OR_ONE

FOLDER = ".schema"
DIALECT = "https://json-schema.org/draft/2020-12/schema"
_BY_NAME: Mapping[str, type[File]] = {
    **{name.removesuffix(".yaml"): shape for name, shape in {**SHAPES, **MAY_HAVE}.items()},
    "step": StepFile,
    "tables": TablesFile,
    "shelf": ShelfFile,
}
_BY_FOLDER: Mapping[str, str] = {"tables": "tables", "shelf": "shelf"}
NAMES = tuple(_BY_NAME)
"""What the schemas are called."""
Data = dict[str, Any]


def schema_of(file: str) -> str:
    """The name of the schema of a knowledge file, given by its path in the folder.

    >>> schema_of("rolling_bearing/temperature.yaml"), schema_of("rolling_bearing/facts.yaml"), schema_of("docket.yaml")
    ('step', 'facts', 'docket')
    """
    path = PurePosixPath(file)
    folder = path.parent.name
    if folder in _BY_FOLDER:
        return _BY_FOLDER[folder]
    if path.stem in _BY_NAME:
        return path.stem
    return "step" if folder else ""


def shape_of(name: str) -> type[File]:
    """The shape behind a schema."""
    return _BY_NAME[name]


def schema_text(name: str) -> str:
    """The schema of this name as JSON."""
    return json.dumps(schema(name), ensure_ascii=False, indent=1) + "\n"


def schema(name: str) -> Data:
    """The schema of this name."""
    shape = _BY_NAME[name]
    found = shape.model_json_schema(by_alias=True, schema_generator=_Generator)
    parts = found.pop("$defs", {})
    data = {"$schema": DIALECT, "title": f"Gudgeon knowledge: {name}", **_spoken(found, shape.__name__)}
    if parts:
        data["$defs"] = {key: _spoken(part, key) for key, part in sorted(parts.items())}
    return data


class _Generator(GenerateJsonSchema):
    """Writes what the shapes accept of a document: nothing is no value, and every key of a collection is checked."""

    def nullable_schema(self, schema: core_schema.NullableSchema) -> Data:
        return self.generate_inner(schema["schema"])

    def default_schema(self, schema: core_schema.WithDefaultSchema) -> Data:
        return self.generate_inner(schema["schema"])

    def dict_schema(self, schema: core_schema.DictSchema) -> Data:
        keys = self.generate_inner(schema["keys_schema"])
        values = self.generate_inner(schema["values_schema"])
        return {"type": "object", "propertyNames": {"pattern": keys["pattern"]}, "additionalProperties": values}

    def field_title_should_be_set(self, schema: object) -> bool:  # noqa: ARG002 - called by pydantic
        return False


def _spoken(part: Data, shape: str) -> Data:
    """A shape with the hints of its keys."""
    keys = {key: _key(key, value, HINTS[shape][key]) for key, value in part["properties"].items()}
    return {**{key: value for key, value in part.items() if key != "title"}, "properties": keys}


def _key(key: str, value: Data, hint: str) -> Data:
    if value.pop(OR_ONE, False):
        value = {"anyOf": [value["items"], value]}
    return {"title": key, "description": hint, **value}


def modeline(file: str) -> str:
    """The first line of a knowledge file, by which editors find its schema."""
    up = "../" * (len(PurePosixPath(file).parts) - 1)
    return f"# yaml-language-server: $schema={up or './'}{FOLDER}/{schema_of(file)}.schema.json"
