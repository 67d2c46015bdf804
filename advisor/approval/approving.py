"""Sign for one group: rewrite its expectations and append an entry to the log, or leave everything as it was."""

import os
from collections.abc import Callable, Iterable, Iterator, Mapping
from contextlib import contextmanager, suppress
from dataclasses import dataclass
from pathlib import Path

from advisor.advice import Advisor
from advisor.approval.groups import EDITED, GONE, KIND, NEW, RULE, Group, groups
from advisor.approval.log import BEGIN, NAME, NOTHING, Entry, Log, Signed
from advisor.approval.rewriting import rewritten
from advisor.approval.signing import Signature
from advisor.approval.standing import RECORD, Standing, fingerprint, log_above, recorded_in, standing
from advisor.documents import Mapping as Tree
from advisor.documents import Problem, Problems, Unwritable, nearest, read_text, write_text_safely
from advisor.mishaps import Refusal
from advisor.replay import Outcome, find, replay

_LOCKED = ".APPROVALS"
_WHAT = {
    RULE: "differences that name rule {about}",
    KIND: "differences of kind {about}",
    EDITED: "{about} as changed by hand",
    NEW: "{about} as a new scenario",
    GONE: "that {about} is gone",
}


@dataclass(frozen=True, slots=True)
class Review:
    """One replay of a folder of scenarios against one knowledge, and what is to be signed."""

    outcome: Outcome
    standing: Standing
    groups: tuple[Group, ...]
    knowledge: str


def review(root: Path, advisors: Mapping[str, Advisor]) -> Review:
    """Replay everything below a folder and see what is to be signed.

    Raises:
        Refusal: where the log, a record or a scenario is not sound.
    """
    _one_log(root)
    outcome = replay(find([root]), advisors)
    problems = Problems(outcome.problems)
    found = reviewed(root, outcome, advisors, problems)
    if len(problems):
        raise Refusal("\n".join(map(str, problems)) + "\nNothing can be approved until this is mended.")
    return found


def reviewed(root: Path, outcome: Outcome, advisors: Mapping[str, Advisor], problems: Problems) -> Review:
    """What is to be signed after a replay; what is wrong with the log is told."""
    trees = {played.scenario.path: played.scenario.saved.tree for played in outcome.played}
    found = standing(root, trees, problems)
    rules = {rule for advisor in advisors.values() for rule in advisor.knowledge.rules}
    knowledge = next(iter(advisors.values())).knowledge.fingerprint
    return Review(outcome, found, groups(outcome, found, rules, knowledge), knowledge)


def review_of(
    files: Iterable[Path], outcome: Outcome, advisors: Mapping[str, Advisor]
) -> tuple[Review | None, Problems]:
    """What is to be signed where the files have a log, and what is wrong with it or with what they record of it.

    Where something is wrong nothing can be signed, and nothing is said to be.
    """
    problems = Problems()
    root = log_above(files)
    if root is not None:
        found = reviewed(root, outcome, advisors, problems)
        return (None if len(problems) else found), problems
    for played in outcome.played:
        node = played.scenario.saved.tree.get(RECORD)
        if node is not None:
            message = f"this scenario was approved, but there is no {NAME} in the folders above it"
            problems.add(Problem.at(node.mark, message, "put the log back as it was", (RECORD,)))
    return None, problems


def approve(root: Path, name: str, by: Signature, day: str, advisors: Callable[[], Mapping[str, Advisor]]) -> Entry:
    """Sign for the group of this name.

    Raises:
        Refusal: where it is no group of what stands now, or where anything is in the way; then nothing is written.
    """
    _one_log(root)
    with _locked(root):
        now = review(root, advisors())
        strange = [path for path in now.standing.prints if not path.isprintable()]
        if strange:
            raise Refusal(f"The name of {strange[0]!r} holds a line break or a sign that cannot be seen. Rename it.")
        if name == BEGIN:
            return _begin(now, by, day)
        if now.standing.log is None:
            raise Refusal(f"{root} has no log yet. 'gudgeon approve {BEGIN}' begins one, while nothing differs.")
        group = _group(name, now)
        _not_by_hand(group, now.standing)
        texts, signed = _signed(group, now)
        log = now.standing.log
        entry = Entry(
            len(log.entries) + 1,
            day,
            by.by,
            _WHAT[group.kind].format(about=group.about),
            by.because,
            log.knowledge,
            now.knowledge,
            signed,
            log.head,
        )
        records = {path: recorded_in(text, entry.number, entry.seal) for path, text in texts.items()}
        _write(root, records, signed, log.with_entry(entry))
        return entry


def _one_log(root: Path) -> None:
    if not root.is_dir():
        raise Refusal(f"'{root}' is no folder of scenarios.")
    above = log_above([root / NAME])
    if above is not None and above != root.absolute():
        raise Refusal(f"These scenarios belong to the log {above / NAME}. Approve there: --scenarios {above}")


