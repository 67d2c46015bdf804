"""The application around the sheet: themes, first screen, orderly end."""

from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, ClassVar

from textual.app import App
from textual.command import Provider

from advisor.mishaps import INTERNAL, write_log
from advisor.screens.ascii_driver import ascii_driver
from advisor.screens.ends import end_on_signals
from advisor.screens.glyphs import Glyphs
from advisor.screens.opening import Opening
from advisor.screens.palette import Actions
from advisor.screens.start import Start
from advisor.screens.themes import NIGHT, PAPER

if TYPE_CHECKING:
    from advisor.interview import Session
    from advisor.knowledge import Knowledge


class Gudgeon(App[None]):
    """Shows the first screen at once; everything heavy comes after it."""

    CSS_PATH = "sheet.tcss"
    TITLE = "gudgeon"
    COMMANDS: ClassVar[set[type[Provider] | Callable[[], type[Provider]]]] = {Actions}

    def __init__(self, load: "Callable[[], Knowledge]", file: Path | None, glyphs: Glyphs) -> None:
        super().__init__()
        if glyphs.plain:
            self.driver_class = ascii_driver(self.driver_class)
        self.glyphs = glyphs
        self.opening = Opening(self, load, file)
        self.session: Session | None = None
        self.farewell = ""
        self.HORIZONTAL_BREAKPOINTS = [(0, "-tiny"), (60, "-one"), (100, "-two")]
        self.VERTICAL_BREAKPOINTS = [(0, "-flat"), (18, "-short"), (34, "-tall")]
        self.register_theme(NIGHT)
        self.register_theme(PAPER)
        self.theme = "night"

    def get_theme_variable_defaults(self) -> dict[str, str]:
        """The variables of our own, known before a theme is."""
        return dict(NIGHT.variables)

    def on_mount(self) -> None:
        """Paint the first screen, then load."""
        end_on_signals(self)
        self.push_screen(Start(self.glyphs, self.opening.file.name if self.opening.file else ""))
        self.call_after_refresh(self.run_worker, self.opening.load, thread=True)

    def on_start_named(self, event: Start.Named) -> None:
        """A new point."""
        self.opening.begin(event.title)

    def on_start_resumed(self, event: Start.Resumed) -> None:
        """Go on with a kept interview."""
        self.opening.resume(event.number)

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
            f"Something went wrong inside gudgeon. The details are in {write_log()}; send it with your case. "
            "Your answers are kept."
        )
        self._return_code = INTERNAL
        self._close_messages_no_wait()
