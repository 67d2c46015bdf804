"""The matching stage: which conditions definitely hold for a record, found by the rule engine.

The engine is fast to lie when it is used loosely: see the limits in `compiling` and the guards below.
"""

import importlib
import threading
import weakref
from collections.abc import Mapping, Sequence
from typing import Final, Protocol, cast

from advisor.conditions import Condition, Domain, Record
from advisor.inference.attributes import PLAIN_ABOVE
from advisor.inference.compiling import HEAD, RETRACTION, SENTINEL, compile_conditions
from advisor.inference.faults import EngineFault, EngineMissing

_MEND: Final = (
    "CPPFLAGS=-DPyEval_CallObject=PyObject_CallObject "
    "pip install --no-cache-dir --no-binary durable-rules durable-rules==2.0.28"
)
_SESSION: Final = "1"
_MATCHED: Final = 0


class Engine(Protocol):
    """The part of the extension module that is used."""

    def create_ruleset(self, name: str, definition: str) -> int:
        """Build a rule set and return its handle."""

    def assert_fact(self, handle: int, message: str) -> tuple[int, int]:
        """Lay a record before the rules; return whether any matched, and the session."""

    def start_action_for_state(self, handle: int, session: int) -> tuple[str, str] | None:
        """The first rule that fired, in the second place."""

    def complete_and_start_action(self, handle: int, session: int) -> str | None:
        """The next rule that fired."""

    def retract_fact(self, handle: int, message: str) -> tuple[int, int]:
        """Take the record away again."""

    def delete_state(self, handle: int, session: str) -> None:
        """Forget the session; only where a rule has fired in it."""

    def delete_ruleset(self, handle: int) -> None:
        """Give the rule set's memory back."""


def load_engine() -> Engine:
    """The extension module, or one sentence that says how to get it."""
    try:
        return cast(Engine, importlib.import_module("durable_rules_engine"))
    except ImportError as error:
        raise EngineMissing(
            f"The rule engine durable-rules cannot be loaded ({error}); install it with a C compiler at hand: {_MEND}"
        ) from None


class Matcher:
    """Conditions in the engine, known by their position; belongs to the thread that made it.

    Conditions without terms never reach the engine: they always hold.
    """

    def __init__(self, conditions: Sequence[Condition], domains: Mapping[str, Domain]) -> None:
        self._engine = load_engine()
        self._owner = threading.get_ident()
        compiled = compile_conditions(conditions, domains)
        self._always = compiled.always
        self._spellings = [(each.fact, each.head, each.plain_below, each) for each in compiled.spellings]
        self._rule_sets = compiled.rule_sets
        self._handles: list[int | None] = [None] * len(compiled.rule_sets)
        # The engine's memory lies outside Python: a matcher that is dropped must give it back.
        weakref.finalize(self, _give_back, self._engine, self._handles, self._owner).atexit = False

    def fired(self, record: Record) -> frozenset[int]:
        """The positions of all conditions that definitely hold.

        Raises `Unsendable` for a value that cannot be matched, `EngineFault` where the engine cannot be trusted.
        """
        self._check_owner()
        known = record.get
        written = [
            head + repr(seen) if type(seen := known(fact)) is float and PLAIN_ABOVE < seen < below else spelling[seen]
            for fact, head, below, spelling in self._spellings
        ]
        fired = set(self._always)
        for place, rule_set in enumerate(self._rule_sets):
            message = HEAD + "".join([written[attribute] for attribute in rule_set.attributes]) + "}"
            fired.update([rule_set.owners[name] for name in self._fired_names(place, message)])
        return frozenset(fired)

    def close(self) -> None:
        """Give the engine's memory back; a later case would build the rule sets anew."""
        self._check_owner()
        _give_back(self._engine, self._handles, self._owner)

    def _fired_names(self, place: int, message: str) -> list[str]:
        # The handle is taken away while in use. Whatever interrupts the case, Ctrl-C included, leaves it taken:
        # an engine stopped halfway would stay silent for later cases, so the next case builds a new one.
        handle, self._handles[place] = self._handles[place], None
        try:
            if handle is None:
                handle = self._engine.create_ruleset("s", self._rule_sets[place].definition)
            names = self._drained(handle, message)
        except Exception as error:
            raise EngineFault(f"The rule engine failed on a case ({error}); run the case again.") from error
        if SENTINEL not in names:
            raise EngineFault("The rule engine stayed silent where a rule always fires; run the case again.")
        self._handles[place] = handle
        names.remove(SENTINEL)
        return names

    def _drained(self, handle: int, message: str) -> list[str]:
        """The names of all rules that fired, with the record laid down and taken away again."""
        names: list[str] = []
        following = self._engine.complete_and_start_action
        outcome, session = self._engine.assert_fact(handle, message)
        first = self._engine.start_action_for_state(handle, session) if outcome == _MATCHED else None
        firing = first[1] if first else None
        while firing is not None:
            names.append(firing[2:5])  # it begins {"NNN":
            firing = following(handle, session)
        if names:
            self._engine.retract_fact(handle, RETRACTION)
        return names

    def _check_owner(self) -> None:
        if threading.get_ident() != self._owner:
            raise EngineFault("The rule engine was called from a foreign thread; make one Matcher in each thread.")


def _give_back(engine: Engine, handles: list[int | None], owner: int) -> None:
    """Delete the rule sets behind these handles; in a foreign thread they are left alone."""
    if threading.get_ident() != owner:
        return
    for place, handle in enumerate(handles):
        if handle is not None:
            handles[place] = None
            engine.delete_state(handle, _SESSION)
            engine.delete_ruleset(handle)
