"""How the scenarios stand to the log: signed as they are, changed since, new or gone."""

import hashlib
import json
import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from pathlib import Path

from advisor.approval.log import BEGIN, NAME, NOTHING, Log, read_log
from advisor.documents import Mapping as Tree
from advisor.documents import Mark, Node, Problem, Problems, Scalar, read_document
from advisor.mishaps import Refusal

RECORD = "approved"
"""The key by which a scenario says which entry of the log signed it last."""


@dataclass(frozen=True, slots=True)
class Standing:
    """The log of a folder, and what in the folder is not as it was signed; `before` maps to the signed fingerprint."""

    root: Path
    log: Log | None
    prints: Mapping[str, str]
    edited: Mapping[str, str]
    new: tuple[str, ...]
    gone: Mapping[str, str]


def log_above(files: Iterable[Path]) -> Path | None:
    """The folder of the log that these files belong to; None where they have none.

    Raises:
        Refusal: where there are several.
    """
    folders = {folder for file in files for folder in file.absolute().parents}
    found = sorted(folder for folder in folders if (folder / NAME).exists() or (folder / NAME).is_symlink())
    if len(found) > 1:
        raise Refusal(f"There are several logs: {', '.join(str(each / NAME) for each in found)}. Keep the right one.")
    return found[0] if found else None


def standing(root: Path, trees: Mapping[Path, Tree], problems: Problems) -> Standing:
    """How the scenarios below a folder stand; `trees` are documents that were read already."""
    nested = sorted(each for each in root.rglob(NAME) if each.parent != root)
    for each in nested:
        problems.add(Problem.at(Mark(str(each), 1, 1), "a second log stands here", "delete it: one log is enough"))
    before = len(problems)
    log = read_log(root / NAME, problems)
    sound = len(problems) == before
    latest = log.latest() if log else {}
    left = {path: (entry, signed.after) for path, (entry, signed) in latest.items() if signed.after != NOTHING}
    prints: dict[str, str] = {}
    edited: dict[str, str] = {}
    for file in sorted(root.rglob("*.yaml")):
        tree = trees.get(file) or read_document(file, Problems())
        if not isinstance(tree, Tree):
            continue
        path = file.relative_to(root).as_posix()
        prints[path] = fingerprint(tree)
        entry, after = left.get(path, (None, ""))
        if sound:
            wanted = "" if entry is None or entry.group == BEGIN else f"entry {entry.number}, {entry.seal[:16]}"
            _recorded(tree, wanted, problems)
        if after and prints[path] != after:
            edited[path] = after
    return Standing(
        root,
        log,
        prints,
        edited,
        tuple(path for path in prints if log and path not in left),
        {path: after for path, (_, after) in left.items() if path not in prints},
    )


def fingerprint(tree: Tree) -> str:
    """A digest of what a scenario says: comments and layout do not count, nor the record of its approval."""
    said = {key: node for key, node in tree.items() if key != RECORD}
    return hashlib.sha256(json.dumps(said, ensure_ascii=True, sort_keys=True).encode()).hexdigest()[:32]


def _recorded(tree: Tree, wanted: str, problems: Problems) -> None:
    """Tell where the record in a scenario is not the one of the log."""
    node: Node | None = tree.get(RECORD)
    seen = str(node) if isinstance(node, Scalar) else "" if node is None else "something else"
    if seen == wanted:
        return
    mark = tree.mark if node is None else node.mark
    if not wanted:
        message = "no entry of the log has approved this scenario"
        hint = f"delete the line '{RECORD}:' where the scenario is a copy; else put the log back as it was"
    elif node is None:
        message, hint = "the record of its approval is missing", f"put the line '{RECORD}: {wanted}' back"
    else:
        message = f"the log has '{wanted}' as the last approval of this scenario"
        hint = "put the scenario and the log back as they were"
    problems.add(Problem.at(mark, message, hint, (RECORD,)))


def recorded_in(text: str, number: int, seal: str) -> str:
    """The text of a scenario with the record of its approval."""
    line = f"{RECORD}: entry {number}, {seal[:16]}"
    found = re.compile(rf"^{RECORD}:.*$", re.MULTILINE)
    if found.search(text):
        return found.sub(line, text, count=1)
    return f"{text.rstrip()}\n{line}\n"
