"""The viscosity-temperature chart on Walther axes, where oils are straight lines, told apart by dashes."""

import math
from collections.abc import Iterator
from dataclasses import dataclass

from advisor.advice import Advice
from advisor.conditions import Bound, leaves
from advisor.explanation.seeing import recommended_oils
from advisor.explanation.weighing import oil_title
from advisor.explanation.words import LEVELS
from advisor.formulas import FORMULAS, OutOfRange
from advisor.quantities import show

WIDTH, HEIGHT = 720, 400
_LEFT, _RIGHT, _TOP, _BOTTOM = 64, 236, 24, 44
_GRADES = (2.0, 5.0, 10.0, 20.0, 50.0, 100.0, 200.0, 500.0, 1000.0, 2000.0, 5000.0, 20000.0, 100000.0)
_DASHES = ("", "8 4", "2 3", "10 3 2 3", "5 5", "1 4")
_MOST_OILS = 6
_LINE_HEIGHT = 14


@dataclass(frozen=True, slots=True)
class Line:
    """A line of the chart with its label."""

    x1: float
    y1: float
    x2: float
    y2: float
    dash: str
    label: str
    label_x: float
    label_y: float
    kind: str


@dataclass(frozen=True, slots=True)
class Tick:
    """A mark of an axis."""

    at: float
    label: str


@dataclass(frozen=True, slots=True)
class Chart:
    """Everything that the drawing needs, in its own coordinates."""

    width: int
    height: int
    left: int
    right: int
    top: int
    bottom: int
    title: str
    description: str
    lines: tuple[Line, ...]
    temperatures: tuple[Tick, ...]
    viscosities: tuple[Tick, ...]


@dataclass(frozen=True, slots=True)
class _Axes:
    cold: float
    hot: float
    thin: float
    thick: float

    def x(self, celsius: float) -> float:
        start, end = _kelvin_log(self.cold), _kelvin_log(self.hot)
        return round(_LEFT + (_kelvin_log(celsius) - start) / (end - start) * (WIDTH - _LEFT - _RIGHT), 1)

    def y(self, viscosity: float) -> float:
        low, high = _walther(self.thin), _walther(self.thick)
        place = (_walther(min(max(viscosity, self.thin), self.thick)) - low) / (high - low)
        return round(HEIGHT - _BOTTOM - place * (HEIGHT - _TOP - _BOTTOM), 1)


def _kelvin_log(celsius: float) -> float:
    return math.log10(celsius + 273.15)


def _walther(viscosity: float) -> float:
    return math.log10(math.log10(viscosity + 0.7))


def chart(advice: Advice) -> Chart | None:
    """The chart of the recommended oils; None where nothing is recommended or the point has no film to draw."""
    running, needed = _number(advice, "t_eff_c"), _number(advice, "reference_viscosity")
    oils = list(_oils(advice))[:_MOST_OILS]
    dashes = dict(zip(dict.fromkeys(oil[1:] for oil in oils), _DASHES, strict=False))
    if advice.withheld or running is None or not oils:
        return None
    axes = _axes(running, oils)
    lines = [_oil_line(axes, *oil, dashes[oil[1:]]) for oil in oils]
    lines += _needed_lines(axes, advice, needed) if needed is not None else []
    lines.append(_running_line(axes, running))
    return Chart(
        WIDTH,
        HEIGHT,
        _LEFT,
        WIDTH - _RIGHT,
        _TOP,
        HEIGHT - _BOTTOM,
        "Viscosity against temperature" + (f", for {advice.told_for}" if advice.told_for else ""),
        _describe(oils, running, advice, needed),
        tuple(_spread(lines)),
        tuple(_temperatures(axes)),
        tuple(Tick(axes.y(each), show(each, "")) for each in _GRADES if axes.thin <= each <= axes.thick),
    )


def _number(advice: Advice, name: str) -> float | None:
    fact = advice.facts.get(name)
    return fact.value if fact is not None and isinstance(fact.value, float) else None


def _oils(advice: Advice) -> Iterator[tuple[str, float, float]]:
    """The recommended oils with their viscosities at 40 and at 100 °C."""
    if advice.oils is None:
        return
    for place in recommended_oils(advice):
        values = advice.oils.catalogue.items[place].values
        at_40, at_100 = values.get("viscosity_40"), values.get("viscosity_100")
        if isinstance(at_40, float | int) and isinstance(at_100, float | int):
            yield oil_title(advice.oils, place), float(at_40), float(at_100)


