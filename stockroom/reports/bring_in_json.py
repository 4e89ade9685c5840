"""A list of bottles tried or brought in, for programs: every column, question and row."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from stockroom.bringing.doubts import Weight
from stockroom.bringing.outcome import ListRead, RowRead, Status

Written = Mapping[int, tuple[str, ...]]


def bring_in_json(
    read: ListRead, written: Written, *, agreed: bool, practice: bool
) -> dict[str, Any]:
    """The same for programs: every column, question and row."""
    return {
        "file": read.file,
        "read_as": read.told,
        "headings_in_line": read.table.line or None,
        "agreed": agreed,
        "counts": {status.name.lower(): read.count(status) for status in Status},
        "columns": [
            {
                "heading": column.heading,
                "field": column.field or None,
                "by": column.how,
                "samples": list(column.samples),
            }
            for column in read.table.columns
        ],
        "questions": [
            {
                "key": question.key,
                "field": question.field or None,
                "value": question.value,
                "text": question.text,
                "options": [f"{question.key}={option}" for option in question.options],
                "rows": list(question.rows),
                "waits": question.weight >= Weight.ASKED,
            }
            for question in read.questions
        ],
        "rows": [_row_json(row, read, written) for row in read.rows],
        "practice": practice,
    }


def _row_json(row: RowRead, read: ListRead, written: Written) -> dict[str, Any]:
    said = row.incoming
    return {
        "row": row.row,
        "line": row.line,
        "status": row.status.name.lower(),
        "goes_in": row.goes_in,
        "bottles": list(written.get(row.row, row.bottles)),
        "item": said.line.key if said and said.line else None,
        "amount": said.left.number if said and said.left is not None else None,
        "unit": said.left.unit if said and said.left is not None else None,
        "count": said.count if said else None,
        "opened": _iso(said.opened) if said else None,
        "printed": [day.isoformat() for day in said.printed.readings]
        if said and said.printed
        else [],
        "place": said.place or None if said else None,
        "why": row.why,
        "doubts": [
            {
                "weight": doubt.weight.name.lower(),
                "column": read.table.column(doubt.field) if doubt.field else None,
                "value": doubt.value,
                "reason": doubt.text,
                "key": doubt.key or None,
            }
            for doubt in row.doubts
        ],
    }


def _iso(day: Any) -> str | None:
    return day.isoformat() if day else None
