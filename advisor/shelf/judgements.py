"""All judgements on the facts of one case, kept for rules that are tried on the same facts."""

from collections.abc import Mapping, Sequence

from advisor.case import Fact
from advisor.conditions import Domain, Value
from advisor.shelf.catalogue import Catalogue, Raise
from advisor.shelf.judging import Judgement
from advisor.specification import Demand


class Judgements:
    """The judgements on one set of facts; other rules that are tried on the same facts judge only what is new."""

    def __init__(self, facts: Mapping[str, Fact], before: Mapping[object, Judgement] | None = None) -> None:
        self._facts = facts
        self._made: dict[object, Judgement] = {}
        self._before = before or {}

    def again(self) -> "Judgements":
        """Those of other rules on the same facts."""
        return Judgements(self._facts, self._made)

    def of(
        self,
        catalogue: Catalogue,
        demands: Sequence[Demand],
        domains: Mapping[str, Domain],
        raises: Sequence[Raise],
        *,
        needed: frozenset[str],
        lenient: bool = False,
        context: Mapping[str, Value] | None = None,
    ) -> Judgement:
        """The judgement of a catalogue; `lenient` is that of classes, which have no sheet that could lack a value."""
        key = catalogue, needed, tuple(raises), lenient, tuple((context or {}).items())
        like = self._before.get(key)
        columns = (
            like.columns
            if like is not None
            else catalogue.for_case(self._facts, raises, needed=needed, lenient=lenient, context=context)
        )
        made = Judgement(catalogue, columns, demands, domains, missing_counts=not lenient, like=like)
        self._made[key] = made
        return made
