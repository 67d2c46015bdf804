"""What damage has taken away, so that its consequences elsewhere are not reported as faults of their own."""

from collections.abc import Iterable
from dataclasses import dataclass, field
from typing import Literal

Space = Literal[
    "sources", "tables", "names", "cautions", "referrals", "rules", "procedures", "items", "rows", "choices",
]  # fmt: skip
"""What a name names; facts and properties share one space; a table may have lost some of its rows or ids."""


@dataclass(slots=True)
class Lost:
    """Names whose declarations are damaged, and spaces of which a whole file could not be read."""

    _names: set[tuple[Space, str]] = field(default_factory=set)
    _wholes: set[Space] = field(default_factory=set)

    def lose(self, space: Space, name: str) -> None:
        """Note one damaged declaration."""
        self._names.add((space, name))

    def lose_all(self, space: Space, names: Iterable[str]) -> None:
        """Note damaged declarations."""
        self._names.update((space, name) for name in names)

    def lose_whole(self, *spaces: Space) -> None:
        """Note a file that could not be read: any name of these spaces may have stood in it."""
        self._wholes.update(spaces)

    def has(self, space: Space, name: str) -> bool:
        """Whether this name is lost for certain."""
        return (space, name) in self._names

    def may_have(self, space: Space, name: str) -> bool:
        """Whether a name that is known nowhere may be a lost one."""
        return space in self._wholes or self.has(space, name)

    def __bool__(self) -> bool:
        return bool(self._names or self._wholes)
