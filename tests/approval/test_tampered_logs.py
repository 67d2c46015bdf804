"""A thousand tampered logs: by letters, lines and entries, some with seals made anew. Every one is detected."""

import random
from collections.abc import Callable
from dataclasses import replace

from advisor.approval.log import HEAD, NAME, parsed
from advisor.approval.standing import standing
from advisor.documents import Mapping, Problems, read_document
from tests.approval.desk import Desk

LOGS = 1000
Blocks = list[str]


def letter(text: str, rng: random.Random) -> str:
    at = rng.randrange(len(text))
    return text[:at] + rng.choice("abcdef0123456789 \n.:,") + text[at + 1 :]


def letter_less(text: str, rng: random.Random) -> str:
    at = rng.randrange(len(text))
    return text[:at] + text[at + 1 :]


def letter_more(text: str, rng: random.Random) -> str:
    at = rng.randrange(len(text) + 1)
    return text[:at] + rng.choice("abcdef0123456789 \n.:,\u200b") + text[at:]


def line_less(text: str, rng: random.Random) -> str:
    lines = text.splitlines()
    del lines[rng.randrange(len(lines))]
    return "\n".join(lines) + "\n"


def lines_changed_about(text: str, rng: random.Random) -> str:
    lines = text.splitlines()
    one, other = rng.sample(range(len(lines)), 2)
    lines[one], lines[other] = lines[other], lines[one]
    return "\n".join(lines) + "\n"


def line_doubled(text: str, rng: random.Random) -> str:
    lines = text.splitlines()
    lines.insert(rng.randrange(len(lines)), rng.choice(lines))
    return "\n".join(lines) + "\n"


def cut_off(text: str, rng: random.Random) -> str:
    return text[: rng.randrange(len(text))]


def by_entries(change: Callable[[Blocks, random.Random], Blocks]) -> Callable[[str, random.Random], str]:
    def tamper(text: str, rng: random.Random) -> str:
        head, *blocks = text.removesuffix("\n").split("\n\n")
        return "\n\n".join([head, *change(blocks, rng)]) + "\n"

    return tamper


def entry_less(blocks: Blocks, rng: random.Random) -> Blocks:
    del blocks[rng.randrange(len(blocks))]
    return blocks


def last_entries_less(blocks: Blocks, rng: random.Random) -> Blocks:
    return blocks[: rng.randrange(len(blocks))]


def entry_doubled(blocks: Blocks, rng: random.Random) -> Blocks:
    blocks.insert(rng.randrange(len(blocks) + 1), rng.choice(blocks))
    return blocks


def entries_changed_about(blocks: Blocks, rng: random.Random) -> Blocks:
    one, other = rng.sample(range(len(blocks)), 2)
    blocks[one], blocks[other] = blocks[other], blocks[one]
    return blocks


def sealed_anew(blocks: Blocks, rng: random.Random) -> Blocks:
    """One entry says something else, with a seal that suits it."""
    at = rng.randrange(len(blocks))
    entry = parsed(blocks[at])
    assert entry is not None
    blocks[at] = replace(entry, by="Otto Example").sealed()
    return blocks


def all_sealed_anew(blocks: Blocks, rng: random.Random) -> Blocks:
    """One entry says something else, and the whole chain after it is made to suit: the scenarios know better."""
    at = rng.randrange(len(blocks))
    found = [entry for block in blocks if (entry := parsed(block))]
    found[at] = replace(found[at], because="Something else was the reason")
    for place in range(at + 1, len(found)):
        found[place] = replace(found[place], follows=found[place - 1].seal)
    return [entry.sealed() for entry in found]


WAYS = [
    letter, letter_less, letter_more, line_less, line_doubled, lines_changed_about, cut_off, by_entries(entry_less),
    by_entries(last_entries_less), by_entries(entry_doubled), by_entries(entries_changed_about),
    by_entries(sealed_anew),    by_entries(all_sealed_anew),
]  # fmt: skip


def test_every_tampered_log_is_detected(desk: Desk) -> None:
    desk.sign(desk.the("thickener_steady"))
    for name in ("cool", "hot", "hotter", "cool"):
        for old, new in (("agreed", "draft"), ("draft", "agreed")):
            desk.edit(name, f"status: {old}", f"status: {new}")
            desk.sign(desk.the(f"edited/{name}"))
    text = desk.log.read_text(encoding="utf-8")
    assert text.startswith(HEAD)
    found = {file: read_document(file, Problems()) for file in desk.root.glob("*.yaml")}
    trees = {file: tree for file, tree in found.items() if isinstance(tree, Mapping)}
    sound = Problems()
    standing(desk.root, trees, sound)
    assert not len(sound)
    rng = random.Random(7)  # noqa: S311 - reproducible tampering
    tampered = 0
    while tampered < LOGS:
        way = WAYS[tampered % len(WAYS)]
        changed = way(text, rng)
        if changed == text:
            continue
        tampered += 1
        (desk.root / NAME).write_text(changed, encoding="utf-8", newline="")
        problems = Problems()
        standing(desk.root, trees, problems)
        assert len(problems), f"{way} was not detected:\n{changed}"
