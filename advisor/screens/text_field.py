"""Type a few words."""

from textual.widgets import Input

from advisor.screens.given import Given


class TextField(Input):
    """A field whose text is the answer."""

    def __init__(self) -> None:
        super().__init__(compact=True, classes="editor")

    @property
    def keys_go_to(self) -> Input:
        """The widget that takes the keys."""
        return self

    def load(self, typed: str) -> None:
        """Show what was typed before."""
        self.value = typed

    def on_input_submitted(self, event: Input.Submitted) -> None:
        """Enter answers."""
        event.stop()
        self.post_message(Given(event.value))
