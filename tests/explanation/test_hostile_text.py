"""Whatever stands in titles and products arrives as text: it neither becomes markup nor steers the terminal."""

import json
import unicodedata
from collections.abc import Callable
from dataclasses import replace
from html.parser import HTMLParser

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from markdown_it import MarkdownIt

from advisor import explanation
from advisor.advice import Advice
from advisor.explanation.text_report import WIDTH
from advisor.explanation.words import harmless

AdviceOf = Callable[[str], Advice]
ESCAPE = chr(27)
HOSTILE = [
    "<script>alert(1)</script><img src=x onerror=alert(1)>",
    "</title></style><b>bold</b> &amp; &lt;i&gt;",
    "[link](http://example.invalid) ![image](x) <http://example.invalid> http://example.invalid www.example.invalid",
    "`code` ``more`` *one* _two_ **three** __four__ ~~five~~ # six",
    "| a | b |\n| --- | --- |",
    "# heading",
    "- item",
    "1. item",
    "2) item",
    "> quote",
    "===",
    "+ plus",
    "{speed_rpm} {0} {row.title} %s %(x)s ${x} {{ 7*7 }} {% raw %}",
    "first line\nsecond line\r\n\tthird",
    f"{ESCAPE}[31mred{ESCAPE}[0m{ESCAPE}]0;title\x07 \x9b2J \x7f \x00",
    "right\u202eleft \u2066inner\u2069 zero\u200bwidth \ufeff",
    "[red]rich markup[/red] [@click=app.quit]x[/]",
    "\\ backslash \\n \\| end \\",
    "x" * 500,
]


def titled(advice: Advice, title: str) -> Advice:
    return replace(advice, case=replace(advice.case, title=title))


class Page(HTMLParser):
    """The tags of a page, and the text of its first heading and of its title."""

    def __init__(self, page: str) -> None:
        super().__init__()
        self.tags: list[str] = []
        self.texts: dict[str, str] = {}
        self.open: list[str] = []
        self.feed(page)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:  # noqa: ARG002 - as the base class calls it
        self.tags.append(tag)
        self.open.append(tag)

    def handle_endtag(self, tag: str) -> None:
        if tag in self.open:
            while self.open.pop() != tag:
                pass

    def handle_data(self, data: str) -> None:
        if self.open and self.open[-1] in {"h1", "title"}:
            self.texts[self.open[-1]] = self.texts.get(self.open[-1], "") + data


@pytest.fixture(scope="module")
def small(advice_of: AdviceOf) -> Advice:
    """A short report: a withheld advice."""
    return advice_of("oxygen_booster_motor")


@pytest.mark.parametrize("title", HOSTILE)
def test_a_title_makes_no_tags_in_html(title: str, small: Advice) -> None:
    page, plain = Page(explanation.html(titled(small, title))), Page(explanation.html(titled(small, "plain")))
    assert page.tags == plain.tags
    assert page.texts["h1"] == harmless(title)
    assert page.texts["title"].startswith(harmless(title))


@pytest.mark.parametrize("title", HOSTILE)
def test_a_title_makes_no_markup_in_markdown(title: str, small: Advice) -> None:
    tokens = MarkdownIt("gfm-like").parse(explanation.markdown(titled(small, title)))
    plain = MarkdownIt("gfm-like").parse(explanation.markdown(titled(small, "plain")))
    assert [token.type for token in tokens] == [token.type for token in plain]
    children = tokens[1].children or []
    assert {child.type for child in children} <= {"text", "text_special"}
    assert "".join(child.content for child in children).split() == harmless(title).split()


@pytest.mark.parametrize("title", HOSTILE)
def test_a_title_stays_text_on_the_terminal(title: str, small: Advice) -> None:
    text = explanation.text(titled(small, title))
    assert all(sign == "\n" or sign.isprintable() for sign in text)
    assert all(len(line) <= WIDTH for line in text.splitlines())
    head = text[: text.index("Rolling bearing.")]
    assert "".join(harmless(title).split()) in "".join(head.split())


@pytest.mark.parametrize("title", HOSTILE)
def test_json_gives_the_title_back_and_holds_no_control_character(title: str, small: Advice) -> None:
    text = explanation.as_json(titled(small, title))
    assert json.loads(text)["case"]["title"] == title
    assert all(unicodedata.category(sign) not in {"Cc", "Cf", "Cs", "Zl", "Zp"} for sign in text.removesuffix("\n"))


@given(title=st.text(alphabet=st.characters(exclude_categories=()), max_size=60))
@settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
def test_any_title_can_be_written_everywhere(title: str, small: Advice) -> None:
    advice = titled(small, title)
    for written in (explanation.text(advice), explanation.markdown(advice), explanation.html(advice)):
        assert all(sign == "\n" or sign.isprintable() for sign in written)
        written.encode("utf-8")
    assert json.loads(explanation.as_json(advice))["case"]["title"] == title


def test_a_hostile_product_stays_text_in_its_table(advice_of: AdviceOf) -> None:
    advice = advice_of("motor_keeps_its_polyurea")
    judgement = advice.judgement
    assert judgement is not None
    title = "<b>x</b> | `y` | [z](http://example.invalid)\n| new | row |"
    items = tuple(replace(item, title=title) for item in judgement.catalogue.items)
    plain_page, plain_markdown = (
        Page(explanation.html(advice)),
        MarkdownIt("gfm-like").parse(explanation.markdown(advice)),
    )
    before = judgement.catalogue.items
    try:
        judgement.catalogue.items = items
        page, tokens = Page(explanation.html(advice)), MarkdownIt("gfm-like").parse(explanation.markdown(advice))
    finally:
        judgement.catalogue.items = before
    assert page.tags == plain_page.tags
    assert [token.type for token in tokens] == [token.type for token in plain_markdown]


def test_braces_in_a_reason_are_filled_once_and_never_as_a_format(advice_of: AdviceOf) -> None:
    """An answer that looks like a placeholder is not filled again."""
    advice = advice_of("hot_wet_roller_table")
    text = explanation.text(titled(advice, "{steady_need_c} {row.title}"))
    assert text.startswith("{steady_need_c} {row.title}\n")
