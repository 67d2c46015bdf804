"""Answers as people type them, and saved cases: typed by the declared facts, kept with the text that was typed."""

import re
from collections.abc import Mapping as Map
from dataclasses import dataclass, field
from pathlib import Path

from advisor.case import Answer, Case
from advisor.documents import Mapping, Mark, Node, Problem, Problems, Scalar, Sequence, nearest, read_document
from advisor.knowledge import Declaration, Knowledge
from advisor.quantities import Unreadable, parse, show

DONT_KNOW = "dont_know"
UNANSWERED = "unanswered"
OR = " or "
_CODE = re.compile(r"([A-Z]*)\s*(\d+(?:/\d+)?)")


class Unsuitable(ValueError):
    """An answer that does not suit its question; the message says what was seen and the mend."""


def answer(declaration: Declaration, typed: str, *, strict: bool = True) -> Answer:
    """The answer that a text gives to a question.

    Raises:
        Unsuitable: in one plain sentence.
    """
    text = typed.strip()
    if text in {"?", DONT_KNOW, "don't know"}:
        return Answer(None, DONT_KNOW)
    domain = declaration.domain
    if domain.kind == "number" and ".." in text:
        return _span(declaration, text, strict=strict)
    if domain.kind in {"choice", "scale", "yes_no"} and OR in text and not _named(declaration, text):
        return _alternatives(declaration, text)
    if domain.kind == "number":
        return _number(declaration, text, strict=strict)
    if domain.kind == "text":
        return Answer(text, text)
    if domain.kind == "several":
        return Answer(_ticks(declaration, text), text)
    return Answer(_choice(declaration, text), text)


def _number(declaration: Declaration, text: str, *, strict: bool) -> Answer:
    domain = declaration.domain
    word = text.casefold().replace(" ", "_")
    if word in domain.named:
        return Answer(domain.named[word], text, estimate=True)
    try:
        value = parse(text, domain.unit, strict=strict).value
    except Unreadable as fault:
        words = (
            f" Known words: {', '.join(domain.named)}." if domain.named and not any(c.isdigit() for c in text) else ""
        )
        raise Unsuitable(f"{fault}{words}") from None
    if not domain.low <= value <= domain.high:
        ends = f"{show(domain.low, domain.unit)} to {show(domain.high, domain.unit)}"
        raise Unsuitable(f"{show(value, domain.unit)} lies outside {ends}. Check the unit and the decimal point.")
    if domain.places and value not in domain.places:
        raise Unsuitable(f"{value:g} is none of the grades " + ", ".join(f"{place:g}" for place in domain.places) + ".")
    return Answer(value, text)


def _span(declaration: Declaration, text: str, *, strict: bool) -> Answer:
    """A range such as `70..90 °C`: the unit of its end serves for both."""
    low_text, _, high_text = (part.strip() for part in text.partition(".."))
    high = _number(declaration, high_text, strict=strict)
    unit = _unit_typed(declaration, high_text, strict=strict)
    bare = _unit_typed(declaration, low_text, strict=strict) == ""
    low = _number(declaration, f"{low_text} {unit}" if bare and unit else low_text, strict=strict)
    if not isinstance(low.value, float) or not isinstance(high.value, float) or not low.value < high.value:
        raise Unsuitable(f"'{text}' is no range: write the lower value first, as in 70..90.")
    return Answer(None, text, span=(low.value, high.value))


def _unit_typed(declaration: Declaration, text: str, *, strict: bool) -> str | None:
    """The unit that stands behind a number, empty where none does; nothing where this is no number."""
    try:
        return parse(text, declaration.domain.unit, strict=strict).typed_unit
    except Unreadable:
        return None


def _alternatives(declaration: Declaration, text: str) -> Answer:
    """Several choices left open, such as `pressed_steel or polyamide`."""
    named = tuple(dict.fromkeys(_choice(declaration, part.strip()) for part in text.split(OR)))
    return Answer(named[0], text) if len(named) == 1 else Answer(None, text, alternatives=named)


def _choice(declaration: Declaration, text: str) -> str:
    if found := _named(declaration, text) or _code(text, declaration.domain.choices):
        return found
    choices = declaration.domain.choices
    near = nearest(text, choices)
    known = near or f" Choose one of {', '.join(list(choices)[:12])}{' ...' if len(choices) > 12 else ''}."
    raise Unsuitable(f"'{text}' is not one of the choices of {declaration.title}.{known}")


