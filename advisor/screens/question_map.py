"""The map: every question by section, answered or not, to jump to."""

from collections.abc import Iterator

from textual.content import Content
from textual.widgets import OptionList
from textual.widgets.option_list import Option

from advisor.interview import Session, answer_shown, shown_value
from advisor.knowledge import Declaration
from advisor.screens.given import Opened
from advisor.screens.glyphs import Glyphs

_TITLE = 36


class QuestionMap(OptionList):
    """Answered and open questions can be picked; those that this case does not ask are only listed."""

    def __init__(self, session: Session, glyphs: Glyphs) -> None:
        super().__init__(id="map", markup=False)
        self.session, self.glyphs = session, glyphs

    def show(self) -> None:
        """List all questions anew."""
        self.clear_options()
        self.add_options(list(self._entries()))
        here = self.session.question.name if self.session.question else ""
        places = [place for place in range(self.option_count) if self.get_option_at_index(place).id == here]
        self.highlighted = places[0] if places else None
        if self.highlighted is None:
            self.action_first()

    def _entries(self) -> Iterator[Option]:
        section = ""
        for declaration in self.session.knowledge.facts.values():
            if declaration.question is None:
                continue
            if declaration.question.section != section:
                section = declaration.question.section
                yield Option(Content.assemble((self.glyphs.words(section), "bold $accent")), disabled=True)
            yield self._option(declaration)

    def _option(self, declaration: Declaration) -> Option:
        session, name = self.session, declaration.name
        title = f"  {self.glyphs.words(declaration.title):<{_TITLE}} "
        if name in session.case.answers:
            aside = "  (kept aside, not asked now)" if name in session.advice.set_aside else ""
            answer = self.glyphs.words(answer_shown(declaration, session.case.answers[name]))
            return Option(Content.assemble(title, (answer, "bold"), (aside, "$quiet")), id=name)
        if name in session.open:
            return Option(Content.assemble(title, self.glyphs.blank * 5), id=name)
        if name in session.may_be_asked:
            return Option(Content.assemble(title, (self._unasked(declaration), "$quiet")), id=name)
        return Option(Content.assemble((f"{title}not needed so far", "$quiet")), id=name, disabled=True)

    def _unasked(self, declaration: Declaration) -> str:
        fact = self.session.advice.facts[declaration.name]
        if declaration.filled is not None and fact.value is not None:
            return self.glyphs.words(f"{shown_value(declaration, fact.value)}, {fact.note}")
        return "not needed so far"

    def on_option_list_option_selected(self, event: OptionList.OptionSelected) -> None:
        """Jump to the question."""
        event.stop()
        self.post_message(Opened(event.option.id or ""))
