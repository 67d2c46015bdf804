"""What stands in a window that is too small for the sheet."""

from textual.widgets import Static


class TooSmall(Static):
    """One line; the styles show it below 60 columns or 18 rows."""

    def __init__(self) -> None:
        super().__init__(
            "Please make the window larger: 60 x 18 at least. Your answers are kept.", id="too_small", markup=False
        )
