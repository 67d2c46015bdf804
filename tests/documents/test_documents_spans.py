"""One part of a document is changed or taken out, and every other sign of it stays."""

import pytest

from advisor.documents import Problems, Uneditable, read_text, removed, replaced

TEXT = """# top
a: {one: 1, two: [x, 'y y', z], three: 3}   # beside a
b:
  - first   # beside first
  # above second
  - second
  - {k: v}
c:
  deep: value  # beside deep
d: |
  two
  lines
"""


def plain(text: str) -> object:
    problems = Problems()
    tree = read_text(text, "made", problems)
    assert not len(problems), list(problems)
    return tree


@pytest.mark.parametrize(
    ("loc", "new", "old"),
    [(("a", "one"), "9", "1,"), (("a", "two"), "[w]", "[x, 'y y', z]"), (("a", "two", 1), "q", "'y y'"),
     (("b", 0), "other", "first"), (("c", "deep"), "{x: y}", "value"), (("b", 2, "k"), "w", "v}")],
)  # fmt: skip
def test_one_value_is_written_otherwise(loc: tuple[str | int, ...], new: str, old: str) -> None:
    changed = replaced(TEXT, loc, new)
    assert changed == TEXT.replace(old, new + ("," if old == "1," else "}" if old == "v}" else ""), 1)


@pytest.mark.parametrize(
    ("loc", "gone", "left"),
    [
        (("a", "one"), "one: 1, ", ""),
        (("a", "three"), ", three: 3", ""),
        (("a", "two", 0), "x, ", ""),
        (("a", "two", 2), ", z", ""),
        (("b", 1), "  - second\n", ""),
        (("b", 0), "  - first   # beside first\n", ""),
        (("b", 2), "  - {k: v}\n", ""),
    ],
)
def test_one_entry_is_taken_out(loc: tuple[str | int, ...], gone: str, left: str) -> None:
    assert removed(TEXT, loc) == TEXT.replace(gone, left, 1)
    plain(removed(TEXT, loc))


def test_what_is_left_empty_goes_too() -> None:
    assert removed(TEXT, ("c", "deep")) == TEXT.replace("c:\n  deep: value  # beside deep\n", "")


def test_what_shares_its_line_is_left_to_a_person() -> None:
    with pytest.raises(Uneditable):
        removed("- a: 1\n  b: 2\n- c\n", (0, "a"))
