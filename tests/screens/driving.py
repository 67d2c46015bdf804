"""Drive the sheet without a terminal: keys in, lines out."""

import asyncio
from collections.abc import Awaitable, Callable
from pathlib import Path

from textual.pilot import Pilot

from advisor.interview import Session
from advisor.knowledge import Knowledge
from advisor.screens.app import Gudgeon
from advisor.screens.glyphs import Glyphs
from advisor.screens.sheet import Sheet

NARROW, WIDE = (80, 24), (120, 40)
_NAMES = {" ": "space", ",": "comma", ".": "full_stop", "-": "minus", "/": "slash", "?": "question_mark", "[": "left_square_bracket",
          "]": "right_square_bracket", "$": "dollar_sign", "°": "°"}

# The keys of an ordinary motor bearing, question by question, each ended by Enter.
MOTOR_BY_NAME = {
    "bearing_type": "1", "dangers": "", "site": "1", "supply": "4", "incumbent": "GR-301", "bore_mm": "65", "outside_mm": "140",
    "speed_rpm": "1480 rpm", "motion": "1", "running_temperature_c": "167 °F", "measured_where": "1", "excursions": "1",
    "start_temperature_c": "5", "load_ratio": "0.06", "shock": "1", "water_exposure": "2", "dust": "1", "seal": "", "width_mm": "33"}
MOTOR = tuple(MOTOR_BY_NAME.values())

Script = Callable[[Gudgeon, Pilot[None]], Awaitable[None]]


def drive(knowledge: Knowledge, size: tuple[int, int], script: Script, *, file: Path | None = None, glyphs: Glyphs | None = None) -> Gudgeon:
    """Run the sheet in this size until the script has ended."""
    app = Gudgeon(lambda: knowledge, file, glyphs or Glyphs())

    async def run() -> None:
        async with app.run_test(size=size) as pilot:
            await until(pilot, lambda: app.advisor is not None)
            await script(app, pilot)

    try:
        asyncio.run(run())
    finally:
        if app.session is not None:
            app.session.close()
    return app


async def until(pilot: Pilot[None], ready: Callable[[], bool]) -> None:
    """Wait for a condition."""
    for _ in range(500):
        if ready():
            return
        await pilot.pause()
    raise AssertionError("the sheet never came to what was waited for")


async def type_in(pilot: Pilot[None], text: str) -> None:
    """Type a text and press Enter."""
    await pilot.press(*(_NAMES.get(sign, sign) for sign in text), "enter")
    await pilot.pause()


async def begin(app: Gudgeon, pilot: Pilot[None], title: str = "Fan 3, drive end") -> Session:
    """Name a point and wait for its sheet."""
    await type_in(pilot, title)
    await until(pilot, lambda: isinstance(app.screen, Sheet))
    await pilot.pause()
    assert app.session is not None
    return app.session


def lines(app: Gudgeon) -> list[str]:
    """What the screen shows."""
    strips = app.screen._compositor.render_strips()
    return ["".join(segment.text for segment in strip).rstrip() for strip in strips]


def text(app: Gudgeon) -> str:
    """What the screen shows, as one text."""
    return "\n".join(lines(app))
