"""The question in place: what is asked, help, the editor for its kind of answer, what it helps to settle."""

from typing import TYPE_CHECKING

from textual.app import ComposeResult
from textual.containers import Vertical
from textual.content import Content
from textual.widgets import OptionList

from advisor.answers import DONT_KNOW, Unsuitable
from advisor.case import Answer
from advisor.interview import Session, exactly, if_unknown
from advisor.knowledge import Declaration
from advisor.screens.choice_list import ChoiceList
from advisor.screens.ending import Ending
from advisor.screens.find_list import FindList
from advisor.screens.glyphs import Glyphs
from advisor.screens.number_field import NumberField
from advisor.screens.row import Row
from advisor.screens.text_field import TextField
from advisor.screens.tick_list import TickList

if TYPE_CHECKING:
    from advisor.conditions import Value

Editor = ChoiceList | TickList | FindList | NumberField | TextField | Ending
_MANY, _NAMED = 20, 4
_MARGIN, _NEIGHBOURS, _LEAST_LIST, _FIELD_LINES = 8, 4, 5, 5
_LEAST_WIDTH = 30


class QuestionPanel(Vertical):
    """Holds one editor of each kind, of which one shows: nothing is built anew when the question changes."""

    def __init__(self, session: Session, glyphs: Glyphs) -> None:
        super().__init__(id="question")
        self.session, self.glyphs = session, glyphs
        self.stopped = False
        self.lines = 0
        self._shown: object = None
        self._fitted = (0, 0)
        self.choices, self.ticks, self.find = ChoiceList(glyphs), TickList(glyphs), FindList(glyphs)
        self.number, self.text, self.ending = NumberField(glyphs, self._echo), TextField(), Ending(session, glyphs)
        self.editors: tuple[Editor, ...] = (self.choices, self.ticks, self.find, self.number, self.text, self.ending)
        self.editor: Editor = self.ending

    def compose(self) -> ComposeResult:
        """Question, help, editors, and what the answer helps to settle."""
        yield Row(id="ask")
        yield Row(id="help")
        yield from self.editors
        yield Row(id="helps")

    def show(self, width: int, height: int) -> None:
        """Show the question in place, or the ending; what is half typed survives another size of the window."""
        question = None if self.stopped else self.session.question
        given = self.session.case.answers.get(question.name) if question else None
        key, size = (question.name, given) if question else self.session.advice, (width, height)
        if key != self._shown:
            self._show(question, given, max(_LEAST_WIDTH, width - _MARGIN))
        elif size != self._fitted and isinstance(self.editor, ChoiceList | TickList | FindList):
            self.editor.fit(max(_LEAST_WIDTH, width - _MARGIN))
        if question is not None and (key, size) != (self._shown, self._fitted):
            self._limit(question, width, height)
        self._shown, self._fitted = key, size

    def _show(self, question: Declaration | None, given: Answer | None, width: int) -> None:
        if question is None:
            self.ending.load(stopped=self.stopped)
            self.editor = self.ending
        else:
            self.editor = self._loaded(question, given, width)
            self._heads(question)
        for each in self.editors:
            each.display = each is self.editor
        for row in self.query("#ask, #help, #helps"):
            row.display = question is not None
        self.take_keys()

    def take_keys(self) -> None:
        """Give the keys to the editor at once, so that nothing typed ahead goes astray."""
        self.screen.set_focus(self.editor.keys_go_to)

    def _limit(self, question: Declaration, width: int, height: int) -> None:
        """Leave room above and below a long list for the question itself and its neighbours."""
        asked = question.question
        texts = (asked.ask, asked.help) if asked else ()
        lines = sum(-(-len(text) // max(1, width - _MARGIN)) for text in texts)
        most = max(_LEAST_LIST, height - lines - _NEIGHBOURS)
        self.lines = lines + _FIELD_LINES
        inside: list[OptionList] = (
            [self.editor] if isinstance(self.editor, OptionList) else list(self.editor.query(OptionList))
        )
        for options in inside:
            options.styles.max_height = most
            self.lines = lines + 1 + min(most, sum(str(each.prompt).count("\n") + 1 for each in options.options))

    def _heads(self, question: Declaration) -> None:
        assert question.question is not None  # noqa: S101 - asked facts only
        words, session = self.glyphs.words, self.session
        asked = session.answered
        number = asked.index(question.name) + 1 if question.name in asked else len(asked) + 1
        self.query_one("#ask", Row).show(
            Content.assemble((f"{number:>3}  ", "$accent"), (words(question.question.ask), "bold"))
        )
        enough = "All that decides the lubricant is known; F8 stops here. " if session.only_quantities_left else ""
        self.query_one("#help", Row).show(Content.assemble(enough, (words(question.question.help), "$quiet")))
        self.query_one("#helps", Row).show(self._helps(question))

    def _helps(self, question: Declaration) -> Content:
        rows = self.session.helps_settle()
        named = rows if len(rows) <= _NAMED + 1 else rows[:_NAMED]
        more = f" and {len(rows) - len(named)} more rows" if len(rows) > len(named) else ""
        keys = "space ticks, Enter accepts; " if question.domain.kind == "several" else ""
        what = "helps to settle: " if rows else "decides about cautions and who must be asked"
        return Content.assemble((keys + what, "$quiet"), self.glyphs.words(", ".join(named)), (more, "$quiet"))

    def _loaded(self, question: Declaration, given: Answer | None, width: int) -> "Editor":
        domain, unknown = question.domain, if_unknown(question)
        value = given.value if given else None
        if domain.kind == "number":
            self.number.load(
                domain, unknown, given.typed.replace("_", " ") if given and given.typed != DONT_KNOW else ""
            )
            return self.number
        if domain.kind == "several":
            self.ticks.load(domain.choices, unknown, value if isinstance(value, tuple) else (), width)
            return self.ticks
        if domain.kind == "text":
            self.text.load(given.typed if given else "")
            return self.text
        picking = self.find if len(domain.choices) > _MANY else self.choices
        picking.load(domain.choices, unknown, str(value or ""), width)
        return picking

    def _echo(self, text: str) -> str:
        question = self.session.question
        if question is None:
            return ""
        try:
            given = self.session.read(question, text)
        except Unsuitable as fault:
            return f"! {fault}"
        value: Value | None = given.value
        if given.span is not None:
            low, high = (exactly(each, question.domain.unit) for each in given.span)
            return f"reads as a range, {low} to {high}"
        if not isinstance(value, float):
            return ""
        return f"reads as {exactly(value, question.domain.unit)}{', an estimate' if given.estimate else ''}"
