"""The answered questions, one line each; a click opens one again."""

from textual import events
from textual.content import Content

from advisor.interview import Session, answer_shown
from advisor.screens.given import Opened
from advisor.screens.glyphs import Glyphs
from advisor.screens.row import Row

_TITLE = 22


class Answered(Row):
    """Number, title and answer; the one being changed is marked."""

    def __init__(self, session: Session, glyphs: Glyphs) -> None:
        super().__init__(id="answered")
        self.session, self.glyphs = session, glyphs
        self.lines: list[str] = []

    def show_last(self, most: int) -> None:
        """Show the last lines up to a question, so many at most."""
        names = list(self.session.answered)
        here = self.session.question.name if self.session.question else ""
        if here in names:
            names = names[:names.index(here)]
        hidden = max(0, len(names) - most)
        self.lines = names[hidden:]
        lines = [self._line(number, name) for number, name in enumerate(self.lines, start=hidden + 1)]
        self.display = bool(lines)
        self.show(Content("\n").join(lines))

    def _line(self, number: int, name: str) -> Content:
        declaration = self.session.knowledge.facts[name]
        answer = self.glyphs.words(answer_shown(declaration, self.session.case.answers[name]))
        title = self.glyphs.words(declaration.title)
        title = title if len(title) < _TITLE else title[:_TITLE - 3] + "..."
        return Content.assemble((f"{number:>4}  ", "$quiet"), f"{title:<{_TITLE}} ", (answer, "bold"))

    def on_click(self, event: events.Click) -> None:
        """Open the question of the clicked line again."""
        if 0 <= event.y < len(self.lines):
            self.post_message(Opened(self.lines[event.y]))
