"""Type a number with or without its unit; what it reads as is shown while typing."""

import re
from collections.abc import Callable
from typing import TYPE_CHECKING, ClassVar

from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.content import Content
from textual.widgets import Input

from advisor.quantities import units_for
from advisor.screens.field import Field
from advisor.screens.given import DontKnow, Given
from advisor.screens.row import Row

if TYPE_CHECKING:
    from advisor.conditions import Domain
    from advisor.screens.glyphs import Glyphs

Echo = Callable[[str], str]
"""What a text reads as; a fault begins with '!'."""
_BARE = re.compile(r"[-+−\d\s.,'/½¼¾eE]+")


class NumberField(Vertical):
    """A field, the units to choose from (or the words that stand for numbers), and the echo."""

    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("up", "cycle(-1)", show=False, priority=True),
        Binding("down", "cycle(1)", show=False, priority=True),
    ]

    def __init__(self, glyphs: "Glyphs", echo: Echo) -> None:
        super().__init__(classes="editor")
        self.glyphs, self.echo, self.unit = glyphs, echo, ""
        self.words: list[str] = []
        self.units: list[str] = []

    def compose(self) -> ComposeResult:
        """The field, the strip of units, the echo, and what a don't know does."""
        yield Field()
        yield Row(id="units")
        yield Row(id="echo")
        yield Row(id="unknown")

    def load(self, domain: "Domain", unknown: str, typed: str) -> None:
        """Ask for a number of this domain; what was typed before stands there."""
        self.words = [word.replace("_", " ") for word in domain.named]
        self.units = [unit for unit in units_for(domain.unit) if unit]
        self.unit = self.units[0] if self.units else ""
        field = self.query_one(Input)
        with field.prevent(Input.Changed):
            field.value = typed
        field.cursor_position = len(typed)
        self.query_one("#unknown", Row).show(Content(self.glyphs.words(f"?  {unknown}")))
        self._show()

    @property
    def keys_go_to(self) -> Input:
        """The widget that takes the keys."""
        return self.query_one(Input)

    @property
    def text(self) -> str:
        """What is typed, with the chosen unit where none is typed."""
        typed = self.query_one(Input).value.strip()
        return f"{typed} {self.unit}" if typed and self.unit and _BARE.fullmatch(typed) else typed

    def action_cycle(self, by: int) -> None:
        """Choose the next unit, or put the next word into the field."""
        if len(self.units) > 1:
            self.unit = self.units[(self.units.index(self.unit) + by) % len(self.units)]
        elif self.words:
            field = self.query_one(Input)
            place = self.words.index(field.value) + by if field.value in self.words else min(by, 0)
            field.value = self.words[place % len(self.words)]
            field.cursor_position = len(field.value)
        self._show()

    def on_input_changed(self, event: Input.Changed) -> None:
        """Echo what is typed."""
        event.stop()
        self._show()

    def _show(self) -> None:
        self.query_one("#units", Row).show(self._strip())
        self.query_one("#echo", Row).show(Content(self.glyphs.words(self._echo())))

    def _strip(self) -> Content:
        if len(self.units) > 1:
            each = [(f" {self.glyphs.words(unit)} ", "reverse" if unit == self.unit else "") for unit in self.units]
            return Content.assemble(("unit up/down ", "$quiet"), *each)
        if self.words:
            return Content.assemble(("or a word, up/down: ", "$quiet"), ", ".join(self.words))
        return Content(self.glyphs.words(f"in {self.unit}") if self.unit else "a plain number")

    def _echo(self) -> str:
        return self.echo(self.text) if self.text else ""

    def on_input_submitted(self, event: Input.Submitted) -> None:
        """Enter answers what can be read; else it only sounds."""
        event.stop()
        if not self.text or self._echo().startswith("!"):
            self.app.bell()
        else:
            self.post_message(Given(self.text))

    def on_click(self, event: object) -> None:
        """A click on the last line says that nobody knows."""
        if getattr(event, "widget", None) is self.query_one("#unknown"):
            self.post_message(DontKnow())
