"""From the first screen to the sheet: load the knowledge in a thread, then begin, resume or open an interview."""

from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING

from advisor.mishaps import USAGE, Refusal
from advisor.screens.start import Start

if TYPE_CHECKING:
    from advisor.advice import Advisor
    from advisor.interview import Kept, Session
    from advisor.knowledge import Knowledge
    from advisor.screens.app import Gudgeon


class Opening:
    """Only loading happens in another thread: the rules engine belongs to the thread of the screen."""

    def __init__(self, app: "Gudgeon", load: "Callable[[], Knowledge]", file: Path | None) -> None:
        self.app, self.read, self.file = app, load, file
        self.advisor: Advisor | None = None
        self.kept: list[Kept] = []
        self.wanted: str | None = None

    def load(self) -> None:
        """Load the knowledge and what shows it; runs in a thread of its own."""
        try:
            from advisor.screens import sheet  # noqa: F401 - imported here so that the first text need not wait for it

            knowledge = self.read()
        except Refusal as fault:
            self.app.call_from_thread(self.app.leave, str(fault), USAGE)
        else:
            self.app.call_from_thread(self.loaded, knowledge)

    def loaded(self, knowledge: "Knowledge") -> None:
        """The knowledge is there: do what was asked for meanwhile."""
        from advisor.advice import Advisor
        from advisor.interview import kept_interviews

        self.advisor = Advisor(knowledge)
        if self.file is not None:
            self.open(self.file)
            return
        self.kept = kept_interviews()
        if isinstance(self.app.screen, Start):
            self.app.screen.ready(self.kept)
        if self.wanted is not None:
            self.begin(self.wanted)

    def begin(self, title: str) -> None:
        """A new point; it waits until the knowledge is there. Enter pressed again changes nothing."""
        from advisor.interview import new_interview

        if self.app.session is not None:
            return
        self.wanted = title
        if self.advisor is not None:
            self.show(new_interview(self.advisor, title))

    def resume(self, number: int) -> None:
        """Go on with a kept interview, unless one is open already."""
        if self.app.session is None:
            self.open(self.kept[number].path)

    def open(self, path: Path) -> None:
        """Open the interview in a file, or begin one there."""
        from advisor.interview import Damaged, new_interview, open_interview

        assert self.advisor is not None  # noqa: S101 - called once it is there
        try:
            session = (
                open_interview(self.advisor, path) if path.exists() else new_interview(self.advisor, path.stem, path)
            )
        except Damaged as fault:
            if self.file is not None:
                self.app.leave(str(fault), USAGE)
            elif isinstance(self.app.screen, Start):
                self.app.screen.say(str(fault))
        else:
            self.show(session)

    def show(self, session: "Session") -> None:
        """Put the sheet in place of the first screen."""
        from advisor.screens.sheet import Sheet

        if self.app.session is not None:
            self.app.session.close()
        self.app.session = session
        self.app.switch_screen(Sheet(session, self.app.glyphs))
