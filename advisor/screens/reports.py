"""Reports from the sheet: Markdown and HTML, written to a file that is not there yet."""

import re
from pathlib import Path

from advisor.advice import Advice
from advisor.documents import write_text_safely


def file_stem(title: str) -> str:
    """A file name from a title.

    >>> file_stem("Fan 3, drive end")
    'fan_3_drive_end'
    """
    return re.sub(r"[^a-z0-9]+", "_", title.casefold()).strip("_")[:50] or "point"


def write(advice: Advice, kind: str, path: Path) -> None:
    """Write the report.

    Raises:
        Unwritable: with the reason and the mend; a file that exists already is never replaced.
    """
    from advisor import explanation

    text = explanation.markdown(advice) if kind == "markdown" else explanation.html(advice)
    write_text_safely(path, text, exclusive=True)
