"""The first screen: the name of the point, or a kept interview to go on with. It needs no knowledge."""

from collections.abc import Sequence
from typing import TYPE_CHECKING, ClassVar

from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.content import Content
from textual.message import Message
from textual.screen import Screen
from textual.widgets import Input, OptionList
from textual.widgets.option_list import Option

from advisor.screens.key_bar import KeyBar
from advisor.screens.row import Row
from advisor.screens.too_small import TooSmall

if TYPE_CHECKING:
    from advisor.interview import Kept
    from advisor.screens.glyphs import Glyphs

_SHOWN = 9


class Start(Screen[None]):
    """A field for a new point; below it the kept interviews."""

    class Named(Message):
        """A new point with this title."""

        def __init__(self, title: str) -> None:
            self.title = title
            super().__init__()

    class Resumed(Message):
        """A kept interview."""

        def __init__(self, number: int) -> None:
            self.number = number
            super().__init__()

    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("down", "into_list", "Kept interviews", show=False),
        Binding("ctrl+q", "app.quit", "Quit", key_display="^q"),
    ]

    def __init__(self, glyphs: "Glyphs", opening: str = "") -> None:
        super().__init__()
        self.glyphs, self.opening = glyphs, opening

    def compose(self) -> ComposeResult:
        """Heading, field, list."""
        with Vertical(id="start"):
            yield Row(id="welcome")
            yield Row(id="ask")
            yield Input(placeholder="such as: Fan 3, drive end", compact=True, id="name")
            yield Row(id="state")
            yield OptionList(id="kept", markup=False)
        yield KeyBar()
        yield TooSmall()

    def on_mount(self) -> None:
        """Show what can be shown before the knowledge is there."""
        self.query_one("#welcome", Row).show(
            Content.assemble(("gudgeon", "bold $accent"), "  a lubricant for a lubrication point, with the reasons")
        )
        ask = f"Opening {self.glyphs.words(self.opening)}" if self.opening else "What is the point called?"
        self.query_one("#ask", Row).show(Content.assemble((ask, "bold")))
        self.query_one("#state", Row).show(Content.assemble(("reading the knowledge ...", "$quiet")))
        self.query_one("#kept").display = False
        name = self.query_one("#name", Input)
        name.display = not self.opening
        name.focus()

    def ready(self, kept: Sequence["Kept"]) -> None:
        """The knowledge is there: offer the kept interviews."""
        words = self.glyphs.words
        hint = (
            "Enter starts. Down: go on with a kept interview"
            if kept
            else "Enter starts. Answers are kept after each one."
        )
        self.query_one("#state", Row).show(Content.assemble((hint, "$quiet")))
        options = self.query_one("#kept", OptionList)
        options.add_options(
            [
                Option(
                    Content.assemble(
                        f" {words(each.title[:40]):<41}", (f"{each.answered} answered, {each.touched}", "$quiet")
                    )
                )
                for each in kept[:_SHOWN]
            ]
        )
        options.display = bool(kept)

    def say(self, text: str) -> None:
        """Say why something could not be opened."""
        self.query_one("#state", Row).show(Content(self.glyphs.words(text)))

    def action_into_list(self) -> None:
        """From the field into the list."""
        kept = self.query_one("#kept", OptionList)
        if kept.display and not kept.has_focus:
            kept.highlighted = 0
            self.set_focus(kept)

    def on_input_submitted(self, event: Input.Submitted) -> None:
        """A new point."""
        self.post_message(Start.Named(event.value))

    def on_option_list_option_selected(self, event: OptionList.OptionSelected) -> None:
        """A kept one."""
        self.post_message(Start.Resumed(event.option_index))
