"""Each damage is told on its own line, in plain words, and brings no flood of consequences."""

import re
from collections.abc import Callable
from pathlib import Path

import pytest

from tests.knowledge.damage import Damage, copied, listing, told

TEMPERATURE, FACTS, VISCOSITY = (
    "rolling_bearing/temperature.yaml",
    "rolling_bearing/facts.yaml",
    "rolling_bearing/viscosity.yaml",
)
SAFEGUARDS, COMPATIBILITY, CLOSING = (
    "rolling_bearing/safeguards.yaml",
    "rolling_bearing/compatibility.yaml",
    "rolling_bearing/closing.yaml",
)
BEARINGS, MIXING, SEALS = "tables/bearings.yaml", "tables/compatibility.yaml", "tables/elastomers.yaml"

HOT_STEEL = "    when: {t_eff_c: {above: 120}}\n"
HOT_STEEL_THEN = "      - caution: dimensional_stability\n"
HOT_STEEL_BECAUSE = '    because: "At {t_eff_c} ordinary bearing steel may grow."\n'
SEALED_CAUTION = "      - caution: do_not_lubricate\n"
SEALED = "    when: {supply: sealed_no_fitting}\n"
STEADY_NEED = "title: steady temperature with margin, formula: total, in: {a: t_eff_c, b: 10}}"
LIGHT_DRIVE = "      - should: {start_viscosity: {at_most: 8000}}\n        level: 2\n"
OPEN_DRAIN = "      - caution: drain_open\n"
CAGE_UNASKED = "    unasked: pressed_steel\n"
FORTY_TWO = "    when: {either: [" + ", ".join(f"{{t_eff_c: {120 + each}}}" for each in range(42)) + "]}\n"

