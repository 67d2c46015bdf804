"""Damage to one node of a knowledge file - a key, a value, a list item - and the lines on which it may be told.

What counts as the damaged line is settled here, for each kind of damage:

- misspelt: the line of the misspelt key, or of the misspelt name;
- doubled: the line on which either of the two copies begins;
- retyped: the line on which the value begins;
- misindented: the line moved, or the first of the lines that were moved together;
- deleted: the line of the key or list item that now lacks it, or the line where it stood. Where what is deleted
  declared a name, the lines that still use it are the only wrong ones left: one of these, if the problem says the name.
"""

import random
import re
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from functools import lru_cache
from typing import NamedTuple

import yaml

Loc = tuple[str | int, ...]
_LOADER: type = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
_WORD = re.compile(r"[A-Za-z][A-Za-z0-9_]*")
_NUMBER = re.compile(r"-?[0-9]+(\.[0-9]+)?")
_SHIFTS = (-2, -1, 1, 2)
_SECTIONS = {"facts", "properties", "tables", "sources", "cautions", "referrals", "change_over", "steps", "kinds"}


@dataclass(frozen=True)
class Entry:
    """An entry of a mapping or a list in the text; places are characters, `begin` is where the key or dash stands."""

    loc: Loc
    begin: int
    key: tuple[int, int] | None
    node: yaml.Node
    place: int
    beside: int
    """How many entries the mapping or list has."""
    flow: bool
    parent: int
    """Where the entry begins that holds this one."""
    names: tuple[str, ...]
    """The name that it declares; of a section those of its entries."""

    @property
    def start(self) -> int:
        """Where the value begins."""
        return int(self.node.start_mark.index)

    @property
    def end(self) -> int:
        """Where the last sign of the value ends."""
        return _end_of(self.node)


class Damaged(NamedTuple):
    """A text with one node damaged, and where it may be told."""

    what: str
    text: str
    lines: set[int]
    lost: tuple[str, ...] = ()
    """Names that are declared no longer."""
    loc: Loc = ()
    kind: str = ""


class Cannot(Exception):
    """The node has no such damage."""


def entries(text: str) -> list[Entry]:
    """Every entry of a document."""
    root = yaml.compose(text, Loader=_LOADER)
    return list(_below(text, root, (), root.start_mark.index))


def _below(text: str, node: yaml.Node, loc: Loc, parent: int) -> Iterator[Entry]:
    if not isinstance(node, yaml.CollectionNode):
        return
    for place, part in enumerate(node.value):
        key, value = part if isinstance(node, yaml.MappingNode) else (None, part)
        here = (*loc, str(key.value) if key else place)
        begin = int((key or value).start_mark.index)
        if key is None and not node.flow_style:
            begin = text.rindex("-", 0, begin)
        inner = list(_below(text, value, here, begin))
        span = (key.start_mark.index, key.end_mark.index) if key else None
        beneath = {name for each in inner if len(each.loc) == len(here) + 1 for name in each.names}
        names = tuple(sorted(set(_declares(here, value)) or beneath))
        yield Entry(here, begin, span, value, place, len(node.value), bool(node.flow_style), parent, names)
        yield from inner


def _declares(loc: Loc, value: yaml.Node) -> Iterator[str]:
    """The name that an entry declares: by its key, its id, or its first cell."""
    match loc:
        case (str(section), str(name)) if section in _SECTIONS:
            yield name
        case (*_, "columns" | "choices" | "named", str(name)):
            yield name
        case (*_, "choices" | "places", int()) if isinstance(value, yaml.ScalarNode):
            yield value.value
        case ("computations" | "rules" | "products", int()) | (*_, "rows", int()):
            pairs = value.value if isinstance(value, yaml.MappingNode) else []
            cells = {key.value: cell.value for key, cell in pairs if isinstance(cell, yaml.ScalarNode)}
            yield cells.get("fact") or cells.get("id") or cells.get("item") or next(iter(cells.values()), "")
        case ("computations", int(), "fact") | ("rules", int(), "id") | ("products", int(), "item"):
            yield value.value


