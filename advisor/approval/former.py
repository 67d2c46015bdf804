"""What a scenario said when it was signed, where version control still has it: the log keeps fingerprints only."""

import subprocess
from collections.abc import Iterator
from pathlib import Path

from advisor.approval.standing import RECORD, fingerprint
from advisor.documents import Mapping, Node, Problems, Scalar, read_document, read_text

_REVISIONS = 30
"""So many revisions of the file are looked at, the latest first."""
_LONGEST = 160


def changes_by_hand(root: Path, path: str, signed: str) -> tuple[str, ...]:
    """What differs from the scenario of this fingerprint, key by key; one sentence where that is not known."""
    now, before = read_document(root / path, Problems()), _signed(root, path, signed)
    if not isinstance(now, Mapping) or before is None:
        return ("what it said is not in the log: see in your version control what was changed",)
    return tuple(_differing(before, now))


def _signed(root: Path, path: str, signed: str) -> Mapping | None:
    revisions = _git(root, "log", "--format=%H", f"-{_REVISIONS}", "--", path).split()
    for revision in revisions:
        tree = read_text(_git(root, "show", f"{revision}:./{path}"), path, Problems())
        if isinstance(tree, Mapping) and fingerprint(tree) == signed:
            return tree
    return None


def _git(root: Path, *words: str) -> str:
    """What git says; nothing where it fails or is not there."""
    try:
        done = subprocess.run(["git", "-C", str(root), *words], capture_output=True, check=False)  # noqa: S603, S607 - the user's own git, no shell
    except OSError:
        return ""
    return done.stdout.decode("utf-8", "replace") if done.returncode == 0 else ""


def _differing(before: Mapping, now: Mapping, *above: str) -> Iterator[str]:
    for key in dict.fromkeys((*before, *now)):
        was, is_, keys = before.get(key), now.get(key), (*above, key)
        if was == is_ or keys == (RECORD,):
            continue
        if isinstance(was, Mapping) and isinstance(is_, Mapping) and len(keys) < 3:
            yield from _differing(was, is_, *keys)
        else:
            yield f"{' '.join(keys)}: was {_said(was)}, now {_said(is_)}"


def _said(node: Node | None) -> str:
    text = "not there" if node is None else _on_one_line(node)
    clean = "".join(sign if sign.isprintable() else " " for sign in text)
    return clean if len(clean) <= _LONGEST else f"{clean[:_LONGEST]} .."


def _on_one_line(node: Node) -> str:
    if isinstance(node, Mapping):
        return f"{{{', '.join(f'{key}: {_on_one_line(each)}' for key, each in node.items())}}}"
    return str(node) if isinstance(node, Scalar) else f"[{', '.join(map(_on_one_line, node))}]"
