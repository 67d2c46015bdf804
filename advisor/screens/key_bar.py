"""The last line: the keys that do something now, made from the live bindings; a click presses one."""

from textual import events
from textual.content import Content
from textual.screen import Screen

from advisor.screens.row import Row


class KeyBar(Row):
    """One line, drawn again only when the keys change."""

    def __init__(self) -> None:
        super().__init__(id="key_bar", classes="line")
        self.ends: list[tuple[int, str]] = []

    def on_mount(self) -> None:
        """Follow the bindings of the screen."""
        self.screen.bindings_updated_signal.subscribe(self, self._follow)
        self._follow(self.screen)

    def _follow(self, screen: Screen[object]) -> None:
        parts: list[str | tuple[str, str]] = []
        self.ends, width = [], 0
        for key, active in screen.active_bindings.items():
            binding = active.binding
            if not binding.show or not active.enabled or not binding.key_display:
                continue
            parts += [(binding.key_display, "bold $accent"), f" {binding.description} "]
            width += len(binding.key_display) + len(binding.description) + 2
            self.ends.append((width, key))
        self.show(Content.assemble(*parts))

    def on_click(self, event: events.Click) -> None:
        """Press the key that was clicked."""
        for end, key in self.ends:
            if event.x < end:
                self.app.simulate_key(key)
                return