def _end_of(node: yaml.Node) -> int:
    if not isinstance(node, yaml.CollectionNode) or node.flow_style or not node.value:
        return int(node.end_mark.index)
    last = node.value[-1]
    return _end_of(last[1] if isinstance(last, tuple) else last)


def _line_at(text: str, at: int) -> int:
    return text.count("\n", 0, at) + 1


def _column_of(text: str, at: int) -> int:
    """The column of a place, counted from nought."""
    return at - text.rfind("\n", 0, at) - 1


def _lines_of(text: str, entry: Entry) -> tuple[int, int]:
    """The whole lines that a block entry takes."""
    return text.rfind("\n", 0, entry.begin) + 1, text.find("\n", max(entry.end, entry.begin)) + 1 or len(text)


def _begins_its_line(text: str, entry: Entry) -> bool:
    return not text[text.rfind("\n", 0, entry.begin) + 1 : entry.begin].strip()


# ---- deleted -------------------------------------------------------------------------------------------------------


def delete(text: str, entry: Entry, _: random.Random) -> Damaged:
    """Take the entry out with all that is in it."""
    taken = _out_of_brackets(text, entry) if entry.flow else _out_of_lines(text, entry)
    return Damaged("", taken, {_line_at(text, entry.parent), _line_at(text, entry.begin)}, entry.names)


def _out_of_brackets(text: str, entry: Entry) -> str:
    if entry.place < entry.beside - 1:
        return text[: entry.begin] + re.sub(r"^\s*,\s*", "", text[entry.end :])
    start = text.rindex(",", 0, entry.begin) if entry.place else entry.begin
    return text[:start] + text[entry.end :]


def _out_of_lines(text: str, entry: Entry) -> str:
    """The text without the lines of an entry; what follows one beside a dash moves up to the dash."""
    start, end = _lines_of(text, entry)
    if _begins_its_line(text, entry):
        return text[:start] + text[end:]
    if entry.beside == 1:
        return text[: entry.begin].rstrip() + "\n" + text[end:]
    return text[: entry.begin] + re.sub(r"^(?: *(?:#.*)?\n)* *", "", text[end:])


# ---- doubled -------------------------------------------------------------------------------------------------------


def double(text: str, entry: Entry, _: random.Random) -> Damaged:
    """Write the entry a second time after itself."""
    if entry.flow:
        after = text[: entry.end] + ", " + text[entry.begin : entry.end] + text[entry.end :]
        return Damaged("", after, {_line_at(after, entry.begin), _line_at(after, entry.end + 2)})
    _, end = _lines_of(text, entry)
    after = text[:end] + " " * _column_of(text, entry.begin) + text[entry.begin : end] + text[end:]
    return Damaged("", after, {_line_at(after, entry.begin), _line_at(after, end)})


# ---- misspelt ------------------------------------------------------------------------------------------------------


def misspell(text: str, entry: Entry, chance: random.Random) -> Damaged:
    """Exchange, drop or repeat a letter of the key, or of a value that is one word."""
    spans = [entry.key] if entry.key else []
    if isinstance(entry.node, yaml.ScalarNode) and _WORD.fullmatch(entry.node.value):
        quotes = entry.node.style in ("'", '"')
        spans.append((entry.start + quotes, entry.end - quotes))
    spans = [(start, end) for start, end in spans if end - start > 2]
    if not spans:
        raise Cannot
    start, end = chance.choice(spans)
    word = text[start:end]
    at = chance.randrange(len(word) - 1)
    swapped = word[:at] + word[at + 1] + word[at] + word[at + 2 :]
    wrong = chance.choice((swapped, word[:at] + word[at + 1 :], word[: at + 1] + word[at:]))
    wrong = wrong if wrong != word else word + "x"
    return Damaged(f"{word} as {wrong}", text[:start] + wrong + text[end:], {_line_at(text, start)})


