"""The shape of every knowledge file, as pydantic models: the structural stage of loading.

Conditions, table cells and values stay trees here; they are typed by the declared kinds in the next stage.
"""

from typing import Annotated, Literal

from pydantic import BaseModel, BeforeValidator, ConfigDict, Field

from advisor.knowledge.kinds import Id, Level, Name, Number, Present, Text, Tree, YesNo

Unit = Annotated[
    Literal[
        "°C", "K", "mm", "1/min", "mm/min", "mm²/s", "mPa·s", "kg/m³", "N", "h", "g", "cm³", "kg", "%", "", "ISO VG",
        "months",
    ],
    Present,
]  # fmt: skip
SourceKind = Literal["standard", "handbook", "paper", "government", "common practice"]
Checked = Literal["yes", "from memory", "no source"]
Kind = Literal["number", "choice", "scale", "several", "item", "yes_no", "text"]


class Shape(BaseModel):
    """A mapping of which every key is known."""

    model_config = ConfigDict(extra="forbid")


class CitationShape(Shape):
    """A place in a source."""

    id: Id
    where: Text = ""
    checked: Checked | None = None


Citations = list[CitationShape]


class SourceShape(Shape):
    """A publication."""

    title: Text
    publisher: Text = ""
    year: Text = ""
    kind: SourceKind
    checked: Checked
    note: Text = ""


class StepShape(Shape):
    """How a shortfall is counted."""

    absolute: Number | None = None
    ratio: Number | None = None
    places: YesNo | None = None


class DomainShape(Shape):
    """A kind of value."""

    title: Text = ""
    kind: Kind
    unit: Unit = ""
    limits: Annotated[list[Number], Field(min_length=2, max_length=2)] | None = None
    step: Tree = None
    places: list[Number] | None = None
    named: dict[Name, Number] | None = None
    choices: Tree = None
    choices_of: Id | None = None
    note: Text = ""
    source: Citations = []


class QuestionShape(Shape):
    """A question of the interview."""

    ask: Text
    help: Text = ""
    section: Text = ""
    decides: Literal["lubricant", "quantity"] = "lubricant"
    optional: YesNo = False
    when: Tree = None


class AssumeShape(Shape):
    """What stands for a don't know."""

    value: Tree = None
    each: list[Tree] | None = None
    because: Text
    source: Citations = []
    state: Literal["open"] | None = None


class ConcludedShape(Shape):
    """What a conclusion starts from and how several combine."""

    otherwise: Tree
    combine: Literal["highest", "lowest", "one"]


class LookUpShape(Shape):
    """A look-up in a table."""

    table: Id
    by: Tree
    column: Id | None = None
    combine: Literal["highest", "lowest"] | None = None
    otherwise: Tree = None


class FactShape(DomainShape):
    """A declared fact."""

    title: Text
    question: QuestionShape | None = None
    assume: AssumeShape | None = None
    unasked: Tree = None
    filled: LookUpShape | None = None
    concluded: ConcludedShape | None = None
    tunable: AssumeShape | None = None


class WorstPartShape(Shape):
    """One part of a worst-of."""

    looked_up: LookUpShape


class SameShape(Shape):
    """The fact that names the product in use."""

    item: Name


class PropertyShape(DomainShape):
    """A declared property of lubricants."""

    title: Text
    of: Literal["grease", "oil"] | None = None
    test: Text = ""
    hidden: YesNo = False
    formula: Id | None = None
    inputs: Tree = Field(default=None, alias="in")
    looked_up: LookUpShape | None = None
    worst_of: list[WorstPartShape] | None = None
    same: SameShape | None = None
    concluded: ConcludedShape | None = None


class ComputationShape(Shape):
    """A computed fact."""

    fact: Name
    title: Text
    formula: Id | None = None
    inputs: Tree = Field(default=None, alias="in")
    looked_up: LookUpShape | None = None
    limits: Annotated[list[Number], Field(min_length=2, max_length=2)] | None = None
    note: Text = ""
    source: Citations = []


class ConclusionShape(Shape):
    """One conclusion of a rule."""

    must: Tree = None
    should: Tree = None
    level: Level | None = None
    set: Tree = None
    caution: Id | None = None
    refer: Id | None = None
    withhold: YesNo = False
    for_: Tree = Field(default=None, alias="for")


OR_ONE = "or_one"
"""Marks a list of which one entry may stand alone."""


def _listed(value: object) -> object:
    return [value] if isinstance(value, dict) else value


class MayConflictShape(Shape):
    """A conflict that is real life."""

    rule: Id
    because: Text


class RuleShape(Shape):
    """A written rule."""

    id: Name
    title: Text
    status: Literal["draft", "agreed", "retired"]
    each_row_of: Id | None = None
    where: Tree = None
    when: Tree
    unless: Tree = None
    then: Annotated[list[ConclusionShape], Field(min_length=1)]
    because: Text
    limits: Text = ""
    source: Annotated[Citations, Field(min_length=1)]
    fires: Tree = None
    silent: Tree = None
    may_conflict: Annotated[list[MayConflictShape], BeforeValidator(_listed)] = Field(
        default=[], json_schema_extra={OR_ONE: True}
    )
    note: Text = ""


class TableShape(Shape):
    """A table, or a symmetric matrix."""

    title: Text
    key: Id | None = None
    policy: Literal["unique", "all", "complete"] | None = None
    columns: dict[Id, Tree] | None = None
    matrix: Literal["symmetric"] | None = None
    of: Tree = None
    values: Tree = None
    source: Citations = []
    note: Text = ""
    rows: Tree


class CautionShape(Shape):
    """A caution."""

    text: Text
    standing: YesNo = False
    source: Citations = []


class ForkBranchShape(Shape):
    """One branch of a fork: a value for the fact, or ticks to leave out."""

    label: Text
    value: Tree = None
    without: Tree = None


class ForkShape(Shape):
    """A contested point that is run once per branch."""

    title: Text
    when: Tree
    fact: Name
    branches: Annotated[list[ForkBranchShape], Field(min_length=2, max_length=6)]
    because: Text
    source: Citations = []


class ReferralShape(CautionShape):
    """A referral."""

    to: Text


class ProcedureShape(Shape):
    """Numbered steps."""

    title: Text
    steps: list[Text]
    leads_to: list[Name] = []
    source: Citations = []


class DocketRowShape(Shape):
    """A row of the docket."""

    id: Id
    title: Text
    recommends: Name | None = None
    demands: list[Name] | None = None
    facts: list[Name] | None = None
    shown_if: Tree = None


class UsualOilsShape(Shape):
    """How the usual oils are made."""

    table: Id
    family: Name
    low: Id = Field(alias="from")
    high: Id = Field(alias="to")
    index: Id
    ordinary: Tree
    source: Citations = []


class PointKindShape(Shape):
    """A kind of point."""

    title: Text
    folder: Id


class PurposeShape(Shape):
    """A selection step."""

    title: Text
    purpose: Text = Field(alias="for")
