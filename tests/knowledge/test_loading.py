"""What every construction of the knowledge language becomes in memory, read from the made-up folder beside this."""

from collections.abc import Callable
from pathlib import Path

import pytest

from advisor.conditions import ALWAYS, Bound, Condition, Domain, Either, Every, FactRef, Member, Stated, Ticked, negated
from advisor.documents import Faulty, Mapping, Problems, read_text
from advisor.knowledge import (
    Asks,
    Formed,
    FromItem,
    Knowledge,
    LookedUp,
    Mistyped,
    Refers,
    Scope,
    Sets,
    Warns,
    WorstOf,
    condition,
    examine,
    load,
)
from tests.knowledge.damage import SHIPPED, copied

FACTS = {
    "water": Domain("scale", choices=dict.fromkeys(("none", "humid", "wash"), "")),
    "type": Domain("choice", choices=dict.fromkeys(("ball", "roller"), "")),
    "motion": Domain("several", choices=dict.fromkeys(("turning", "swinging", "vertical"), "")),
    "hot": Domain("yes_no", choices={"no": "no", "yes": "yes"}),
    "t": Domain("number", "°C", -80, 400, named={"warm": 60.0}),
    "limit": Domain("number", "°C", -80, 400),
    "vg": Domain("number", "ISO VG", places=(32, 46, 68)),
}

CONDITIONS: list[tuple[str, Condition]] = [
    ("always", ALWAYS),
    ("{t: 70}", Bound("t", "=", 70.0)),
    ("{t: warm}", Bound("t", "=", 60.0)),
    ("{t: {above: 70}}", Bound("t", ">", 70.0)),
    ("{t: {at_least: 70}}", Bound("t", ">=", 70.0)),
    ("{t: {below: -1.5}}", Bound("t", "<", -1.5)),
    ("{t: {at_most: 70}}", Bound("t", "<=", 70.0)),
    ("{t: {at_least: 60, below: 70}}", Every((Bound("t", ">=", 60.0), Bound("t", "<", 70.0)))),
    ("{t: {above: {fact: limit}}}", Bound("t", ">", FactRef("limit"))),
    ("{t: {fact: limit}}", Bound("t", "=", FactRef("limit"))),
    ("{water: humid}", Bound("water", "=", 1.0)),
    ("{water: {at_least: humid}}", Bound("water", ">=", 1.0)),
    ("{water: {any_of: [none, wash]}}", Member("water", frozenset({0.0, 2.0}))),
    ("{hot: yes}", Bound("hot", "=", 1.0)),
    ("{hot: true}", Bound("hot", "=", 1.0)),
    ("{hot: no}", Bound("hot", "=", 0.0)),
    ("{type: ball}", Member("type", frozenset({"ball"}))),
    ("{type: {any_of: [ball, roller]}}", Member("type", frozenset({"ball", "roller"}))),
    ("{type: {none_of: [ball]}}", Member("type", frozenset({"ball"}), wanted=False)),
    ("{vg: {any_of: [32, 46]}}", Member("vg", frozenset({32.0, 46.0}))),
    ("{motion: turning}", Ticked("motion", frozenset({"turning"}))),
    ("{motion: {any_of: [turning, vertical]}}", Ticked("motion", frozenset({"turning", "vertical"}))),
    ("{motion: {none_of: [swinging]}}", Ticked("motion", frozenset({"swinging"}), wanted=False)),
    ("{motion: none}", Ticked("motion", frozenset({"turning", "swinging", "vertical"}), wanted=False)),
    ("{motion: []}", Ticked("motion", frozenset({"turning", "swinging", "vertical"}), wanted=False)),
    ("{t: 1, type: ball}", Every((Bound("t", "=", 1.0), Member("type", frozenset({"ball"}))))),
    ("{either: [{t: 1}, {hot: yes}]}", Either((Bound("t", "=", 1.0), Bound("hot", "=", 1.0)))),
    (
        "{type: ball, either: [{t: 1}, {t: 2}]}",
        Every((Member("type", frozenset({"ball"})), Either((Bound("t", "=", 1.0), Bound("t", "=", 2.0))))),
    ),
    (
        "{either: [{either: [{t: 1}, {t: 2}]}, {hot: yes, type: ball}]}",
        Either(
            (
                Either((Bound("t", "=", 1.0), Bound("t", "=", 2.0))),
                Every((Bound("hot", "=", 1.0), Member("type", frozenset({"ball"})))),
            )
        ),
    ),
]


def scope(problems: Problems, *, stated: bool = False) -> Scope:
    return Scope(problems, FACTS, FACTS, may_ask_stated=stated)


@pytest.mark.parametrize(("text", "expected"), CONDITIONS, ids=lambda part: part if isinstance(part, str) else "")
def test_a_condition_becomes_these_terms(text: str, expected: Condition) -> None:
    problems = Problems()
    node = read_text(f"when: {text}\n", "made up", problems)
    assert isinstance(node, Mapping)
    assert condition(node["when"], scope(problems)) == expected
    assert not len(problems)


