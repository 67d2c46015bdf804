"""What every command needs: the knowledge loaded, and output written."""

import gc
import sys
from pathlib import Path
from typing import TYPE_CHECKING

from advisor.mishaps import Refusal
from advisor.places import knowledge_folder

if TYPE_CHECKING:
    from advisor.advice import Advisor
    from advisor.knowledge import Knowledge


def loaded(knowledge: Path | None, shelf: Path | None, point_kind: str = "rolling_bearing") -> "Knowledge":
    """The knowledge that the command line, the settings or the shipped folder name."""
    from advisor.documents import Faulty
    from advisor.knowledge import load
    from advisor.settings import settings

    kept = settings()
    try:
        loaded = load(knowledge or kept.knowledge or knowledge_folder(), point_kind, shelf or kept.shelf)
    except Faulty as fault:
        raise Refusal(f"{fault}\n{count(len(fault.problems))} in the knowledge; nothing was done.") from None
    # Knowledge lives as long as the process: the collector need not walk it again for every advice.
    gc.freeze()
    return loaded


def say(text: str) -> None:
    """Write text to standard output, ended by a line end."""
    sys.stdout.write(text if text.endswith("\n") else text + "\n")


def count(faults: int) -> str:
    """How many problems, in words."""
    return "1 problem" if faults == 1 else f"{faults} problems"


def as_json_text(data: object) -> str:
    """Plain data as JSON for people and machines."""
    import json

    return json.dumps(data, ensure_ascii=False, indent=1)


def kinds_in(root: Path) -> list[str]:
    """The kinds of point that a knowledge folder declares."""
    from advisor.documents import Mapping, Problems, read_document

    tree = read_document(root / "point_kinds.yaml", Problems())
    kinds = tree.get("kinds") if isinstance(tree, Mapping) else None
    return list(kinds) if isinstance(kinds, Mapping) and kinds else ["rolling_bearing"]


def advisors_for(kinds: list[str], knowledge: Path | None, shelf: Path | None) -> "dict[str, Advisor]":
    """One advisor for each kind of point that the knowledge has; a kind that it lacks is told where a file names it."""
    from advisor.advice import Advisor

    known = kinds_in(knowledge or knowledge_folder())
    chosen = [kind for kind in kinds if kind in known] or known[:1]
    return {kind: Advisor(loaded(knowledge, shelf, kind)) for kind in chosen}
