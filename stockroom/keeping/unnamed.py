"""Bottles nobody can name: the lines they are logged under, and what is written on them."""

from __future__ import annotations

from stockroom.measure.amounts import Kind

UNNAMED = {Kind.MASS: "unknown", Kind.VOLUME: "unknown liquid"}
"""The line an unknown is logged under, by what its content is measured by."""

UNKNOWN = "UNKNOWN, do not use or move"
"""What stands on the label of a bottle that nobody can name."""


def is_unnamed(line: str) -> bool:
    """Whether a line, by its key, is one that nobody can name."""
    return line in UNNAMED.values()
