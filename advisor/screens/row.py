"""One line of text that redraws only when it reads differently."""

from textual.content import Content
from textual.widgets import Static


class Row(Static):
    """A line, cut with a sign where it is too long; nothing in it is ever taken for markup."""

    def __init__(self, *, id: str | None = None, classes: str | None = None) -> None:  # noqa: A002 - the name that textual gives it
        super().__init__("", id=id, classes=classes, markup=False)
        self.shown: Content | None = None

    def show(self, content: Content) -> None:
        """Show this content, unless it stands there already."""
        if self.shown is None or not _same(self.shown, content):
            self.shown = content
            self.update(content)


def _same(one: Content, other: Content) -> bool:
    return one.plain == other.plain and one.spans == other.spans
