"""The knowledge in memory: what the YAML files say, typed, resolved and frozen."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from advisor.conditions import ALWAYS, Bound, Coded, Condition, Domain, FactRef, Value, leaves
from advisor.documents import Mark


@dataclass(frozen=True, slots=True)
class Source:
    """A publication, or the honest lack of one."""

    id: str
    title: str
    publisher: str
    year: str
    kind: str
    checked: str


@dataclass(frozen=True, slots=True)
class Citation:
    """A place in a source, and how surely it was read."""

    id: str
    where: str
    checked: str


@dataclass(frozen=True, slots=True)
class Question:
    """What the interview asks for a fact; `when` says for whom."""

    ask: str
    help: str
    section: str
    decides: str
    when: Condition
    optional: bool = False


@dataclass(frozen=True, slots=True)
class Assumption:
    """A value with its reason: what stands for a don't know, or what the specialist has tuned."""

    value: Value
    because: str
    source: tuple[Citation, ...]
    keeps_open: bool = False
    each: tuple[Value, ...] = ()


@dataclass(frozen=True, slots=True)
class Fork:
    """A contested point: where its condition holds, the case is run once per branch.

    A branch is a label with the value that the fact takes; for a tick list, with the ticks that are left out.
    """

    id: str
    title: str
    when: Condition
    fact: str
    branches: tuple[tuple[str, Value], ...]
    because: str
    source: tuple[Citation, ...]


@dataclass(frozen=True, slots=True)
class FromItem:
    """A property of the product that a fact names."""

    fact: str
    property: str
    otherwise: Value


@dataclass(frozen=True, slots=True)
class Concluded:
    """What a concluded fact or property starts from, and how several conclusions combine."""

    otherwise: Value
    combine: str


@dataclass(frozen=True, slots=True)
class Declaration:
    """A fact as declared: asked, concluded by rules, or tuned by the specialist."""

    name: str
    title: str
    domain: Domain
    mark: Mark
    question: Question | None = None
    assume: Assumption | None = None
    unasked: Value | FactRef | FromItem | None = None
    filled: "LookedUp | None" = None
    concluded: Concluded | None = None
    tunable: Assumption | None = None


@dataclass(frozen=True, slots=True)
class Formed:
    """A formula bound to names and numbers."""

    formula: str
    inputs: Mapping[str, str | float]


@dataclass(frozen=True, slots=True)
class LookedUp:
    """A look-up in a table; `by` pairs its columns (or the two sides of a matrix) with names."""

    table: str
    by: tuple[tuple[str, str], ...]
    column: str
    combine: str
    otherwise: Value | None


@dataclass(frozen=True, slots=True)
class WorstOf:
    """The worst of several look-ups, by the parts that a lubricant has."""

    parts: tuple[LookedUp, ...]


@dataclass(frozen=True, slots=True)
class Computation:
    """A fact that is computed or looked up in a step; `needs` are the facts it is found from."""

    fact: str
    title: str
    domain: Domain
    how: Formed | LookedUp
    step: str
    mark: Mark
    source: tuple[Citation, ...] = ()
    needs: tuple[str, ...] = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        how = self.how
        bound = how.inputs.values() if isinstance(how, Formed) else [name for _, name in how.by]
        object.__setattr__(self, "needs", tuple(each for each in bound if isinstance(each, str)))


@dataclass(frozen=True, slots=True)
class Band:
    """A stretch of numbers, from (included) .. below."""

    low: float
    high: float

    def meets(self, value: float) -> bool:
        """Whether the value lies in the band."""
        return self.low <= value < self.high


Cell = Value | Band


@dataclass(frozen=True, slots=True)
class Row:
    """One row of a table; a blank cell is missing."""

    id: str
    cells: Mapping[str, Cell]
    mark: Mark
    source: tuple[Citation, ...] = ()
    note: str = ""


