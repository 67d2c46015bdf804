"""The exported schema and the loader's structural stage accept the same documents, node by node."""

import copy
import random
from collections.abc import Iterator

import pytest
from pydantic import ValidationError

from advisor.documents import Mapping, Mark, Node, Problems, Scalar, Sequence, read_document
from advisor.knowledge.editor_schema import NAMES, schema, schema_of, shape_of
from tests.conftest import ROOT
from tests.schema.editor import Validator, seen, spelled_otherwise

KNOWLEDGE = ROOT / "knowledge"
FILES = sorted(path.relative_to(KNOWLEDGE).as_posix() for path in KNOWLEDGE.rglob("*.yaml"))
SMALL = [file for file in FILES if (KNOWLEDGE / file).stat().st_size < 60_000]
MUTANTS = 1500
AT = Mark("made.yaml", 1, 1)
NAMED = {name: Validator(schema(name)) for name in NAMES}
# Texts on the border between the kinds, plain and in quotes.
WORDS = [
    "", " ", "~", "null", "Null", "yes", "no", "true", "false", "on", "off", "0", "1", "2", "4", "5", "-3",
    "12.5", "1e3", "1e999", "1,5", "1_000", "12:30", "2024-01-01", "abc", "a b", "Abc", "a.b-c", "9a", "_a",
    "-a", "ä", "°C", "mm²/s", "%", "must", "draft", "agreed", "choice", "number", "highest", "from memory",
    "grease", "symmetric", "open", "x" * 64, "x" * 65, "x" * 81, "a\n", ".5", "5.", "010", "0x1F", "True",
    ".inf", "1.0", "+1",
]  # fmt: skip
KEYS = ["id", "title", "when", "then", "because", "rows", "kind", "unit", "limits", "format", "strange", "a b", "Ä"]


def tree_of(file: str) -> Mapping:
    tree = read_document(KNOWLEDGE / file, Problems())
    assert isinstance(tree, Mapping)
    return tree


def loader_accepts(tree: Node, name: str) -> bool:
    try:
        shape_of(name).model_validate(tree)
    except ValidationError:
        return False
    return True


def schema_accepts(tree: Node, name: str) -> bool:
    return NAMED[name].is_valid(seen(tree))


def places(node: Node) -> Iterator[tuple[Mapping | Sequence, str | int]]:
    """Every place below a node: what holds it, and its key."""
    if isinstance(node, Scalar):
        return
    for key in list(node) if isinstance(node, Mapping) else range(len(node)):
        yield node, key
        yield from places(at(node, key))


def at(holder: Mapping | Sequence, key: str | int) -> Node:
    return holder[str(key)] if isinstance(holder, Mapping) else holder[int(key)]


def put(holder: Mapping | Sequence, key: str | int, node: Node) -> None:
    if isinstance(holder, Mapping):
        holder[str(key)] = node
    else:
        holder[int(key)] = node


def limits_in(tree: Node) -> Sequence:
    """The first limits of a document."""
    limits = next(at(holder, key) for holder, key in places(tree) if key == "limits")
    assert isinstance(limits, Sequence)
    return limits


def cut_down(node: Node, rng: random.Random, most: int = 6) -> Node:
    """A copy with the long lists and mappings thinned out, so that a mutation meets what is typed."""
    if isinstance(node, Scalar):
        return node
    keep = set(rng.sample(range(len(node)), min(most, len(node))))
    if isinstance(node, Sequence):
        short = Sequence(node.mark)
        short.extend(cut_down(each, rng) for place, each in enumerate(node) if place in keep)
        return short
    thin = Mapping(node.mark)
    small = len(node) <= 20
    thin.update({key: cut_down(each, rng) for place, (key, each) in enumerate(node.items()) if small or place in keep})
    return thin


def scalar(rng: random.Random) -> Scalar:
    while True:
        made = Scalar(rng.choice(WORDS), AT, quoted=rng.random() < 0.3)
        if not spelled_otherwise(made):
            return made


def grown(rng: random.Random) -> Node:
    """Something of another kind."""
    kind = rng.randrange(4)
    if kind < 2:
        return scalar(rng)
    if kind == 2:
        several = Sequence(AT)
        several.extend(scalar(rng) for _ in range(rng.randrange(4)))
        return several
    mapping = Mapping(AT)
    mapping.update({rng.choice(KEYS): scalar(rng) for _ in range(rng.randrange(3))})
    return mapping


