"""Why: the derivation of every row down to the numbered answers, and what stands against products."""

from rich.text import Text
from textual.widgets import Tree
from textual.widgets.tree import TreeNode

from advisor.advice import Advice
from advisor.explanation import why, why_not
from advisor.explanation.reasons import Why, say_line
from advisor.explanation.ruling import RuleReason
from advisor.explanation.variants import course_lines, figure_lines, lead, variant_lines
from advisor.explanation.workings import Premise
from advisor.interview import VERDICTS, Session, cautions_told, referrals_told, rows_shown
from advisor.screens.glyphs import Glyphs

Subject = tuple[str, str]
"""What a branch is about: row or item, and which."""
Node = TreeNode[Subject]


class WhyTree(Tree[Subject]):
    """A tree whose branches are worked out when they are opened: rows at once, products on demand."""

    def __init__(self, session: Session, glyphs: Glyphs) -> None:
        super().__init__(Text("why"), id="why")
        self.session, self.glyphs = session, glyphs
        self.show_root = False
        self.guide_depth = 3
        self._shown: object = None

    def show(self) -> None:
        """Derive the advice that is looked at."""
        advice = self.session.shown
        if advice is self._shown:
            return
        self._shown = advice
        self.clear()
        self._show_variants(advice)
        for to, text in referrals_told(advice):
            self._leaf(self.root.add(self._label("goes to", to), expand=True), text)
        for row in () if advice.withheld else rows_shown(advice):
            self.root.add(self._label(row.title, row.full), data=("row", row.id), expand=False)
        for line in advice.quantities:
            self.root.add(self._label(line.title, say_line(advice, line)), data=("row", line.row), expand=False)
        if advice.shelf:
            shelf = self.root.add(self._label("Shelf", "what each product misses"), expand=False)
            for ranked in advice.shelf:
                label = self._label(ranked.item, VERDICTS[ranked.verdict])
                shelf.add(label, data=("item", ranked.item), expand=False)
        care = self.root.add(self._label("Cautions", ""), expand=False)
        for text in cautions_told(advice):
            self._leaf(care, text)
        self.cursor_line = 0

    def _show_variants(self, advice: Advice) -> None:
        """What was left open: which variant this is, what each has of its own, and what changes along a range."""
        number = self.session.variant
        if number:
            self._leaf(self.root, f"Variant {number}: {self.session.advice.branches[number - 1].label}")
        for title, lines in variant_lines(advice):
            node = self.root.add(self._label(title, ""), expand=True)
            for line in lines:
                self._leaf(node, line)
        if advice.span is None:
            return
        title = self.session.knowledge.title(advice.span.fact)
        along = self.root.add(self._label("Along the range", title), expand=False)
        for text in (*lead(advice), *figure_lines(advice, full=False)):
            self._leaf(along, text)
        for variant in dict.fromkeys(each.variant for each in advice.courses):
            node = along.add(self._label("variant", variant), expand=True) if variant else along
            for line in course_lines(advice, variant):
                self._leaf(node, line)

    def on_tree_node_expanded(self, event: Tree.NodeExpanded[Subject]) -> None:
        """Work out what stands behind a row or a product when it is opened."""
        if event.node.data is None or event.node.children:
            return
        what, name = event.node.data
        if what == "row":
            self._row(event.node, why(self.session.shown, name))
        else:
            self._item(event.node, name)

    def _item(self, node: Node, item: str) -> None:
        for miss in why_not(self.session.shown, item).misses:
            inner = node.add(self._label(miss.strength, f"{miss.demand}; {miss.seen}"), expand=False)
            self._rule(inner, miss.rule)
        if not node.children:
            self._leaf(node, "misses nothing")

    def _row(self, node: Node, reason: Why) -> None:
        for waited in reason.waits:
            self._leaf(node, f"waits for {waited}")
        for each in reason.reasons:
            inner = node.add(self._label("decides" if each.decides else "asks", f"{each.demand}"), expand=False)
            if each.against:
                self._leaf(inner, f"against {', '.join(each.against)}")
            self._rule(inner, each.rule)
        for premise in reason.premises:
            self._premise(node, premise)
        for note in (*reason.short, *reason.notes):
            self._leaf(node, note)

    def _rule(self, node: Node, rule: RuleReason) -> None:
        self._leaf(node, rule.because)
        self._leaf(node, f"rule {rule.id}: {rule.title}")
        for premise in rule.premises:
            self._premise(node, premise)
        for each in (
            f"limits: {rule.limits}" if rule.limits else "",
            *(f"source: {source}" for source in rule.sources),
        ):
            if each:
                self._leaf(node, each)

    def _premise(self, node: Node, premise: Premise) -> None:
        origin = self._number(premise.fact) or premise.origin.value
        label = self._label(premise.title, f"{premise.value}  ({origin})")
        working = premise.working
        if not premise.premises and working is None:
            node.add_leaf(label)
            return
        inner = node.add(label, expand=False)
        if working is not None:
            for text in (working.equation, working.substituted):
                self._leaf(inner, text)
        for each in premise.premises:
            self._premise(inner, each)

    def _number(self, name: str) -> str:
        asked = self.session.answered
        return f"your answer {asked.index(name) + 1}" if name in asked else ""

    def _label(self, lead: str, text: str) -> Text:
        words = self.glyphs.words
        return Text.assemble(words(lead), "  ", (words(text), "bold")) if text else Text(words(lead))

    def _leaf(self, node: Node, text: str) -> None:
        """A sentence as leaves of one line each, since a tree does not wrap."""
        width = max(30, self.size.width - 16) if self.size.width else 60
        for line in Text(self.glyphs.words(text)).wrap(self.app.console, width):
            node.add_leaf(line)
