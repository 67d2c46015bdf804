"""Where YAML breaks below the line that was moved, the moved line is told."""

import pytest

from advisor.documents import Expected, Node, Problems, read_text

RULES = """\
format: 1
rules:
  - id: dust
    title: Dust
    when:
      dust: heavy
    then:
      - caution: keep_out
      - caution: purge
    because: so
  - id: water
    title: Water
    when:
      water: wash
    then:
      - caution: purge
        for: grease
    because: so
  - id: salt
    title: Salt
    when:
      salt: yes
    then:
      - caution: purge
    because: so
"""


STEPS = """\
format: 1
steps:
  form: {title: Form}
  load: {title: Load}
  renewal:
    title: Life
    for: How long it lives
    note: None
  closing: {title: Closing}
last: {title: Last}
"""


def told(text: str, expected: Expected = Expected()) -> list[tuple[int, str, str]]:  # noqa: B008 - it never changes
    problems = Problems()
    read_text(text, "it.yaml", problems, expected)
    return [(problem.line, problem.message, problem.hint) for problem in problems]


def with_line(text: str, number: int, line: str) -> str:
    lines = text.splitlines(keepends=True)
    lines[number - 1] = line + "\n"
    return "".join(lines)


@pytest.mark.parametrize(("text", "number", "line", "column"), [
    (RULES, 16, "       - caution: purge", 7),   # in by one: its second key no longer stands under the first
    (RULES, 16, "        - caution: purge", 7),  # in by two
    (STEPS, 4, "load: {title: Load}", 3),        # out by two, to where a section could begin
    (STEPS, 6, "  title: Life", 5),              # out by two, the first of three
    (STEPS, 3, "    form: {title: Form}", 3),    # in by two, the first of its mapping
    (STEPS, 1, "  format: 1", 1),                # in by two, the first of the document
])
def test_the_moved_line_is_told(text: str, number: int, line: str, column: int) -> None:
    ((place, message, hint),) = told(with_line(text, number, line))
    assert place == number
    assert message.startswith("The indentation of this line does not suit that of line ")
    assert hint.startswith(f"Begin it in column {column}, or mend line ")


@pytest.mark.parametrize(("number", "line"), [
    (4, "  title: Dust"),
    (5, "      when:"),
    (10, "   because: so"),
    (11, "- id: water"),
    (17, "          for: grease"),
])
def test_a_line_that_breaks_itself_is_told(number: int, line: str) -> None:
    ((place, _, _),) = told(with_line(RULES, number, line))
    assert place == number


def test_of_two_ways_the_one_that_suits_the_reader_is_told() -> None:
    text = "a:\n  b: 1\n  c: 2\nd: 3\n  e: 4\n"

    def faults_in(wanted: set[str]) -> Expected:
        def count(tree: Node) -> int:
            return len(wanted ^ set(tree))

        return Expected(count)

    assert told(text, faults_in({"a"}))[0][0] == 4
    assert told(text, faults_in({"a", "d", "e"}))[0][0] == 5


def test_a_key_written_twice_because_a_line_was_moved_is_told_there() -> None:
    text = "a:\n  x: 1\n  source: s\nb:\n  x: 1\nsource: s\nsource: t\n"

    def count(tree: Node) -> int:
        within = tree["b"] if isinstance(tree, dict) else ""
        return len({"x", "source"} ^ set(within))

    assert [line for line, _, _ in told(text, Expected(count))] == [6]
    assert told(text) == [(7, "The key 'source' is written twice; it first stands in line 6", "Keep one of the two")]


def test_entries_are_told_twice_only_where_the_reader_says_so() -> None:
    text = "a: [x, y, x]\nlimits: [1, 1]\nb:\n  - {c: 1}\n  - {c: 2}\n  - {c: 1}\n"
    assert told(text) == []
    lines = [line for line, _, _ in told(text, Expected(may_repeat=frozenset({"limits"})))]
    assert lines == [1, 6]
