"""The report as Markdown; every text from outside is escaped, so that nothing in a title or a file becomes markup."""

import re
from collections.abc import Iterator

from advisor.advice import Advice
from advisor.explanation.blocks import Block, Grid, Node, Para, Tree
from advisor.explanation.report import report
from advisor.explanation.words import harmless

_SIGNS = re.compile(r"[\\`*\[\]{}|~!$@]|(?<![^\W_])_|_(?![^\W_])")
_ENTITIES = {"&": "&amp;", "<": "&lt;", ">": "&gt;"}
_START = re.compile(r"^(\s*)([#+=-]|\d+(?=[.)]))")
_LINK = re.compile(r"(?i)(?<=:)/(?=/)|(?<=\bwww)\.")


def markdown(advice: Advice) -> str:
    """The whole report as Markdown."""
    made = report(advice)
    lines = [f"# {escaped(made.title)}", "", escaped(made.about)]
    for section in made.sections:
        lines += ["", f"## {escaped(section.title)}"]
        for block in section.blocks:
            lines += ["", *_block(block)]
    return "\n".join(lines) + "\n"


def escaped(text: str) -> str:
    r"""The text as Markdown that shows exactly it.

    >>> print(escaped("a|b <b>*c*</b> [d](e) steady_need_c"))
    a\|b &lt;b&gt;\*c\*&lt;/b&gt; \[d\](e) steady_need_c
    """
    signs = _SIGNS.sub(lambda found: f"\\{found.group()}", harmless(text))
    signs = "".join(_ENTITIES.get(sign, sign) for sign in signs)
    signs = _LINK.sub(lambda found: f"\\{found.group()}", signs)
    return _START.sub(_escape_start, signs)


def _escape_start(found: re.Match[str]) -> str:
    space, sign = found.groups()
    return f"{space}{sign}\\" if sign.isdigit() else f"{space}\\{sign}"


def _block(block: Block) -> Iterator[str]:
    if isinstance(block, Para):
        yield f"**{escaped(block.text)}**" if block.strong else escaped(block.text)
    elif isinstance(block, Tree):
        for number, node in enumerate(block.nodes, start=1):
            yield from _node(node, f"{number}. " if block.numbered else "- ", "")
    else:
        yield from _grid(block)


def _node(node: Node, bullet: str, indent: str) -> Iterator[str]:
    yield f"{indent}{bullet}{escaped(node.text)}"
    for each in node.under:
        yield from _node(each, "- ", indent + " " * len(bullet))


def _grid(grid: Grid) -> Iterator[str]:
    yield f"| {' | '.join(map(escaped, grid.heads))} |"
    yield f"|{' --- |' * len(grid.heads)}"
    for row in grid.rows:
        yield f"| {' | '.join(map(escaped, row))} |"
