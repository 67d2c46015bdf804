"""The questions still to come, dotted."""

from textual import events
from textual.content import Content

from advisor.interview import Session
from advisor.screens.answered import titled
from advisor.screens.given import Opened
from advisor.screens.glyphs import Glyphs
from advisor.screens.row import Row


class Upcoming(Row):
    """The next open questions under the one in place."""

    def __init__(self, session: Session, glyphs: Glyphs) -> None:
        super().__init__(id="upcoming")
        self.session, self.glyphs = session, glyphs
        self.names: list[str] = []

    def show_next(self, most: int) -> None:
        """Show so many of them."""
        session = self.session
        here = session.question.name if session.question else ""
        later = list(session.answered)
        later = later[later.index(here) + 1 :] if here in later else []
        ahead = [*later, *(name for name in session.open if name != here)]
        self.names = ahead[:most]
        lines = [self._line(name) for name in self.names]
        if len(ahead) > most > 1:
            lines.append(Content.assemble((f"      and {len(ahead) - most} more", "$quiet")))
        self.display = bool(lines) and session.question is not None
        self.show(Content("\n").join(lines))

    def _line(self, name: str) -> Content:
        title = titled(self.glyphs.words(self.session.knowledge.title(name)), self.app.size.width)
        mark = "answered" if name in self.session.case.answers else self.glyphs.blank * 5
        return Content.assemble((f"      {title} {mark}", "$quiet"))

    def on_click(self, event: events.Click) -> None:
        """Open the clicked question out of turn."""
        if 0 <= event.y < len(self.names):
            self.post_message(Opened(self.names[event.y]))
