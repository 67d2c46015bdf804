"""Pick one of a few choices: by digit, by first letter, or with the arrows."""

from collections.abc import Mapping
from typing import TYPE_CHECKING

from textual import events
from textual.content import Content
from textual.widgets import OptionList
from textual.widgets.option_list import Option

from advisor.interview.typed import list_number, whole_number
from advisor.screens.given import DontKnow, Given
from advisor.screens.hanging import hanging

if TYPE_CHECKING:
    from advisor.screens.glyphs import Glyphs


class ChoiceList(OptionList):
    """The choices in order, numbered from one; the last entry says that nobody knows."""

    def __init__(self, glyphs: "Glyphs") -> None:
        super().__init__(classes="editor", markup=False)
        self.glyphs, self.width, self.digits = glyphs, 0, ""
        self.ids: list[str] = []
        self.labels: list[str] = []

    @property
    def keys_go_to(self) -> OptionList:
        """The widget that takes the keys."""
        return self

    def load(self, choices: Mapping[str, str], unknown: str, chosen: str, width: int) -> None:
        """Show these choices; the one chosen before is highlighted."""
        self.ids, self.labels = list(choices), [*choices.values(), unknown]
        self.width, self.digits = width, ""
        self.set_options(self._entries())
        self.highlighted = self.ids.index(chosen) if chosen in self.ids else 0

    def fit(self, width: int) -> None:
        """Break the entries at another width; the highlight stays."""
        here, self.width = self.highlighted, width
        self.set_options(self._entries())
        self.highlighted = here

    def _entries(self) -> list[Option]:
        numbers = [*(str(place) for place in range(1, len(self.ids) + 1)), "?"]
        wide = len(str(len(self.ids)))
        return [
            Option(Content(self.glyphs.words(hanging(f" {number:>{wide}}  ", label, self.width))), id=str(place))
            for place, (number, label) in enumerate(zip(numbers, self.labels, strict=True))
        ]

    def on_key(self, event: events.Key) -> None:
        """A digit goes to the choice of that number, a letter to the next one that begins with it."""
        sign = event.character or ""
        if whole_number(sign) is not None:
            self.digits = next((each for each in (self.digits + sign, sign) if list_number(each, len(self.ids))), "")
            if self.digits:
                self.highlighted = int(self.digits) - 1
        elif sign.isalpha():
            self._next_with(sign.casefold())
        else:
            self.digits = ""

    def _next_with(self, letter: str) -> None:
        here = -1 if self.highlighted is None else self.highlighted
        order = [*range(here + 1, len(self.ids)), *range(here + 1)]
        self.highlighted = next((place for place in order if self.labels[place].casefold().startswith(letter)), here)

    def on_option_list_option_selected(self, event: OptionList.OptionSelected) -> None:
        """Enter or a click answers."""
        event.stop()
        place = event.option_index
        self.post_message(DontKnow() if place == len(self.ids) else Given(self.ids[place]))