def _begin(now: Review, by: Signature, day: str) -> Entry:
    """Begin the log: every scenario as it is, while its advice is as expected."""
    if now.standing.log is not None:
        raise Refusal("The log has begun already. Sign for the groups one by one.")
    if now.outcome.differing:
        raise Refusal("The log begins only while nothing differs. Put the knowledge back, begin, then change it.")
    if not now.standing.prints:
        raise Refusal("There is no scenario here.")
    signed = tuple(Signed(path, NOTHING, print_) for path, print_ in now.standing.prints.items())
    entry = Entry(1, day, by.by, BEGIN, by.because, NOTHING, now.knowledge, signed, NOTHING)
    log = Log(now.standing.root / NAME)
    _write(now.standing.root, {}, (), log.with_entry(entry))
    return entry


def _group(name: str, now: Review) -> Group:
    found = next((each for each in now.groups if each.name == name), None)
    if found is not None:
        return found
    names = [each.name for each in now.groups]
    about, _, digest = name.partition("@")
    same = next((each for each in names if each.partition("@")[0] == about), "")
    if same and digest:
        raise Refusal(f"'{name}' is void: knowledge, scenarios or log have changed since. Replay; it is {same} now.")
    if same:
        raise Refusal(f"Name the group as the replay shows it, {same}, so that you sign for what you have seen.")
    hint = nearest(name, names) or (f" The groups are {', '.join(names)}." if names else " Nothing is to be signed.")
    raise Refusal(f"'{name}' is no group. One group is signed at a time.{hint}")


def _not_by_hand(group: Group, found: Standing) -> None:
    """Refuse a group that would sign for a change by hand on the side."""
    if group.kind not in {RULE, KIND}:
        return
    unsigned = [path for path in group.paths if path in found.edited or path in found.new]
    if unsigned:
        raise Refusal(f"{', '.join(unsigned)}: new or changed by hand, and not signed for. Sign for that first.")


def _signed(group: Group, now: Review) -> tuple[dict[str, str], tuple[Signed, ...]]:
    """The new texts of the scenarios without their records, and what the log says of them."""
    texts: dict[str, str] = {}
    signed: list[Signed] = []
    log = now.standing.log
    latest = log.latest() if log else {}
    for path in group.paths:
        before = latest[path][1].after if path in latest else NOTHING
        if group.kind == GONE:
            signed.append(Signed(path, before, NOTHING))
            continue
        text = _text(now.standing.root / path)
        words: tuple[str, ...] = ()
        chosen = [item.difference for item in group.items if item.path == path and item.difference]
        if chosen:
            played = next(item.played for item in group.items if item.path == path and item.played)
            text, words = rewritten(text, played, chosen)
        texts[path] = text
        signed.append(Signed(path, before, _print_of(text, path), words))
    return texts, tuple(signed)


def _text(path: Path) -> str:
    """The text of a file with its own line ends."""
    return path.read_bytes().decode("utf-8")


def _print_of(text: str, path: str) -> str:
    tree = read_text(text, path, Problems())
    if not isinstance(tree, Tree):
        raise Refusal(f"{path} cannot be read any more. Nothing was written.")
    return fingerprint(tree)


def _write(root: Path, texts: Mapping[str, str], signed: tuple[Signed, ...], log: str) -> None:
    """Write the scenarios, then the log; where something fails, everything is put back."""
    after = {each.path: each.after for each in signed}
    for path, text in texts.items():
        if (root / path).is_symlink():
            raise Refusal(f"{root / path} is a link. Approve where the scenario itself is. Nothing was written.")
        problems = Problems()
        tree = read_text(text, path, problems)
        if len(problems) or not isinstance(tree, Tree) or RECORD not in tree or fingerprint(tree) != after[path]:
            raise Refusal(f"{root / path}: the record cannot be added. Write the scenario in block style first.")
    kept = {path: _text(root / path) for path in texts}
    done: list[str] = []
    try:
        if (root / NAME).exists() and not os.access(root / NAME, os.W_OK):
            raise Unwritable(f"'{root / NAME}' is write-protected.")  # noqa: TRY301 - told like the others below
        for path, text in texts.items():
            write_text_safely(root / path, text)
            done.append(path)
        write_text_safely(root / NAME, log)
    except (Unwritable, OSError) as fault:
        for path in done:
            with suppress(Unwritable):
                write_text_safely(root / path, kept[path])
        raise Refusal(f"{fault} Nothing was approved.") from None


@contextmanager
def _locked(root: Path) -> Iterator[None]:
    """One approval at a time; one that was killed on this machine is not in the way."""
    from advisor.interview import Keeper

    keeper = Keeper(root / _LOCKED)
    if not keeper.take():
        who = f" (process {keeper.holder})" if keeper.holder else ""
        raise Refusal(f"Another approval is going on here{who}. If it was broken off, delete {keeper.lock}.")
    try:
        if not keeper.lock.is_file():
            raise Refusal(f"'{root}' cannot be written. Nothing was approved.")
        yield
    finally:
        keeper.release()