CASES = [
    # ---- keys ------------------------------------------------------------------------------------------------
    Damage(
        "misspelt key",
        TEMPERATURE,
        "    title: Bearing steel changes size in the heat",
        "    titel: Bearing steel",
        "'titel' is not known here",
        hint="Did you mean 'title'?",
    ),
    Damage(
        "misspelt key of a section",
        "properties.yaml",
        "properties:\n",
        "propertys:\n",
        "'propertys' is not known here",
        hint="Did you mean 'properties'?",
    ),
    Damage(
        "misspelt key of a computation",
        TEMPERATURE,
        STEADY_NEED,
        STEADY_NEED.replace("formula:", "fromula:"),
        "'fromula' is not known here",
        hint="Did you mean 'formula'?",
    ),
    Damage(
        "unknown operator",
        TEMPERATURE,
        HOT_STEEL,
        HOT_STEEL.replace("above", "over"),
        "'over' is no operator",
        hint="Did you mean 'above'?",
    ),
    Damage(
        "sign for a word",
        TEMPERATURE,
        HOT_STEEL,
        HOT_STEEL.replace("above", "<"),
        "'<' is no operator",
        hint="write below",
    ),
    Damage(
        "sign before a number",
        TEMPERATURE,
        HOT_STEEL,
        HOT_STEEL.replace("{above: 120}", '">= 120"'),
        "'>= 120' is a limit, not a number",
    ),
    Damage(
        "decimal comma in braces",
        TEMPERATURE,
        HOT_STEEL,
        HOT_STEEL.replace("120", "120,0"),
        "'120,0' has a decimal comma",
        hint="Write 120.0",
    ),
    Damage(
        "curly quotes around a choice",
        "shelf/demo.yaml",
        'viscosity_40: 100, viscosity_100: 11.3, nlgi: "2"',
        "viscosity_40: 100, viscosity_100: 11.3, nlgi: \u201c2\u201d",
        "'\u201c2\u201d' stands in curly quotes",
        hint='use straight quotes: "2"',
    ),
    Damage(
        "curly quotes around a text with a comma",
        BEARINGS,
        'note: "insert bearings count here; the usual sealed-for-life bearing"',
        "note: \u201cinsert bearings, the usual\u201d",
        "A comma has parted the text in curly quotes that ends with 'the usual\u201d'",
        hint="Use straight quotes",
    ),
    Damage(
        "key one level too low",
        FACTS,
        "      when: {bearing_type: cylindrical_roller}\n    assume:",
        "      when: {bearing_type: cylindrical_roller}\n      assume:",
        "'assume' is not known here",
        offset=1,
        hint="it belongs one level up, to the keys that begin in line ",
    ),
    Damage(
        "key one level too high",
        "sources.yaml",
        "sources:\n",
        "sources:\n  kind: standard\n",
        "a mapping (key: value) is expected here",
        offset=1,
    ),
    Damage(
        "key of a conclusion beside it",
        VISCOSITY,
        LIGHT_DRIVE,
        LIGHT_DRIVE.replace("        level", "    level"),
        "'level' is not known here",
        offset=1,
        hint="it belongs under 'then' in line",
    ),
    Damage(
        "then below when",
        VISCOSITY,
        "      load_ratio: {below: 0.01}\n    then:\n",
        "      load_ratio: {below: 0.01}\n      then:\n",
        "'then' stands in the wrong place",
        offset=1,
        hint="is its indentation wrong?",
    ),
    Damage(
        "missing required key", TEMPERATURE, HOT_STEEL_BECAUSE, "", "'because' is missing here", hint="add 'because:'"
    ),
    Damage(
        "missing heading",
        COMPATIBILITY,
        "rules:\n  - id: pair_decides_change_over\n",
        "  - id: pair_decides_change_over\n",
        "does not belong here, nor do the",
        hint="is the line 'rules:' missing above?",
    ),
    Damage(
        "duplicate key",
        FACTS,
        "    title: bore\n",
        "    title: bore\n    title: bore\n",
        "'title' is written twice",
        offset=1,
    ),
    # ---- values ----------------------------------------------------------------------------------------------
    Damage(
        "threshold on a choice without order",
        SAFEGUARDS,
        SEALED,
        SEALED.replace("sealed_no", "{at_least: sealed_no").replace("}", "}}"),
        "'supply' has no order",
        hint="any_of",
    ),
    Damage(
        "value outside the choices",
        SAFEGUARDS,
        SEALED,
        SEALED.replace("fitting", "fiting"),
        "'sealed_no_fiting' is not one of the choices",
        hint="Did you mean 'sealed_no_fitting'?",
    ),
    Damage(
        "number outside the limits",
        FACTS,
        '    assume: {value: 200, because: "A line',
        '    assume: {value: 2000, because: "A line',
        "2000 °C lies outside -60 to 500 °C",
        hint="decimal point",
    ),
    Damage(
        "decimal comma",
        SEALS,
        '{id: HNBR, title: "HNBR, hydrogenated nitrile", min_c: -30,',
        '{id: HNBR, title: "HNBR, hydrogenated nitrile", min_c: "-30,5",',
        "'-30,5' has a decimal comma",
    ),
    Damage(
        "time of day",
        SEALS,
        '{id: CR, title: "CR, chloroprene", min_c: -40, cont_c: 90,',
        '{id: CR, title: "CR, chloroprene", min_c: -40, cont_c: 12:30,',
        "'12:30' looks like a time of day",
    ),
    Damage(
        "grade that does not exist",
        VISCOSITY,
        "{at_least: 46, at_most: 150}",
        "{at_least: 46, at_most: 140}",
        "140 is none of the grades",
        hint="use one of 2, 3, 5",
    ),
    Damage(
        "limits the wrong way round",
        FACTS,
        "    limits: [2, 6000]\n",
        "    limits: [6000, 2]\n",
        "the lower limit lies above the upper",
    ),
    Damage(
        "list for a test", TEMPERATURE, HOT_STEEL, HOT_STEEL.replace("{above: 120}", "[120, 130]"), "a list is no test"
    ),
    Damage(
        "unit mismatch",
        TEMPERATURE,
        "{upper_service_c: {at_least: {fact: bearing_peak_c}}}",
        "{upper_service_c: {at_least: {fact: speed_factor}}}",
        "number in mm/min",
        hint="the same kind and unit",
    ),
    Damage(
        "input in another unit",
        "rolling_bearing/form.yaml",
        "in: {bore_mm: bore_mm, outside_mm: outside_mm}",
        "in: {bore_mm: bore_mm, outside_mm: speed_rpm}",
        "'speed_rpm' is in 1/min",
    ),
    # ---- names -----------------------------------------------------------------------------------------------
    Damage(
        "unknown fact",
        TEMPERATURE,
        HOT_STEEL,
        HOT_STEEL.replace("t_eff_c", "t_ef_c"),
        "'t_ef_c' is no fact",
        hint="Did you mean 't_eff_c'?",
    ),
    Damage(
        "unknown property",
        VISCOSITY,
        "{start_viscosity: {at_most: 8000}}",
        "{start_viscosty: {at_most: 8000}}",
        "'start_viscosty' is no property",
        hint="Did you mean 'start_viscosity'?",
    ),
    Damage(
        "property in when",
        SAFEGUARDS,
        SEALED,
        "    when: {thickener: lithium_12OH}\n",
        "'thickener' is no fact",
        hint="properties belong in 'for'",
    ),
    Damage(
        "fact in for",
        VISCOSITY,
        "    then:\n      - should: {vg: {at_most: {fact: thickest_usual_vg}}}\n        level: 1\n",
        "    then:\n      - should: {vg: {at_most: {fact: thickest_usual_vg}}}\n        level: 1\n"
        "        for: {supply: central}\n",
        "'supply' is no property",
        offset=3,
        hint="that is a fact",
    ),
    Damage(
        "unknown table",
        COMPATIBILITY,
        "    each_row_of: change_over_by_pair\n",
        "    each_row_of: change_over_by_pear\n",
        "'change_over_by_pear' is no table",
        hint="Did you mean 'change_over_by_pair'?",
    ),
    Damage(
        "unknown column of a row",
        COMPATIBILITY,
        "{change_over: {row: action}}",
        "{change_over: {row: acton}}",
        "'acton' is no column",
        hint="Did you mean 'action'?",
    ),
    Damage(
        "unknown column of a look-up",
        TEMPERATURE,
        "by: {id: measured_where}, column: add_k",
        "by: {id: measured_where}, column: ad_k",
        "'ad_k' is no column of table measured_where",
    ),
    Damage(
        "unknown key column of a look-up",
        TEMPERATURE,
        "by: {id: measured_where}",
        "by: {ide: measured_where}",
        "'ide' is no column of table measured_where",
    ),
    Damage(
        "unknown column in a row",
        SEALS,
        '{id: CR, title: "CR, chloroprene", min_c:',
        '{id: CR, title: "CR, chloroprene", mn_c:',
        "'mn_c' is no column of this table",
        hint="Did you mean 'min_c'?",
    ),
    Damage(
        "unknown formula",
        TEMPERATURE,
        STEADY_NEED,
        STEADY_NEED.replace("total", "totl"),
        "'totl' is no formula",
        hint="Did you mean 'total'?",
    ),
    Damage(
        "unknown input of a formula",
        TEMPERATURE,
        STEADY_NEED,
        STEADY_NEED.replace("b: 10", "c: 10"),
        "'c' is no input of total",
        most=2,
    ),
    Damage(
        "unknown fact in a formula",
        TEMPERATURE,
        STEADY_NEED,
        STEADY_NEED.replace("t_eff_c", "t_ef_c"),
        "'t_ef_c' is neither a number nor a known fact",
    ),
    Damage(
        "missing input of a formula",
        TEMPERATURE,
        STEADY_NEED,
        STEADY_NEED.replace(", b: 10", ""),
        "input 'b' of total is missing",
    ),
    Damage(
        "unknown source",
        SEALS,
        '{id: iso_1629, where: "codes"}',
        '{id: iso_1692, where: "codes"}',
        "'iso_1692' is no source",
        hint="Did you mean 'iso_1629'?",
    ),
    Damage(
        "unknown caution",
        TEMPERATURE,
        HOT_STEEL_THEN,
        HOT_STEEL_THEN.replace("dimensional", "dimentional"),
        "'dimentional_stability' stands nowhere under 'cautions'",
        hint="Did you mean 'dimensional_stability'?",
    ),
    Damage(
        "unknown referral",
        CLOSING,
        "      - refer: film_specialist\n",
        "      - refer: film_spezialist\n",
        "'film_spezialist' stands nowhere under 'referrals'",
        hint="Did you mean",
    ),
    Damage(
        "unknown table of choices",
        FACTS,
        "    title: thickener of the lubricant in use\n    kind: choice\n    choices_of: thickeners\n",
        "    title: thickener of the lubricant in use\n    kind: choice\n    choices_of: thickner\n",
        "'thickner' is no table",
        offset=2,
    ),
    Damage(
        "unknown demand in the docket", "docket.yaml", "demands: [kappa]", "demands: [kapa]", "'kapa' is no property"
    ),
    Damage(
        "unknown fact of the codes",
        "designations.yaml",
        "    need: code_need_c                                    #",
        "    need: code_ned_c                                     #",
        "'code_ned_c' is no fact",
    ),
    Damage(
        "unknown column of the codes",
        "designations.yaml",
        "water_grid: {table: iso_water, letter: letter, environment: environment,",
        "water_grid: {table: iso_water, letter: letter, environment: enviroment,",
        "'enviroment' is no column of table iso_water",
    ),
    Damage(
        "unknown column of the usual oils",
        "usual_oils.yaml",
        "  from: vg_from\n",
        "  from: vg_form\n",
        "'vg_form' is no column of table base_oils",
    ),
    Damage(
        "unknown rule that may conflict",
        CLOSING,
        "    when: {maker_verdict: falls_short}\n",
        "    when: {maker_verdict: falls_short}\n    may_conflict: {rule: nobody, because: seen}\n",
        "'nobody' is no rule",
        offset=1,
    ),
    Damage(
        "misspelt declaration of a fact",
        FACTS,
        "  feed_line_max_c:\n",
        "  feed_lien_max_c:\n",
        "'feed_lien_max_c' is used nowhere, while 'feed_line_max_c'",
        hint="Is 'feed_line_max_c' meant here?",
    ),
    Damage(
        "misspelt declaration that is used once",
        "cautions.yaml",
        "  do_not_lubricate:\n",
        "  do_not_lubricatte:\n",
        "'do_not_lubricatte' is used nowhere",
    ),
    Damage(
        "misspelt declaration of a source",
        "sources.yaml",
        "  iso_1629: {title",
        "  iso_1692: {title",
        "'iso_1692' is used nowhere",
        most=1,
    ),
    Damage(
        "misspelt choice",
        FACTS,
        "      sealed_no_fitting: sealed",
        "      sealed_no_fiting: sealed",
        "'sealed_no_fiting' is used nowhere",
    ),
    Damage(
        "misspelt column",
        BEARINGS,
        "      special_share: {kind",
        "      spezial_share: {kind",
        "'special_share' is declared nowhere",
    ),
    Damage(
        "misspelt row of a matrix",
        MIXING,
        "      AlX: {AlX: C",
        "      AX: {AlX: C",
        "'AX' is no row or column",
    ),
    Damage(
        "misspelt step",
        "steps.yaml",
        "  renewal: {title",
        "  reneawl: {title",
        "no file holds the step 'reneawl'",
        hint="Is 'renewal' meant here?",
    ),
    # ---- twice -----------------------------------------------------------------------------------------------
    Damage("conclusion twice", SAFEGUARDS, SEALED_CAUTION, SEALED_CAUTION * 2, "This entry is written twice", offset=1),
    Damage(
        "value twice in a list",
        "docket.yaml",
        "demands: [lower_service_c, start_viscosity]",
        "demands: [lower_service_c, lower_service_c]",
        "This entry is written twice",
    ),
    Damage(
        "duplicate rule id",
        SAFEGUARDS,
        "  - id: failed_twice\n",
        "  - id: fire_in_drip_path\n",
        "the id 'fire_in_drip_path' is taken by the rule in line",
        hint="never used twice",
    ),
    Damage(
        "duplicate key of a table row",
        SEALS,
        "      - {id: HNBR,",
        "      - {id: NBR,",
        "'NBR' has a row already",
        most=10,
    ),
    Damage(
        "duplicate product",
        "shelf/demo.yaml",
        "  - {item: GR-102,",
        "  - {item: GR-101,",
        "item 'GR-101' stands on the shelf already",
    ),
    Damage(
        "matrix pair given twice",
        MIXING,
        "      PPE: {PPE: C}",
        "      PPE: {PPE: C, PFPE: I}",
        "PPE x PFPE is given twice",
    ),
    Damage(
        "matrix pair left out",
        MIXING,
        "      PFPE: {PFPE: C, PPE: I}",
        "      PFPE: {PFPE: C}",
        "the matrix has no cell for PFPE x PPE",
    ),
    Damage(
        "fact computed twice",
        TEMPERATURE,
        "  - {fact: peak_plus_50_c,",
        "  - {fact: steady_need_c,",
        "'steady_need_c' is declared twice",
        most=2,
    ),
    # ---- rules -----------------------------------------------------------------------------------------------
    Damage(
        "empty condition", SAFEGUARDS, SEALED, "    when: {}\n", "the condition is empty", hint="or write 'always'"
    ),
    Damage(
        "condition that lacks what its example gives",
        VISCOSITY,
        "      load_ratio: {below: 0.01}\n    then:\n",
        "    then:\n",
        "the condition holds with the example 'silent'",
        offset=-2,
        hint="it does not name 'load_ratio'",
    ),
    Damage(
        "number without unit",
        FACTS,
        '  feed_line_max_c:\n    title: hottest section of the feed line\n    kind: number\n    unit: "°C"\n',
        "  feed_line_max_c:\n    title: hottest section of the feed line\n    kind: number\n",
        "a number has a unit",
    ),
    Damage(
        "step of places that is no yes",
        "properties.yaml",
        "    step: {places: yes}\n",
        "    step: {places: {a: yes}}\n",
        "this is no step",
    ),
    Damage(
        "code without a column that it reads",
        "designations.yaml",
        "upper: upper_c, water_test: water_test_c, rating_to",
        "upper: upper_c, rating_to",
        "'water_test' is missing here",
    ),
    Damage(
        "placeholder for an unknown fact",
        TEMPERATURE,
        HOT_STEEL_BECAUSE,
        HOT_STEEL_BECAUSE.replace("t_eff_c", "t_ef_c"),
        "'{t_ef_c}' stands for no fact",
        hint="Did you mean 't_eff_c'?",
    ),
    Damage(
        "brace without a name",
        TEMPERATURE,
        HOT_STEEL_BECAUSE,
        HOT_STEEL_BECAUSE.replace("{t_eff_c}", "{} °C"),
        "a brace without a name",
        hint="{fact}",
    ),
    Damage(
        "should without a level",
        VISCOSITY,
        LIGHT_DRIVE,
        LIGHT_DRIVE.replace("        level: 2\n", ""),
        "a should has a level",
        hint="add 'level: 3'",
    ),
    Damage(
        "must with a level",
        VISCOSITY,
        "      - must: {kappa: {at_least: {fact: film_floor}}}\n",
        "      - must: {kappa: {at_least: {fact: film_floor}}}\n        level: 1\n",
        "nothing else has one",
        offset=1,
        hint="take 'level' out",
    ),
    Damage(
        "level outside its range",
        VISCOSITY,
        LIGHT_DRIVE,
        LIGHT_DRIVE.replace("level: 2", "level: 5"),
        "5 is too large here",
        offset=1,
        hint="1 (strong) to 4 (taste)",
    ),
    Damage(
        "two verbs in one conclusion",
        COMPATIBILITY,
        OPEN_DRAIN,
        OPEN_DRAIN + "        refer: root_cause\n",
        "a conclusion has exactly one of must, should, set, caution and refer",
        hint="this one has caution and refer",
    ),
    Damage(
        "empty then", TEMPERATURE, "    then:\n" + HOT_STEEL_THEN, "    then: []\n", "more entries are expected here"
    ),
    Damage(
        "unasked missing beside when",
        FACTS,
        CAGE_UNASKED,
        "",
        "a question with 'when' needs the value",
        offset=-2,
        hint="add 'unasked:'",
    ),
    Damage(
        "example that should fire fails",
        TEMPERATURE,
        "    fires: {t_eff_c: 130}\n",
        "    fires: {t_eff_c: 110}\n",
        "with this example the condition fails",
        hint="it should hold",
    ),
    Damage(
        "silent example undecided",
        TEMPERATURE,
        "    silent: {t_eff_c: 120}\n",
        "    silent: {shock: none}\n",
        "with this example the condition is undecided",
        hint="give every fact",
    ),
    Damage(
        "no examples",
        SAFEGUARDS,
        "    fires: {supply: sealed_no_fitting}\n    silent: {supply: nipple_through}\n",
        "",
        "a rule with a condition needs two examples",
        offset=-10,
    ),
    Damage(
        "circular computations",
        TEMPERATURE,
        "in: {a: hot_spell_c, b: bearing_temperature_c}}",
        "in: {a: steady_need_c, b: bearing_temperature_c}}",
        "these computations need one another",
        hint="break the circle",
    ),
    Damage(
        "fact used before its step",
        SAFEGUARDS,
        SEALED,
        "    when: {t_eff_c: {above: 100}}\n",
        "'t_eff_c' is not known yet in step safeguards",
        most=3,
    ),
    Damage(
        "closing rule with a must",
        CLOSING,
        "      - refer: film_specialist\n",
        "      - must: {vg: {at_least: 100}}\n",
        "a closing rule may only caution and refer",
    ),
    Damage(
        "band from above its end",
        BEARINGS,
        "ordinary_share: {from: 0.1, below: 0.75}",
        "ordinary_share: {from: 0.9, below: 0.75}",
        "the band is empty",
    ),
    Damage(
        "either that is no list",
        TEMPERATURE,
        HOT_STEEL,
        "    when: {either: {t_eff_c: {above: 120}}}\n",
        "'either' holds a list",
    ),
    Damage(
        "too many branches",
        TEMPERATURE,
        HOT_STEEL,
        FORTY_TWO,
        "more than 40 alternatives",
        hint="split the rule in two",
    ),
    Damage(
        "product with a computed property",
        "shelf/demo.yaml",
        "  - {item: GR-102, title",
        "  - {kappa: 2, item: GR-102, title",
        "'kappa' is no property stored on a sheet",
        hint="computed or looked up",
    ),
    Damage(
        "product without its code",
        "shelf/demo.yaml",
        "  - {item: GR-102, title",
        "  - {itm: GR-102, title",
        "a product needs an item code",
    ),
    Damage(
        "citation surer than its source",
        TEMPERATURE,
        "    source: [{id: common_practice}]\n    fires: {t_eff_c: 130}\n",
        "    source: [{id: common_practice, checked: yes}]\n    fires: {t_eff_c: 130}\n",
        "a citation cannot be surer",
    ),
    Damage(
        "referral for some lubricants",
        CLOSING,
        "      - refer: film_specialist\n",
        "      - refer: film_specialist\n        for: {form: grease}\n",
        "a referral is for the whole case",
        offset=1,
    ),
    Damage(
        "change-over without steps",
        "cautions.yaml",
        "  test_or_clean:\n    title: Test",
        "  test_and_clean:\n    title: Test",
        "'test_and_clean' is no choice of the property change_over",
        hint="Did you mean 'test_or_clean'?",
        most=2,
    ),
    # ---- YAML ------------------------------------------------------------------------------------------------
    Damage(
        "anchor",
        TEMPERATURE,
        HOT_STEEL,
        HOT_STEEL.replace("{t_eff", "&hot {t_eff"),
        "The anchor '&hot' is not accepted",
    ),
    Damage(
        "tab", TEMPERATURE, HOT_STEEL, HOT_STEEL.replace("    when", "\twhen"), "A tab stands where only spaces may"
    ),
    Damage("quote never closed", "usual_oils.yaml", 'family"}]', "family}]", "never closed"),
    Damage(
        "one entry moved out",
        "steps.yaml",
        "  viscosity: {title",
        "viscosity: {title",
        "The indentation of this line does not suit that of line ",
        hint="Begin it in column 3",
    ),
    Damage(
        "key moved out, its values left",
        "facts.yaml",
        "    tunable:\n",
        "  tunable:\n",
        "The indentation of this line does not suit that of line ",
    ),
    Damage(
        "key moved out beside one of its name",
        "facts.yaml",
        "      source: [{id: common_practice}]\n",
        "    source: [{id: common_practice}]\n",
        "The indentation of this line does not suit that of line ",
    ),
    Damage(
        "heading moved in",
        "cautions.yaml",
        "change_over:\n",
        "  change_over:\n",
        "'change_over' stands in the wrong place",
    ),
    Damage("first line moved in", "forks.yaml", "format: 1\n", "  format: 1\n", "The indentation of this line does"),
    Damage("second document", "docket.yaml", "quantities:\n", "---\nquantities:\n", "A second document begins here"),
]


