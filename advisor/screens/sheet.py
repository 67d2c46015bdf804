"""The sheet: interview on the left, docket, shelf and chart on the right; in a narrow window one after the other."""

from pathlib import Path
from typing import ClassVar

from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Horizontal, Vertical, VerticalScroll
from textual.screen import Screen

from advisor.advice import Advice
from advisor.answers import Unsuitable
from advisor.documents import Unwritable
from advisor.interview import Session, referrals_added
from advisor.screens import reports
from advisor.screens.answered import Answered
from advisor.screens.chart import Chart
from advisor.screens.dialog import Dialog
from advisor.screens.docket import Docket
from advisor.screens.foot import Foot
from advisor.screens.given import Chosen, DontKnow, Given, Opened
from advisor.screens.glyphs import Glyphs
from advisor.screens.key_bar import KeyBar
from advisor.screens.notice import Notice
from advisor.screens.question_map import QuestionMap
from advisor.screens.question_panel import QuestionPanel
from advisor.screens.shelf import Shelf
from advisor.screens.title_line import TitleLine
from advisor.screens.too_small import TooSmall
from advisor.screens.upcoming import Upcoming
from advisor.screens.why import WhyTree

VIEWS = ("docket", "why", "chart", "map")
_TALL, _WIDE, _FEW, _MANY = 34, 100, 1, 4
_LEFT_SHARE, _AROUND_WIDE, _AROUND_NARROW = 0.46, 2, 5


