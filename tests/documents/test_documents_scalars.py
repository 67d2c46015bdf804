"""A text is typed by its declared kind; what readers of YAML 1.1 take in several ways is refused with the mend.

What YAML 1.1 readers do is published in the YAML type repository (yaml.org/type: bool, int, float, timestamp).
"""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.documents import as_number, as_yes_no


@pytest.mark.parametrize(("text", "number"), [
    ("1", 1.0), ("-1.5", -1.5), ("1e3", 1000.0), ("1.5e-3", 0.0015), ("+2", 2.0), ("0", 0.0), ("-0.5", -0.5),
    ("0.125", 0.125), ("1.450", 1.45), ("1E+2", 100.0),
])
def test_reads_decimal_numbers(text: str, number: float) -> None:
    assert as_number(text) == number


@pytest.mark.parametrize(("text", "part"), [
    ("1,5", "has a decimal comma. Write 1.5."),
    ("1,450", "can be read in two ways. Write 1450 or 1.450"),
    (">= 0.15", "is a limit, not a number. Write the number alone, and in a rule {at_least: 12.5}"),
    ("≤5", "is a limit, not a number"),
    ("\u201c2\u201d", "begins with a curly quote. Write the number alone."),
    ("12:30", "looks like a time of day"),
    ("1:02:03", "looks like a time of day"),
    ("2024-01-31", "looks like a date"),
    ("31.01.2024", "looks like a date"),
    ("2024-01-31T10:00:00Z", "looks like a date"),
    ("0x1F", "is not a decimal number"),
    ("0o17", "is not a decimal number"),
    ("0b11", "is not a decimal number"),
    ("010", "has leading noughts, which some programs read as octal. Write 10."),
    ("-007", "Write -7."),
    ("00", "Write 0."),
    ("1_000", "has its digits in groups. Write 1000."),
    ("1 000", "has its digits in groups. Write 1000."),
    ("1'000", "has its digits in groups. Write 1000."),
    ("nan", "not a number to work with"),
    (".NaN", "not a number to work with"),
    ("inf", "not a number to work with"),
    ("-.inf", "not a number to work with"),
    ("1e400", "too large a number"),
    ("", "A number is missing here."),
    ("  ", "A number is missing here."),
    (".5", "Write 0.5."),
    ("-.5", "Write -0.5."),
    ("5.", "Write 5."),
    ("\u22125", "begins with a typographic minus"),
    ("yes", "is a yes or no"), ("no", "is a yes or no"), ("on", "is a yes or no"), ("off", "is a yes or no"),
    ("NO", "is a yes or no"),
    ("25 mm", "is more than a number"),
    ("5%", "is more than a number"),
    ("warm", "is not a number"),
    ("٣", "is not a number"),
    ("5\n", "5"),
])
def test_refuses_other_numbers_with_the_mend(text: str, part: str) -> None:
    with pytest.raises(ValueError, match=r"\w") as refusal:
        as_number(text)
    assert part in str(refusal.value)


@settings(deadline=None)
@given(st.floats(allow_nan=False, allow_infinity=False))
def test_reads_every_number_that_python_writes(number: float) -> None:
    assert as_number(repr(number)) == number


@settings(deadline=None)
@given(st.text(max_size=20))
def test_any_text_is_a_finite_number_or_a_refusal_in_one_line(text: str) -> None:
    try:
        outcome = repr(as_number(text))
    except ValueError as refusal:
        outcome = str(refusal)
    assert len(outcome.splitlines()) == 1
    assert outcome not in {"nan", "inf", "-inf"}


@pytest.mark.parametrize(("text", "truth"), [("yes", True), ("true", True), ("no", False), ("false", False)])
def test_reads_yes_and_no(text: str, truth: bool) -> None:
    assert as_yes_no(text) is truth


@pytest.mark.parametrize(("text", "part"), [
    ("YES", "is not written in small letters. Write yes."),
    ("No", "is not written in small letters. Write no."),
    ("on", "Did you mean yes?"),
    ("off", "Did you mean no?"),
    ("y", "Did you mean yes?"),
    ("n", "Did you mean no?"),
    ("1", "Write yes or no."),
    ("", "A yes or no is missing here. Write yes or no."),
    ("maybe", "'maybe' is neither yes nor no."),
])
def test_refuses_anything_but_yes_and_no(text: str, part: str) -> None:
    with pytest.raises(ValueError, match=r"\w") as refusal:
        as_yes_no(text)
    assert part in str(refusal.value)
