"""The docket: fixed rows that fill as answers settle them."""

from textual.app import ComposeResult
from textual.containers import Vertical
from textual.content import Content

from advisor.advice import State
from advisor.interview import (
    RowShown,
    Session,
    care_text,
    codes_text,
    quantities_text,
    referrals_told,
    rows_shown,
    variant_text,
)
from advisor.screens.glyphs import Glyphs
from advisor.screens.row import Row

_TITLE = 17
_STATES = {
    State.OPEN: "open",
    State.REFERRED: "referred to a person",
    State.CONFLICT: "in conflict",
    State.SETTLED: "settled",
}


class Docket(Vertical):
    """One widget per row, so that only rows that change are drawn again; rows never move."""

    def __init__(self, session: Session, glyphs: Glyphs) -> None:
        super().__init__(id="docket")
        self.session, self.glyphs = session, glyphs
        self.titles = [(row.id, row.title) for row in session.knowledge.docket if row.section == "docket"]

    def compose(self) -> ComposeResult:
        """The heading, the rows, codes and quantities, and what needs care."""
        yield Row(id="docket_heading", classes="line")
        for row, _ in self.titles:
            yield Row(id=f"row_{row}", classes="line")
        yield Row(id="codes", classes="line")
        yield Row(id="quantities", classes="line")
        yield Row(id="referral", classes="line")
        yield Row(id="care", classes="line")

    def show(self) -> None:
        """Show the advice that is looked at."""
        advice, changed = self.session.shown, self.session.changed_rows()
        shown = {each.id: each for each in rows_shown(advice)}
        settled = sum(not each.waits_for for each in shown.values())
        variant = variant_text(self.session.advice, self.session.variant)
        state = f"{settled} of {len(self.titles)} rows settled" if not variant else f"{variant}, F7 for the next"
        state = "withheld: see the referral" if advice.withheld else state
        state += "" if advice.withheld or advice.state is State.SETTLED else f", the case is {_STATES[advice.state]}"
        self.query_one("#docket_heading", Row).show(
            Content.assemble(("DOCKET", "bold $accent"), (self.glyphs.words(f"  {state}"), "$quiet"))
        )
        for row, title in self.titles:
            each = shown.get(row) or RowShown(row, title, "withheld", ())
            self.query_one(f"#row_{row}", Row).show(self._line(each, changed=row in changed))
        self.query_one("#codes", Row).show(self._plain("Code", codes_text(advice)))
        self.query_one("#quantities", Row).show(
            self._plain("Quantities", "" if advice.withheld else quantities_text(advice))
        )
        told = " ".join(f"{text} Goes to {to}." for to, text in referrals_told(advice))
        self.query_one("#referral", Row).display = bool(told)
        self.query_one("#referral", Row).show(self._plain("Referral", told))
        self.query_one("#care", Row).show(self._plain("Care", care_text(advice)))

    def _line(self, row: RowShown, *, changed: bool) -> Content:
        words = self.glyphs.words
        lead = (f"{self.glyphs.changed if changed else ' '} {words(row.title):<{_TITLE}} ", "")
        if row.waits_for:
            blank = row.text or self.glyphs.blank * 9
            return Content.assemble(
                lead, (f"{words(blank)}", "$quiet"), (f"  waits for {words(row.waits_for)}", "$quiet")
            )
        return Content.assemble(lead, (words(row.text), "bold"), (f"  {_rules(row)}", "$quiet"))

    def _plain(self, title: str, text: str) -> Content:
        return Content.assemble(f"  {title:<{_TITLE}} ", self.glyphs.words(text))


def _rules(row: RowShown) -> str:
    if not row.rules:
        return ""
    more = f" +{len(row.rules) - 1}" if len(row.rules) > 1 else ""
    return f"{row.rules[0]}{more}"