@pytest.mark.parametrize("damage", CASES, ids=lambda damage: damage.name)
def test_each_damage_is_told_on_its_line(damage: Damage, tmp_path: Path) -> None:
    folder = copied(tmp_path)
    line = damage.apply(folder)
    problems = told(folder)
    at = [problem for problem in problems if problem.file == str(folder / damage.file) and problem.line == line]
    assert any(damage.message in problem.message and damage.hint in problem.hint for problem in at), (
        f"expected in line {line}: {damage.message}; told:\n{listing(problems)}"
    )
    assert len(problems) <= damage.most, listing(problems)
    for problem in problems:
        assert not re.search("Input should|<class|Scalar|Traceback", str(problem)), f"not plain: {problem}"
        assert problem.hint or re.search(r"Write|Did you mean", problem.message), f"no mend: {problem}"


def not_utf8(path: Path) -> None:
    path.write_bytes(path.read_bytes().replace(b"Rolling", b"Rolling \xff", 1))


def huge(path: Path) -> None:
    path.write_text(path.read_text(encoding="utf-8") + "# filler\n" * 350_000, encoding="utf-8")


def deep(path: Path) -> None:
    path.write_text("format: 1\ntables: " + "[" * 200 + "]" * 200 + "\n", encoding="utf-8")