def test_stated_is_asked_only_of_products() -> None:
    problems = Problems()
    node = read_text("{t: stated, limit: not_stated}\n", "made up", problems)
    assert node is not None
    assert condition(node, scope(problems, stated=True)) == Every((Stated("t"), Stated("limit", wanted=False)))
    with pytest.raises(Mistyped):
        condition(node, scope(problems))


def test_all_faults_of_one_condition_are_told() -> None:
    problems = Problems()
    text = "{t: {over: 1}, tipe: ball, water: {at_least: soaked}, either: [{hot: maybe}, {vg: {above: {fact: t}}}]}\n"
    node = read_text(text, "made up", problems)
    assert node is not None
    with pytest.raises(Mistyped):
        condition(node, scope(problems))
    assert len(problems) == 5


# ---- a folder of our own ------------------------------------------------------------

SMALL = Path(__file__).with_name("small")


@pytest.fixture
def small() -> Knowledge:
    return load(SMALL, "hinge")


def test_every_kind_of_domain(small: Knowledge) -> None:
    assert small.facts["t"].domain == Domain("number", "°C", -50, 300)
    assert dict(small.facts["seal"].domain.choices) == {"NBR": "NBR", "FKM": "FKM"}
    assert dict(small.facts["now"].domain.choices) == {"A-1": "A-1 First", "none": "none"}
    thickeners = {"soap": "plain soap", "complex": "complex", "clay": "clay"}
    assert dict(small.facts["now_thickener"].domain.choices) == {**thickeners, "not_known": "not known"}
    assert dict(small.properties["thickener"].domain.choices) == thickeners
    assert small.properties["vg"].domain.places == (32, 46)


def test_every_way_in_which_a_fact_gets_its_value(small: Knowledge) -> None:
    seal, again, margin = small.facts["seal"], small.facts["again"], small.facts["margin_k"]
    assert seal.question is not None
    assert seal.question.when == ALWAYS
    assert seal.assume is not None
    assert seal.assume.value == ("NBR",)
    assert again.question is not None
    assert again.question.when == Ticked("seal", frozenset({"NBR"}))
    assert again.unasked == FactRef("t")
    assert small.facts["now_thickener"].unasked == FromItem("now", "thickener", "not_known")
    assert margin.tunable is not None
    assert margin.tunable.value == 10
    cap = small.facts["cap"].concluded
    assert cap is not None
    assert (cap.otherwise, cap.combine) == (1500, "lowest")


def test_every_way_in_which_a_property_is_found(small: Knowledge) -> None:
    found = {name: each.how for name, each in small.properties.items()}
    rank = LookedUp("thickeners", (("id", "thickener"),), "rank", "", None)
    assert found["intercept"] == Formed("walther_intercept", {"viscosity_40": "viscosity_40", "viscosity_100": 9})
    assert found["cont"] == LookedUp("thickeners", (("id", "thickener"),), "cont_c", "", None)
    assert found["special"] == WorstOf((rank, LookedUp("oils", (("id", "base_oil"),), "rank", "", None)))
    assert found["mixes"] == LookedUp("mixing", (("left", "now_thickener"), ("right", "thickener")), "", "", "I")
    assert small.properties["mixes"].same_item == "now"
    work = small.properties["work"].concluded
    assert work is not None
    assert (work.otherwise, work.combine) == ("none", "highest")
    assert [name for name, each in small.properties.items() if each.stored] == [
        "form",
        "thickener",
        "vg",
        "base_oil",
        "viscosity_40",
        "viscosity_100",
    ]


def test_computations_take_their_domain_from_what_computes_them(small: Knowledge) -> None:
    assert small.computations["more_k"].domain == Domain("number", "K")
    assert small.computations["need_c"].domain == Domain("number", "°C", -50, 400)
    assert small.computations["need_c"].how == Formed("total", {"a": "t", "b": "margin_k"})
    assert small.computations["need_c"].step == "heat"


def test_a_matrix_is_symmetric(small: Knowledge) -> None:
    mixing = small.tables["mixing"].matrix
    assert mixing["soap", "clay"] == mixing["clay", "soap"] == "I"
    assert len(mixing) == 9


def test_a_rule_speaks_once_for_each_row_that_has_the_cell(small: Knowledge) -> None:
    """Row soap does not meet `where`, and row clay has no steady limit."""
    instances = [each for each in small.instances["heat"] if each.rule.id == "too_hot"]
    assert [each.id for each in instances] == ["too_hot/complex"]


def test_unless_is_the_negation_of_its_condition(small: Knowledge) -> None:
    instance = next(each for each in small.instances["heat"] if each.rule.id == "too_hot")
    unless = Every((Ticked("seal", frozenset({"FKM"})), Bound("t", "<", 0.0)))
    assert instance.when == Every((Bound("need_c", ">", 130.0), negated(unless)))


