"""The end of an interview: what came out, what to mind, and what to do next."""

from collections.abc import Iterator
from typing import TYPE_CHECKING

from textual.app import ComposeResult
from textual.containers import Vertical
from textual.content import Content
from textual.widgets import OptionList
from textual.widgets.option_list import Option

from advisor.interview import Session, cautions_told, codes_text, outcome_text, quantities_text, referrals_told
from advisor.interview.typed import list_number
from advisor.screens.given import Chosen
from advisor.screens.row import Row

if TYPE_CHECKING:
    from advisor.screens.glyphs import Glyphs

NEXT = {
    "scenario": "save the case as a scenario  Ctrl+S",
    "markdown": "write the report as Markdown",
    "html": "write the report as HTML",
    "map": "change an answer  F5",
    "go_on": "go on with the questions left",
    "quit": "leave; the answers are kept",
}


class Ending(Vertical):
    """The outcome in a sentence, referrals and cautions in full, and the next steps to pick from."""

    def __init__(self, session: Session, glyphs: "Glyphs") -> None:
        super().__init__(classes="editor")
        self.session, self.glyphs = session, glyphs

    def compose(self) -> ComposeResult:
        """The outcome first, then what next, then what to mind."""
        yield Row(id="outcome")
        yield OptionList(markup=False)
        yield Row(id="minding")

    def load(self, *, stopped: bool) -> None:
        """Fill in the texts."""
        left = stopped and bool(self.session.open)
        entries = [(what, text) for what, text in NEXT.items() if what != "go_on" or left]
        options = self.query_one(OptionList)
        options.set_options(
            [Option(Content(f" {number}  {text}"), id=what) for number, (what, text) in enumerate(entries, start=1)]
        )
        options.highlighted = 0
        self.query_one("#outcome", Row).show(Content("\n").join(self._outcome()))
        self.query_one("#minding", Row).show(Content("\n").join(self._minding()))

    @property
    def keys_go_to(self) -> OptionList:
        """The widget that takes the keys."""
        return self.query_one(OptionList)

    def _outcome(self) -> Iterator[Content]:
        advice, words = self.session.advice, self.glyphs.words
        yield Content.assemble((words(outcome_text(advice)), "bold"))
        if not advice.withheld:
            yield Content.assemble(("Code: ", "$quiet"), words(codes_text(advice)))
            yield Content.assemble(("Quantities: ", "$quiet"), words(quantities_text(advice)))

    def _minding(self) -> Iterator[Content]:
        advice, words = self.session.advice, self.glyphs.words
        for to, text in referrals_told(advice):
            yield Content.assemble(("\nThis goes to ", "$quiet"), (words(to), "bold"), f"\n{words(text)}")
        for number, text in enumerate(cautions_told(advice)):
            yield Content.assemble(("\nMIND\n", "bold $accent") if not number else "", f"! {words(text)}")

    def on_key(self, event: object) -> None:
        """A digit picks."""
        sign = getattr(event, "character", None) or ""
        options = self.query_one(OptionList)
        if (number := list_number(sign, options.option_count)) is not None:
            options.highlighted = number - 1

    def on_option_list_option_selected(self, event: OptionList.OptionSelected) -> None:
        """Tell the sheet."""
        event.stop()
        self.post_message(Chosen(event.option.id or ""))
