"""Type a text by its declared kind, refusing what YAML readers or people read in several ways."""

import math
import re

_NUMBER = re.compile(r"[-+]?(?:0|[1-9][0-9]*)(?:\.[0-9]+)?(?:[eE][-+]?[0-9]+)?")
_YES = {"yes": True, "true": True, "no": False, "false": False}
_YES_OR_NO_ELSEWHERE = {"yes", "no", "on", "off", "true", "false", "y", "n"}
_MISREAD = tuple((re.compile(pattern, re.IGNORECASE), message) for pattern, message in (
    (r"\s*", "A number is missing here. Write it in digits, such as 12.5."),
    (r"[-+]?\.?(?:nan|inf|infinity)", "'{seen}' is not a number to work with. Write a finite one, such as 12.5."),
    (r"[-+]?[0-9]+,[0-9]{3}", "'{seen}' can be read in two ways. Write {joined} or {dotted}: the dot marks decimals."),
    (r"[-+]?[0-9]+,[0-9]+", "'{seen}' has a decimal comma. Write {dotted}."),
    (r"[0-9]+(?::[0-9]+)+(?:\.[0-9]+)?",
     "'{seen}' looks like a time of day or a ratio. Write one number, such as 12.5."),
    (r"[0-9]{4}-[0-9]{1,2}-[0-9]{1,2}.*|[0-9]{1,2}\.[0-9]{1,2}\.[0-9]{2,4}",
     "'{seen}' looks like a date. Write a number, such as 12.5."),
    (r"[-+]?0[xob][0-9a-f_]+", "'{seen}' is not a decimal number. Write it in decimal digits."),
    (r"[-+]?0+[0-9]+(?:\.[0-9]+)?",
     "'{seen}' has leading noughts, which some programs read as octal. Write {trimmed}."),
    (r"[-+]?[0-9]+(?:[_' ][0-9]+)+(?:\.[0-9]+)?", "'{seen}' has its digits in groups. Write {closed}."),
    (r"[-+]?\.[0-9]+", "'{seen}' lacks the nought before the dot. Write {padded}."),
    (r"[-+]?[0-9]+\.", "'{seen}' ends in a dot. Write {whole}."),
    (r"[\u2012\u2013\u2212].*", "'{seen}' begins with a typographic minus. Write the plain one, -."),
    (r"[<>=\u2264\u2265].*",
     "'{seen}' is a limit, not a number. Write the number alone, and in a rule {{at_least: 12.5}} or the like."),
    (r"[\u201c\u201d\u201e\u201a\u2018\u2019].*", "'{seen}' begins with a curly quote. Write the number alone."),
    (r"yes|no|on|off|true|false|y|n", "'{seen}' is a yes or no, where a number is needed. Write one, such as 12.5."),
    (r"[-+]?[0-9.]+\s*[^\s0-9.,:].*", "'{seen}' is more than a number. Write the number alone: its unit is declared."),
))


def as_number(scalar: str) -> float:
    """The number that a text in a file states: digits with a dot for decimals, perhaps a power of ten.

    Raises:
        ValueError: the text is no such number; the message says what was seen and how to mend it.
    """
    if not _NUMBER.fullmatch(scalar):
        raise ValueError(_why_no_number(scalar))
    number = float(scalar)
    if math.isinf(number):
        raise ValueError(f"'{_short(scalar)}' is too large a number. Write a smaller one.")
    return number


def as_yes_no(scalar: str) -> bool:
    """Whether a text says yes.

    Raises:
        ValueError: the text is neither yes nor no (true and false are taken too).
    """
    if scalar in _YES:
        return _YES[scalar]
    if scalar.casefold() in _YES:
        raise ValueError(f"'{scalar}' is not written in small letters. Write {scalar.casefold()}.")
    if scalar.casefold() in _YES_OR_NO_ELSEWHERE:
        meant = "yes" if scalar.casefold() in {"on", "y"} else "no"
        raise ValueError(f"'{scalar}' is neither yes nor no. Did you mean {meant}?")
    seen = f"'{_short(scalar)}' is neither yes nor no." if scalar.strip() else "A yes or no is missing here."
    raise ValueError(f"{seen} Write yes or no.")


def _why_no_number(scalar: str) -> str:
    """What the text looks like instead, and the mend."""
    for pattern, message in _MISREAD:
        if pattern.fullmatch(scalar):
            return message.format(
                seen=_short(scalar),
                joined=scalar.replace(",", ""),
                dotted=scalar.replace(",", "."),
                trimmed=re.sub(r"^([-+]?)0+(?=[0-9])", r"\1", scalar),
                closed=re.sub(r"[_' ]", "", scalar),
                padded=scalar.replace(".", "0."),
                whole=scalar[:-1],
            )
    return f"'{_short(scalar)}' is not a number. Write it in digits with a dot for decimals, such as 12.5."


def _short(scalar: str) -> str:
    """The text on one line, cut where it is long."""
    line = " ".join(scalar.split())
    return line if len(line) <= 40 else f"{line[:37]}..."