def folder_instead(path: Path) -> None:
    path.unlink()
    path.mkdir()


def renamed(name: str) -> Callable[[Path], None]:
    return lambda path: path.rename(path.with_name(name)) and None


FILES: list[tuple[str, Callable[[Path], None], str, str]] = [
    ("point_kinds.yaml", not_utf8, "point_kinds.yaml", "The byte 0xff is not UTF-8"),
    ("shelf/demo.yaml", huge, "shelf/demo.yaml", "The file is too big"),
    ("tables/elastomers.yaml", deep, "tables/elastomers.yaml", "nested deeper than 40 levels"),
    ("cautions.yaml", folder_instead, "cautions.yaml", "This is a folder, not a file"),
    ("tables/bearings.yaml", folder_instead, "tables/bearings.yaml", "This is a folder, not a file"),
    *(
        (name, Path.unlink, name, "There is no such file")
        for name in (
            "sources.yaml",
            "steps.yaml",
            "facts.yaml",
            "properties.yaml",
            "usual_oils.yaml",
            "docket.yaml",
            "cautions.yaml",
            "designations.yaml",
            "point_kinds.yaml",
            "shelf/demo.yaml",
            "rolling_bearing/facts.yaml",
        )
    ),
    (
        "rolling_bearing/viscosity.yaml",
        renamed("viscosty.yaml"),
        "rolling_bearing/viscosty.yaml",
        "nothing reads this file",
    ),
    ("tables/bearings.yaml", renamed("bearings.yml"), "tables/bearings.yml", "nothing reads this file"),
]