class Sheet(Screen[None]):
    """Shows one session. A view is what stands beside the interview, or in a narrow window instead of it."""

    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("pageup", "back", "Back", key_display="PgUp", priority=True, id="back"),
        Binding("pagedown", "later", "Later", key_display="PgDn", priority=True, id="later"),
        Binding("escape", "undo", "Undo", key_display="Esc", id="undo"),
        Binding("f2", "view('docket')", "Docket", key_display="F2", id="docket"),
        Binding("f3", "view('why')", "Why", key_display="F3", id="why"),
        Binding("f4", "view('chart')", "Chart", key_display="F4", id="chart"),
        Binding("f5", "view('map')", "Map", key_display="F5", id="map"),
        Binding("f7", "variant", "Variant", key_display="F7", id="variant"),
        Binding("f8", "stop_here", "Stop", key_display="F8", id="stop_here"),
        Binding("ctrl+p", "app.command_palette", "All", key_display="^p", priority=True, id="palette"),
        Binding("ctrl+q", "app.quit", "Quit", key_display="^q", priority=True, id="quit"),
        Binding("ctrl+s", "save_as", "Save as", key_display="^s", id="save_as"),
        Binding("question_mark", "dont_know", "Don't know", key_display="?", priority=True, show=False, id="dont_know"),
    ]

    def __init__(self, session: Session, glyphs: Glyphs) -> None:
        super().__init__()
        self.session, self.glyphs, self.view = session, glyphs, ""

    def compose(self) -> ComposeResult:
        """All parts; styles decide which of them show."""
        session, glyphs = self.session, self.glyphs
        yield TitleLine(session, glyphs)
        with Horizontal(id="body"):
            with VerticalScroll(id="left", can_focus=False):
                yield Notice(glyphs)
                yield Answered(session, glyphs)
                yield QuestionPanel(session, glyphs)
                yield Upcoming(session, glyphs)
            with Vertical(id="right"):
                with Vertical(id="result"):
                    yield Docket(session, glyphs)
                    yield Shelf(glyphs)
                yield WhyTree(session, glyphs)
                yield QuestionMap(session, glyphs)
                yield Chart(glyphs)
        yield Foot(session, glyphs)
        yield KeyBar()
        yield TooSmall()

    async def on_mount(self) -> None:
        """Show what the session holds, and what it has to say."""
        self.query_one(Notice).say(*self.session.notices, *self._referred(None))
        self.show()

    def show(self) -> None:
        """Show the session; parts that read the same are not drawn again."""
        with self.app.batch_update():
            self.query_one(TitleLine).show()
            self.query_one(QuestionPanel).show(self._left_width(), self._left_height())
            self._show_neighbours()
            self.query_one(Foot).show()
            self._show_beside()
        self.call_after_refresh(self._to_the_question)

    def _left_width(self) -> int:
        width = self.app.size.width
        return int(width * _LEFT_SHARE) if width >= _WIDE else width

    def _left_height(self) -> int:
        return self.app.size.height - (_AROUND_WIDE if self.app.size.width >= _WIDE else _AROUND_NARROW)

    def _show_neighbours(self) -> None:
        tall = self.app.size.height >= _TALL
        ended = self.session.question is None or self.query_one(QuestionPanel).stopped
        narrow = self.app.size.width < _WIDE
        spare = self._left_height() - self.query_one(QuestionPanel).lines - _FEW
        most = 0 if ended and narrow else self.app.size.height if tall else max(_FEW, spare)
        self.query_one(Answered).show_last(most)
        self.query_one(Upcoming).show_next(0 if ended else _MANY if tall else _FEW)

    def _show_beside(self) -> None:
        """Show what stands beside the interview, or instead of it; what is out of sight is left alone."""
        if self.view == "why":
            self.query_one(WhyTree).show()
        elif self.view == "map":
            self.query_one(QuestionMap).show()
        elif self.view or self.app.size.width >= _WIDE:
            self.query_one(Docket).show()
            self.query_one(Shelf).show(self.session.shown)
            self.query_one(Chart).show(self.session.shown)

    def _to_the_question(self) -> None:
        if self.is_mounted and self.query_one("#left").max_scroll_y > 0:
            for each in ("#question", "#ask", "#outcome"):
                self.query_one(each).scroll_visible(animate=False, immediate=True)

    async def on_resize(self) -> None:
        """Lay out anew; what was typed stays where the question need not be rebuilt."""
        if self.is_mounted and self.query(TitleLine):
            self.show()
            if not self.view:
                self.call_after_refresh(self._focus_editor)

    # ---- answers -----------------------------------------------------------------------------------------------

    async def on_given(self, event: Given) -> None:
        """Take an answer."""
        try:
            self.session.answer(event.text)
        except Unsuitable as fault:
            self.query_one(Notice).say(f"! {fault}")
            self.app.bell()
            return
        await self._changed()

    async def on_dont_know(self, event: DontKnow) -> None:
        """Take a don't know."""
        event.stop()
        await self.action_dont_know()

    async def action_dont_know(self) -> None:
        """Nobody knows the answer to the question in place."""
        self.session.dont_know()
        await self._changed()

    async def action_undo(self) -> None:
        """Return from a view to the interview; in the interview take the last change back."""
        if self.view:
            await self.action_view(self.view)
        elif self.session.undo():
            self.query_one(QuestionPanel).stopped = False
            await self._changed()
        else:
            self.app.bell()

    async def _changed(self) -> None:
        trouble = [f"! {self.session.trouble}"] if self.session.trouble else []
        self.query_one(Notice).say(*trouble, *self._referred(self.session.before))
        self.show()

    def _referred(self, before: Advice | None) -> list[str]:
        """Why the case now goes to a person; at the end of the interview this stands there anyway."""
        return [] if self.session.finished else referrals_added(before, self.session.advice)

    # ---- moving about ------------------------------------------------------------------------------------------

    async def action_back(self) -> None:
        """The question before; in a view one page up."""
        await self._move(self.session.back, "scroll_page_up")

    async def action_later(self) -> None:
        """The question after; in a view one page down."""
        await self._move(self.session.later, "scroll_page_down")

    async def _move(self, go: object, scroll: str) -> None:
        if self.view and self.focused is not None and self.app.size.width < _WIDE:
            getattr(self.focused, scroll)(animate=False)
            return
        self.query_one(QuestionPanel).stopped = False
        assert callable(go)  # noqa: S101 - a method of the session
        go()
        self.show()

    async def on_opened(self, event: Opened) -> None:
        """Open a question out of turn."""
        self.session.revise(event.name)
        self._see("")
        self.query_one(QuestionPanel).stopped = False
        self.show()
        self._focus_editor()

    async def action_view(self, name: str) -> None:
        """Open a view, or close it where it is open."""
        self._see("" if name == self.view else name)
        self.show()
        target = {"docket": "#products", "chart": "#chart", "why": "#why", "map": "#map"}.get(self.view)
        if target is None:
            self._focus_editor()
        else:
            self.set_focus(self.query_one(target))

    def _see(self, view: str) -> None:
        for each in VIEWS:
            self.set_class(each == view, f"-view-{each}")
        self.view = view

    def _focus_editor(self) -> None:
        self.query_one(QuestionPanel).take_keys()

    async def action_variant(self) -> None:
        """Show the next variant of what was left open; in the interview of a narrow window, beside the docket."""
        self.session.next_variant()
        if not self.view and self.app.size.width < _WIDE:
            await self.action_view("docket")
        else:
            self.show()

    async def action_stop_here(self) -> None:
        """End before the questions that only tune quantity and interval."""
        self.query_one(QuestionPanel).stopped = True
        self.show()

    def check_action(self, action: str, parameters: tuple[object, ...]) -> bool | None:  # noqa: ARG002 - as textual asks
        """Which keys do something now; the others stay out of the footer."""
        if action == "stop_here":
            return self.session.only_quantities_left and not self.query_one(QuestionPanel).stopped
        if action == "variant":
            return bool(self.session.advice.branches)
        if action == "dont_know":
            return self.session.question is not None and not self.view
        return True

    # ---- keeping -----------------------------------------------------------------------------------------------

    async def on_chosen(self, event: Chosen) -> None:
        """Do what was picked at the end."""
        if event.what == "scenario":
            self.action_save_as()
        elif event.what in {"markdown", "html"}:
            self.action_report(event.what)
        elif event.what == "map":
            await self.action_view("map")
        elif event.what == "go_on":
            self.query_one(QuestionPanel).stopped = False
            self.show()
        else:
            self.app.exit()

    def action_save_as(self) -> None:
        """Ask where to, and write the case as a scenario."""
        title = self.session.case.title
        fields = {"file": f"{reports.file_stem(title)}.yaml", "title": title, "why it is worth keeping": ""}
        self.app.push_screen(Dialog("Save as a scenario", fields, self.glyphs), self._save_as)

    def _save_as(self, given: dict[str, str] | None) -> None:
        if given is not None:
            path, title, guards = given.values()
            self._write(path, lambda: self.session.save_scenario(Path(path), title, guards or title))

    def action_report(self, kind: str) -> None:
        """Ask where to, and write the report."""
        name = f"{reports.file_stem(self.session.case.title)}.{'md' if kind == 'markdown' else 'html'}"
        self.app.push_screen(
            Dialog("Write the report", {"file": name}, self.glyphs), lambda given: self._report(kind, given)
        )

    def _report(self, kind: str, given: dict[str, str] | None) -> None:
        if given is not None:
            path = given["file"]
            self._write(path, lambda: reports.write(self.session.advice, kind, Path(path)))

    def _write(self, path: str, write: object) -> None:
        assert callable(write)  # noqa: S101 - made just above
        try:
            write()
        except Unwritable as fault:
            self.query_one(Notice).say(f"! {fault}")
        else:
            self.query_one(Notice).say(f"Written: {path}")
