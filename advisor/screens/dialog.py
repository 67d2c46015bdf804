"""A few named fields to fill in."""

from typing import TYPE_CHECKING, ClassVar

from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.content import Content
from textual.screen import ModalScreen
from textual.widgets import Input, Static

if TYPE_CHECKING:
    from advisor.screens.glyphs import Glyphs


class Dialog(ModalScreen[dict[str, str] | None]):
    """Enter goes on to the next field and, on the last one, accepts; Esc leaves everything as it is."""

    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape", "leave", "Leave it")]

    def __init__(self, heading: str, fields: dict[str, str], glyphs: "Glyphs") -> None:
        super().__init__()
        self.heading, self.fields, self.glyphs = heading, fields, glyphs

    def compose(self) -> ComposeResult:
        """Heading, fields, and how to leave."""
        with Vertical(id="dialog"):
            yield Static(Content.assemble((self.heading, "bold")), markup=False)
            for name, value in self.fields.items():
                yield Static(name, classes="field_name", markup=False)
                yield Input(self.glyphs.words(value), compact=True)
            yield Static("Enter accepts, Esc leaves", classes="field_name", markup=False)

    def on_input_submitted(self, event: Input.Submitted) -> None:
        """Go on to the next field, or accept."""
        event.stop()
        inputs = list(self.query(Input))
        place = inputs.index(event.input) + 1
        if place < len(inputs):
            inputs[place].focus()
        elif inputs[0].value.strip():
            self.dismiss({name: each.value.strip() for name, each in zip(self.fields, inputs, strict=True)})
        else:
            self.app.bell()

    def action_leave(self) -> None:
        """Close without doing anything."""
        self.dismiss(None)