def _named(declaration: Declaration, text: str) -> str:
    """The choice that a text names by its id or its label; empty if none."""
    choices, yes_no = declaration.domain.choices, declaration.domain.kind == "yes_no"
    wanted = {"true": "yes", "false": "no", "y": "yes", "n": "no"}.get(text, text) if yes_no else text
    if wanted in choices:
        return wanted
    folded = wanted.casefold()
    return next((one for one, label in choices.items() if folded in {one.casefold(), label.casefold()}), "")


def _code(text: str, choices: Map[str, str]) -> str:
    """The code with which a designation begins, blanks and suffixes aside: `NU 208 ECP` is NU208."""
    found = _CODE.match(text.upper())
    code = "".join(found.groups()) if found else ""
    return code if code in choices else ""


def _ticks(declaration: Declaration, text: str) -> tuple[str, ...]:
    if text in {"", "none", "[]"} and "none" not in declaration.domain.choices:
        return ()
    ticked = {_choice(declaration, part.strip()) for part in text.split(",") if part.strip()}
    return tuple(choice for choice in declaration.domain.choices if choice in ticked)


@dataclass(frozen=True, slots=True)
class Saved:
    """A saved case: the case itself, how gaps count, which products count, and the whole document."""

    path: Path
    case: Case
    assume_gaps: bool
    only: frozenset[str] | None
    tree: Mapping
    taken_away: frozenset[str] = field(default_factory=frozenset)


_KEYS = (
    "format",
    "title",
    "point_kind",
    "guards",
    "status",
    "like",
    "answers",
    "gaps",
    "shelf",
    "expect",
    "knowledge",
    "history",
    "approved",
)


def point_kind_of(path: Path) -> str:
    """The kind of point that a saved case speaks of; rolling_bearing where the file cannot say."""
    tree = read_document(path, Problems())
    kind = tree.get("point_kind") if isinstance(tree, Mapping) else None
    return str(kind) if isinstance(kind, Scalar) else "rolling_bearing"


def read_case(
    path: Path,
    knowledge: Knowledge,
    problems: Problems,
    read: dict[Path, Saved] | None = None,
    _above: tuple[Path, ...] = (),
) -> Saved | None:
    """Read a saved case or scenario; every fault is collected, and then there is none.

    `read` keeps what was read, so that a case whose answers many take over is read once.
    """
    if read is not None and path in read:
        return read[path]
    tree = read_document(path, problems)
    if tree is None:
        return None
    if not isinstance(tree, Mapping):
        _fault(problems, tree, (), "a saved case is a mapping", "format: 1, answers: {...}")
        return None
    before = len(problems)
    _head(tree, knowledge, problems)
    base = _base(path, tree, knowledge, problems, read, _above)
    answers = dict(base.case.answers) if base else {}
    taken = _read_answers(tree.get("answers"), answers, knowledge, problems)
    only = _only(tree.get("shelf"), knowledge, problems)
    gaps = str(tree.get("gaps", "open"))
    if gaps not in {"open", DONT_KNOW}:
        seen = _seen(tree["gaps"])
        _fault(problems, tree["gaps"], ("gaps",), f"{seen} is not known here", f"gaps: open, or gaps: {DONT_KNOW}")
    if len(problems) > before:
        return None
    ordered = {name: answers[name] for name in knowledge.facts if name in answers}
    case = Case(knowledge.point_kind.id, str(tree.get("title", path.stem)), ordered)
    saved = Saved(path, case, gaps == DONT_KNOW, only, tree, frozenset(taken))
    if read is not None:
        read[path] = saved
    return saved


def _head(tree: Mapping, knowledge: Knowledge, problems: Problems) -> None:
    """Tell what is wrong with the keys, the format, the title and the kind of point."""
    for key in tree:
        if key not in _KEYS:
            hint = nearest(key, _KEYS).strip() or f"known here: {', '.join(_KEYS)}"
            _fault(problems, tree.key_marks[key], (), f"'{key}' is not known in a saved case", hint)
    if str(tree.get("format", "")) != "1":
        _fault(problems, tree.get("format", tree), (), "the format of the case is missing or unknown", "format: 1")
    if not isinstance(tree.get("title", Scalar("")), Scalar):
        _fault(problems, tree["title"], ("title",), "the title is text", "title: Pump motor, drive end")
    kind, wanted = str(tree.get("point_kind", "")), knowledge.point_kind.id
    if kind != wanted and (kind or "like" not in tree):
        message = f"{_seen(tree['point_kind'])} is no kind of point here" if kind else "the kind of point is missing"
        _fault(problems, tree.get("point_kind", tree), (), message, f"point_kind: {wanted}")


