"""What the sheet has to say beside the interview: a sentence or two, gone with the next answer."""

from textual.content import Content

from advisor.screens.glyphs import Glyphs
from advisor.screens.row import Row


class Notice(Row):
    """Shown only while there is something to say."""

    def __init__(self, glyphs: Glyphs) -> None:
        super().__init__(id="notice")
        self.glyphs = glyphs
        self.display = False

    def say(self, *sentences: str) -> None:
        """Say these sentences instead of the last ones."""
        self.display = bool(sentences)
        self.show(Content(self.glyphs.words("\n".join(sentences))))