# ---- retyped -------------------------------------------------------------------------------------------------------


def retype(text: str, entry: Entry, chance: random.Random) -> Damaged:
    """Make one value, a list or a mapping of what is something else, or a word of a number."""
    node, value = entry.node, text[entry.start : entry.end]
    if not value:
        raise Cannot
    if isinstance(node, yaml.ScalarNode):
        number = ["word"] if _NUMBER.fullmatch(node.value) else []
        return _written(text, entry, chance.choice([f"[{value}]", f"{{a: {value}}}", *number]))
    if isinstance(node, yaml.CollectionNode) and node.flow_style:
        wrapped = f"[{value}]" if isinstance(node, yaml.MappingNode) else f"{{a: {value}}}"
        return _written(text, entry, chance.choice([wrapped, "word"]))
    if chance.random() < 0.5:
        head = text[: entry.key[1] + 1 if entry.key else entry.begin + 1]
        return Damaged("as a word", f"{head} word{text[entry.end :]}", {_line_at(text, len(head))})
    column = _column_of(text, entry.start)
    mark = "- " if isinstance(node, yaml.MappingNode) else "a:\n" + " " * (column + 2)
    return _written(text, entry, mark + value.replace("\n", "\n  "))


def _written(text: str, entry: Entry, new: str) -> Damaged:
    """The text with the value written otherwise."""
    what = "as " + new.split("\n", maxsplit=1)[0][:20]
    return Damaged(what, text[: entry.start] + new + text[entry.end :], {_line_at(text, entry.start)})


# ---- misindented ---------------------------------------------------------------------------------------------------


def misindent(text: str, entry: Entry, chance: random.Random) -> Damaged:
    """Move the first line of a block entry, or all its lines, one or two columns in or out."""
    if entry.flow or not _begins_its_line(text, entry):
        raise Cannot
    start, end = _lines_of(text, entry)
    whole, shift = chance.random() < 0.5, chance.choice(_SHIFTS)
    if _column_of(text, entry.begin) + shift < 0:
        shift = -shift
    if not whole:
        end = text.index("\n", start) + 1
    moved = "".join(_moved(line, shift) for line in text[start:end].splitlines(keepends=True))
    what = f"{'all' if whole else 'first line'} by {shift}"
    return Damaged(what, text[:start] + moved + text[end:], {_line_at(text, start)})


def _moved(line: str, shift: int) -> str:
    if shift > 0:
        return " " * shift + line if line.strip() else line
    return line[min(-shift, len(line) - len(line.lstrip(" "))) :]


# ---- drawing -------------------------------------------------------------------------------------------------------

KINDS: dict[str, Callable[[str, Entry, random.Random], Damaged]] = {
    "deleted": delete,
    "doubled": double,
    "misspelt": misspell,
    "misindented": misindent,
    "retyped": retype,
}


def draw(text: str, known: list[Entry], kind: str, chance: random.Random) -> Damaged:
    """One damage of the kind to a node of the text; what leaves the document the same is no damage and drawn again."""
    while True:
        entry = chance.choice(known)
        try:
            made = KINDS[kind](text, entry, chance)
        except Cannot:
            continue
        if _content(made.text) != _content(text):
            what = f"{kind} {made.what}".strip()
            return made._replace(what=f"{what}: {' > '.join(map(str, entry.loc))}", loc=entry.loc, kind=kind)


@lru_cache(maxsize=128)
def _content(text: str) -> object:
    """What a text holds for YAML; nothing where YAML cannot read it."""
    try:
        return _plain(yaml.compose(text, Loader=_LOADER))
    except yaml.YAMLError:
        return None


def _plain(node: yaml.Node | None) -> object:
    if isinstance(node, yaml.MappingNode):
        return ("mapping", [(_plain(key), _plain(value)) for key, value in node.value])
    if isinstance(node, yaml.SequenceNode):
        return ("list", [_plain(each) for each in node.value])
    return node.value if node is not None else None
