"""`gudgeon schema`, the schemas beside the knowledge, and the first line by which an editor finds them."""

import json
from pathlib import Path

import pytest
from jsonschema import Draft202012Validator

from advisor.commands import schema as run
from advisor.knowledge import load
from advisor.knowledge.editor_schema import FOLDER, NAMES, modeline, schema, schema_of, schema_text
from advisor.mishaps import DONE, Refusal
from tests.conftest import ROOT
from tests.knowledge.damage import copied

KNOWLEDGE = ROOT / "knowledge"
FILES = sorted(path.relative_to(KNOWLEDGE).as_posix() for path in KNOWLEDGE.rglob("*.yaml"))


@pytest.mark.parametrize("name", NAMES)
def test_every_schema_is_one_and_says_something_of_every_key(name: str) -> None:
    made = schema(name)
    Draft202012Validator.check_schema(made)
    for part in (made, *made.get("$defs", {}).values()):
        assert part["additionalProperties"] is False
        for key, value in part["properties"].items():
            assert value["title"] == key
            assert value["description"].strip(), key


@pytest.mark.parametrize("name", NAMES)
def test_the_schemas_beside_the_knowledge_are_up_to_date(name: str) -> None:
    kept = (KNOWLEDGE / FOLDER / f"{name}.schema.json").read_text(encoding="utf-8")
    assert kept == schema_text(name), "run: gudgeon schema --out knowledge/.schema"


@pytest.mark.parametrize("file", FILES)
def test_every_shipped_file_names_its_schema(file: str) -> None:
    first = (KNOWLEDGE / file).read_text(encoding="utf-8").partition("\n")[0]
    assert first == modeline(file)
    target = (KNOWLEDGE / file).parent / first.partition("$schema=")[2]
    assert target.resolve() == KNOWLEDGE / FOLDER / f"{schema_of(file)}.schema.json"
    assert target.is_file()


def test_schemas_are_no_part_of_the_knowledge(tmp_path: Path) -> None:
    folder = copied(tmp_path)
    before = load(folder).fingerprint
    assert run(None, folder / FOLDER) == DONE
    (folder / FOLDER / "another.schema.json").write_text("{}", encoding="utf-8")
    assert load(folder).fingerprint == before


def test_one_schema_is_printed(capsys: pytest.CaptureFixture[str]) -> None:
    assert run("knowledge/rolling_bearing/temperature.yaml", None) == DONE
    assert json.loads(capsys.readouterr().out) == schema("step")


def test_without_a_file_the_schemas_are_listed(capsys: pytest.CaptureFixture[str]) -> None:
    assert run(None, None) == DONE
    assert {line.split()[0] for line in capsys.readouterr().out.splitlines()} >= {"facts", "step", "shelf"}


@pytest.mark.parametrize("file", ["fact", "README.md", "strange.yaml", ""])
def test_what_has_no_schema_is_refused(file: str) -> None:
    with pytest.raises(Refusal, match="no schema"):
        run(file, None)


def test_the_unit_and_the_level_are_offered() -> None:
    fact = schema("facts")["$defs"]["FactShape"]["properties"]
    assert "mm²/s" in fact["unit"]["enum"]
    assert "°C" in fact["unit"]["description"]
    assert schema("step")["$defs"]["ConclusionShape"]["properties"]["level"]["enum"][:4] == [1, 2, 3, 4]
