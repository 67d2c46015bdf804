"""The signs of the sheet, and what stands for them where only ASCII can be shown."""

import locale
import os
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Glyphs:
    """One sign for each meaning; every sign stands beside a word."""

    fits: str = "●"
    out: str = "○"
    unsure: str = "◌"
    changed: str = "▸"
    blank: str = "·"
    full: str = "■"
    empty: str = "□"
    ticked: str = "■"
    unticked: str = "□"
    point: str = "◉"
    across: str = "─"
    plain: bool = False

    def words(self, text: str) -> str:
        """A text in signs that the terminal can show; each sign keeps its width where that is possible."""
        if not self.plain or text.isascii():
            return text
        for sign, instead in _SPELLED.items():
            text = text.replace(sign, instead)
        return text.translate(ONE_FOR_ONE).encode("ascii", "replace").decode("ascii")


ASCII = Glyphs("*", "o", "?", ">", ".", "#", "-", "x", "_", "@", "-", plain=True)

_SPELLED = {"≥": ">=", "≤": "<=", "±": "+/-", "→": "->", "…": "...", "°C": "degC", "°F": "degF", "µ": "u"}
ONE_FOR_ONE = str.maketrans(
    {
        **dict.fromkeys("─━═┄┈╌▔▁▂", "-"),
        **dict.fromkeys("│┃║┆┊▏▕▎▌▐", "|"),
        **dict.fromkeys("┌┐└┘├┤┬┴┼╭╮╰╯┗┛┏┓", "+"),
        **dict.fromkeys("█▉▊▋▇▆▅▄▃▀■", "#"),
        **dict.fromkeys("·⋅•", "."),
        **dict.fromkeys("−–—‐", "-"),
        "×": "x",
        "²": "2",
        "³": "3",
        "°": " ",
        "µ": "u",
        "…": "~",
        "▼": "v",
        "▶": ">",
        "▸": ">",
        "●": "*",
        "○": "o",
        "◌": "?",
        "□": "-",
        "◉": "@",
        "≥": ">",
        "≤": "<",
        "’": "'",
        "“": '"',
        "”": '"',
        "ä": "a",
        "ö": "o",
        "ü": "u",
        "é": "e",
    }
)
"""One ASCII sign for one that is drawn by the screen itself."""


def glyphs_for(*, plain: bool) -> Glyphs:
    """The signs for this terminal: ASCII where asked for, or where the locale cannot show others."""
    encoding = locale.getpreferredencoding(do_setlocale=False).replace("-", "").casefold()
    return (
        ASCII
        if plain or encoding not in {"utf8", "utf16", "cp65001"} or os.environ.get("TERM") == "linux"
        else Glyphs()
    )
