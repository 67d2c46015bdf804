"""A changed scenario is told with all that it changes; a case that an edition does not understand, with the cause."""

import shutil
from pathlib import Path

from advisor.comparison import Meaning, compare
from advisor.knowledge import Knowledge
from advisor.places import scenario_folder
from tests.comparison.editing import edited

SELDOM = """  seldom_turned:
    title: seldom turned
    kind: yes_no
    question: {ask: Does it stand for weeks?, section: Surroundings, decides: lubricant, optional: yes}
    unasked: no
    source: [{id: common_practice}]

  dust:
    title: dust
"""
WISH = """      - should: {nlgi: {any_of: ["1"]}}
        level: 3
      - caution: do_not_lubricate
"""
CASE = """format: 1
title: A motor that stands for weeks
point_kind: rolling_bearing
guards: "It is compared."
status: agreed
like: dry_motor_bearing
answers: {ANSWERS}
expect: {state: settled}
"""


def scenario(place: Path, answers: str) -> Path:
    path = place / "standing_motor.yaml"
    path.write_text(CASE.replace("ANSWERS", answers), encoding="utf-8")
    shipped = scenario_folder() / "rolling_bearing" / "dry_motor_bearing.yaml"
    shutil.copy(shipped, place)
    return path


def test_a_case_that_the_old_edition_does_not_understand_says_why(knowledge: Knowledge, tmp_path: Path) -> None:
    new = edited(tmp_path / "new", "rolling_bearing/facts.yaml", ("  dust:\n    title: dust\n", SELDOM))
    compared = compare(knowledge, new, [scenario(tmp_path, "seldom_turned: yes")])
    differences = compared.changed[0].differences["case",]
    assert differences[0].startswith("is not understood: 'seldom_turned' is no question of this kind of point")
    assert differences[1] == "is understood"


def test_a_change_in_safety_is_told_with_the_wishes_that_change(knowledge: Knowledge, tmp_path: Path) -> None:
    rule = (
        "      - should: {shear_rating: {at_least: 4}}\n        level: 3\n        for: {form: grease}\n",
        "      - should: {shear_rating: {at_least: 4}}\n        level: 3\n        for: {form: grease}\n" + WISH,
    )
    new = edited(tmp_path / "new", "rolling_bearing/consistency.yaml", rule)
    compared = compare(knowledge, new, [scenario(tmp_path, "motion: [turning, shaken_machine]")])
    changed = compared.changed[0]
    assert changed.meaning is Meaning.SAFETY
    assert ("cautions", "do_not_lubricate") in changed.differences
    assert any(part[:2] == ("should", "nlgi") for part in changed.differences)
