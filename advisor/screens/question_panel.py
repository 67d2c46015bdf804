"""The question in place: what is asked, help, the editor for its kind of answer, and what the answer helps to settle."""

from typing import TYPE_CHECKING

from textual.containers import Vertical
from textual.content import Content
from textual.widget import Widget

from advisor.answers import Unsuitable
from advisor.case import Answer
from advisor.interview import Session
from advisor.interview.wording import exactly, shown_value
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

_MANY, _NAMED = 20, 4
_MARGIN = 8
_LEAST_WIDTH = 30


class QuestionPanel(Vertical):
    """Rebuilt only when another question comes into place."""

    def __init__(self, session: Session, glyphs: Glyphs) -> None:
        super().__init__(id="question")
        self.session, self.glyphs = session, glyphs
        self.stopped = False
        self._shown: object = None

    async def show(self, width: int) -> None:
        """Show the question in place, or the ending."""
        question = None if self.stopped else self.session.question
        given = self.session.case.answers.get(question.name) if question else None
        key = (question.name, given, width) if question else (self.session.advice, width)
        if key == self._shown:
            return
        self._shown = key
        await self.remove_children()
        if question is None:
            await self.mount(Ending(self.session, self.glyphs, stopped=self.stopped))
        else:
            await self.mount(*self._parts(question, given, max(_LEAST_WIDTH, width - _MARGIN)))
            self._heads(question)
        self.query_one("#editor").focus()

    def _parts(self, question: Declaration, given: Answer | None, width: int) -> list[Widget]:
        return [Row(id="ask"), Row(id="help"), self._editor(question, given, width), Row(id="helps")]

    def _heads(self, question: Declaration) -> None:
        assert question.question is not None  # noqa: S101 - asked facts only
        words, session = self.glyphs.words, self.session
        asked = session.answered
        number = asked.index(question.name) + 1 if question.name in asked else len(asked) + 1
        self.query_one("#ask", Row).show(Content.assemble((f"{number:>3}  ", "$accent"), (words(question.question.ask), "bold")))
        enough = "All that decides the lubricant is known; F8 stops here. " if session.only_quantities_left else ""
        self.query_one("#help", Row).show(Content.assemble(enough, (words(question.question.help), "$quiet")))
        self.query_one("#helps", Row).show(self._helps())

    def _helps(self) -> Content:
        rows = self.session.helps_settle()
        if not rows:
            return Content("")
        more = f" and {len(rows) - _NAMED} more rows" if len(rows) > _NAMED else ""
        return Content.assemble(("helps to settle: ", "$quiet"), self.glyphs.words(", ".join(rows[:_NAMED])), (more, "$quiet"))

    def _editor(self, question: Declaration, given: Answer | None, width: int) -> Widget:
        domain, unknown = question.domain, _unknown(question)
        value = given.value if given else None
        if domain.kind == "number":
            typed = given.typed if given and given.value is not None else ""
            return NumberField(domain, unknown, typed.replace("_", " "), self._echo, self.glyphs)
        if domain.kind == "several":
            return TickList(domain.choices, unknown, value if isinstance(value, tuple) else (), width, self.glyphs)
        if domain.kind == "text":
            return TextField(given.typed if given else "")
        widget = FindList if len(domain.choices) > _MANY else ChoiceList
        return widget(domain.choices, unknown, str(value or ""), width, self.glyphs)

    def _echo(self, text: str) -> str:
        question = self.session.question
        if question is None:
            return ""
        try:
            given = self.session.read(question, text)
        except Unsuitable as fault:
            return f"! {fault}"
        value: Value | None = given.value
        if not isinstance(value, float):
            return ""
        return f"reads as {exactly(value, question.domain.unit)}{', an estimate' if given.estimate else ''}"


def _unknown(question: Declaration) -> str:
    if question.assume is None:
        return "don't know: this stays open"
    stays = "; the case stays open" if question.assume.keeps_open else ""
    return f"don't know: taken as {shown_value(question, question.assume.value)}{stays}"