def mutate(tree: Mapping, rng: random.Random) -> None:
    """Delete, rename, double or retype one node."""
    found = list(places(tree))
    if not found:
        return
    holder, key = rng.choice(found)
    how = rng.choice(["delete", "rename", "retype", "retype", "retype", "move", "add"])
    if how == "delete":
        if isinstance(holder, Mapping):
            del holder[str(key)]
        else:
            del holder[int(key)]
    elif how in {"rename", "add"} and isinstance(holder, Mapping):
        value = holder.pop(str(key)) if how == "rename" else grown(rng)
        holder[rng.choice([*KEYS, str(key) + "s", "x" * 81])] = value
    elif how == "move":
        other, there = rng.choice(list(places(tree)))
        put(other, there, copy.deepcopy(at(holder, key)))
    else:
        put(holder, key, grown(rng))


@pytest.mark.parametrize("file", FILES)
def test_the_schema_accepts_what_is_shipped(file: str) -> None:
    assert [each.message for each in NAMED[schema_of(file)].iter_errors(seen(tree_of(file)))] == []


def test_mutated_documents_are_accepted_by_both_or_by_neither() -> None:
    rng = random.Random(4)  # noqa: S311 - reproducible mutants
    trees = {file: tree_of(file) for file in SMALL}
    accepted = 0
    for number in range(MUTANTS):
        file = rng.choice(SMALL)
        tree = cut_down(trees[file], rng)
        assert isinstance(tree, Mapping)
        for _ in range(rng.choice([1, 1, 1, 2])):
            mutate(tree, rng)
        name = schema_of(file)
        by_loader, by_schema = loader_accepts(tree, name), schema_accepts(tree, name)
        assert by_loader is by_schema, f"mutant {number} of {file}: loader {by_loader}\n{seen(tree)}"
        accepted += by_loader
    assert MUTANTS // 10 < accepted < MUTANTS * 9 // 10, "the corpus must hold both kinds"


def field_trees(name: str) -> Iterator[tuple[Mapping, Mapping, str]]:
    """Every field of the shipped files of this kind, once for each mapping it stands in."""
    for file in FILES:
        if schema_of(file) == name:
            tree = tree_of(file)
            met: set[tuple[str, ...]] = set()
            for holder, key in places(tree):
                if isinstance(holder, Mapping) and (kind := (*sorted(holder), str(key))) not in met and len(met) < 120:
                    met.add(kind)
                    yield tree, holder, str(key)


@pytest.mark.parametrize("name", [name for name in NAMES if any(schema_of(file) == name for file in SMALL)])
def test_every_word_in_every_field_is_judged_alike(name: str) -> None:
    rng = random.Random(name)  # noqa: S311 - reproducible words
    for tree, holder, key in list(field_trees(name))[:60]:
        kept = holder[key]
        for word in rng.sample(WORDS, 12):
            holder[key] = made = Scalar(word, AT, quoted=rng.random() < 0.3)
            if not spelled_otherwise(made):
                assert loader_accepts(tree, name) is schema_accepts(tree, name), f"{key}: {word!r} quoted {made.quoted}"
        holder[key] = kept


# The spellings that YAML 1.2 reads before a schema sees them; the loader alone can refuse them.
@pytest.mark.parametrize("word", [".5", "5.", "010", "0x1F", "+.5"])
def test_a_spelling_that_only_the_loader_sees(word: str) -> None:
    tree = tree_of("rolling_bearing/facts.yaml")
    limits = limits_in(tree)
    limits[0] = Scalar(word, AT)
    assert schema_accepts(tree, "facts")
    assert not loader_accepts(tree, "facts")
    limits[0] = Scalar(word, AT, quoted=True)
    assert not schema_accepts(tree, "facts")


def test_an_endless_number_is_refused_by_both() -> None:
    tree = tree_of("rolling_bearing/facts.yaml")
    limits = limits_in(tree)
    limits[0] = Scalar("1e999", AT)
    assert not schema_accepts(tree, "facts")
    assert not loader_accepts(tree, "facts")
