"""What is written reads back as the same tree of texts, and any YAML 1.1 reader sees texts as texts."""

import math
from typing import Any

import pytest
import yaml
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.documents import Problems, as_number, read_text, to_yaml

# What has misled readers or writers of YAML before.
AWKWARD = st.sampled_from([
    "", " ", "yes", "NO", "y", "null", "~", "00", "010", "0x1F", "1_000", "12:30", "1,5", "1e3", ".inf", "2024-01-31",
    "a: b", "a:", "#x", "a #b", "- a", "-", "?", "[a]", "{a: b}", "*a", "&a", "!a", "%a", "@a", "`a", "|", ">", ">5",
    "'", '"', "it's", "\\", "---", "...", "<<", "=", " lead", "trail ", "a\nb", "\n", "a\n", "a\n\n", "\na", "a\n b",
    " a\nb", "a \nb", "---\nx", "\t", "a\tb", "\r\n", "\u2028", "\u0085", "\ufeff", "\0", "\x7f", "😀", "a\u00a0b",
    "word " * 40 + "end", "word  " * 40, "x" * 300, "# " * 80 + "x",
])
TEXTS = st.one_of(AWKWARD, st.text(max_size=30), st.text(st.sampled_from("ab '\":#-[]{}\n,"), max_size=250))
KEYS = st.one_of(AWKWARD.filter(lambda text: 0 < len(text) < 50), st.text(min_size=1, max_size=15))
TREES = st.recursive(TEXTS, lambda inner: st.lists(inner, max_size=4) | st.dictionaries(KEYS, inner, max_size=4))


@settings(deadline=None)
@given(TREES)
def test_reads_back_as_the_same_texts(tree: Any) -> None:
    problems = Problems()
    assert read_text(to_yaml(tree), "it.yaml", problems) == tree
    assert list(problems) == []


@settings(deadline=None)
@given(TREES)
def test_another_reader_takes_texts_for_texts(tree: Any) -> None:
    assert yaml.safe_load(to_yaml(tree)) == tree


@settings(deadline=None)
@given(st.floats(allow_nan=False, allow_infinity=False) | st.integers(-(10**15), 10**15))
def test_numbers_read_back(number: float) -> None:
    tree = read_text(to_yaml([number]), "it.yaml", Problems())
    assert isinstance(tree, list)
    assert as_number(str(tree[0])) == number


def test_writes_blocks_in_the_order_given() -> None:
    data: dict[str, Any] = {
        "id": "fan_3",
        "format": 1,
        "speed": 1450.0,
        "sealed": False,
        "answers": {"bore": "60 mm", "medium": "mm²/s", "never": "no"},
        "steps": ["a", ["b"], {"id": "c", "note": "two\nlines\n"}],
        "none": [],
    }
    assert to_yaml(data) == """\
id: fan_3
format: 1
speed: 1450
sealed: no
answers:
  bore: '60 mm'
  medium: mm²/s
  never: 'no'
steps:
  - a
  - - b
  - id: c
    note: |
      two
      lines
'none': []
"""


def test_long_texts_are_folded_between_words() -> None:
    written = to_yaml({"because": "Sodium soap takes up water: it softens. " * 6 + "End"})
    assert written.startswith("because: >-\n  Sodium")
    assert max(len(line) for line in written.splitlines()) <= 102


def test_unicode_is_kept() -> None:
    assert to_yaml(["Öl 😀"]) == "- 'Öl 😀'\n"


@pytest.mark.parametrize("number", [math.nan, math.inf, -math.inf])
def test_refuses_numbers_that_are_not_finite(number: float) -> None:
    with pytest.raises(ValueError, match="no form in a document"):
        to_yaml(number)


def test_refuses_half_a_character() -> None:
    with pytest.raises(ValueError, match="U\\+D83D cannot be written as UTF-8"):
        to_yaml("\ud83d")


def test_refuses_a_key_too_long_to_read_back() -> None:
    with pytest.raises(ValueError, match="longer than 200"):
        to_yaml({"k" * 201: "x"})


@pytest.mark.parametrize("data", [None, {"a": {1, 2}}, {1: "a"}, b"x"])
def test_refuses_other_data(data: Any) -> None:
    with pytest.raises(TypeError):
        to_yaml(data)
