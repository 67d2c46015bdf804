"""Find one of many choices: type a part of its name."""

from collections.abc import Mapping
from typing import TYPE_CHECKING, ClassVar

from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.content import Content
from textual.widgets import Input, OptionList
from textual.widgets.option_list import Option

from advisor.interview.typed import holding, own_choices
from advisor.screens.field import Field
from advisor.screens.given import DontKnow, Given
from advisor.screens.hanging import hanging

if TYPE_CHECKING:
    from advisor.screens.glyphs import Glyphs

_UNKNOWN, _TYPED, _SHOWN = "?", "!", 60


class FindList(Vertical):
    """A field over a list: what is typed narrows the list, the arrows move in it, Enter answers."""

    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("up", "move(-1)", show=False, priority=True),
        Binding("down", "move(1)", show=False, priority=True),
    ]

    def __init__(self, glyphs: "Glyphs") -> None:
        super().__init__(classes="editor")
        self.glyphs, self.width = glyphs, 0
        self.choices: dict[str, str] = {}

    def compose(self) -> ComposeResult:
        """The field and the list."""
        yield Field()
        options = OptionList(markup=False)
        options.can_focus = False
        yield options

    def load(self, choices: Mapping[str, str], unknown: str, chosen: str, width: int) -> None:
        """Show these choices, those that are no products first; the one chosen before is highlighted."""
        self.choices, self.width = {**own_choices(choices), **choices, _UNKNOWN: unknown}, width
        field = self.query_one(Input)
        field.placeholder = f"type a part of the name; {len(choices)} entries"
        with field.prevent(Input.Changed):
            field.value = ""
        self._list("")
        names = list(self.choices)
        self.query_one(OptionList).highlighted = names.index(chosen) if chosen in names else 0

    def fit(self, width: int) -> None:
        """Break the entries at another width."""
        self.width = width
        self._list(self.query_one(Input).value)

    @property
    def keys_go_to(self) -> Input:
        """The widget that takes the keys."""
        return self.query_one(Input)

    def on_input_changed(self, event: Input.Changed) -> None:
        """Narrow the list to the entries that hold every word typed, in what is shown or in their own name."""
        event.stop()
        self._list(event.value)

    def _list(self, typed: str) -> None:
        words = typed.casefold().split()
        held = holding(self.choices, typed)
        begun = [name for name in held if words and self.choices[name].casefold().startswith(words[0])]
        found = list(dict.fromkeys((*begun, *held)))
        shown = found if len(found) <= _SHOWN else [*found[:_SHOWN], _UNKNOWN]
        options = self.query_one(OptionList)
        options.set_options([self._entry(name) for name in dict.fromkeys(shown)])
        if not found:
            options.add_option(
                Option(Content(self.glyphs.words(f"   none holds this; Enter takes it as typed: {typed}")), id=_TYPED)
            )
        options.highlighted = 0

    def _entry(self, name: str) -> Option:
        lead = " ? " if name == _UNKNOWN else "   "
        return Option(Content(self.glyphs.words(hanging(lead, self.choices[name], self.width))), id=name)

    def action_move(self, by: int) -> None:
        """Move the highlight."""
        options = self.query_one(OptionList)
        if options.option_count:
            options.highlighted = min(max((options.highlighted or 0) + by, 0), options.option_count - 1)

    def on_input_submitted(self, event: Input.Submitted) -> None:
        """Enter answers with the highlighted entry; where none is left, with what is typed."""
        event.stop()
        options = self.query_one(OptionList)
        self._answer(options.get_option_at_index(options.highlighted or 0).id or "")

    def on_option_list_option_selected(self, event: OptionList.OptionSelected) -> None:
        """A click answers."""
        event.stop()
        self._answer(event.option.id or "")

    def _answer(self, name: str) -> None:
        if name == _TYPED:
            self.post_message(Given(self.query_one(Input).value))
        else:
            self.post_message(DontKnow() if name == _UNKNOWN else Given(name))
