"""Tick all that applies; none ticked is an answer too."""

from collections.abc import Collection, Mapping
from typing import TYPE_CHECKING, ClassVar

from textual import events
from textual.binding import Binding, BindingType
from textual.content import Content
from textual.widgets import OptionList
from textual.widgets.option_list import Option

from advisor.interview.typed import list_number, whole_number
from advisor.screens.given import DontKnow, Given
from advisor.screens.hanging import hanging

if TYPE_CHECKING:
    from advisor.screens.glyphs import Glyphs


class TickList(OptionList):
    """The choices with a box each. Space or a digit ticks, Enter accepts all ticks together.

    That none of them applies must be meant: Enter leads to that entry first, so that one key too many says nothing.
    """

    BINDINGS: ClassVar[list[BindingType]] = [Binding("space", "tick", "Tick", show=False)]

    def __init__(self, glyphs: "Glyphs") -> None:
        super().__init__(classes="editor", markup=False)
        self.glyphs, self.unknown, self.width, self.digits = glyphs, "", 0, ""
        self.ids: list[str] = []
        self.labels: list[str] = []
        self.ticked: set[str] = set()

    @property
    def keys_go_to(self) -> OptionList:
        """The widget that takes the keys."""
        return self

    def load(self, choices: Mapping[str, str], unknown: str, ticked: Collection[str], width: int) -> None:
        """Show these choices, with those ticked that were before."""
        self.ids, self.labels, self.unknown = list(choices), list(choices.values()), unknown
        self.ticked = {each for each in ticked if each in choices}
        self.width, self.digits = width, ""
        self.set_options(self._entries())
        self.highlighted = 0

    def fit(self, width: int) -> None:
        """Break the entries at another width; ticks and highlight stay."""
        here, self.width = self.highlighted, width
        self.set_options(self._entries())
        self.highlighted = here

    def _entries(self) -> list[Option]:
        wide = len(str(len(self.ids)))
        entries = [
            (f" {self._box(each)} {place:>{wide}}  ", label)
            for place, (each, label) in enumerate(zip(self.ids, self.labels, strict=True), start=1)
        ]
        none = "" if self.ticked else "0"
        entries += [(f"   {none:>{wide}}  ", self._accepts()), (f"   {'?':>{wide}}  ", self.unknown)]
        return [
            Option(Content(self.glyphs.words(hanging(*entry, self.width))), id=str(place))
            for place, entry in enumerate(entries)
        ]

    def _box(self, choice: str) -> str:
        return self.glyphs.ticked if choice in self.ticked else self.glyphs.unticked

    def _accepts(self) -> str:
        return (
            f"Enter: accept these {len(self.ticked)}"
            if len(self.ticked) > 1
            else f"Enter: {'accept this one' if self.ticked else 'none of these'}"
        )

    def on_key(self, event: events.Key) -> None:
        """A digit ticks the choice of that number; a second digit corrects it to a two-digit number."""
        sign = event.character or ""
        if whole_number(sign) is None:
            self.digits = ""
            return
        longer = self.digits + sign
        if self.digits and list_number(longer, len(self.ids)):
            self._turn(int(self.digits) - 1)
            self.digits = longer
        else:
            self.digits = sign if list_number(sign, len(self.ids)) else ""
        if self.digits:
            self._turn(int(self.digits) - 1)
        elif sign == "0" and not self.ticked:
            self.highlighted = len(self.ids)

    def action_tick(self) -> None:
        """Tick or untick the highlighted choice."""
        if self.highlighted is not None and self.highlighted < len(self.ids):
            self._turn(self.highlighted)

    def _turn(self, place: int) -> None:
        self.ticked ^= {self.ids[place]}
        for each, option in enumerate(self._entries()):
            if each in {place, len(self.ids)}:
                self.replace_option_prompt_at_index(each, option.prompt)
        self.highlighted = place

    async def _on_click(self, event: events.Click) -> None:
        """A click on a choice ticks it; on the last two entries it answers."""
        place = event.style.meta.get("option")
        if isinstance(place, int) and place < len(self.ids):
            event.prevent_default()
            event.stop()
            self._turn(place)

    def on_option_list_option_selected(self, event: OptionList.OptionSelected) -> None:
        """Enter accepts the ticks, unless it stands on the last entry; without ticks it leads to 'none of these'."""
        event.stop()
        if not self.ticked and event.option_index < len(self.ids):
            self.highlighted = len(self.ids)
            return
        unknown = event.option_index == len(self.ids) + 1
        self.post_message(DontKnow() if unknown else Given(", ".join(each for each in self.ids if each in self.ticked)))
