"""The shape of every knowledge file as a whole."""

from collections.abc import Mapping
from typing import Annotated, ClassVar, Literal

from pydantic import Field, WithJsonSchema

from advisor.knowledge.kinds import Id, Name, Number, Text, Tree
from advisor.knowledge.lost import Space
from advisor.knowledge.schema import (
    CautionShape,
    Citations,
    ComputationShape,
    DocketRowShape,
    FactShape,
    ForkShape,
    PointKindShape,
    ProcedureShape,
    PropertyShape,
    PurposeShape,
    ReferralShape,
    RuleShape,
    Shape,
    SourceShape,
    TableShape,
    UsualOilsShape,
)

Sections = Mapping[str, Space | None]


class DinLowerShape(Shape):
    """The table of lower temperatures, and the columns of it that a code reads."""

    table: Id
    lower: Id


class LowerShape(DinLowerShape):
    """The same with a letter for each."""

    letter: Id


class UpperShape(Shape):
    """The table of upper temperatures."""

    table: Id
    letter: Id
    upper: Id


class DinUpperShape(UpperShape):
    """The same with the water test that goes with each letter."""

    water_test: Id
    rating_to: Id


class WaterGridShape(Shape):
    """The table of water symbols."""

    table: Id
    letter: Id
    environment: Id
    rust: Id


class LettersShape(Shape):
    """A letter that is printed where one of these values is asked for."""

    property: Name
    values: list[Text]


class LoadSymbolShape(LettersShape):
    """A symbol for the load: one with, one without."""

    with_: Text = Field(alias="with")
    without: Text


class BaseOilLettersShape(Shape):
    """The letters of base oils."""

    table: Id
    property: Name
    letters: Id


class StandardShape(Shape):
    """What the codes of both standards are composed from."""

    title: Text
    written: Text
    need: Name
    cold: Name
    nlgi: Name
    source: Citations = Field(default_factory=list)


class DinShape(StandardShape):
    """DIN 51825."""

    kind: Text
    upper: DinUpperShape
    lower: DinLowerShape
    water_test: Name
    water_rating: Name
    rating_at_most: Number
    additive: dict[Id, LettersShape]
    base_oil: BaseOilLettersShape


class IsoShape(StandardShape):
    """ISO 6743-9."""

    prefix: Text
    water: Name
    upper: UpperShape
    lower: LowerShape
    water_grid: WaterGridShape
    load: LoadSymbolShape
    none_when: Tree = None


class DesignationsShape(Shape):
    """The two standards."""

    din: DinShape
    iso: IsoShape


class File(Shape):
    """What every file begins with."""

    format: Annotated[Literal["1"], WithJsonSchema({"enum": [1, "1"]})]
    sections: ClassVar[Sections] = {}
    """The collections of the file and what their names name; one damaged entry leaves the others readable."""


class SourcesFile(File):
    """sources.yaml."""

    sections: ClassVar[Sections] = {"sources": "sources"}
    sources: dict[Id, SourceShape]


class PointKindsFile(File):
    """point_kinds.yaml."""

    kinds: dict[Name, PointKindShape]


class StepsFile(File):
    """steps.yaml."""

    steps: dict[Name, PurposeShape]


class FactsFile(File):
    """facts.yaml."""

    sections: ClassVar[Sections] = {"facts": "names"}
    facts: dict[Name, FactShape] = Field(default_factory=dict)


class PropertiesFile(File):
    """properties.yaml."""

    sections: ClassVar[Sections] = {"properties": "names"}
    properties: dict[Name, PropertyShape]


class TablesFile(File):
    """A file of tables."""

    sections: ClassVar[Sections] = {"tables": "tables"}
    tables: dict[Id, TableShape]


class StepFile(File):
    """The computations and rules of a step."""

    sections: ClassVar[Sections] = {"computations": "names", "rules": "rules"}
    computations: list[ComputationShape] = Field(default_factory=list)
    rules: list[RuleShape] = Field(default_factory=list)


class CautionsFile(File):
    """cautions.yaml."""

    sections: ClassVar[Sections] = {"cautions": "cautions", "referrals": "referrals", "change_over": "procedures"}
    cautions: dict[Name, CautionShape]
    referrals: dict[Name, ReferralShape]
    change_over: dict[Name, ProcedureShape] = Field(default_factory=dict)


class DocketFile(File):
    """docket.yaml."""

    sections: ClassVar[Sections] = {"rows": None, "quantities": None}
    rows: list[DocketRowShape]
    quantities: list[DocketRowShape] = Field(default_factory=list)


class UsualOilsFile(File):
    """usual_oils.yaml."""

    usual_oils: UsualOilsShape


class DesignationsFile(File):
    """designations.yaml."""

    designations: DesignationsShape


class ForksFile(File):
    """forks.yaml; a folder may do without it."""

    forks: dict[Name, ForkShape]


class ShelfFile(File):
    """A shelf."""

    shelf: Text
    note: Text = ""
    products: list[Tree]


SHAPES: Mapping[str, type[File]] = {
    "sources.yaml": SourcesFile,
    "point_kinds.yaml": PointKindsFile,
    "steps.yaml": StepsFile,
    "facts.yaml": FactsFile,
    "properties.yaml": PropertiesFile,
    "usual_oils.yaml": UsualOilsFile,
    "docket.yaml": DocketFile,
    "cautions.yaml": CautionsFile,
    "designations.yaml": DesignationsFile,
}
"""The files that every folder has."""

MAY_HAVE: Mapping[str, type[File]] = {"forks.yaml": ForksFile}
"""The files that a folder may do without."""
