"""A bench sum on one line, with the figures it used under it."""

from __future__ import annotations

from typing import Any

from stockroom.reports.sheet import PRACTICE, wrap
from stockroom.reports.words import raised, rounded


def bench_text(
    answer: str, details: tuple[str, ...], *, practice: bool = False, width: int = 100
) -> str:
    """The answer first; then each figure and caution, indented."""
    told = (wrap(raised(detail), width, indent=2) for detail in details)
    lines = [wrap(raised(answer), width), *told]
    return "\n".join([PRACTICE, *lines] if practice else lines)


def bench_json(
    value: float, unit: str, answer: str, details: tuple[str, ...], *, practice: bool = False
) -> dict[str, Any]:
    """The answer as a number to six figures with its unit, and the same words."""
    figures = {"value": rounded(value, 6), "unit": unit, "text": answer, "details": list(details)}
    return figures | {"practice": practice}