def _at(at_40: float, at_100: float, celsius: float) -> float:
    try:
        return FORMULAS["viscosity_at"](at_40, at_100, celsius)
    except OutOfRange:
        return _GRADES[-1] if celsius < 40 else _GRADES[0]


def _axes(running: float, oils: list[tuple[str, float, float]]) -> _Axes:
    cold, hot = min(0.0, 20 * math.floor((running - 20) / 20)), max(120.0, 20.0 * math.ceil((running + 20) / 20))
    thickest = max(_at(at_40, at_100, max(cold, 10.0)) for _, at_40, at_100 in oils)
    thick = next((each for each in _GRADES if each >= thickest), _GRADES[-1])
    return _Axes(cold, hot, _GRADES[0], max(thick, 1000.0))


def _oil_line(axes: _Axes, label: str, at_40: float, at_100: float, dash: str) -> Line:
    """A straight line on these axes, from where it enters the frame to where it leaves it."""
    inside = [
        celsius
        for celsius in range(math.ceil(axes.cold), math.floor(axes.hot) + 1)
        if axes.thin <= _at(at_40, at_100, celsius) <= axes.thick
    ]
    start, end = float(inside[0]), float(inside[-1])
    y = axes.y(_at(at_40, at_100, end))
    return Line(
        axes.x(start), axes.y(_at(at_40, at_100, start)), axes.x(end), y, dash, label, axes.x(end) + 6, y + 4, "oil"
    )


def _needed_lines(axes: _Axes, advice: Advice, needed: float) -> Iterator[Line]:
    """What the demands on kappa ask at the running temperature, as level lines."""
    for label, kappa in _asked(advice):
        viscosity = kappa * needed
        if axes.thin <= viscosity <= axes.thick:
            y = axes.y(viscosity)
            said = f"{label}: {show(viscosity, 'mm²/s')}"
            yield Line(_LEFT, y, WIDTH - _RIGHT, y, "3 3", said, _LEFT + 6, y - 4, "needed")


def _asked(advice: Advice) -> Iterator[tuple[str, float]]:
    found: dict[float, int] = {}
    for demand in advice.specification.plain:
        for term in leaves(demand.test):
            if (
                demand.property == "kappa"
                and isinstance(term, Bound)
                and term.sign == ">="
                and isinstance(term.limit, float)
            ):
                found[term.limit] = min(demand.level, found.get(term.limit, demand.level))
    for kappa, level in sorted(found.items()):
        yield f"kappa {show(kappa, '')}, {LEVELS[level].partition(' (')[0]}", kappa


def _running_line(axes: _Axes, running: float) -> Line:
    x = axes.x(running)
    return Line(x, _TOP, x, HEIGHT - _BOTTOM, "1 3", f"runs at {show(running, '°C')}", x + 4, _TOP + 10, "running")


def _spread(lines: list[Line]) -> Iterator[Line]:
    """Labels at the right end moved apart, so that none covers another."""
    taken: list[float] = []
    for line in sorted(lines, key=lambda each: each.label_y):
        y = line.label_y
        if line.kind == "oil":
            while any(abs(y - other) < _LINE_HEIGHT for other in taken):
                y += 1
            taken.append(y)
        yield Line(line.x1, line.y1, line.x2, line.y2, line.dash, line.label, line.label_x, round(y, 1), line.kind)


def _temperatures(axes: _Axes) -> Iterator[Tick]:
    for celsius in range(int(axes.cold), int(axes.hot) + 1, 20):
        yield Tick(axes.x(celsius), str(celsius))


def _describe(oils: list[tuple[str, float, float]], running: float, advice: Advice, needed: float | None) -> str:
    """The chart in words, for those who cannot see it."""
    said = [f"{name} has {show(_at(at_40, at_100, running), 'mm²/s')}" for name, at_40, at_100 in oils]
    asked = (
        [f"{label} asks {show(kappa * needed, 'mm²/s')}" for label, kappa in _asked(advice)]
        if needed is not None
        else []
    )
    return f"At the running temperature of {show(running, '°C')}: {'; '.join([*said, *asked])}."
