"""Two themes: night and paper. One accent hue and neutrals; no state is ever told by a colour."""

from textual.theme import Theme

_NIGHT = {"quiet": "#a3afba", "rule": "#35414d", "strip": "#1d2731"}
_PAPER = {"quiet": "#4c5863", "rule": "#c4c0b4", "strip": "#e6e3da"}


def _variables(own: dict[str, str], accent: str, foreground: str, background: str) -> dict[str, str]:
    return {
        **own,
        "block-cursor-background": foreground,
        "block-cursor-foreground": background,
        "block-cursor-text-style": "none",
        "input-cursor-background": foreground,
        "input-cursor-foreground": background,
        "input-selection-background": accent,
        "scrollbar": own["rule"],
        "scrollbar-hover": accent,
        "scrollbar-active": accent,
        "scrollbar-background": background,
        "border": accent,
        "border-blurred": own["rule"],
    }


def _theme(name: str, own: dict[str, str], accent: str, foreground: str, background: str, *, dark: bool) -> Theme:
    return Theme(
        name=name,
        primary=accent,
        secondary=accent,
        accent=accent,
        warning=foreground,
        error=foreground,
        success=accent,
        foreground=foreground,
        background=background,
        surface=background,
        panel=own["strip"],
        boost=own["strip"],
        dark=dark,
        variables=_variables(own, accent, foreground, background),
    )


NIGHT = _theme("night", _NIGHT, "#82b1dc", "#e8edf2", "#12171c", dark=True)
PAPER = _theme("paper", _PAPER, "#1f4e86", "#14191e", "#fbfaf6", dark=False)
