"""What is withheld leaks nowhere: no product, no grade, no code, no film."""

import json
from collections.abc import Callable

import pytest

from advisor import explanation
from advisor.advice import Advice, Advisor
from advisor.case import Case
from advisor.explanation.workings import NotHere

AdviceOf = Callable[[str], Advice]
WITHHELD = [
    "oxygen_booster_motor",
    "food_touches_the_lubricant",
    "nuclear_plant_pump",
    "vacuum_chamber_bearing",
    "linear_guide_is_out_of_scope",
    "sealed_motor_bearing",
]
WRITERS = [explanation.text, explanation.markdown, explanation.html, explanation.as_json]
TELLING = ["VG", "ISO-L-X", "KP", "K2", "kappa", "NLGI grade", "film_floor", "thickener_steady"]


@pytest.mark.parametrize("name", WITHHELD)
@pytest.mark.parametrize("write", WRITERS, ids=lambda write: write.__name__)
def test_no_product_grade_or_code_is_named(name: str, write: Callable[[Advice], str], advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    assert advice.withheld
    written = write(advice)
    for product in advice.knowledge.shelf:
        assert product.item not in written
        assert product.title not in written
    assert [word for word in TELLING if word in written] == []


@pytest.mark.parametrize("write", WRITERS, ids=lambda write: write.__name__)
def test_not_even_the_product_in_use_is_named(
    write: Callable[[Advice], str], advisor: Advisor, make_case: Callable[..., Case]
) -> None:
    advice = advisor.advise(
        make_case(
            dangers="oxidiser",
            incumbent="GR-301",
            incumbent_thickener=None,
            incumbent_base_oil=None,
            maker_item="GR-102",
        )
    )
    assert advice.withheld
    assert "GR-" not in write(advice)


@pytest.mark.parametrize("name", WITHHELD)
def test_json_has_no_result(name: str, advice_of: AdviceOf) -> None:
    data = json.loads(explanation.as_json(advice_of(name)))
    assert data["withheld"] is True
    assert data["state"] == "referred"
    assert not data.keys() & {"specification", "docket", "usual_oils", "renewal", "shelf", "fits"}
    assert data["referrals"]


def test_questions_about_it_are_declined(advice_of: AdviceOf) -> None:
    advice = advice_of("oxygen_booster_motor")
    assert explanation.why(advice, "vg").conclusion.startswith("withheld")
    assert explanation.why(advice, "vg").reasons == ()
    with pytest.raises(NotHere, match="see the referral"):
        explanation.why_not(advice, "GR-101")


@pytest.mark.parametrize("name", WITHHELD)
def test_it_says_to_whom(name: str, advice_of: AdviceOf) -> None:
    advice = advice_of(name)
    text = " ".join(explanation.text(advice).split())
    for referral in advice.referrals:
        assert f"Refer to {advice.knowledge.referrals[referral.to].to}" in text
