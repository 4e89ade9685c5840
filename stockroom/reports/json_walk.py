"""A walk along the shelves as data."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from stockroom.measure.amounts import Amount
from stockroom.planning.on_shelf import OnShelf
from stockroom.planning.walking import Met, Sheet, Visit, Walk, totals


def walk_json(sheet: Sheet) -> dict[str, Any]:
    """A walk as data: amounts are numbers in `unit`, days are ISO text."""
    return {
        "practice": sheet.practice,
        **_about(sheet.walk),
        "met": [_visit_json(visit) for visit in sheet.visits],
        "to_count": [_row_json(row) for row in sheet.to_count],
        "again": [_row_json(row) for row in sheet.again],
        "look_out_for": [_row_json(row) for row in sheet.look_out],
        "totals": [
            {
                "item": total.line,
                "less": Amount(total.kind, total.less).number,
                "more": Amount(total.kind, total.more).number,
                "unit": Amount(total.kind, 0).unit,
            }
            for total in totals(sheet.visits)
        ],
    }


def walks_json(sheets: Sequence[Sheet]) -> dict[str, Any]:
    """Every walk as data, without its bottles."""
    return {
        "practice": bool(sheets) and sheets[0].practice,
        "walks": [
            {
                **_about(sheet.walk),
                "counted": sum(visit.how is Met.COUNTED for visit in sheet.visits),
                "differing": len(sheet.differing),
                "still": None if sheet.walk.ended else len(sheet.to_count),
            }
            for sheet in sheets
        ],
    }


def _about(walk: Walk) -> dict[str, Any]:
    return {
        "walk": walk.name,
        "places": list(walk.places),
        "started": walk.started.isoformat(),
        "by": walk.by,
        "ended": walk.ended.isoformat() if walk.ended else None,
        "ended_by": walk.ended_by or None,
    }


def _visit_json(visit: Visit) -> dict[str, Any]:
    held = Amount(visit.kind, visit.left)
    return {
        "bottle": visit.bottle,
        "item": visit.line,
        "met": visit.how.value,
        "left": held.number,
        "difference": Amount(visit.kind, visit.difference).number,
        "unit": held.unit,
        "about": visit.about,
        "by": visit.by,
        "on": visit.on.isoformat(),
    }


def _row_json(row: OnShelf) -> dict[str, Any]:
    held = Amount(row.line.kind, row.bottle.left)
    return {
        "bottle": row.bottle.number,
        "item": row.bottle.line,
        "place": row.bottle.place,
        "left": held.number,
        "unit": held.unit,
        "about": row.bottle.about,
    }


def sitting_json(
    sheet: Sheet,
    lines: Sequence[tuple[str, str, int | None, str]],
    skipped: Sequence[tuple[int, str, str]],
    missed: Sequence[str],
) -> dict[str, Any]:
    """One sitting of entering: each line saved, each skipped, and the walk as it stands."""
    return {
        **walk_json(sheet),
        "lines": [
            {"bottle": bottle, "came": came, "entry": entry, "text": text}
            for bottle, came, entry, text in lines
        ],
        "skipped": [{"line": number, "text": text, "hint": hint} for number, text, hint in skipped],
        "missed_for": list(missed),
    }
