"""The viscosity chart: double-log axes after ASTM D341, on which every oil is a straight line."""

import math
from collections.abc import Iterator
from dataclasses import dataclass

from textual.content import Content

from advisor.advice import Advice
from advisor.formulas.viscosity import viscosity_at, walther_z
from advisor.screens.canvas import GRID, LINE, STRONG, Canvas
from advisor.screens.glyphs import Glyphs

_TEMPERATURE, _REFERENCE, _FLOOR = "t_eff_c", "reference_viscosity", "film_floor"
_TICKS = (2, 5, 10, 20, 50, 100, 200, 500, 1000, 2000, 5000)
_LEFT, _RIGHT, _MOST_OILS = 6, 9, 4
_ZERO_C = 273.15


@dataclass(frozen=True, slots=True)
class Oil:
    """An oil by its label and its viscosities at 40 and 100 °C in mm²/s."""

    label: str
    at_40: float
    at_100: float
    strong: bool = False


@dataclass(frozen=True, slots=True)
class Charted:
    """What the chart shows: oils, the running temperature, and the viscosity needed there."""

    oils: tuple[Oil, ...]
    temperature: float
    needed: float
    is_floor: bool


def charted(advice: Advice) -> Charted | None:
    """The chart's contents, or None while the film cannot be reckoned."""
    temperature, reference, floor = (_number(advice, name) for name in (_TEMPERATURE, _REFERENCE, _FLOOR))
    if temperature is None or reference is None or advice.withheld:
        return None
    needed = reference * (floor if floor is not None else 1.0)
    return Charted(tuple(_recommended(advice)) + tuple(_first_product(advice)), temperature, needed, floor is not None)


def _number(advice: Advice, name: str) -> float | None:
    fact = advice.facts.get(name)
    return fact.value if fact is not None and isinstance(fact.value, float) else None


def _recommended(advice: Advice) -> Iterator[Oil]:
    """One oil for each recommended grade, the thinnest first."""
    best = min(advice.oil_ranks.values(), default=None)
    catalogue = advice.oils.catalogue if advice.oils else None
    found: dict[float, Oil] = {}
    for code, steps in advice.oil_ranks.items():
        values = catalogue.items[catalogue.place[code]].values if catalogue else {}
        grade, at_40, at_100 = values.get("vg"), values.get("viscosity_40"), values.get("viscosity_100")
        if (
            steps == best
            and isinstance(grade, float)
            and isinstance(at_40, float | int)
            and isinstance(at_100, float | int)
        ):
            found.setdefault(grade, Oil(f"VG {grade:g}", float(at_40), float(at_100)))
    grades = sorted(found)
    step = max(1, math.ceil(len(grades) / _MOST_OILS))
    yield from (found[grade] for grade in grades[::step])


def _first_product(advice: Advice) -> Iterator[Oil]:
    first = next(iter(advice.shelf), None)
    if first is None or advice.judgement is None or first.verdict.value in {"falls_short", "unproven", "still_in"}:
        return
    columns = advice.judgement.columns
    seen = [
        columns[name].values[first.place] if name in columns else None for name in ("viscosity_40", "viscosity_100")
    ]
    if isinstance(seen[0], float | int) and isinstance(seen[1], float | int):
        yield Oil(first.item, seen[0], seen[1], strong=True)


class _Axes:
    """Places in cells for temperatures and viscosities."""

    def __init__(self, chart: Charted, width: int, height: int) -> None:
        self.width, self.height = width - _LEFT - _RIGHT, height - 1
        self.cold, self.hot = min(0.0, chart.temperature - 20), max(120.0, chart.temperature + 20)
        self.thin = max(1.5, min(5.0, chart.needed / 2))
        self.thick = max(1000.0, chart.needed * 3)

    def x(self, celsius: float) -> float:
        low, high = math.log10(self.cold + _ZERO_C), math.log10(self.hot + _ZERO_C)
        return _LEFT + (math.log10(celsius + _ZERO_C) - low) / (high - low) * (self.width - 1)

    def y(self, viscosity: float) -> float:
        low, high = (math.log10(math.log10(walther_z(each))) for each in (self.thin, self.thick))
        return (high - math.log10(math.log10(walther_z(viscosity)))) / (high - low) * (self.height - 1) + 0.5

    def temperatures(self) -> Iterator[float]:
        count = self.width * 4
        return (self.cold + (self.hot - self.cold) * each / count for each in range(count + 1))


def drawn(chart: Charted, width: int, height: int, glyphs: Glyphs) -> Content:
    """The chart as text of this size."""
    canvas, axes = Canvas(width, height, plain=glyphs.plain), _Axes(chart, width, height)
    _grid(canvas, axes)
    for oil in chart.oils:
        _oil(canvas, axes, oil)
    across = ((axes.x(each), axes.y(chart.needed)) for each in axes.temperatures())
    canvas.curve(across, STRONG, on=4, off=3)
    down = ((axes.x(chart.temperature), each / 8) for each in range(axes.height * 8))
    canvas.curve(down, STRONG, on=1, off=1)
    _labels(canvas, axes, chart, glyphs)
    return canvas.content()


def _grid(canvas: Canvas, axes: _Axes) -> None:
    for tick in _TICKS:
        if axes.thin <= tick <= axes.thick:
            row = int(axes.y(tick))
            label = f"{tick:>{_LEFT - 1}}"
            if canvas.free(0, row, _LEFT - 1):
                canvas.text(0, row, label, LINE)
                canvas.curve(((_LEFT + each / 2, axes.y(tick)) for each in range(axes.width * 2)), GRID, on=1, off=1)
    for celsius in range(-60, int(axes.hot) + 1, 20):
        if celsius >= axes.cold:
            place = int(axes.x(celsius))
            canvas.text(place - len(str(celsius)) // 2, axes.height, str(celsius), LINE)
            canvas.curve(((axes.x(celsius), each / 4) for each in range(axes.height * 4)), GRID, on=1, off=1)
    canvas.text(axes.width + _LEFT + 2, axes.height, "°C" if not canvas.plain else "degC", LINE)


def _oil(canvas: Canvas, axes: _Axes, oil: Oil) -> None:
    layer = STRONG if oil.strong else LINE
    end = axes.y(viscosity_at(oil.at_40, oil.at_100, axes.hot))
    curve = ((axes.x(each), axes.y(viscosity_at(oil.at_40, oil.at_100, each))) for each in axes.temperatures())
    canvas.curve((point for point in curve if 0 <= point[1] < axes.height), layer, on=1, off=0 if oil.strong else 1)
    place = axes.width + _LEFT + 1
    rows = sorted(range(axes.height), key=lambda row: abs(row - int(end)))
    row = next((each for each in rows if canvas.free(place, each, 1)), 0)
    canvas.text(place, row, oil.label[: _RIGHT - 1], layer)


def _labels(canvas: Canvas, axes: _Axes, chart: Charted, glyphs: Glyphs) -> None:
    needed = f"{'needed' if chart.is_floor else 'kappa 1 at'} {chart.needed:.3g}"
    row = min(max(int(axes.y(chart.needed)) + 1, 0), axes.height - 1)
    canvas.text(_LEFT + 1, row, needed, STRONG)
    place = int(axes.x(chart.temperature))
    canvas.text(place + 2, 0, glyphs.words(f"{chart.temperature:.4g} °C"), STRONG)
    for oil in chart.oils:
        height = axes.y(viscosity_at(oil.at_40, oil.at_100, chart.temperature))
        if oil.strong or len(chart.oils) == 1:
            canvas.text(place, int(height), glyphs.point, STRONG)