def test_every_kind_of_conclusion(small: Knowledge) -> None:
    then = next(each for each in small.instances["heat"] if each.rule.id == "too_hot").then
    grease = Every((Member("form", frozenset({"grease"})), Stated("viscosity_40")))
    assert then == (
        Asks("thickener", Member("thickener", frozenset({"complex"}), wanted=False), 0, grease),
        Asks("vg", Bound("vg", ">=", 46.0), 2),
        Sets("cap", 46.0),
        Sets("work", 1.0, Bound("mixes", "=", 1.0)),
        Warns("careful"),
        Refers("someone", withhold=True),
    )


def test_draft_rules_are_kept_and_bind_nothing_and_retired_rules_are_only_listed(small: Knowledge) -> None:
    binding = {each.rule.id: each.binds for each in small.instances["heat"]}
    assert binding == {"too_hot": True, "sketch": False}
    assert "old" in small.rules


def test_a_citation_is_as_sure_as_its_source(small: Knowledge) -> None:
    assert [(each.id, each.where, each.checked) for each in small.rules["too_hot"].source] == [
        ("practice", "shop", "no source"),
        ("standard", "", "from memory"),
    ]


def test_closing_rules_see_the_result(small: Knowledge) -> None:
    assert [each.when for each in small.instances["closing"]] == [Bound("shelf_fits", "=", 0.0)]


def test_the_small_files(small: Knowledge) -> None:
    assert [step.id for step in small.steps] == ["heat", "choice", "closing"]
    assert small.docket[0].shown_if == Bound("t", ">", 0.0)
    assert small.usual_oils.ordinary == Bound("special", "<=", 1.0)
    assert small.referrals["someone"].to == "someone"
    assert small.shelf[0].values == {"form": "grease", "thickener": "soap", "vg": 46.0}
    assert small.shelf_title == "Shelf"


# ---- the shipped folder ------------------------------------------------------------


def test_the_fingerprint_is_the_same_anywhere(knowledge: Knowledge, tmp_path: Path) -> None:
    assert load(copied(tmp_path)).fingerprint == knowledge.fingerprint


def test_line_ends_do_not_change_the_fingerprint(knowledge: Knowledge, tmp_path: Path) -> None:
    folder = copied(tmp_path)
    for path in folder.rglob("*.yaml"):
        path.write_bytes(path.read_bytes().replace(b"\n", b"\r\n"))
    assert load(folder).fingerprint == knowledge.fingerprint


def a_changed_byte(folder: Path) -> None:
    path = folder / "docket.yaml"
    path.write_bytes(path.read_bytes().replace(b"Thickener", b"thickener", 1))


def a_new_comment(folder: Path) -> None:
    path = folder / "shelf" / "demo.yaml"
    path.write_bytes(b"# seen\n" + path.read_bytes())


def a_renamed_file(folder: Path) -> None:
    (folder / "tables" / "bearings.yaml").rename(folder / "tables" / "types.yaml")


@pytest.mark.parametrize("change", [a_changed_byte, a_new_comment, a_renamed_file])
def test_any_change_of_a_file_changes_the_fingerprint(
    change: Callable[[Path], None], knowledge: Knowledge, tmp_path: Path
) -> None:
    folder = copied(tmp_path)
    change(folder)
    assert load(folder).fingerprint != knowledge.fingerprint


def test_another_shelf_can_be_named(tmp_path: Path) -> None:
    shelf = tmp_path / "ours.yaml"
    shelf.write_text(
        "format: 1\nshelf: Ours\nproducts:\n  - {item: X-1, title: Ours, form: oil, vg: 46}\n", encoding="utf-8"
    )
    ours = load(SHIPPED, shelf=shelf)
    assert [product.item for product in ours.shelf] == ["X-1"]
    assert "X-1" in ours.facts["incumbent"].domain.choices
    assert "GR-101" not in ours.facts["incumbent"].domain.choices


def test_load_raises_every_problem(tmp_path: Path) -> None:
    folder = copied(tmp_path)
    (folder / "docket.yaml").write_text("format: 1\nrows:\n  - {id: form, titel: Form}\n", encoding="utf-8")
    (folder / "usual_oils.yaml").unlink()
    with pytest.raises(Faulty) as told:
        load(folder)
    assert [Path(problem.file).name for problem in told.value.problems] == ["docket.yaml", "usual_oils.yaml"]


def test_an_unknown_kind_of_point_is_told(tmp_path: Path) -> None:
    problems = Problems()
    assert examine(copied(tmp_path), "rolling_bering", None, problems) is None
    assert "'rolling_bering' is no kind of point here. Did you mean 'rolling_bearing'?" in str(next(iter(problems)))
