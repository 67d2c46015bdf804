"""A comparison as data for JSON."""

from typing import Any

from advisor.comparison.details import Line, details
from advisor.comparison.edits import Edit
from advisor.comparison.reporting import Comparison
from advisor.comparison.saying import say_box

FORMAT = 1


def as_data(comparison: Comparison) -> dict[str, Any]:
    """The comparison for JSON."""
    return {
        "format": FORMAT,
        "old": comparison.old.fingerprint,
        "new": comparison.new.fingerprint,
        "point_kind": comparison.new.point_kind.id,
        "edits": [
            {**_edit_data(each), "details": [_line(line) for line in details(comparison.old, comparison.new, each)]}
            for each in comparison.edits
        ],
        "shelf": [{"item": each.item, "new": each.new, "verdicts": dict(each.verdicts)} for each in comparison.shelved],
        "replayed": comparison.replayed,
        "groups": [
            {
                "causes": [_edit_data(each) for each in causes],
                "scenarios": [
                    {
                        "file": str(each.path),
                        "meaning": str(each.meaning),
                        "differences": [
                            {"part": list(part), "old": was, "new": now}
                            for part, (was, now) in each.differences.items()
                        ],
                    }
                    for each in changed
                ],
            }
            for causes, changed in comparison.groups()
        ],
        "regions": [
            {
                "edit": _edit_data(each.edit),
                "step": each.step,
                "instance": each.instance,
                "how": each.how,
                "where": say_box(each.box, each.knowledge),
                "witness": {
                    "kind": "record" if each.witness.answers is None else "whole case",
                    "record": {name: _plain(value) for name, value in each.witness.record.items()},
                    "like": each.witness.like,
                    "answers": dict(each.witness.answers or {}),
                },
            }
            for each in comparison.regions
        ],
        "left_out": [{"instance": each.instance, "names": list(each.names)} for each in comparison.left_out],
    }


def _line(line: Line) -> dict[str, str]:
    return dict(zip(("what", "old", "new"), line, strict=True))


def _edit_data(edit: Edit) -> dict[str, str]:
    return {"kind": edit.kind, "name": edit.name, "how": edit.how}


def _plain(value: object) -> object:
    return sorted(value) if isinstance(value, frozenset) else value if isinstance(value, float | str) else None
