"""The chart of oil thickness against temperature."""

from textual.app import ComposeResult
from textual.containers import Vertical
from textual.content import Content

from advisor.advice import Advice
from advisor.screens.glyphs import Glyphs
from advisor.screens.row import Row
from advisor.screens.walther import charted, drawn

_LEAST_WIDTH, _LEAST_HEIGHT, _TALLEST = 40, 8, 24


class Chart(Vertical):
    """Recommended oils, the viscosity needed, and the running temperature."""

    def __init__(self, glyphs: Glyphs) -> None:
        super().__init__(id="chart")
        self.glyphs = glyphs
        self.advice: Advice | None = None
        self._drawn: object = None

    def compose(self) -> ComposeResult:
        """A heading and the drawing."""
        yield Row(id="chart_heading", classes="line")
        yield Row(id="drawing")

    def show(self, advice: Advice) -> None:
        """Show this advice."""
        self.advice = advice
        self._draw()

    def on_resize(self) -> None:
        """Draw anew in the new size."""
        self._draw()

    def _draw(self) -> None:
        width, height = self.size.width, min(self.size.height - 1, _TALLEST)
        if self.advice is None or not width:
            return
        chart = charted(self.advice)
        if (chart, width, height) == self._drawn:
            return
        self._drawn = (chart, width, height)
        heading = self.query_one("#chart_heading", Row)
        drawing = self.query_one("#drawing", Row)
        if chart is None or width < _LEAST_WIDTH or height < _LEAST_HEIGHT:
            when = (
                "withheld: see the referral" if self.advice.withheld else "when speed, size and temperature are known"
            )
            heading.show(Content.assemble(("CHART", "bold $accent"), (f"  {when}", "$quiet")))
            drawing.show(Content(""))
            return
        words = self.glyphs.words("  mm²/s against °C, on the double-log scale of ASTM D341")
        heading.show(Content.assemble(("CHART", "bold $accent"), (words, "$quiet")))
        drawing.show(drawn(chart, width, height, self.glyphs))
