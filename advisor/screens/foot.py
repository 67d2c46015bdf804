"""The foot of the narrow sheet: what the last answer settled, and how many products fit."""

from textual.app import ComposeResult
from textual.containers import Vertical
from textual.content import Content

from advisor.interview import Session, count_text
from advisor.screens.glyphs import Glyphs
from advisor.screens.row import Row
from advisor.screens.shelf import bar


class Foot(Vertical):
    """Two lines that stand for docket and shelf while these are out of sight."""

    def __init__(self, session: Session, glyphs: Glyphs) -> None:
        super().__init__(id="foot")
        self.session, self.glyphs = session, glyphs

    def compose(self) -> ComposeResult:
        """What was settled, and the count."""
        yield Row(id="settled", classes="line")
        yield Row(id="count", classes="line")

    def show(self) -> None:
        """Show the session's advice."""
        advice, words = self.session.advice, self.glyphs.words
        now = self.session.settled_rows()
        settled = [line.title for line in advice.docket if not line.waits]
        rows = f"{len(settled)} of {len(advice.docket)} docket rows settled"
        text = f"{self.glyphs.changed} settled just now: {', '.join(now)}" if now else rows
        self.query_one("#settled", Row).show(
            Content.assemble(words("No product is named here." if advice.withheld else text))
        )
        count = "" if advice.withheld else f"{bar(advice, self.glyphs)}  {count_text(advice)}"
        self.query_one("#count", Row).show(Content.assemble(count, ("   F2 docket and shelf", "$quiet")))
