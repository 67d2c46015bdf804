"""What the commands of the reviewer do: replay, approve, mutate, compare."""

import sys
from pathlib import Path
from typing import TYPE_CHECKING

from advisor.desk import (
    advisors_for,
    as_json_text,
    kinds_in,
    known_of,
    loaded,
    read_knowledge,
    say,
    what_counts,
    write,
)
from advisor.mishaps import DONE, NOT_SETTLED, USAGE, Refusal
from advisor.places import knowledge_folder

if TYPE_CHECKING:
    from advisor.advice import Advisor
    from advisor.knowledge import Knowledge


def replay(
    files: tuple[Path, ...],
    as_json: bool,
    junit: Path | None,
    coverage: bool,
    knowledge: Path | None,
    shelf: Path | None,
    markdown: bool = False,
) -> int:
    """Replay scenarios, or advice that was saved as JSON, and tell what differs."""
    from advisor import approval
    from advisor import replay as replaying

    if any(each.suffix == ".json" for each in files):
        return _replay_saved(files, as_json, knowledge, shelf)
    found = replaying.find(files)
    if not found:
        raise Refusal("There is no scenario to replay here. Name a file or a folder that holds some.")
    advisors = advisors_for(replaying.kinds_of(found), knowledge, shelf)
    outcome = replaying.replay(found, advisors)
    covered = replaying.coverage(outcome, [each.knowledge for each in advisors.values()]) if coverage else None
    if junit is not None:
        write(junit, replaying.as_junit(outcome))
    review, faults = approval.review_of(found, outcome, advisors)
    for problem in (*outcome.problems, *faults):
        print(problem, file=sys.stderr)  # noqa: T201 - words beside the output
    if as_json:
        signing = {"to_be_signed": approval.as_data(review)} if review else {}
        say(as_json_text(replaying.as_data(outcome, covered) | signing))
    elif markdown:
        say(replaying.as_markdown(outcome, covered) + (f"\n{approval.as_markdown(review)}" if review else ""))
    else:
        say(replaying.as_text(outcome, covered) + (f"\n\n{approval.as_text(review)}".rstrip() if review else ""))
    if outcome.problems or len(faults):
        return USAGE
    return NOT_SETTLED if outcome.differing or (review and review.groups) else DONE


def _replay_saved(files: tuple[Path, ...], as_json: bool, knowledge: Path | None, shelf: Path | None) -> int:
    """Replay advice that was saved as JSON."""
    from advisor.advice import Advisor
    from advisor.replay import saved_advice

    advisors: dict[str, Advisor] = {}

    def advisor_for(kind: str) -> "Advisor":
        if kind not in advisors:
            advisors[kind] = Advisor(loaded(knowledge, shelf, kind))
        return advisors[kind]

    found = [saved_advice.replay(file, advisor_for) for file in files]
    say(as_json_text([saved_advice.as_data(each) for each in found]) if as_json else saved_advice.as_text(found))
    return DONE if all(each.same for each in found) else NOT_SETTLED


def approve(
    group: str | None, by: str | None, because: str | None, scenarios: Path | None, knowledge: Path | None
) -> int:
    """Sign for one group of changed expectations; without a group: list what is to be signed."""
    from datetime import UTC, datetime

    from advisor import approval
    from advisor import replay as replaying
    from advisor.places import scenario_folder

    root = (scenarios or scenario_folder()).absolute()

    def advisors() -> "dict[str, Advisor]":
        return _advisors_of(knowledge or knowledge_folder(), replaying.kinds_of(replaying.find([root])))

    if group is None:
        if by is not None or because is not None:
            raise Refusal("Name the group that you sign for. 'gudgeon approve' alone lists them.")
        review = approval.review(root, advisors())
        say(approval.as_text(review) or "Nothing is to be signed.")
        return NOT_SETTLED if review.groups else DONE
    signature = approval.signature(by or "", because or "")
    entry = approval.approve(root, group, signature, datetime.now(UTC).date().isoformat(), advisors)
    say(f"{root / approval.NAME}\n{entry.text()}")
    return DONE


def _advisors_of(folder: Path, kinds: list[str]) -> "dict[str, Advisor]":
    """Advisors on the knowledge of this folder with its own shelf, whatever the settings say: what is signed for."""
    from advisor.advice import Advisor

    return {kind: Advisor(read_knowledge(folder, kind, None)) for kind in known_of(kinds, folder)}


def mutate(
    files: tuple[Path, ...],
    rules: tuple[str, ...],
    tries: int | None,
    as_json: bool,
    knowledge: Path | None,
    shelf: Path | None,
) -> int:
    """Change every agreed rule in one place after the other; 1 where a change goes unnoticed."""
    from advisor import replay as replaying
    from advisor.mutation import measuring, wording

    found = replaying.find(files)
    if not found:
        raise Refusal("There is no scenario here, so nothing would notice a change. Name a file or a folder with some.")
    root, products = what_counts(knowledge, shelf)
    kinds = _kinds(found, root)
    for kind in kinds:
        known = loaded(root, products, kind).rules
        unknown = [rule for rule in rules if rule not in known]
        if unknown:
            raise Refusal(f"'{unknown[0]}' is no rule of {kind}. 'gudgeon rules' lists them.")
    measured = [
        measuring.measure(root, kind, products, found, rules=rules, tries=measuring.TRIES if tries is None else tries)
        for kind in kinds
    ]
    if as_json:
        say(as_json_text([wording.as_data(each) for each in measured]))
    else:
        say("\n\n".join(wording.as_text(each) for each in measured))
    return NOT_SETTLED if any(len(each.survivors) > each.equivalent for each in measured) else DONE


def _kinds(files: list[Path], root: Path) -> list[str]:
    """The kinds of point that both files and knowledge know; of knowledge with one kind no file need be asked."""
    from advisor import replay as replaying

    known = kinds_in(root)
    return known_of(replaying.kinds_of(files), root) if len(known) > 1 else known


def compare(old: str, new: str, scenarios: Path | None, kind: str, as_json: bool, markdown: bool) -> int:
    """Tell what changes between two editions of the knowledge; 1 where a scenario or a region does."""
    from advisor import comparison
    from advisor import replay as replaying

    with comparison.edition(old) as before, comparison.edition(new) as after:
        editions = comparison.beside(lambda: _edition(before, kind, old), lambda: _edition(after, kind, new))
        compared = comparison.compare(*editions, replaying.find([scenarios] if scenarios else []))
    for problem in compared.problems:
        print(problem, file=sys.stderr)  # noqa: T201 - words beside the output
    tell = comparison.as_markdown if markdown else comparison.as_text
    say(as_json_text(comparison.as_data(compared)) if as_json else tell(compared))
    return NOT_SETTLED if compared.changed or compared.regions else DONE


def _edition(root: Path, kind: str, named: str) -> "Knowledge":
    return read_knowledge(root, kind, None, f"in {named}; nothing was compared")
