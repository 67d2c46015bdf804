"""What was edited is told cell by cell and key by key, with what stood there and what stands there now."""

import json
import re
from pathlib import Path

import pytest

from advisor.comparison import as_data, as_markdown, as_text, compare, edits
from advisor.comparison.details import MOST_LINES, Line, details, shown
from advisor.knowledge import Knowledge
from advisor.places import knowledge_folder
from tests.comparison.editing import HOT_STEEL, HOT_STEEL_SILENT, edited

TEMPERATURE = "rolling_bearing/temperature.yaml"


def lines_of(old: Knowledge, new: Knowledge, name: str) -> list[Line]:
    (edit,) = [each for each in edits(old, new) if each.name == name]
    return details(old, new, edit)


def row_of(file: str, row: str) -> str:
    text = (knowledge_folder() / file).read_text(encoding="utf-8")
    return text.partition(f"id: {row}\n")[2].partition("- id:")[0]


def test_a_cell_is_told_with_its_row_column_and_both_values(knowledge: Knowledge, tmp_path: Path) -> None:
    row = row_of("tables/lubricants.yaml", "lithium_complex")
    before = re.search(r"\bcont_c: (\d+)", row)
    assert before is not None
    limit = int(before[1])
    cooler = row.replace(before[0], f"cont_c: {limit - 5}", 1)
    other = edited(tmp_path, "tables/lubricants.yaml", (row, cooler))
    assert lines_of(knowledge, other, "thickeners") == [
        ("row lithium_complex, cont_c", f"{limit} °C", f"{limit - 5} °C")
    ]


def test_a_condition_is_told_in_words_without_what_both_have(knowledge: Knowledge, tmp_path: Path) -> None:
    other = edited(tmp_path, TEMPERATURE, HOT_STEEL, HOT_STEEL_SILENT)
    assert lines_of(knowledge, other, "bearing_steel_hot") == [
        ("when", "effective temperature is above 120 °C", "effective temperature is above 110 °C"),
        ("silent, t_eff_c", "120 °C", "110 °C"),
    ]


def test_a_conclusion_is_told_in_words(knowledge: Knowledge, tmp_path: Path) -> None:
    softer = ("kappa: {at_least: 1.5}}\n        level: 2", "kappa: {at_least: 1.5}}\n        level: 3")
    other = edited(tmp_path, "rolling_bearing/viscosity.yaml", softer)
    (edit,) = edits(knowledge, other)
    ((what, was, now),) = details(knowledge, other, edit)
    assert what == "then"
    assert was.startswith("strong wish (level 2): viscosity ratio kappa at least 1.5")
    assert now == was.replace("strong wish (level 2)", "wish (level 3)")


def test_other_keys_are_told_and_long_texts_only_where_they_differ(knowledge: Knowledge, tmp_path: Path) -> None:
    other = edited(
        tmp_path,
        TEMPERATURE,
        ("ordinary bearing steel may grow", "bearing steel grows"),
        (
            "    title: Bearing steel changes size in the heat\n    status: agreed",
            "    title: Bearing steel grows in the heat\n    status: draft",
        ),
    )
    lines = {what: (was, now) for what, was, now in lines_of(knowledge, other, "bearing_steel_hot")}
    assert lines["status"] == ("agreed", "draft")
    assert lines["title"] == ("Bearing steel changes size in the heat", "Bearing steel grows in the heat")
    (words,) = [pair for what, pair in lines.items() if what not in {"status", "title"}]
    assert "ordinary bearing steel may grow" in words[0]
    assert "bearing steel grows" in words[1]


def test_a_fact_is_told_with_the_attribute_that_differs(knowledge: Knowledge, tmp_path: Path) -> None:
    fact = ("  dust:\n    title: dust\n", "  dust:\n    title: dust and grit\n")
    other = edited(tmp_path, "rolling_bearing/facts.yaml", fact)
    assert lines_of(knowledge, other, "dust") == [("title", "dust", "dust and grit")]


def test_a_product_is_told_with_the_property_that_differs(knowledge: Knowledge, tmp_path: Path) -> None:
    text = (knowledge_folder() / "shelf" / "demo.yaml").read_text(encoding="utf-8")
    product = text.partition("item: GR-101,")[2].partition("- {item")[0]
    assert product.count("upper_service_c: 120") == 1
    hotter = product.replace("upper_service_c: 120", "upper_service_c: 125")
    other = edited(tmp_path, "shelf/demo.yaml", (product, hotter))
    assert lines_of(knowledge, other, "the shelf") == [("GR-101, upper_service_c", "120 °C", "125 °C")]


def test_many_lines_are_counted() -> None:
    lines = [(f"row {place}", "", "1") for place in range(MOST_LINES + 3)]
    assert shown(lines)[-1] == "3 more"
    assert len(shown(lines)) == MOST_LINES + 1
    assert shown(lines[:1]) == ["row 0: nothing -> 1"]


@pytest.mark.parametrize("tell", [as_text, as_markdown, lambda each: json.dumps(as_data(each), ensure_ascii=False)])
def test_it_is_told_in_every_form(tell: object, knowledge: Knowledge, tmp_path: Path) -> None:
    other = edited(tmp_path, TEMPERATURE, HOT_STEEL, HOT_STEEL_SILENT)
    told = tell(compare(knowledge, other, []))  # type: ignore[operator]  # one of the three forms
    assert "effective temperature is above 120 °C" in told
    assert "effective temperature is above 110 °C" in told
