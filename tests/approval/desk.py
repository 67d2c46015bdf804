"""A reviewer's desk: a few scenarios with a log, the knowledge they agree with, and the same after an edit."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from pathlib import Path

from advisor.advice import Advisor
from advisor.approval import BEGIN, NAME, Entry, Review, approve, review, signature
from advisor.knowledge import Knowledge

HERE = Path(__file__).resolve().parent
ORDINARY = HERE.parent / "replay" / "failing" / "ordinary.yaml"
DAY = "2026-03-02"
ANNA = signature("Anna Example", "The limit was agreed after the oven tests")

HOT = """# A comment that stays.
format: 1
title: "Hot motor bearing"
point_kind: rolling_bearing
guards: "Plain lithium soap does not stand it."   # and this one
status: agreed
like: ordinary
answers:
  running_temperature_c: 105 °C
expect:
  withheld: no   # kept
  barred:
    thickener: {lithium_12OH: thickener_steady, sodium: thickener_steady}
  # between two expectations
  products: {GR-101: falls_short by thickener_steady}
"""
HOTTER = HOT.replace("105 °C", "120 °C").replace("Hot motor", "Hotter motor")
COOL = HOT.partition("expect:")[0].replace("105 °C", "60 °C").replace("Hot motor", "Cool motor") + (
    "expect:\n  products: {GR-101: fits}\n"
)


@dataclass
class Desk:
    """The folder, and who advises before and after the edit."""

    root: Path
    before: Advisor
    after: Advisor

    @property
    def log(self) -> Path:
        return self.root / NAME

    def file(self, name: str) -> Path:
        return self.root / f"{name}.yaml"

    def edit(self, name: str, old: str, new: str) -> None:
        text = self.file(name).read_text(encoding="utf-8")
        assert text.count(old) == 1, f"{old!r} stands {text.count(old)} times in {name}"
        self.file(name).write_text(text.replace(old, new), encoding="utf-8")

    def review(self, advisor: Advisor | None = None) -> Review:
        return review(self.root, self.advisors(advisor))

    def advisors(self, advisor: Advisor | None = None) -> Mapping[str, Advisor]:
        return {"rolling_bearing": advisor or self.after}

    def sign(self, group: str, advisor: Advisor | None = None) -> Entry:
        return approve(self.root, group, ANNA, DAY, lambda: self.advisors(advisor))

    def names(self) -> list[str]:
        return [each.name for each in self.review().groups]

    def the(self, about: str) -> str:
        """The group about this, as the replay shows it now."""
        return next(name for name in self.names() if name.partition("@")[0] == about)

    def everything(self) -> dict[str, bytes]:
        """Every byte of the folder."""
        return {path.name: path.read_bytes() for path in sorted(self.root.rglob("*")) if path.is_file()}


def edited(knowledge: Knowledge) -> Knowledge:
    """The knowledge after an edit: steady heat rules out no thickener any more."""
    instances = {
        step: tuple(each for each in of_step if each.rule.id != "thickener_steady")
        for step, of_step in knowledge.instances.items()
    }
    return replace(knowledge, instances=instances, fingerprint="e" * 16)


def laid_out(root: Path, before: Advisor, after: Advisor) -> Desk:
    """A desk whose log has begun."""
    root.mkdir()
    (root / "ordinary.yaml").write_text(ORDINARY.read_text(encoding="utf-8"), encoding="utf-8")
    for name, text in (("hot", HOT), ("hotter", HOTTER), ("cool", COOL)):
        (root / f"{name}.yaml").write_text(text, encoding="utf-8")
    desk = Desk(root, before, after)
    desk.sign(BEGIN, before)
    return desk
