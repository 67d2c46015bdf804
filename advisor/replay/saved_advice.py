"""Replay advice that was saved as JSON: on the same knowledge the same bytes, on other knowledge what has changed."""

import json
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass
from itertools import islice, product
from pathlib import Path
from typing import Any

from advisor import __version__
from advisor.advice import FORMAT, Advisor
from advisor.answers import Unsuitable, answer
from advisor.case import Answer, Case
from advisor.explanation import as_json
from advisor.explanation.words import harmless
from advisor.knowledge import FromItem, Knowledge
from advisor.mishaps import Refusal

_HIDDEN = "withheld"
_LARGEST = 50_000_000  # bytes
_MOST_TRIES = 1_000
Data = Mapping[str, Any]


@dataclass(frozen=True, slots=True)
class Change:
    """Something people read that is otherwise now."""

    what: str
    was: str
    now: str


@dataclass(frozen=True, slots=True)
class Replayed:
    """A saved advice given again; `identical` says that not one byte differs."""

    file: Path
    title: str
    knowledge: tuple[str, str]
    program: tuple[str, str]
    identical: bool
    changes: tuple[Change, ...]

    @property
    def same(self) -> bool:
        """Whether nothing differs that should not: every byte on the same knowledge, what people read on another."""
        return self.identical or (self.knowledge[0] != self.knowledge[1] and not self.changes)


def replay(file: Path, advisor_for: Callable[[str], Advisor]) -> Replayed:
    """Give the saved advice again.

    Raises:
        Refusal: where the file is no saved advice, or its answers do not suit the questions any more.
    """
    text, data = _read(file)
    case = data["case"]
    advisor = advisor_for(str(case["point_kind"]))
    now = _again(file, text, data, advisor)
    return Replayed(
        file,
        str(case["title"]),
        (str(data["knowledge"]["fingerprint"]), advisor.knowledge.fingerprint),
        (str(data["program"]["version"]), __version__),
        now == text,
        tuple(_changes(data, json.loads(now))),
    )


def _read(file: Path) -> tuple[str, Data]:
    """The text of the file and what it says."""
    try:
        if file.stat().st_size > _LARGEST:
            raise Refusal(f"{file} is too big to be a saved advice.")
        text = file.read_bytes().decode("utf-8").replace("\r\n", "\n")
        data = json.loads(text)
    except OSError as fault:
        raise Refusal(f"{file} cannot be read: {fault.strerror}.") from None
    except (ValueError, RecursionError):
        raise Refusal(f"{file} is no JSON. Save an advice with: gudgeon advise FILE --json > {file.name}") from None
    if not _is_advice(data):
        raise Refusal(f"{file} is no saved advice of format {FORMAT}. Save one with: gudgeon advise FILE --json")
    return text, data


def _is_advice(data: object) -> bool:
    if not isinstance(data, dict) or data.get("format") != FORMAT:
        return False
    inside = {"program": "version", "knowledge": "fingerprint", "case": "answers"}
    if not all(isinstance(data.get(key), dict) and part in data[key] for key, part in inside.items()):
        return False
    case = data["case"]
    answers = case["answers"]
    return (
        {"point_kind", "title"} <= set(case)
        and isinstance(answers, dict)
        and all(isinstance(each, dict) and isinstance(each.get("typed"), str) for each in answers.values())
        and isinstance(case.get("shelf", []), list)
    )


def _again(file: Path, text: str, data: Data, advisor: Advisor) -> str:
    """The advice for the same answers, as JSON.

    A withheld advice keeps some answers to itself; they are tried, since nothing that it says depends on them.
    """
    knowledge, case = advisor.knowledge, data["case"]
    only = frozenset(map(str, case["shelf"])) if "shelf" in case else None
    first = ""
    for answers in islice(_answers(file, case["answers"], knowledge), _MOST_TRIES):
        given = Case(knowledge.point_kind.id, str(case["title"]), answers)
        advice = advisor.advise(given, assume_gaps=case.get("gaps") == "dont_know", only=only)
        said = as_json(advice)
        if said == text:
            return said
        first = first or said
    return first


