"""Type a few words."""

from textual.widgets import Input

from advisor.screens.given import Given


class TextField(Input):
    """A field whose text is the answer."""

    def __init__(self, typed: str = "") -> None:
        super().__init__(typed, compact=True, id="editor")

    def on_input_submitted(self, event: Input.Submitted) -> None:
        """Enter answers."""
        event.stop()
        self.post_message(Given(event.value))
