"""A bench sum on one line, its cautions and the figures it used under it."""

from __future__ import annotations

import re
from collections.abc import Sequence
from typing import Any, Protocol

from stockroom.reports.sheet import PRACTICE, wrap
from stockroom.reports.words import TIED, raised, rounded
from stockroom.safety.cautions import HOUSE_LINE

# "1 000 cm³" and "0.47 %" are each one thing to the eye, so no line is broken in them
_IN_A_NUMBER = re.compile(r"(?<=[0-9]) (?=[0-9]{3}(?![0-9]))")
_BEFORE_UNIT = re.compile(r"(?<=[0-9]) (?=(?:%|cm³|dm³|g|mol/dm³|g/cm³|°C|vol|M|N)(?![\w/]))")


class _Named(Protocol):
    @property
    def what(self) -> str: ...
    @property
    def value(self) -> float: ...
    @property
    def unit(self) -> str: ...


class _Sum(Protocol):
    @property
    def text(self) -> str: ...
    @property
    def value(self) -> float: ...
    @property
    def unit(self) -> str: ...
    @property
    def details(self) -> tuple[str, ...]: ...
    @property
    def practice(self) -> bool: ...
    @property
    def amounts(self) -> Sequence[_Named]: ...
    @property
    def ways(self) -> Sequence[Sequence[_Named]]: ...
    @property
    def cautions(self) -> tuple[str, ...]: ...


def bench_text(
    answer: str,
    details: Sequence[str],
    cautions: Sequence[str] = (),
    *,
    practice: bool = False,
    width: int = 100,
) -> str:
    """The answer first, and beside it what to mind; then each figure; then whose word is first."""
    marked = [f"! {caution}" for caution in cautions]
    foot = [HOUSE_LINE] if cautions else []
    told = [wrap(_tied(line), width, indent=2) for line in (*marked, *details, *foot)]
    lines = [wrap(_tied(answer), width), *told]
    return "\n".join([PRACTICE, *lines] if practice else lines)


def sum_text(answer: _Sum, width: int = 100) -> str:
    """A bench sum as it is printed."""
    return bench_text(
        answer.text, answer.details, answer.cautions, practice=answer.practice, width=width
    )


def sum_json(answer: _Sum) -> dict[str, Any]:
    """The answer as numbers to six figures with their units, and the same words.

    `value` is the first of `amounts`; `ways` are the other ways, each a row of amounts.
    """
    return {
        "value": rounded(answer.value, 6),
        "unit": answer.unit,
        "amounts": [_named_json(each) for each in answer.amounts],
        "ways": [[_named_json(each) for each in way] for way in answer.ways],
        "text": raised(answer.text),
        "details": [raised(detail) for detail in answer.details],
        "cautions": list(answer.cautions),
        "practice": answer.practice,
    }


def _named_json(each: _Named) -> dict[str, Any]:
    return {"what": each.what, "value": rounded(each.value, 6), "unit": each.unit}


def _tied(text: str) -> str:
    return _BEFORE_UNIT.sub(TIED, _IN_A_NUMBER.sub(TIED, raised(text)))
