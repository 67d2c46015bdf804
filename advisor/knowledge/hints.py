"""What an editor says about every key of the knowledge files: for completion and on hover."""

from collections.abc import Mapping

_SOURCE = "Where this comes from: [{id: an id of sources.yaml, where: the place in it}]."
_NOTE = "A remark for the specialist; nothing is concluded from it."
_CHECKED = "yes: it was read; from memory: it was not looked up; no source: common practice."
_WHEN = (
    "A condition on facts, {fact: test}: a value means equal; else any_of, none_of (lists), above, at_least, below, "
    "at_most (limits). Several facts: all hold. either: [{..}, {..}]: one of them holds."
)
_FOR = "A condition on properties of the lubricant, written like one on facts; stated: yes where its sheet must say so."
_LIMITS = "The two ends of what is physically possible, [lowest, highest], in the unit of the value."
_LOOK_UP = "The value stands in a table: {table, by, column}."
_FORMULA = "The name of a formula; gudgeon compute lists them with the units of their inputs."
_IN = "What the formula is given: {input: fact or number}, each in the unit of the formula's input."
_FORMAT = "The format of the file: 1."
_TABLE = "The id of a table."

DOMAIN: Mapping[str, str] = {
    "title": "What people call it.",
    "kind": (
        "number; choice (one of several); scale (choices in rising order); several (ticks); item (a product); "
        "yes_no; text."
    ),
    "unit": (
        "The unit of a number, in which every figure in these files is written: °C temperature, K difference of "
        'temperatures, mm, 1/min, mm/min, mm²/s, mPa·s, kg/m³, N, h, g, cm³, kg, %, ISO VG, months; "" without unit.'
    ),
    "limits": _LIMITS,
    "step": "How a shortfall is counted: one step is {absolute: so much}, {ratio: so many times} or {places: yes}.",
    "places": "The values a number can have, rising, such as the grades.",
    "named": "Words that stand for a number: {word: number in the unit}.",
    "choices": "What can be chosen: {id: label}, or a list of ids; a scale rises from first to last.",
    "choices_of": "The id of a table: its rows are the choices.",
    "note": _NOTE,
    "source": _SOURCE,
}
_CAUTION = {"text": "What the reader is told.", "standing": "yes: given with every advice.", "source": _SOURCE}
_CODE = {
    "title": "What the standard is called.",
    "written": "How a code is written, with its parts in braces.",
    "need": "The fact that says which upper temperature the code must promise, °C.",
    "cold": "The fact that says which lower temperature the code must promise, °C.",
    "upper": "The table of upper temperatures and their letters.",
    "lower": "The table of lower temperatures and their signs.",
    "nlgi": "The property that holds the NLGI class.",
    "source": _SOURCE,
}
_LETTER = "The column with the letter."
_LOWER = {"table": _TABLE, "lower": "The column with the lower temperature, °C."}
_UPPER = {"table": _TABLE, "letter": _LETTER, "upper": "The column with the upper temperature, °C."}
_LETTERS = {"property": "The property that decides.", "values": "The values for which the letter is printed."}