@dataclass(frozen=True, slots=True)
class Table:
    """A table of the knowledge; a symmetric matrix keeps its cells by ordered pair."""

    id: str
    title: str
    columns: Mapping[str, Domain]
    bands: frozenset[str]
    rows: tuple[Row, ...]
    key: str
    policy: str
    mark: Mark
    source: tuple[Citation, ...] = ()
    matrix: Mapping[tuple[str, str], Value] = field(default_factory=dict)
    values: Domain | None = None
    row_of: Mapping[str, Row] = field(default_factory=dict, init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        object.__setattr__(self, "row_of", {row.id: row for row in self.rows} if self.key else {})


@dataclass(frozen=True, slots=True)
class Property:
    """Something a lubricant can be said to be: stored on its sheet, computed, looked up, or concluded by rules."""

    name: str
    title: str
    domain: Domain
    mark: Mark
    of: str = ""
    test: str = ""
    hidden: bool = False
    how: Formed | LookedUp | WorstOf | None = None
    concluded: Concluded | None = None
    same_item: str = ""

    @property
    def stored(self) -> bool:
        """Whether a product's sheet states it."""
        return self.how is None and self.concluded is None


@dataclass(frozen=True, slots=True)
class Asks:
    """A demand as a rule writes it; level 0 is a must."""

    property: str
    test: Condition
    level: int
    for_: Condition = ALWAYS
    refers: bool = field(default=False, init=False, repr=False, compare=False)
    """Whether a fact stands for a limit."""

    def __post_init__(self) -> None:
        terms = (*leaves(self.test), *leaves(self.for_))
        refers = any(isinstance(term, Bound) and isinstance(term.limit, FactRef) for term in terms)
        object.__setattr__(self, "refers", refers)


@dataclass(frozen=True, slots=True)
class Sets:
    """A concluded fact, or a concluded property of some lubricants."""

    name: str
    value: Coded | FactRef
    for_: Condition = ALWAYS


@dataclass(frozen=True, slots=True)
class Warns:
    """A caution."""

    caution: str
    for_: Condition = ALWAYS


@dataclass(frozen=True, slots=True)
class Refers:
    """A referral to a person who must decide."""

    to: str
    withhold: bool = False


Conclusion = Asks | Sets | Warns | Refers


@dataclass(frozen=True, slots=True)
class Rule:
    """A rule as written: the unit of status, source and scenarios."""

    id: str
    title: str
    status: str
    step: str
    point_kind: str
    because: str
    limits: str
    source: tuple[Citation, ...]
    table: str
    may_conflict: Mapping[str, str]
    fires: Mapping[str, Value]
    silent: Mapping[str, Value]
    mark: Mark
    matched: tuple[str, ...] = field(default=(), repr=False, compare=False)
    """The columns of its table that it compares."""


@dataclass(frozen=True, slots=True)
class Instance:
    """A written rule for one row of its table (or the rule itself): the unit of the trace."""

    id: str
    rule: Rule
    row: Row | None
    when: Condition
    then: tuple[Conclusion, ...]

    @property
    def binds(self) -> bool:
        """Whether its conclusions count; draft rules are traced only."""
        return self.rule.status == "agreed"


@dataclass(frozen=True, slots=True)
class Step:
    """One selection step."""

    id: str
    title: str
    purpose: str


@dataclass(frozen=True, slots=True)
class Caution:
    """A caution, or a referral (then `to` says to whom)."""

    id: str
    text: str
    source: tuple[Citation, ...]
    to: str = ""
    standing: bool = False


@dataclass(frozen=True, slots=True)
class Procedure:
    """Numbered steps of a change-over; `leads_to` are others that its steps refer to."""

    id: str
    title: str
    steps: tuple[str, ...]
    leads_to: tuple[str, ...]
    source: tuple[Citation, ...]


@dataclass(frozen=True, slots=True)
class DocketRow:
    """A row of the docket and what it shows."""

    id: str
    title: str
    recommends: str = ""
    demands: tuple[str, ...] = ()
    facts: tuple[str, ...] = ()
    shown_if: Condition = ALWAYS
    section: str = "docket"


@dataclass(frozen=True, slots=True)
class UsualOils:
    """How the usual oils are made: one per family and grade."""

    table: str
    family: str
    low: str
    high: str
    index: str
    ordinary: Condition


@dataclass(frozen=True, slots=True)
class Product:
    """A product of the shelf: what its sheet states."""

    item: str
    title: str
    values: Mapping[str, Value]
    mark: Mark


@dataclass(frozen=True, slots=True)
class PointKind:
    """A kind of lubrication point."""

    id: str
    title: str


@dataclass(frozen=True, slots=True)
class Knowledge:
    """Everything that a knowledge folder says about one kind of point."""

    point_kind: PointKind
    sources: Mapping[str, Source]
    steps: tuple[Step, ...]
    facts: Mapping[str, Declaration]
    computations: Mapping[str, Computation]
    properties: Mapping[str, Property]
    tables: Mapping[str, Table]
    rules: Mapping[str, Rule]
    instances: Mapping[str, tuple[Instance, ...]]
    cautions: Mapping[str, Caution]
    referrals: Mapping[str, Caution]
    procedures: Mapping[str, Procedure]
    docket: tuple[DocketRow, ...]
    usual_oils: UsualOils
    designations: Mapping[str, object]
    shelf_title: str
    shelf: tuple[Product, ...]
    fingerprint: str
    forks: Mapping[str, Fork] = field(default_factory=dict)

    def domain(self, name: str) -> Domain:
        """The domain of a fact or property."""
        if name in self.facts:
            return self.facts[name].domain
        if name in self.computations:
            return self.computations[name].domain
        return self.properties[name].domain

    def title(self, name: str) -> str:
        """What people call a fact or property."""
        if name in self.facts:
            return self.facts[name].title
        if name in self.computations:
            return self.computations[name].title
        return self.properties[name].title if name in self.properties else name.replace("_", " ")
