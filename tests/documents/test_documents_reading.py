"""A document becomes a tree of texts with places; every fault is told with its place and its mend."""

import os
from pathlib import Path

import pytest
import yaml
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.documents import (
    Mapping,
    Mark,
    Node,
    Problems,
    Scalar,
    Sequence,
    locate,
    read_document,
    read_text,
    reading,
    trail,
)

BAD = Path(__file__).parent / "bad"
SAMPLES = sorted(BAD.glob("*.yaml"))

RULES = """\
rules:
  - id: water
    when: {water: {at_least: humid}}
    then:
      - must:
          thickener: [lithium, 'calcium']
      - caution:
"""


def read(text: str) -> Node:
    problems = Problems()
    tree = read_text(text, "it.yaml", problems)
    assert list(problems) == []
    assert tree is not None
    return tree


def faults(text: str) -> list[str]:
    problems = Problems()
    read_text(text, "it.yaml", problems)
    return [str(problem) for problem in problems]


@pytest.mark.parametrize("loader", ["CSafeLoader", "SafeLoader"])
@pytest.mark.parametrize("path", SAMPLES, ids=lambda path: path.stem)
def test_every_fault_is_told_with_its_place_by_either_parser(
    path: Path, loader: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    if not hasattr(yaml, loader):
        pytest.skip("the parser written in C is not built in here")
    monkeypatch.setattr(reading, "_LOADER", getattr(yaml, loader))
    problems = Problems()
    read_document(path, problems, path.name)
    assert [str(problem) for problem in problems] == path.with_suffix(".txt").read_text("utf-8").splitlines()


def test_every_scalar_stays_text() -> None:
    tree = read("[yes, NO, 00, 1_000, 12:30, 2024-01-31, 0x1F, 1e3, ~, null, .inf, '', , =]".replace(" ,", ""))
    assert tree == ["yes", "NO", "00", "1_000", "12:30", "2024-01-31", "0x1F", "1e3", "~", "null", ".inf", "", "="]
    assert {type(scalar) for scalar in tree} == {Scalar}


def test_keys_stay_text() -> None:
    assert read("{1: a, yes: b, '<<': c}") == {"1": "a", "yes": "b", "<<": "c"}


def test_quotes_are_remembered() -> None:
    tree = read("- plain\n- 'single'\n- \"double\"\n- |\n  block\n")
    assert isinstance(tree, Sequence)
    assert [scalar.quoted for scalar in tree if isinstance(scalar, Scalar)] == [False, True, True, True]


def test_an_empty_value_is_an_empty_plain_text() -> None:
    tree = read("a:\nb: 1\n")
    assert isinstance(tree, Mapping)
    assert tree == {"a": "", "b": "1"}


def test_lines_end_in_any_fashion() -> None:
    assert read("a: 1\r\nb: 2\r\n") == {"a": "1", "b": "2"}


@pytest.mark.parametrize(("loc", "place"), [
    ((), (1, 1)),
    (("rules",), (2, 3)),
    (("rules", 0), (2, 5)),
    (("rules", 0, "id"), (2, 9)),
    (("rules", 0, "when", "water", "at_least"), (3, 30)),
    (("rules", 0, "then", 0, "must", "thickener", 1), (6, 32)),
    (("rules", 0, "source"), (2, 5)),                                # missing: its parent
    (("rules", 0, "then", 5, "must"), (5, 7)),                       # nothing there: the nearest ancestor
    (("rules", 0, "when", "Condition", "water", "at_least"), (3, 30)),  # the name of an alternative is passed over
    (("rules", 0, "then", 0, "must", "[key]"), (5, 9)),
])
def test_locates_a_value(loc: tuple[str | int, ...], place: tuple[int, int]) -> None:
    assert locate(read(RULES), loc) == Mark("it.yaml", *place)


def test_locates_a_key() -> None:
    assert locate(read(RULES), ("rules", 0, "then", 1, "caution"), key=True) == Mark("it.yaml", 7, 9)
    assert locate(read(RULES), ("rules", 0), key=True) == Mark("it.yaml", 2, 5)


@pytest.mark.parametrize(("loc", "names"), [
    (("rules", 0, "then", 0, "must"), ("rule 'water'", "then", "must")),
    (("rules", 0, "RuleModel", "title"), ("rule 'water'",)),
    ((), ()),
])
def test_a_trail_names_members_by_id(loc: tuple[str | int, ...], names: tuple[str, ...]) -> None:
    assert trail(read(RULES), loc) == names


@pytest.mark.parametrize(("plural", "singular"), [("properties", "property"), ("facts", "fact"), ("shelf", "shelf")])
def test_a_trail_speaks_of_one_member(plural: str, singular: str) -> None:
    assert trail(read(f"{plural}:\n  - id: x\n"), (plural, 0)) == (f"{singular} 'x'",)


def test_a_trail_begins_with_the_member_of_an_outermost_list() -> None:
    assert trail(read("- id: x\n  a: 1\n"), (0, "a")) == ("'x'", "a")


def test_what_follows_a_fault_is_still_checked() -> None:
    assert len(faults("a: &x 1\nb: !t 2\na: 3\n<<: 4\n")) == 4


@pytest.mark.parametrize(("raw", "line"), [
    (b"a: 1\nb: gr\xfcn\n",
     "x.yaml:2:6: The byte 0xfc is not UTF-8. Save the file as UTF-8 without a byte order mark."),
    ("ä: 1\n".encode("utf-16"),
     "x.yaml:1:1: The file is written in UTF-16. Save the file as UTF-8 without a byte order mark."),
    (b"\xef\xbb\xbfa: 1\n",
     "x.yaml:1:1: The file begins with a byte order mark. Save the file as UTF-8 without a byte order mark."),
    (b"a: 1\nb: \0\n",
     "x.yaml:2:4: The file holds a NUL character, so it is not text. Check that it is the right file."),
    ("a: x\u2028y\n".encode(),
     ("x.yaml:1:5: The invisible character U+2028 stands here. "
      "Delete it; where it is meant, write it as an escape in double quotes.")),
    (b"", "x.yaml:1:1: The document is empty. Write its contents or delete the file."),
    (b"a: " + b"x" * 2_000_001, "x.yaml:1:1: The file is too big: more than 2 MB. Divide it into several files."),
])
def test_refuses_what_is_no_plain_text(tmp_path: Path, raw: bytes, line: str) -> None:
    (tmp_path / "x.yaml").write_bytes(raw)
    problems = Problems()
    read_document(tmp_path / "x.yaml", problems, "x.yaml")
    assert [str(problem) for problem in problems] == [line]


def test_a_few_stray_signs_are_told_one_by_one() -> None:
    places = [line.split(": ")[0] for line in faults("a: \x01\nb: \x7f\nc: [\n")]
    assert places == ["it.yaml:1:4", "it.yaml:2:4", "it.yaml:3:4"]


def test_no_list_of_faults_grows_without_end() -> None:
    assert len(faults("a: " + "\x01" * 100_000)) == 20


def test_refuses_to_nest_deeper_than_forty_levels() -> None:
    assert faults("[" * 40 + "]" * 40) == []
    assert faults("[" * 41 + "]" * 41) == [
        "it.yaml:1:41: The document is too big: nested deeper than 40 levels. Flatten it."
    ]


def test_refuses_more_than_200_000_nodes() -> None:
    assert faults("- a\n" * 199_999) == []  # and the list itself
    assert faults("- a\n" * 200_000) == [
        "it.yaml:200000:3: The document is too big: more than 200000 keys and values. Divide it into several files."
    ]


def test_a_large_text_is_refused_like_a_large_file() -> None:
    (line,) = faults("ä" * 1_000_001)
    assert line == "it.yaml:1:1: The file is too big: more than 2 MB. Divide it into several files."


def test_a_missing_file_suggests_its_neighbour(tmp_path: Path) -> None:
    (tmp_path / "facts.yaml").touch()
    problems = Problems()
    assert read_document(tmp_path / "fact.yaml", problems) is None
    (problem,) = problems
    assert problem.message == "There is no such file"
    assert problem.hint == "Check the name and the folder. Did you mean 'facts.yaml'?"


def test_a_missing_folder_is_a_missing_file(tmp_path: Path) -> None:
    problems = Problems()
    read_document(tmp_path / "nowhere" / "facts.yaml", problems, "facts.yaml")
    assert [str(p) for p in problems] == ["facts.yaml:1:1: There is no such file. Check the name and the folder."]


def test_a_folder_is_no_document(tmp_path: Path) -> None:
    problems = Problems()
    read_document(tmp_path, problems, "shelf")
    assert [str(problem) for problem in problems] == ["shelf:1:1: This is a folder, not a file. Name a file in it."]


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="the system has no named pipes")
def test_a_pipe_is_not_waited_for(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "pipe")
    problems = Problems()
    read_document(tmp_path / "pipe", problems, "pipe")
    assert [problem.message for problem in problems] == ["The file cannot be read: it is a device or a pipe"]


