"""Regions of cases as boxes: intersect, subtract, cover, and a case that lies inside."""

from advisor.boxes.box import Box, Key, Space, covered, uncovered
from advisor.boxes.cutting import boxes_of
from advisor.boxes.sides import LACKING, Among, Lacking, Side, Stretch, Ticks, whole

__all__ = [
    "LACKING",
    "Among",
    "Box",
    "Key",
    "Lacking",
    "Side",
    "Space",
    "Stretch",
    "Ticks",
    "boxes_of",
    "covered",
    "uncovered",
    "whole",
]