def _base(
    path: Path,
    tree: Mapping,
    knowledge: Knowledge,
    problems: Problems,
    read: dict[Path, Saved] | None,
    above: tuple[Path, ...],
) -> Saved | None:
    """The scenario whose answers this one takes over."""
    like = tree.get("like")
    if like is None:
        return None
    other = path.parent / f"{like}.yaml"
    if other in (*above, path):
        _fault(problems, like, ("like",), f"{_seen(like)} leads back to this file", "break the circle")
        return None
    if not isinstance(like, Scalar) or "/" in like or not other.is_file():
        _fault(
            problems,
            like,
            ("like",),
            f"{_seen(like)} is no scenario beside this file",
            nearest(str(like), [each.stem for each in path.parent.glob("*.yaml")]).strip() or "name a file beside it",
        )
        return None
    return read_case(other, knowledge, problems, read, (*above, path))


def _read_answers(node: Node | None, answers: dict[str, Answer], knowledge: Knowledge, problems: Problems) -> list[str]:
    if node is None:
        return []
    if not isinstance(node, Mapping):
        _fault(problems, node, ("answers",), "answers are written 'fact: value'", "answers: {bore_mm: 65 mm}")
        return []
    asked: Map[str, Declaration] = {name: each for name, each in knowledge.facts.items() if each.question is not None}
    taken: list[str] = []
    for name, child in node.items():
        if name not in asked:
            _no_question(name, node, asked, knowledge, problems)
        elif isinstance(child, Scalar) and str(child) == UNANSWERED:
            answers.pop(name, None)
            taken.append(name)
        else:
            try:
                answers[name] = answer(asked[name], _text(child, asked[name]), strict=False)
            except Unsuitable as fault:
                _fault(problems, child, ("answers", name), str(fault))
    return taken


def _no_question(
    name: str, node: Mapping, asked: Map[str, Declaration], knowledge: Knowledge, problems: Problems
) -> None:
    found = name in knowledge.facts or name in knowledge.computations
    hint = "it is computed or concluded, not asked" if found else nearest(name, asked).strip()
    message = f"'{name}' is no question of this kind of point"
    _fault(problems, node.key_marks[name], ("answers",), message, hint or "'gudgeon facts' lists them")


def _text(node: Node, declaration: Declaration) -> str:
    """An answer in a file as a person would have typed it."""
    if isinstance(node, Scalar) and str(node).strip():
        return str(node)
    if isinstance(node, Scalar):
        raise Unsuitable(f"The answer is missing. Write it, {DONT_KNOW} or {UNANSWERED}.")
    if isinstance(node, Mapping) or declaration.domain.kind != "several":
        raise Unsuitable("One answer is expected here, not a list or a mapping. Write the value alone.")
    if not all(isinstance(each, Scalar) for each in node):
        raise Unsuitable("A list of ticks holds single words. Write [a, b].")
    return ", ".join(map(str, node)) or "none"


def _only(node: Node | None, knowledge: Knowledge, problems: Problems) -> frozenset[str] | None:
    if node is None:
        return None
    if not isinstance(node, Sequence):
        _fault(problems, node, ("shelf",), "the products are a list of item codes", "shelf: [GR-101]")
        return None
    known = [product.item for product in knowledge.shelf]
    for each in node:
        if str(each) not in known:
            hint = nearest(str(each), known).strip() or "name a product of the shelf by its item code"
            _fault(problems, each, ("shelf",), f"{_seen(each)} is no product of the shelf", hint)
    return frozenset(str(each) for each in node)


def _seen(node: object) -> str:
    """A node as a message names it."""
    return f"'{node}'" if isinstance(node, str) else "a list or a mapping"


def _fault(problems: Problems, at: Node | Mark, trail: tuple[str, ...], message: str, hint: str = "") -> None:
    mark = at if isinstance(at, Mark) else at.mark
    problems.add(Problem.at(mark, message.rstrip("."), hint, trail))
