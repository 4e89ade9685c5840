"""What is asked of a whole list: each question once, with every row it is open in."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace

from stockroom.bringing.doubts import Doubt, Weight


@dataclass(frozen=True, slots=True)
class Question:
    """What is asked once for all rows it is open in, and the answers it may have."""

    key: str
    field: str
    value: str
    text: str
    options: tuple[str, ...]
    rows: tuple[int, ...]
    weight: Weight


def questions_of(rows: Iterable[tuple[int, Iterable[Doubt]]]) -> tuple[Question, ...]:
    """Each open question once, with the rows it is open in; those of many rows first."""
    asked: dict[str, Question] = {}
    for row, doubts in rows:
        for doubt in doubts:
            if not doubt.key:
                continue
            before = asked.get(doubt.key)
            if before is None:
                asked[doubt.key] = Question(
                    doubt.key, doubt.field, doubt.value, doubt.asked, doubt.options,
                    (row,), doubt.weight,
                )  # fmt: skip
            elif before.rows[-1] != row:
                weight = max(before.weight, doubt.weight)
                asked[doubt.key] = replace(before, rows=(*before.rows, row), weight=weight)
    whole = [each for each in asked.values() if "." not in each.key and not each.key.isdigit()]
    return (*whole, *(each for each in asked.values() if each not in whole))
