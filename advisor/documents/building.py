"""Build the tree from the events of the YAML parser, noting what is refused on the way."""

from dataclasses import dataclass

from yaml import events

from advisor.documents.problems import Mark, Problem
from advisor.documents.slips import STRAIGHT, comma_in_braces, invisible, rest_of_text, space_after_colon, space_before
from advisor.documents.tree import Mapping, Node, Scalar, Sequence, trail

DEEPEST = 40
MOST_NODES = 200_000
_REFUSED = Scalar("")
"""Stands for a key whose value is dropped."""


class TooBig(Exception):
    """A document that nobody wrote by hand."""

    def __init__(self, mark: Mark, message: str, hint: str) -> None:
        super().__init__(message)
        self.mark, self.message, self.hint = mark, message, hint


@dataclass(slots=True)
class _Open:
    """A mapping or list being filled; a mapping between a key and its value holds the key, then remembers it."""

    node: Mapping | Sequence
    key: Scalar | None = None
    last_key: Scalar = _REFUSED
    flow: bool = False


class Builder:
    """Takes the events of one text in order; `root` is the tree so far, `repeated` are keys refused
    as written twice, with the line of the first.

    Where `may_repeat` is given, no list but those under these keys holds an entry twice.
    """

    def __init__(self, name: str, may_repeat: frozenset[str] | None = None) -> None:
        self.root: Node | None = None
        self.repeated: dict[Mark, int] = {}
        self._name, self._may_repeat = name, may_repeat
        self._open: list[_Open] = []
        self._nodes = 0
        self._documents = 0
        self._faults: list[tuple[Mark, str, str, tuple[str | int, ...]]] = []

    def problems(self) -> list[Problem]:
        """What was refused."""
        return [
            Problem.at(mark, message, hint, trail(self.root, loc) if self.root is not None else ())
            for mark, message, hint, loc in self._faults
        ]

    @property
    def innermost(self) -> Mark:
        """Where the innermost mapping or list still being filled begins."""
        return self._open[-1].node.mark if self._open else Mark(self._name, 1, 1)

    def take(self, event: events.Event) -> None:
        """Add what the event says to the tree."""
        if isinstance(event, events.DocumentStartEvent):
            self._begin_document(event)
        elif self._documents > 1:
            return
        elif isinstance(event, events.NodeEvent):
            self._take_node(event, self._mark(event))
        elif isinstance(event, events.CollectionEndEvent):
            self._drop_repeated()
            self._open.pop()

    def _begin_document(self, event: events.Event) -> None:
        """Allow one document only."""
        self._documents += 1
        if self._documents == 2:
            hint = "Put each document into a file of its own and delete the line '---'"
            self._fault(self._mark(event), "A second document begins here", hint)

    def _take_node(self, event: events.NodeEvent, mark: Mark) -> None:
        """Add a scalar, or begin a mapping or list."""
        self._count(mark)
        self._refuse_anchor_and_tag(event, mark)
        if isinstance(event, events.ScalarEvent):
            self._take_scalar(event, mark)
        elif isinstance(event, events.AliasEvent):
            self._place(Scalar(f"*{event.anchor}", mark))
        else:
            node = Mapping(mark) if isinstance(event, events.MappingStartEvent) else Sequence(mark)
            self._place(node)
            self._open.append(_Open(node, flow=bool(getattr(event, "flow_style", False))))
            if len(self._open) > DEEPEST:
                raise TooBig(mark, f"The document is too big: nested deeper than {DEEPEST} levels", "Flatten it")

    def _take_scalar(self, event: events.ScalarEvent, mark: Mark) -> None:
        """Add a text, unless it is all that the document holds and empty."""
        scalar = Scalar(event.value, mark, quoted=event.style not in (None, ""))
        if event.style in ("|", ">") and not scalar:
            hint = f"Put a text that begins with '{event.style}' in quotes, or indent the lines that belong to it"
            self._fault(mark, f"No text follows the sign '{event.style}'", hint)
        if scalar or scalar.quoted or self._open:
            self._place(scalar)

    def _count(self, mark: Mark) -> None:
        """Give up on a document of machine size."""
        self._nodes += 1
        if self._nodes > MOST_NODES:
            hint = "Divide it into several files"
            raise TooBig(mark, f"The document is too big: more than {MOST_NODES} keys and values", hint)

    def _refuse_anchor_and_tag(self, event: events.NodeEvent, mark: Mark) -> None:
        """Note what makes a value come from elsewhere or be more than text."""
        if isinstance(event, events.AliasEvent):
            hint = "Write the value out; where a text begins with '*', put it in quotes"
            self._fault(mark, f"The alias '*{event.anchor}' is not accepted", hint)
        elif event.anchor:
            hint = "Delete it and write the value out wherever it is needed"
            self._fault(mark, f"The anchor '&{event.anchor}' is not accepted", hint)
        if tag := getattr(event, "tag", None):
            seen = tag.replace("tag:yaml.org,2002:", "!!")
            hint = "Delete it, for the kind of every value is declared; where a text begins with '!', put it in quotes"
            self._fault(mark, f"The tag '{seen}' is not accepted", hint)

    def _place(self, node: Node) -> None:
        """Put the node where the innermost open mapping or list expects one."""
        if not self._open:
            self.root = node
            return
        inner = self._open[-1]
        if isinstance(inner.node, Sequence):
            inner.node.append(node)
        elif inner.key is None:
            inner.key = self._accepted_key(inner.node, node)
        elif inner.flow and self._slipped(inner.node, inner.last_key, inner.key, node):
            inner.key = None
        else:
            if inner.key is not _REFUSED:
                inner.node[str(inner.key)] = node
            inner.last_key = inner.key
            inner.key = None

    def _slipped(self, mapping: Mapping, before: Scalar, key: Scalar, value: Node) -> bool:
        """Whether a key in braces is none, but what a decimal comma or an invisible space has left of an entry."""
        number, space = comma_in_braces(mapping.get(before), key, value), space_after_colon(key, value)
        if number:
            written = mapping[before]
            self._fault(written.mark, f"'{written},{key}' has a decimal comma", f"Write {number}")
            mapping[str(before)] = Scalar(number, written.mark)
        elif space:
            mark = key.mark._replace(column=key.mark.column + key.index(space))
            self._fault(mark, *invisible(space))
        elif rest := rest_of_text(key, value):
            self._fault(key.mark, rest, STRAIGHT)
        else:
            return False
        mapping.key_marks.pop(key, None)
        return True

    def _drop_repeated(self) -> None:
        """Refuse the entries of the innermost list that stood in it before."""
        node = self._open[-1].node
        beyond = self._open[-2].last_key if len(self._open) > 1 else ""
        if self._may_repeat is None or not isinstance(node, Sequence) or len(node) < 2 or beyond in self._may_repeat:
            return
        first: dict[str, int] = {}
        *within, _ = self._loc()
        for place, child in enumerate(node):
            before = first.setdefault(repr(child), place)
            if before != place:
                message = f"This entry is written twice; it first stands in line {node[before].mark.line}"
                self._faults.append((child.mark, message, "Keep one of the two", (*within, len(first) - 1)))
        if len(first) < len(node):
            node[:] = [node[place] for place in first.values()]

    def _accepted_key(self, mapping: Mapping, key: Node) -> Scalar:
        """The key, noted with its place, or `_REFUSED`."""
        if not isinstance(key, Scalar):
            self._fault(key.mark, "A list or mapping stands where a key should", "Write a plain word as the key")
        elif key == "<<" and not key.quoted:
            self._fault(key.mark, "The merge key '<<' is not accepted", "Write the merged keys out")
        elif space := space_before(key):
            self._fault(key.mark, *invisible(space))
        elif not key:
            self._fault(key.mark, "A key is missing before the colon", "Write the key, or put the text in quotes")
        elif key in mapping.key_marks:
            first = mapping.key_marks[key].line
            self.repeated[key.mark] = first
            message = f"The key '{key}' is written twice; it first stands in line {first}"
            self._fault(key.mark, message, "Keep one of the two")
        else:
            mapping.key_marks[str(key)] = key.mark
            return key
        return _REFUSED

    def _fault(self, mark: Mark, message: str, hint: str) -> None:
        """Note a fault and where in the tree it stands."""
        self._faults.append((mark, message, hint, tuple(self._loc())))

    def _loc(self) -> list[str | int]:
        """The keys and indices that lead to the node expected next."""
        steps: list[str | int] = []
        for opened in self._open:
            innermost = opened is self._open[-1]
            if isinstance(opened.node, Sequence):
                steps.append(len(opened.node) - (not innermost))
            else:
                steps.append(str((opened.key or _REFUSED) if innermost else opened.last_key))
        return steps

    def _mark(self, event: events.Event) -> Mark:
        """Where the event begins."""
        start = event.start_mark
        return Mark(self._name, start.line + 1, start.column + 1) if start else Mark(self._name, 1, 1)
