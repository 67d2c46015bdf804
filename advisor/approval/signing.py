"""Who signs, and why: a person's name and a reason that say something."""

import re
from dataclasses import dataclass

from advisor.mishaps import Refusal

_LONGEST_NAME, _LONGEST_REASON = 80, 400
_WORD = re.compile(r"[^\W\d_]{2,}")


@dataclass(frozen=True, slots=True)
class Signature:
    """A reviewer's name and the reason, on one line each."""

    by: str
    because: str


def signature(by: str, because: str) -> Signature:
    """The signature that these two texts make.

    Raises:
        Refusal: where one of them says nothing.
    """
    name, reason = _line(by, "--by", _LONGEST_NAME), _line(because, "--because", _LONGEST_REASON)
    if not re.match(r"[^\W\d_]", name) or not _WORD.search(name):
        raise Refusal(f"'{name}' is nobody's name. Write --by 'First Last': the person who answers for it.")
    if len({word.casefold() for word in _WORD.findall(reason)}) < 3:
        raise Refusal("The reason says too little. Write --because with a sentence that a reader understands later.")
    return Signature(name, reason)


def _line(text: str, option: str, longest: int) -> str:
    line = text.strip()
    if not line:
        raise Refusal(f"{option} is empty. Nothing is approved without a name and a reason.")
    if not text.isprintable():
        raise Refusal(f"{option} holds a line break or a character that cannot be seen. Write it on one line.")
    if len(line) > longest:
        raise Refusal(f"{option} is longer than {longest} characters. Say it shorter.")
    return line
