"""The application around the sheet: start, load in the background, sheet, orderly end."""

from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, ClassVar

from textual.app import App
from textual.command import Provider

from advisor.mishaps import INTERNAL, USAGE, Refusal, write_log
from advisor.screens.ends import end_on_signals
from advisor.screens.glyphs import Glyphs
from advisor.screens.palette import Actions
from advisor.screens.start import Start
from advisor.screens.themes import NIGHT, PAPER

if TYPE_CHECKING:
    from advisor.advice import Advisor
    from advisor.interview import Kept, Session
    from advisor.knowledge import Knowledge


class Gudgeon(App[None]):
    """The knowledge is loaded in a thread; the engine then lives in the thread of the screen alone."""

    CSS_PATH = "sheet.tcss"
    TITLE = "gudgeon"
    COMMANDS: ClassVar[set[type[Provider] | Callable[[], type[Provider]]]] = {Actions}
    HORIZONTAL_BREAKPOINTS = [(0, "-tiny"), (60, "-one"), (100, "-two")]
    VERTICAL_BREAKPOINTS = [(0, "-flat"), (18, "-short"), (34, "-tall")]

    def __init__(self, load: "Callable[[], Knowledge]", file: Path | None, glyphs: Glyphs) -> None:
        super().__init__()
        self.load, self.file, self.glyphs = load, file, glyphs
        self.session: Session | None = None
        self.advisor: Advisor | None = None
        self.kept: list[Kept] = []
        self.wanted: str | None = None
        self.farewell = ""
        self.register_theme(NIGHT)
        self.register_theme(PAPER)
        self.theme = "night"

    def get_theme_variable_defaults(self) -> dict[str, str]:
        """The variables of our own, known before a theme is."""
        return dict(NIGHT.variables)

    def on_mount(self) -> None:
        """Paint the first screen, then load."""
        end_on_signals(self)
        opening = f"Opening {self.glyphs.words(self.file.name)}" if self.file else ""
        self.push_screen(Start(self.glyphs, opening))
        self.call_after_refresh(self.run_worker, self._load, thread=True)

    def _load(self) -> None:
        try:
            from advisor.screens import sheet  # noqa: F401, PLC0415 - imported here so that the first text need not wait for it

            knowledge = self.load()
        except Refusal as fault:
            self.call_from_thread(self.leave, str(fault), USAGE)
        else:
            self.call_from_thread(self._loaded, knowledge)

    def _loaded(self, knowledge: "Knowledge") -> None:
        from advisor.advice import Advisor
        from advisor.interview import kept_interviews

        self.advisor = Advisor(knowledge)
        if self.file is not None:
            self._open(self.file)
            return
        self.kept = kept_interviews()
        if isinstance(self.screen, Start):
            self.screen.ready(self.kept)
        if self.wanted is not None:
            self._begin(self.wanted)

    def on_start_named(self, event: Start.Named) -> None:
        """A new point; it waits until the knowledge is there."""
        self.wanted = event.title
        if self.advisor is not None:
            self._begin(event.title)

    def on_start_resumed(self, event: Start.Resumed) -> None:
        """Go on with a kept interview."""
        self._open(self.kept[event.number].path)

    def _begin(self, title: str) -> None:
        from advisor.interview import new_interview

        assert self.advisor is not None  # noqa: S101 - asked by the callers
        self._show(new_interview(self.advisor, title))

    def _open(self, path: Path) -> None:
        from advisor.interview import Damaged, new_interview, open_interview

        assert self.advisor is not None  # noqa: S101 - asked by the callers
        try:
            self._show(open_interview(self.advisor, path) if path.exists() else new_interview(self.advisor, path.stem, path))
        except Damaged as fault:
            if self.file is not None:
                self.leave(str(fault), USAGE)
            elif isinstance(self.screen, Start):
                self.screen.say(str(fault))

    def _show(self, session: "Session") -> None:
        from advisor.screens.sheet import Sheet

        self.session = session
        self.switch_screen(Sheet(session, self.glyphs))

    def leave(self, farewell: str, code: int) -> None:
        """End with a sentence for the terminal that stays behind."""
        self.farewell = farewell
        self.exit(return_code=code)

    def action_change_theme(self, name: str = "") -> None:
        """Night or paper."""
        self.theme = name if name in {"night", "paper"} else "paper" if self.theme == "night" else "night"

    def _fatal_error(self) -> None:
        """Instead of a traceback with everybody's values: a log, and a sentence."""
        self.farewell = (
            f"Something went wrong inside gudgeon. The details are in {write_log()}; please send that file with your case. "
            "Your answers are kept.")
        self._return_code = INTERNAL
        self._close_messages_no_wait()
