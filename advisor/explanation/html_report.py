"""The report as one HTML file that needs nothing else; the only user of jinja2."""

from functools import cache
from importlib.resources import files

import jinja2

from advisor.advice import Advice
from advisor.explanation.blocks import Grid, Para, Tree
from advisor.explanation.chart import chart
from advisor.explanation.report import report
from advisor.explanation.words import harmless


def html(advice: Advice) -> str:
    """The whole report as HTML."""
    return _template().render(report=report(advice), chart=chart(advice)) + "\n"


@cache
def _template() -> jinja2.Template:
    environment = jinja2.Environment(
        autoescape=True, undefined=jinja2.StrictUndefined, finalize=_finalized, trim_blocks=True, lstrip_blocks=True
    )
    environment.tests |= {
        "para": lambda block: isinstance(block, Para),
        "tree": lambda block: isinstance(block, Tree),
        "grid": lambda block: isinstance(block, Grid),
    }
    source = files("advisor.explanation").joinpath("report.html").read_text(encoding="utf-8")
    return environment.from_string(source)


def _finalized(value: object) -> object:
    """Texts from outside lose their control characters; escaping follows."""
    return harmless(value) if type(value) is str else value
