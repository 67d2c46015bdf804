"""The answered questions, one line each; a click opens one again."""

from textual import events
from textual.content import Content

from advisor.interview import Session, answer_shown, shown_value
from advisor.knowledge import Declaration
from advisor.screens.given import Opened
from advisor.screens.glyphs import Glyphs
from advisor.screens.row import Row

_WIDE, _SHORT_TITLE, _LONG_TITLE = 100, 22, 34


def titled(title: str, window: int) -> str:
    """A title cut and filled up to the width that suits the window."""
    width = _LONG_TITLE if window < _WIDE else _SHORT_TITLE
    return f"{title if len(title) <= width else title[: width - 3] + '...':<{width}}"


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
            names = names[: names.index(here)]
        hidden = max(0, len(names) - most)
        self.lines = names[hidden:]
        lines = [self._line(number, name) for number, name in enumerate(self.lines, start=hidden + 1)]
        self.display = bool(lines)
        self.show(Content("\n").join(lines))

    def _line(self, number: int, name: str) -> Content:
        declaration = self.session.knowledge.facts[name]
        answer = self.glyphs.words(self._answer(declaration))
        title = titled(self.glyphs.words(declaration.title), self.app.size.width)
        return Content.assemble((f"{number:>4}  ", "$quiet"), f"{title} ", (answer, "bold"))

    def _answer(self, declaration: Declaration) -> str:
        """The answer, with what it filled in from a table."""
        session = self.session
        told = answer_shown(declaration, session.case.answers[declaration.name])
        filled = [
            (session.knowledge.facts[name], session.advice.facts[name].value)
            for name in session.fills(declaration.name)
        ]
        parts = [shown_value(each, value) for each, value in filled if value is not None]
        return f"{told}: {', '.join(parts)}" if parts else told

    def on_click(self, event: events.Click) -> None:
        """Open the question of the clicked line again."""
        if 0 <= event.y < len(self.lines):
            self.post_message(Opened(self.lines[event.y]))
