"""Numbered entries whose later lines stand under the first."""

import textwrap


def hanging(lead: str, text: str, width: int) -> str:
    r"""The text after its lead, broken at the width.

    >>> hanging(" 1  ", "grease or oil", 12)
    ' 1  grease or\n    oil'
    """
    lines = textwrap.wrap(text, max(10, width - len(lead))) or [""]
    return lead + ("\n" + " " * len(lead)).join(lines)