def _answers(file: Path, saved: Data, knowledge: Knowledge) -> Iterator[dict[str, Answer]]:
    """The answers as they were typed; hidden ones in every way that may make a difference."""
    known: dict[str, list[Answer]] = {}
    for name, each in saved.items():
        declaration = knowledge.facts.get(name)
        if declaration is None or declaration.question is None:
            raise Refusal(f"{file}: '{harmless(name)}' is no question of this knowledge any more.")
        typed = str(each["typed"])
        hidden = typed == _HIDDEN and _HIDDEN not in declaration.domain.choices
        try:
            known[name] = (
                [answer(declaration, one) for one in _possible(name, knowledge)]
                if hidden and declaration.domain.choices
                else [answer(declaration, typed, strict=False)]
            )
        except Unsuitable as fault:
            raise Refusal(f"{file}: {name}: {fault}") from None
    order = [name for name in knowledge.facts if name in known]
    for chosen in product(*(known[name] for name in order)):
        yield dict(zip(order, chosen, strict=True))


def _possible(name: str, knowledge: Knowledge) -> list[str]:
    """One product for all that make no difference, and everything else that can be chosen."""
    read = [
        each.unasked.property
        for each in knowledge.facts.values()
        if isinstance(each.unasked, FromItem) and each.unasked.fact == name
    ]
    alike: dict[tuple[object, ...], str] = {}
    for product_ in knowledge.shelf:
        alike.setdefault(tuple(product_.values.get(each) for each in read), product_.item)
    items = {each.item for each in knowledge.shelf}
    return [*(each for each in knowledge.facts[name].domain.choices if each not in items), *alike.values()]


def _changes(was: Data, now: Data) -> Iterator[Change]:
    """What people read otherwise: state, rows, codes, verdicts, cautions, referrals."""
    for what, of in (
        ("state", lambda data: {"": data.get("state")}),
        ("withheld", lambda data: {"": "yes" if data.get("withheld") else "no"}),
        ("row", _rows),
        ("code", _codes),
        ("product", lambda data: {each["item"]: each["verdict"] for each in data.get("shelf", [])}),
        ("caution", lambda data: {each["caution"]: "given" for each in data.get("cautions", [])}),
        ("referral", lambda data: {each["to"]: "made" for each in data.get("referrals", [])}),
    ):
        try:
            before, after = of(was), of(now)
        except (KeyError, TypeError, AttributeError):
            yield Change(what, "not readable in the saved advice", "")
            continue
        for name in dict.fromkeys((*before, *after)):
            if before.get(name) != after.get(name):
                yield Change(f"{what} {name}".strip(), _word(before.get(name)), _word(after.get(name)))


def _rows(data: Data) -> dict[str, Any]:
    shown = {each["row"]: each["recommended"] for each in data.get("docket", []) if "recommended" in each}
    quantities = {row: each["values"] for row, each in data.get("renewal", {}).items() if each.get("shown")}
    return shown | quantities


def _codes(data: Data) -> dict[str, Any]:
    codes = data.get("specification", {}).get("designations", {})
    return {name: codes.get(name) for name in ("din", "iso") if name in codes}


def _word(value: object) -> str:
    if isinstance(value, list):
        return ", ".join(map(_word, value)) or "nothing"
    if isinstance(value, dict):
        return ", ".join(f"{key} {_word(each)}" for key, each in value.items())
    return "none" if value is None else harmless(str(value))


def as_text(found: Iterable[Replayed]) -> str:
    """What became of every saved advice."""
    return "\n".join(line for each in found for line in _lines(each))


def _lines(each: Replayed) -> Iterator[str]:
    was, now = each.knowledge
    yield f"{each.file}: {harmless(each.title)}"
    if each.identical:
        yield f"  the same, byte for byte, on knowledge {now}"
        return
    if was == now:
        yield f"  differs although the knowledge is the same ({now})"
    else:
        yield f"  saved on knowledge {was}; now on {now}"
    if each.program[0] != each.program[1]:
        yield f"  saved by version {each.program[0]}; this is version {each.program[1]}"
    for change in each.changes:
        yield f"  {change.what}: was {change.was}, now {change.now}"
    if not each.changes:
        yield "  state, rows, codes, verdicts, cautions and referrals are the same; what differs lies behind them"


def as_data(each: Replayed) -> dict[str, Any]:
    """What became of a saved advice, for machines."""
    return {
        "file": str(each.file),
        "title": each.title,
        "knowledge": {"saved": each.knowledge[0], "now": each.knowledge[1]},
        "program": {"saved": each.program[0], "now": each.program[1]},
        "identical": each.identical,
        "same": each.same,
        "changes": [{"what": change.what, "was": change.was, "now": change.now} for change in each.changes],
    }
