"""A canvas of braille dots, two across and four down in each cell; ASCII where there is no braille."""

from collections.abc import Iterable
from itertools import groupby

from textual.content import Content

_DOTS = ((0x01, 0x08), (0x02, 0x10), (0x04, 0x20), (0x40, 0x80))
GRID, LINE, STRONG = 0, 1, 2
_STYLES = ("$rule", "$quiet", "$foreground")


class Canvas:
    """Dots of crossing lines merge in a cell; texts stand over dots; the strongest layer in a cell gives its style."""

    def __init__(self, width: int, height: int, *, plain: bool = False) -> None:
        self.width, self.height, self.plain = width, height, plain
        self._dots: dict[tuple[int, int], int] = {}
        self._layer: dict[tuple[int, int], int] = {}
        self._signs: dict[tuple[int, int], str] = {}

    def dot(self, x: float, y: float, layer: int) -> None:
        """A dot at a place counted in cells from the top left."""
        column, row = int(x), int(y)
        if 0 <= column < self.width and 0 <= row < self.height:
            cell = (row, column)
            if layer >= self._layer.get(cell, GRID):
                self._layer[cell] = layer
            self._dots[cell] = self._dots.get(cell, 0) | _DOTS[int((y - row) * 4)][int((x - column) * 2)]

    def curve(self, points: Iterable[tuple[float, float]], layer: int, *, on: int = 1, off: int = 0) -> None:
        """Dots along a curve; `on` of them drawn, then `off` left out."""
        seen: tuple[int, int] | None = None
        count = 0
        for x, y in points:
            place = (int(x * 2), int(y * 4))
            if place == seen:
                continue
            seen = place
            if count % (on + off) < on:
                self.dot(x, y, layer)
            count += 1

    def text(self, x: int, y: int, text: str, layer: int) -> None:
        """A text over the dots."""
        for at, sign in enumerate(text, start=x):
            if 0 <= at < self.width and 0 <= y < self.height:
                self._signs[y, at] = sign
                self._layer[y, at] = layer

    def free(self, x: int, y: int, length: int) -> bool:
        """Whether no text stands there."""
        return all((y, at) not in self._signs for at in range(x, x + length))

    def content(self) -> Content:
        """The canvas as text, one styled run after another."""
        parts: list[str | tuple[str, str]] = []
        for row in range(self.height):
            cells = [(self._sign(row, column), self._layer.get((row, column), GRID)) for column in range(self.width)]
            for layer, run in groupby(cells, key=lambda cell: cell[1]):
                parts.append(("".join(sign for sign, _ in run), _STYLES[layer]))
            parts.append("\n" if row < self.height - 1 else "")
        return Content.assemble(*parts)

    def _sign(self, row: int, column: int) -> str:
        if (row, column) in self._signs:
            return self._signs[row, column]
        dots = self._dots.get((row, column), 0)
        if not dots or not self.plain:
            return chr(0x2800 + dots) if dots else " "
        return ".+*"[self._layer.get((row, column), GRID)]
