"""The shelf: every product on one line, those that fit first."""

from textual.app import ComposeResult
from textual.containers import Vertical, VerticalScroll
from textual.content import Content

from advisor.advice import Advice
from advisor.interview import VERDICTS, count_text, product_reasons
from advisor.screens.glyphs import Glyphs
from advisor.screens.row import Row
from advisor.shelf import USABLE, Ranked, Verdict

_BAR = 10


class Shelf(Vertical):
    """The count, and the products in their order with verdict and reason."""

    def __init__(self, glyphs: Glyphs) -> None:
        super().__init__(id="shelf")
        self.glyphs = glyphs

    def compose(self) -> ComposeResult:
        """The heading stays while the products scroll."""
        yield Row(id="shelf_heading", classes="line")
        with VerticalScroll(id="products"):
            yield Row(id="product_lines")

    def show(self, advice: Advice) -> None:
        """Show this advice."""
        count = "withheld" if advice.withheld else count_text(advice)
        self.query_one("#shelf_heading", Row).show(
            Content.assemble(
                ("SHELF", "bold $accent"), f"  {count}  ", self.glyphs.words("") + bar(advice, self.glyphs)
            )
        )
        reasons = product_reasons(advice)
        lines = [self._line(each, reason) for each, reason in zip(advice.shelf, reasons, strict=True)]
        self.query_one("#product_lines", Row).show(Content("\n").join(lines))

    def _line(self, ranked: Ranked, reason: str) -> Content:
        glyph, style = _sign(ranked.verdict, self.glyphs)
        return Content.assemble(
            f"{glyph} ",
            (f"{ranked.item:<8}", style),
            f"{VERDICTS[ranked.verdict]:<12}",
            (self.glyphs.words(reason), "$quiet"),
        )


def _sign(verdict: Verdict, glyphs: Glyphs) -> tuple[str, str]:
    if verdict in {Verdict.FITS, Verdict.SECOND_BEST}:
        return glyphs.fits, "bold"
    return (glyphs.out, "") if verdict is Verdict.FALLS_SHORT else (glyphs.unsure, "")


def bar(advice: Advice, glyphs: Glyphs) -> str:
    """The count as a bar of ten signs."""
    alive = sum(each.verdict in USABLE for each in advice.shelf)
    full = -(-alive * _BAR // len(advice.shelf)) if advice.shelf else 0
    return glyphs.full * full + glyphs.empty * (_BAR - full) if advice.shelf else ""
