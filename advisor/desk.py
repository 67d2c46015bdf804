"""What every command needs: the knowledge that counts, loaded; and output written."""

import gc
import os
import sys
from pathlib import Path
from typing import TYPE_CHECKING

from advisor.mishaps import Refusal
from advisor.places import knowledge_folder

if TYPE_CHECKING:
    from advisor.advice import Advisor
    from advisor.knowledge import Knowledge


def what_counts(knowledge: Path | None, shelf: Path | None) -> tuple[Path, Path | None]:
    """The folder and the shelf that count: of the command line, else the variables, else the settings, else shipped."""
    from advisor.settings import settings

    kept = settings()
    folder = knowledge or _named("GUDGEON_KNOWLEDGE") or kept.knowledge or knowledge_folder()
    return folder, shelf or _named("GUDGEON_SHELF") or kept.shelf


def _named(variable: str) -> Path | None:
    named = os.environ.get(variable)
    return Path(named) if named else None


def loaded(knowledge: Path | None, shelf: Path | None, point_kind: str = "rolling_bearing") -> "Knowledge":
    """The knowledge that counts, loaded for good: for a command that keeps it until it ends."""
    found = loaded_for_now(knowledge, shelf, point_kind)
    # The collector need not walk it again for every advice.
    gc.freeze()
    return found


def loaded_for_now(knowledge: Path | None, shelf: Path | None, point_kind: str = "rolling_bearing") -> "Knowledge":
    """The knowledge that counts, for the sheet, which may load it in a thread and again."""
    folder, products = what_counts(knowledge, shelf)
    return read_knowledge(folder, point_kind, products)


def read_knowledge(
    folder: Path, point_kind: str, shelf: Path | None, told: str = "in the knowledge; nothing was done"
) -> "Knowledge":
    """The knowledge of this folder; where it is at fault, the command ends with all its problems, told so."""
    from advisor.documents import Faulty
    from advisor.knowledge import load

    try:
        return load(folder, point_kind, shelf)
    except Faulty as fault:
        raise Refusal(f"{fault}\n{count(len(fault.problems))} {told}.") from None


def write(path: Path, text: str) -> None:
    """Write a file that the user asked for; where that fails, the command ends with the reason."""
    from advisor.documents import Unwritable, write_text_safely

    try:
        write_text_safely(path, text)
    except Unwritable as fault:
        raise Refusal(str(fault)) from None


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

    folder, products = what_counts(knowledge, shelf)
    return {kind: Advisor(loaded(folder, products, kind)) for kind in known_of(kinds, folder)}


def known_of(kinds: list[str], folder: Path) -> list[str]:
    """Those of the kinds that a knowledge folder declares; where it declares none of them, its first."""
    known = kinds_in(folder)
    return [kind for kind in kinds if kind in known] or known[:1]
