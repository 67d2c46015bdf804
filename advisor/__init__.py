"""Gudgeon: a rule-based expert system for choosing the lubricant of a lubrication point."""

__version__ = "0.1.0"