HINTS: Mapping[str, Mapping[str, str]] = {
    "CitationShape": {
        "id": "The id of a source in sources.yaml.",
        "where": "The place: chapter, equation, table.",
        "checked": f"How surely this place is known. {_CHECKED}",
    },
    "SourceShape": {
        "title": "The title of the publication.",
        "publisher": "Who published it.",
        "year": "The year of this edition.",
        "kind": "What it is.",
        "checked": f"How surely it is known. {_CHECKED}",
        "note": _NOTE,
    },
    "StepShape": {
        "absolute": "One step is so much, in the unit of the value.",
        "ratio": "One step is so many times.",
        "places": "yes: one step is one place of the scale or series.",
    },
    "DomainShape": DOMAIN,
    "QuestionShape": {
        "ask": "The question as it is asked.",
        "help": "What helps to answer it.",
        "section": "The heading under which it is asked.",
        "decides": "What the answer is needed for: the lubricant, or a quantity only.",
        "optional": "yes: the advice can be settled without an answer.",
        "when": f"For whom it is asked. {_WHEN}",
    },
    "AssumeShape": {
        "value": "The value that stands for a don't know, in the unit of the fact.",
        "each": "Several values; the case is run once for each.",
        "because": "Why this value, for the reader.",
        "source": _SOURCE,
        "state": "open: the advice stays open as long as this is assumed.",
    },
    "ConcludedShape": {
        "otherwise": "The value where no rule concludes one.",
        "combine": "Which of several conclusions counts: the highest, the lowest, or one (they must agree).",
    },
    "LookUpShape": {
        "table": _TABLE,
        "by": "How the row is found: {column: fact}; in a matrix the two facts of its sides.",
        "column": "The column that holds the value.",
        "combine": "Which of several values found counts.",
        "otherwise": "The value where no row is found.",
    },
    "FactShape": {
        **DOMAIN,
        "question": "How it is asked; without it the fact is concluded or tuned.",
        "assume": "What stands for a don't know, and why.",
        "unasked": "The value where the question is not asked.",
        "filled": "Where the answer can be taken from a table, such as the size of a designated bearing.",
        "concluded": "What rules conclude it from, and how several conclusions combine.",
        "tunable": "A figure that the specialist sets, with its reason.",
    },
    "WorstPartShape": {"looked_up": _LOOK_UP},
    "SameShape": {"item": "The fact that names the product in use."},
    "PropertyShape": {
        **DOMAIN,
        "of": "Which lubricants have it; without it all.",
        "test": "The test method behind the figure.",
        "hidden": "yes: it is not shown to the reader.",
        "formula": _FORMULA,
        "in": _IN,
        "looked_up": _LOOK_UP,
        "worst_of": "The worst of several look-ups.",
        "same": "Whether it is the product in use.",
        "concluded": "What rules conclude it from, and how several conclusions combine.",
    },
    "ComputationShape": {
        "fact": "The name of the fact that is computed.",
        "title": "What people call it.",
        "formula": _FORMULA,
        "in": _IN,
        "looked_up": _LOOK_UP,
        "limits": _LIMITS,
        "note": _NOTE,
        "source": _SOURCE,
    },
    "ConclusionShape": {
        "must": f"What the lubricant must be, {{property: test}}: for physics, safety and law. {_FOR}",
        "should": "What the lubricant should be, {property: test}; needs a level.",
        "level": "How strongly a should counts: 1 strong, 2 strong, 3 wish, 4 taste.",
        "set": "A concluded fact or property: {name: value}.",
        "caution": "The id of a caution in cautions.yaml.",
        "refer": "The id of a referral in cautions.yaml: a person must decide.",
        "withhold": "yes: the interview ends here; products and grades are withheld.",
        "for": f"For which lubricants. {_FOR}",
    },
    "MayConflictShape": {
        "rule": "The id of the other rule.",
        "because": "Why both stand although they can exclude each other.",
    },
    "RuleShape": {
        "id": "The name of the rule, situation first; it never changes later.",
        "title": "The rule in one sentence.",
        "status": "draft: shown, but binds nothing; agreed: binds; retired: kept for its id only.",
        "when": _WHEN,
        "unless": f"What takes back what when allows. {_WHEN}",
        "each_row_of": "The id of a table: the rule speaks once per row; {row: column} takes the value of the row.",
        "where": "A condition on the columns of that table: the rows for which the rule speaks.",
        "then": "What follows: must, should, set, caution or refer, each perhaps with for.",
        "because": "The reason as the engineer reads it; {fact} and {row.column} are filled in.",
        "limits": "Where the rule ends, or what else is said about it.",
        "source": _SOURCE,
        "fires": "Facts with which it must fire: {fact: value}.",
        "silent": "Facts with which it must stay silent: {fact: value}.",
        "may_conflict": "Rules with which it can exclude everything in real life, with the reason.",
        "note": _NOTE,
    },
    "TableShape": {
        "title": "What the table holds.",
        "key": "The column that names a row; id unless said.",
        "policy": "unique: one row at most applies; complete: exactly one; all: every row that applies counts.",
        "columns": (
            "The columns: {name: {kind: ...}}, with unit and limits for numbers; needed: yes where every row must have "
            "a cell; at_most: another column that is never exceeded."
        ),
        "matrix": "symmetric: the table compares every entry with every other.",
        "of": "What the two sides of a matrix are.",
        "values": "The kind of value in the cells of a matrix.",
        "source": _SOURCE,
        "note": _NOTE,
        "rows": "The rows; a band of numbers is written {from: 1, below: 2}.",
    },
    "CautionShape": _CAUTION,
    "ForkBranchShape": {
        "label": "What the branch is called.",
        "value": "The value that the fact takes in it, in its unit.",
        "without": "The ticks that are left out in it.",
    },
    "ForkShape": {
        "title": "The contested point.",
        "when": _WHEN,
        "fact": "The fact that differs between the branches.",
        "branches": "Two to six branches.",
        "because": "What speaks for each, for the reader.",
        "source": _SOURCE,
    },
    "ReferralShape": {**_CAUTION, "to": "Who decides."},
    "ProcedureShape": {
        "title": "What is done.",
        "steps": "The steps in their order.",
        "leads_to": "Other procedures that the steps refer to.",
        "source": _SOURCE,
    },
    "DocketRowShape": {
        "id": "The id of the row.",
        "title": "What the reader sees.",
        "recommends": "The property whose recommended classes it shows.",
        "demands": "The properties whose demands it shows.",
        "facts": "The facts it shows, with their units.",
        "shown_if": f"When it is shown. {_WHEN}",
    },
    "UsualOilsShape": {
        "table": _TABLE,
        "family": "The property that the rows of the table are values of.",
        "from": "The column with the lowest usual grade, ISO VG.",
        "to": "The column with the highest usual grade, ISO VG.",
        "index": "The column with the usual viscosity index.",
        "ordinary": f"Which families are usual. {_FOR}",
        "source": _SOURCE,
    },
    "PointKindShape": {"title": "What people call it.", "folder": "The folder with its facts and steps."},
    "PurposeShape": {"title": "What the step is called.", "for": "What the step settles."},
    "DinLowerShape": _LOWER,
    "LowerShape": {**_LOWER, "letter": _LETTER},
    "UpperShape": _UPPER,
    "DinUpperShape": {
        **_UPPER,
        "water_test": "The column with the temperature of the water test, °C.",
        "rating_to": "The column with the worst rating that still counts.",
    },
    "WaterGridShape": {
        "table": _TABLE,
        "letter": _LETTER,
        "environment": "The column with the presence of water.",
        "rust": "The column with the protection against rust.",
    },
    "LettersShape": _LETTERS,
    "LoadSymbolShape": {**_LETTERS, "with": "The symbol where one of the values is asked for.", "without": "Else."},
    "BaseOilLettersShape": {
        "table": _TABLE,
        "property": "The property that holds the base oil.",
        "letters": "The column with the letters.",
    },
    "StandardShape": _CODE,
    "DinShape": {
        **_CODE,
        "kind": "The letter for the use.",
        "water_test": "The fact that gives the temperature of the water test, °C.",
        "water_rating": "The property that holds the rating of the water test.",
        "rating_at_most": "The worst rating that the code may promise.",
        "additive": "The letters for additives.",
        "base_oil": "The letters for base oils.",
    },
    "IsoShape": {
        **_CODE,
        "prefix": "What every code begins with.",
        "water": "The fact that says how wet the point is.",
        "water_grid": "The table of water and rust symbols.",
        "load": "The symbol for the load.",
        "none_when": f"When no code is given. {_WHEN}",
    },
    "DesignationsShape": {"din": "DIN 51825.", "iso": "ISO 6743-9."},
    "SourcesFile": {"format": _FORMAT, "sources": "The publications: {id: {title, kind, checked}}."},
    "PointKindsFile": {"format": _FORMAT, "kinds": "The kinds of lubrication point."},
    "StepsFile": {"format": _FORMAT, "steps": "The selection steps in their order."},
    "FactsFile": {"format": _FORMAT, "facts": "The facts in the order of asking: {name: {title, kind, ...}}."},
    "PropertiesFile": {"format": _FORMAT, "properties": "What a lubricant can be said to be."},
    "TablesFile": {"format": _FORMAT, "tables": "The tables: {id: {title, columns, rows}}."},
    "StepFile": {
        "format": _FORMAT,
        "computations": "What is computed or looked up in this step.",
        "rules": "The rules of this step.",
    },
    "CautionsFile": {
        "format": _FORMAT,
        "cautions": "The cautions: {id: {text}}.",
        "referrals": "The referrals: {id: {text, to}}.",
        "change_over": "The procedures of changing over: {id: {title, steps}}.",
    },
    "DocketFile": {"format": _FORMAT, "rows": "The rows of the docket.", "quantities": "The rows with quantities."},
    "UsualOilsFile": {"format": _FORMAT, "usual_oils": "How the usual oils are made: one per family and grade."},
    "DesignationsFile": {"format": _FORMAT, "designations": "What the codes of the two standards are made of."},
    "ForksFile": {"format": _FORMAT, "forks": "The contested points: {id: {title, when, fact, branches}}."},
    "ShelfFile": {
        "format": _FORMAT,
        "shelf": "What the shelf is called.",
        "note": _NOTE,
        "products": "The products: {item, title, and the properties that the sheet states, in their units}.",
    },
}
"""Shape by shape, key by key."""
