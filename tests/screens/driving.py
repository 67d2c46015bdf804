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
_NAMES = {
    " ": "space",
    ",": "comma",
    ".": "full_stop",
    "-": "minus",
    "/": "slash",
    "?": "question_mark",
    "[": "left_square_bracket",
    "]": "right_square_bracket",
    "$": "dollar_sign",
    "°": "°",
}

KEYS = {
    "designation": "6313",
    "bearing_type": "1",
    "dangers": "0",
    "site": "1",
    "supply": "4",
    "incumbent": "GR-301",
    "maker_item": "none_named",
    "bore_mm": "65",
    "outside_mm": "140",
    "speed_rpm": "1480 rpm",
    "motion": "1",
    "running_temperature_c": "167 °F",
    "measured_where": "1",
    "excursions": "1",
    "start_temperature_c": "5",
    "load_ratio": "0.06",
    "shock": "1",
    "water_exposure": "2",
    "dust": "1",
    "seal": "0",
    "width_mm": "33",
}
"""An ordinary motor bearing: the keys for each question, each ended by Enter."""
VALUES = {
    **KEYS,
    "bearing_type": "deep_groove_ball",
    "dangers": "",
    "seal": "",
    "site": "converter_fed",
    "supply": "nipple_through",
    "motion": "turning",
    "measured_where": "outer_ring_probe",
    "excursions": "no",
    "shock": "none",
    "water_exposure": "humid",
    "dust": "none",
}
"""The same answers as the session takes them."""

Script = Callable[[Gudgeon, Pilot[None]], Awaitable[None]]


def drive(
    knowledge: Knowledge,
    size: tuple[int, int],
    script: Script,
    *,
    file: Path | None = None,
    glyphs: Glyphs | None = None,
) -> Gudgeon:
    """Run the sheet in this size until the script has ended."""
    app = Gudgeon(lambda: knowledge, file, glyphs or Glyphs())

    async def run() -> None:
        async with app.run_test(size=size) as pilot:
            await until(pilot, lambda: app.opening.advisor is not None)
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


async def ask(app: Gudgeon, pilot: Pilot[None], name: str) -> None:
    """Bring a question into place."""
    assert app.session is not None
    app.session.revise(name)
    await show(app, pilot)


async def fill(app: Gudgeon, pilot: Pilot[None], *, until: str = "", designation: str = KEYS["designation"]) -> None:
    """Answer the questions of the motor bearing without typing, up to this one."""
    values = {**VALUES, "designation": designation}
    assert app.session is not None
    app.session.go_on()
    while app.session.question is not None and app.session.question.name != until:
        app.session.answer(values[app.session.question.name])
    await show(app, pilot)


async def show(app: Gudgeon, pilot: Pilot[None]) -> None:
    """Show what the session has come to."""
    assert isinstance(app.screen, Sheet)
    app.screen.show()
    await pilot.pause()


def lines(app: Gudgeon) -> list[str]:
    """What the screen shows."""
    strips = app.screen._compositor.render_strips()
    return ["".join(segment.text for segment in strip).rstrip() for strip in strips]


def text(app: Gudgeon) -> str:
    """What the screen shows, as one text."""
    return "\n".join(lines(app))
