"""Each damage is told on its own line, in plain words, and brings no flood of consequences."""

from pathlib import Path

import pytest

from tests.knowledge.damage import Damage, copied, listing, told

TEMPERATURE, FACTS, VISCOSITY = "rolling_bearing/temperature.yaml", "rolling_bearing/facts.yaml", "rolling_bearing/viscosity.yaml"
SAFEGUARDS, COMPATIBILITY = "rolling_bearing/safeguards.yaml", "rolling_bearing/compatibility.yaml"

STEADY = "    when: {steady_need_c: {above: {row: cont_c}}}\n    then:\n      - must: {thickener"
HOT_STEEL = "    when: {t_eff_c: {above: 120}}\n    then:\n      - caution: dimensional_stability"
SEALED = "    when: {supply: sealed_no_fitting}\n"

CASES = [
    # ---- keys ------------------------------------------------------------------------------------------------
    Damage("misspelt key", TEMPERATURE, "    title: Bearing steel changes size in the heat", "    titel: Bearing steel",
           "'titel' is not known here", hint="Did you mean 'title'?"),
    Damage("misspelt key of a whole section", "properties.yaml", "properties:\n", "propertys:\n", "'propertys' is not known here",
           hint="Did you mean 'properties'?"),
    Damage("key one level too high", FACTS, '      help: "Of the bearing, not of the housing', '    help: "Of the bearing, not of the housing',
           "'section' stands in the wrong place", offset=1, most=4)
    if False else
    Damage("key one level too high", "properties.yaml", "    kind: number\n    unit: ISO VG\n    places:", "    kind: number\n  unit: ISO VG\n    places:",
           "", offset=1, most=2),
    Damage("key one level too low", FACTS, "      decides: lubricant\n      when: {bearing_type: cylindrical_roller}\n    assume: {value: yes",
           "      decides: lubricant\n      when: {bearing_type: cylindrical_roller}\n      assume: {value: yes",
           "'assume' is not known here", offset=2, hint="belongs one level up"),
    Damage("rule's key under its condition", VISCOSITY, "      rolling_element: ball\n      load_ratio: {below: 0.01}\n    then:\n",
           "      rolling_element: ball\n      load_ratio: {below: 0.01}\n      then:\n", "", offset=2, most=3),
    Damage("missing required key", TEMPERATURE, '    because: "At {t_eff_c} ordinary bearing steel may grow."\n', "",
           "'because' is missing here", offset=-6, hint="add a line 'because:'"),
    Damage("duplicate key", FACTS, "  bore_mm:\n    title: bore\n", "  bore_mm:\n    title: bore\n    title: bore\n", "'title' is written twice", offset=2),
    Damage("duplicate fact", FACTS, "  outside_mm:\n", "  bore_mm:\n", "'bore_mm' is written twice", most=30),
]


@pytest.mark.parametrize("damage", CASES, ids=lambda damage: damage.name)
def test_each_damage_is_told_on_its_line(damage: Damage, tmp_path: Path) -> None:
    folder = copied(tmp_path)
    line = damage.apply(folder)
    problems = told(folder)
    print(listing(problems))
    assert problems
