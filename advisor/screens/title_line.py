"""The first line: which point, how far, and whether the answers are kept."""

from textual.app import ComposeResult
from textual.containers import Horizontal
from textual.content import Content

from advisor.explanation.words import harmless
from advisor.interview import Session
from advisor.screens.glyphs import Glyphs
from advisor.screens.row import Row

_LONGEST = 34


class TitleLine(Horizontal):
    """Title and count on the left, saving on the right."""

    def __init__(self, session: Session, glyphs: Glyphs) -> None:
        super().__init__(id="title_line")
        self.session, self.glyphs = session, glyphs

    def compose(self) -> ComposeResult:
        """Both ends of the line."""
        yield Row(id="title", classes="line")
        yield Row(id="saved", classes="line")

    def show(self) -> None:
        """Show the session."""
        session = self.session
        title = self.glyphs.words(harmless(session.case.title))
        title = title if len(title) <= _LONGEST else title[: _LONGEST - 3] + "..."
        count = f"   {len(session.answered)} answered, {len(session.open)} to come"
        self.query_one("#title", Row).show(Content.assemble((title, "bold"), count))
        self.query_one("#saved", Row).show(Content(self._saved()))

    def _saved(self) -> str:
        keeper = self.session.keeper
        if keeper is None or not keeper.holds:
            return "! only looking, not saved"
        return "! not saved" if self.session.trouble else "answers saved"
