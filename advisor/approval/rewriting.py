"""Rewrite the expectations that a group changes, and nothing else: comments, order and layout stay."""

from collections.abc import Iterator, Sequence
from dataclasses import replace

from advisor.advice import Advice
from advisor.approval.candidates import candidates, is_gone
from advisor.documents import (
    Mapping,
    Mark,
    Node,
    Problems,
    Uneditable,
    read_text,
    removed,
    replaced,
)
from advisor.documents import Sequence as Listed
from advisor.mishaps import Refusal
from advisor.replay import Difference, Expectation, Played, differences, read_expectations
from advisor.replay.expectations import DemandedBy

_NOWHERE = Mark("", 1, 1)
WITHDRAWN = "withdrawn"


def rewritten(text: str, played: Played, chosen: Sequence[Difference]) -> tuple[str, tuple[str, ...]]:
    """The text of a scenario in which these differences are accepted, and what was accepted of each in words.

    Raises:
        Refusal: where an expectation can only be changed by hand.
    """
    words: dict[int, str] = {}
    tree = _tree(text, played)
    expectations = list(_expectations(tree, played))
    if expectations != list(played.scenario.expectations):
        raise Refusal(f"{played.scenario.path} was changed while it was replayed. Replay again.")
    for at, difference in sorted(enumerate(chosen), key=lambda each: each[1].mark, reverse=True):
        place = next(
            number
            for number, each in enumerate(expectations)
            if each.mark == difference.mark and differences(played.advice, [each])
        )
        text, said = _accepted(text, tree, expectations, place, played, difference)
        words[at] = said
        tree = _tree(text, played)
        expectations = list(_expectations(tree, played))
    return text, tuple(words[at] for at in range(len(chosen)))


def _accepted(
    text: str, tree: Mapping, expectations: list[Expectation], place: int, played: Played, difference: Difference
) -> tuple[str, str]:
    """The text with one expectation as the advice has it now; it is withdrawn only where nothing is there any more."""
    expected = expectations[place]
    loc, node = _written_at(tree, expected.mark)
    kept = [_unplaced(each) for number, each in enumerate(expectations) if number != place]
    tried = not is_gone(expected, played.advice)
    for steps, written in candidates(expected, played.advice, node):
        tried = True
        changed = replaced(text, (*loc, *steps), written)
        found = _sound(changed, tree, played)
        if found is not None and _only_one_new(found, kept, played.advice):
            return changed, _rewritten_words(expected, difference, " ".join([*map(str, steps), written]))
    if tried:
        how = f"Write there what there is now ({difference.got}), or delete the entry and expect something else"
        raise _by_hand(difference, "no value, limit or test in its place says what there is now", how)
    try:
        changed = removed(text, loc)
    except Uneditable as fault:
        raise _by_hand(difference, str(fault), "Write it on a line of its own, or delete it") from None
    found = _sound(changed, tree, played)
    if found is None or [_unplaced(each) for each in found] != kept:
        how = "Delete it and expect something else of this case, or set the scenario to 'status: retired'"
        raise _by_hand(difference, "it is the only one there, or it hangs together with others", how)
    return changed, _said(difference, f"{WITHDRAWN}, seen {difference.got}")


def _only_one_new(found: list[Expectation], kept: list[Expectation], advice: Advice) -> bool:
    """Whether all other expectations stand as before, and the new one is met."""
    rest = list(kept)
    new: list[Expectation] = []
    for each in found:
        if rest and _unplaced(each) == rest[0]:
            rest.pop(0)
        else:
            new.append(each)
    return not rest and len(new) == 1 and not differences(advice, new)


def _by_hand(difference: Difference, why: str, how: str) -> Refusal:
    mark = difference.mark
    return Refusal(
        f"{mark.file}:{mark.line}:{mark.column}: '{difference.kind}' cannot be rewritten here: {why}. "
        f"{how}; then replay, and sign the change by hand. Nothing was written."
    )


def _rewritten_words(expected: Expectation, difference: Difference, written: str) -> str:
    """What was accepted in words; of several demands of a rule only those that change."""
    was, now = difference.expected.split("; "), difference.got.split("; ")
    stay = [each for each in was if each in now]
    if not isinstance(expected, DemandedBy) or not stay:
        return _said(difference, f"now {written}")
    changed = replace(difference, expected="; ".join(each for each in was if each not in stay) or "nothing more")
    told = "; ".join(each for each in now if each not in stay) or "nothing more"
    return _said(changed, f"now {told}; {len(stay)} of its demands stay{'s' if len(stay) == 1 else ''}")


def _said(difference: Difference, outcome: str) -> str:
    what = f" {difference.what}" if difference.what else ""
    said = f"line {difference.mark.line}, {difference.kind}{what}: was {difference.expected}, {outcome}"
    return "".join(sign if sign.isprintable() else " " for sign in said)


def _sound(text: str, before: Mapping, played: Played) -> list[Expectation] | None:
    """The expectations of a changed text; None where anything beside them would differ."""
    problems = Problems()
    tree = read_text(text, str(played.scenario.path), problems)
    if len(problems) or not isinstance(tree, Mapping):
        return None
    if {key: node for key, node in tree.items() if key != "expect"} != {
        key: node for key, node in before.items() if key != "expect"
    }:
        return None
    saved = replace(played.scenario.saved, tree=tree)
    found = read_expectations(saved, played.advice.knowledge, problems)
    return None if len(problems) else list(found)


def _tree(text: str, played: Played) -> Mapping:
    tree = read_text(text, str(played.scenario.path), Problems())
    if not isinstance(tree, Mapping):
        raise Refusal(f"{played.scenario.path} cannot be read any more. Replay again.")
    return tree


def _expectations(tree: Mapping, played: Played) -> tuple[Expectation, ...]:
    return read_expectations(replace(played.scenario.saved, tree=tree), played.advice.knowledge, Problems())


def _unplaced(expected: Expectation) -> Expectation:
    return replace(expected, mark=_NOWHERE)


def _written_at(tree: Mapping, mark: Mark) -> tuple[tuple[str | int, ...], Node]:
    """Where the expectation that this mark stands for is written, and how."""
    return next(found for found in _below(tree["expect"], ("expect",)) if found[1].mark == mark)


def _below(node: Node, loc: tuple[str | int, ...]) -> Iterator[tuple[tuple[str | int, ...], Node]]:
    yield loc, node
    pairs: Iterator[tuple[str | int, Node]] = iter(())
    if isinstance(node, Mapping):
        pairs = iter(node.items())
    elif isinstance(node, Listed):
        pairs = iter(enumerate(node))
    for key, child in pairs:
        yield from _below(child, (*loc, key))
