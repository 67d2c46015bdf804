"""The palette: every action of the sheet by name."""

from functools import partial

from textual.binding import Binding
from textual.command import DiscoveryHit, Hit, Hits, Provider
from textual.content import Content

_MORE = {
    "screen.report('markdown')": "Write the report as Markdown",
    "screen.report('html')": "Write the report as HTML",
    "app.change_theme('night')": "Theme: night",
    "app.change_theme('paper')": "Theme: paper",
    "app.quit": "Quit; the answers are kept",
}


class Actions(Provider):
    """The live keys of the screen, and what has no key of its own."""

    def _entries(self) -> list[tuple[str, str]]:
        keys: list[Binding] = [active.binding for active in self.screen.active_bindings.values() if active.enabled]
        own = {
            f"screen.{each.action}": f"{each.description}  {self.app.get_key_display(each)}"
            for each in keys
            if each.id in _OWN
        }
        more = (
            _MORE
            if "screen.view('docket')" in own
            else {name: text for name, text in _MORE.items() if name.startswith("app.")}
        )
        return [*own.items(), *more.items()]

    async def discover(self) -> Hits:
        """All of them."""
        for action, text in self._entries():
            yield DiscoveryHit(Content(text), partial(self.app.run_action, action, self.screen), text)

    async def search(self, query: str) -> Hits:
        """Those that match."""
        matcher = self.matcher(query)
        for action, text in self._entries():
            if (score := matcher.match(text)) > 0:
                yield Hit(score, Content(text), partial(self.app.run_action, action, self.screen), text)


_OWN = {"back", "later", "docket", "why", "chart", "map", "variant", "stop_here", "undo", "save_as", "dont_know"}
