"""Run the sheet, and say afterwards where the answers are."""

import sys
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING

from advisor.screens.app import Gudgeon
from advisor.screens.glyphs import glyphs_for

if TYPE_CHECKING:
    from advisor.interview import Session
    from advisor.knowledge import Knowledge


def run(load: "Callable[[], Knowledge]", file: Path | None, *, plain_glyphs: bool) -> int:
    """Run the sheet until it is left; the result is the exit code."""
    app = Gudgeon(load, file, glyphs_for(plain=plain_glyphs))
    try:
        app.run()
        code = app.return_code or 0
        if app.farewell:
            sys.stderr.write(app.farewell + "\n")
        if app.session is not None and not code:
            sys.stdout.write("\n".join(parting(app.session)) + "\n")
    finally:
        if app.session is not None:
            app.session.close()
    return code


def parting(session: "Session") -> list[str]:
    """What stays in the terminal: the outcome in a sentence, and how to go on."""
    from advisor.interview import outcome_text

    lines = [outcome_text(session.advice)]
    if session.trouble:
        lines.append(session.trouble)
    elif session.keeper is not None and session.keeper.holds:
        lines.append(f"Kept in {session.keeper.path}")
        lines.append(f"Go on with: gudgeon interview '{session.keeper.path}'")
    return lines