def test_a_forbidden_file_is_told(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    (tmp_path / "x.yaml").write_text("a: 1")

    def forbidden(*_: object) -> None:
        raise PermissionError

    monkeypatch.setattr(Path, "open", forbidden)
    problems = Problems()
    read_document(tmp_path / "x.yaml", problems, "x.yaml")
    assert [str(p) for p in problems] == ["x.yaml:1:1: The file may not be read. Ask for the permission to read it."]


@settings(deadline=None)
@given(st.text(st.sampled_from("ab:-?[]{}#&*!|>'\"%@` \n\t,\\\0\ufeff<1"), max_size=60))
def test_any_text_is_read_or_told_in_one_line_each(text: str) -> None:
    problems = Problems()
    tree = read_text(text, "it.yaml", problems)
    assert tree is not None or len(problems) > 0
    for problem in problems:
        assert "\n" not in str(problem)
        assert problem.line >= 1
        assert problem.column >= 1
        assert not problem.message.startswith("YAML cannot read this")


def test_signs_that_only_look_odd_are_left_alone_where_a_text_holds_them() -> None:
    text = "a: \u201cHot\u201d bearings\nb: 10\u00a0000 h\nc: 'x:\u00a0y'\nd: [{e: 1, f: 2}]\ng: \"2\u00a0>= 1\"\n"
    assert read(text) == {
        "a": "\u201cHot\u201d bearings", "b": "10\u00a0000 h", "c": "x:\u00a0y", "d": [{"e": "1", "f": "2"}],
        "g": "2\u00a0>= 1",
    }  # fmt: skip


def test_a_number_parted_by_a_comma_is_read_on_as_it_was_meant() -> None:
    problems = Problems()
    tree = read_text("row: {factor: 0,8, lenient: 1.0}\n", "it.yaml", problems)
    assert tree == {"row": {"factor": "0.8", "lenient": "1.0"}}
    assert [str(each) for each in problems] == ["it.yaml:1:15: at row: '0,8' has a decimal comma. Write 0.8."]
