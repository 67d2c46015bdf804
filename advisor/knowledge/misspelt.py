"""Where a misspelt name is told: where it is used, or where it is declared and every use is right."""

import re
from collections.abc import Iterable, Iterator
from functools import cached_property

from advisor.documents import Mapping, Mark, Node, Problem, Scalar

_PLACEHOLDER = re.compile(r"\{(?:row\.)?(\w+)\}")
_WORD = re.compile(r"[A-Za-z0-9]+")
_BETWEEN = re.compile(r"[^A-Za-z0-9]")
_OFTEN = 2
"""A name used so often without being known is hardly misspelt each time."""
_LONG = 5
"""The letters of shorter words say nothing: they may stand for something."""


def told_where_misspelt(problems: Iterable[Problem], trees: Iterable[Node]) -> list[Problem]:
    """The problems; those of a name that is known nowhere become one at the declaration, where that is misspelt."""
    told = list(problems)
    spellings = _Spellings(tuple(trees), {name for each in told if each.like for name in (each.name, each.like)})
    wrong = {
        pair: spellings.places[pair[1]][0]
        for pair in {(each.name, each.like) for each in told if each.like}
        if spellings.declaration_is_wrong(*pair)
    }
    kept = [each for each in told if (each.name, each.like) not in wrong]
    return kept + [
        _at_declaration(pair, mark, [each for each in told if (each.name, each.like) == pair])
        for pair, mark in wrong.items()
    ]


def _at_declaration(pair: tuple[str, str], mark: Mark, uses: list[Problem]) -> Problem:
    name, like = pair
    first, places = min(uses, key=lambda use: use.mark), f"in {len(uses)} places, first " if len(uses) > 1 else ""
    message = (
        f"'{like}' is used nowhere, while '{name}', which is declared nowhere, is used "
        f"{places}in line {first.line} of {first.file}"
    )
    return Problem.at(mark, message, f"Is '{name}' meant here?")


class _Spellings:
    """Every text of the folder, to see which of two spellings is the odd one."""

    def __init__(self, trees: tuple[Node, ...], names: set[str]) -> None:
        self.trees, self.names = trees, names

    def declaration_is_wrong(self, name: str, like: str) -> bool:
        """Whether the known name, which nothing uses, is a misspelling of the one that is used.

        The odd one of the two has a word that stands nowhere else. Where both or neither have, a name that is used
        often is right; one that is used once, if its letters follow one another as elsewhere, and those of the known
        name do not.
        """
        if len(self.places.get(like, ())) != 1 or not _is_slip(name, like):
            return False
        odd, odd_like = self._odd_words(name), self._odd_words(like)
        if bool(odd) != bool(odd_like):
            return bool(odd_like)
        if len(self.places.get(name, ())) >= _OFTEN:
            return True
        long = all(len(word) >= _LONG for word in odd | odd_like)
        return long and self._odd_triples(odd) < self._odd_triples(odd_like)

    def _odd_words(self, name: str) -> set[str]:
        return {word.lower() for word in _BETWEEN.split(name)} - self.words

    def _odd_triples(self, words: set[str]) -> int:
        return len({triple for word in words for triple in _triples(word)} - self.triples)

    @cached_property
    def triples(self) -> set[str]:
        """The letters that follow one another in words."""
        return {triple for word in self.words for triple in _triples(word)}

    @cached_property
    def places(self) -> dict[str, list[Mark]]:
        """Where each of the names stands, as a key, as a value, or in a text in braces."""
        found: dict[str, list[Mark]] = {}
        if not self.names:
            return found
        for text, mark in self._texts():
            for each in (text, *(_PLACEHOLDER.findall(text) if "{" in text else ())):
                if each in self.names:
                    found.setdefault(each, []).append(mark)
        return found

    @cached_property
    def words(self) -> set[str]:
        """The words of all other texts."""
        return {
            word.lower()
            for text, _ in self._texts()
            if text not in self.names
            for word in _WORD.findall(_PLACEHOLDER.sub("", text))
        }

    def _texts(self) -> Iterator[tuple[str, Mark]]:
        for tree in self.trees:
            yield from _texts(tree)


def _is_slip(one: str, other: str) -> bool:
    """Whether one letter is wrong, missing or too much, or two neighbours are exchanged."""
    same = 0
    while same < min(len(one), len(other)) and one[same] == other[same]:
        same += 1
    one, other = one[same:], other[same:]
    return one[1:] in {other[1:], other} or one == other[1:] or (one[:2] == other[1::-1] and one[2:] == other[2:])


def _triples(word: str) -> Iterator[str]:
    edged = f" {word} "
    return (edged[at : at + 3] for at in range(len(edged) - 2))


def _texts(node: Node) -> Iterator[tuple[str, Mark]]:
    """Every key and every value with its place."""
    if isinstance(node, Scalar):
        yield str(node), node.mark
    elif isinstance(node, Mapping):
        for key, child in node.items():
            yield key, node.key_marks[key]
            yield from _texts(child)
    else:
        for child in node:
            yield from _texts(child)