@pytest.mark.parametrize(
    ("file", "harm", "at", "message"), FILES, ids=lambda part: part if isinstance(part, str) else ""
)
def test_a_damaged_file_is_told_once(
    file: str, harm: Callable[[Path], None], at: str, message: str, tmp_path: Path
) -> None:
    folder = copied(tmp_path)
    harm(folder / file)
    problems = told(folder)
    assert [problem.file for problem in problems] == [str(folder / at)], listing(problems)
    assert message in problems[0].message
    assert problems[0].hint


def test_a_misspelt_file_name_is_guessed(tmp_path: Path) -> None:
    folder = copied(tmp_path)
    renamed("viscosty.yaml")(folder / "rolling_bearing" / "viscosity.yaml")
    assert "Did you mean 'viscosity'?" in listing(told(folder))


def test_many_uses_of_one_lost_declaration_are_told_in_a_few_lines(tmp_path: Path) -> None:
    folder = copied(tmp_path)
    Damage("", "sources.yaml", "  memory: {title:", "  remembered: {title:", "").apply(folder)
    problems = told(folder)
    assert len(problems) == 4
    assert {problem.message for problem in problems} == {"'memory' is no source"}
    assert "more places say the same" in problems[-1].hint


def test_no_folder_is_told(tmp_path: Path) -> None:
    problems = told(tmp_path / "nowhere")
    assert [problem.message for problem in problems] == ["this is no folder"]


TOGETHER = [
    ["misspelt key", "unknown source", "duplicate product", "level outside its range", "unknown fact of the codes"],
    [
        "decimal comma",
        "unknown caution",
        "value outside the choices",
        "two verbs in one conclusion",
        "closing rule with a must",
    ],
    [
        "matrix pair given twice",
        "unknown demand in the docket",
        "limits the wrong way round",
        "silent example undecided",
        "product with a computed property",
    ],
    ["tab", "quote never closed", "misspelt key of a section", "key one level too high", "unknown referral"],
]


@pytest.mark.parametrize("names", TOGETHER, ids=lambda names: names[0])
def test_five_faults_in_different_files_are_told_at_once(names: list[str], tmp_path: Path) -> None:
    folder = copied(tmp_path)
    chosen = [damage for damage in CASES if damage.name in names]
    places = {(str(folder / damage.file), damage.apply(folder)) for damage in chosen}
    problems = told(folder)
    assert len(places) == 5
    assert {(problem.file, problem.line) for problem in problems} == places, listing(problems)
