"""The sheets of the term's workbook: one a subject, each a heading and rows of the plan's data."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from datetime import date
from typing import Any

from stockroom.measure.days import format_time
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.reports.json_plan import plan_json
from stockroom.reports.sheet import CAUTION, PRACTICE, safe_side, spanning

Data = Mapping[str, Any]
Cell = str | int | float | None
Columns = tuple[tuple[str, str | Callable[[Data], Any]], ...]


@dataclass(frozen=True, slots=True)
class Sheet:
    """One sheet: its name, its headings, its rows. Days are text, amounts and money numbers."""

    name: str
    headings: tuple[str, ...]
    rows: tuple[tuple[Cell, ...], ...]


@dataclass(frozen=True, slots=True)
class Workbook:
    """What stands on the first sheet, line by line, and the sheets behind it."""

    house: str
    practice: bool
    as_at: date
    about: tuple[str, ...]
    sheets: tuple[Sheet, ...]


def workbook_of(known: Facts, plan: Plan) -> Workbook:
    """The term's workbook: the same figures as `plan --json`, a subject a sheet."""
    data = plan_json(plan)
    house = plan.house
    top = [PRACTICE] if house.practice else []
    top += [house.name, f"The term's workbook, {spanning(plan)}"]
    top += [safe_side(plan.lower_limits)] if plan.lower_limits else []
    sheets = (
        _sheet("Bookings", _BOOKINGS, _bookings(known)),
        _sheet("Needs", _NEEDS, data["needs"]),
        _sheet("Makes", _MAKES, data["makes"]),
        _sheet("Taken from", _TAKEN, _taken(data)),
        _sheet("Checks", _CHECKS, data["checks"]),
        _sheet("Orders", _ORDERS, data["orders"]),
        _sheet("On order", _ON_ORDER, data["on_order"]),
        _sheet("Past", _PAST, data["past"]),
        _sheet("Usage", _USAGE, data["usage"]),
        _sheet("Short", _SHORT, data["short"]),
        _sheet("Levels", _LEVELS, data["levels"]),
        _sheet("Guesses", _FOUND, data["guesses"]),
        _sheet("Notes", _FOUND, data["notes"]),
    )
    top += [CAUTION, "Money is in pounds; days are text, year-month-day."]
    return Workbook(house.name, house.practice, plan.as_at, tuple(top), sheets)


def _sheet(name: str, columns: Columns, rows: Iterable[Data]) -> Sheet:
    headings = tuple(heading for heading, _ in columns)
    return Sheet(name, headings, tuple(_row(columns, row) for row in rows))


def _row(columns: Columns, row: Data) -> tuple[Cell, ...]:
    return tuple(_cell(row.get(how) if isinstance(how, str) else how(row)) for _, how in columns)


def _cell(value: Any) -> Cell:
    """A value as a cell holds it: lists in one text, yes for True, nothing for False and None."""
    if isinstance(value, bool):
        return "yes" if value else None
    if isinstance(value, Mapping):
        return ", ".join(f"{key} {part:.2f}" for key, part in value.items()) or None
    if isinstance(value, (list, tuple)):
        return "; ".join(str(each) for each in value) or None
    if value is None or isinstance(value, (int, float)):
        return value
    return str(value) or None


def _plain(*names: str) -> Columns:
    return tuple((name.replace("_", " "), name) for name in names)


def _subject(row: Data) -> Any:
    return row.get("bottle") or row.get("subject") or row.get("item")


def _bookings(known: Facts) -> list[Data]:
    return [
        {
            "booking": each.number, "on": each.on.isoformat(), "begins": format_time(each.minute),
            "minutes": each.lasts_minutes, "recipe": each.recipe,
            "title": known.recipes[each.recipe, each.version].title, "groups": each.groups,
            "spare %": each.spare / 10, "room": each.room, "dept": each.department,
            "firmness": each.firmness.value,
        }
        for each in known.bookings
        if known.start <= each.on <= known.end
    ]  # fmt: skip


def _taken(data: Data) -> list[Data]:
    """One row for each amount from one bottle, or of what is still to be made or bought."""
    needs = [(need["ref"], need["on"], each) for need in data["needs"] for each in need["from"]]
    makes = [(make["id"], make["on"], each) for make in data["makes"] for each in make["sources"]]
    return [{"for": ref, "on": on, **each} for ref, on, each in (*needs, *makes)]


def _year_before(key: str) -> Callable[[Data], Any]:
    return lambda row: row.get("year_before", {}).get(key)


_BOOKINGS = _plain(
    "booking", "on", "begins", "minutes", "recipe", "title", "groups", "spare %", "room", "dept",
    "firmness",
)  # fmt: skip
_NEEDS = _plain(
    "ref", "booking", "on", "title", "dept", "item", "strength", "amount", "unit", "closeness",
    "fresh", "outcome", "make", "order", "reasons",
)  # fmt: skip
_MAKES = _plain(
    "id", "on", "item", "strength", "volume", "unit", "needed", "earliest", "latest", "finish_on",
    "ready", "good_until", "minutes", "vessels", "for", "heel", "heel_kept", "steps", "cautions",
    "reasons",
)  # fmt: skip
_TAKEN = _plain("for", "on", "bottle", "item", "make", "amount", "unit")
_CHECKS: Columns = (
    ("subject", _subject),
    *_plain("item", "what", "not_before", "best", "by", "minutes", "for", "optional", "reason"),
)
_ORDERS: Columns = (
    *_plain(
        "order_by", "late_by_open_days", "id", "item", "pack", "packs", "amount", "unit",
        "supplier",
    ),
    ("cost £", "cost"),
    ("shares £", "shares"),
    *_plain(
        "need_by", "arrives", "falls_below", "runs_out", "keeps_until", "ask_first", "for",
        "reasons",
    ),
)  # fmt: skip
_ON_ORDER = _plain(
    "id", "expected", "overdue_open_days", "item", "pack", "packs", "amount", "unit", "placed_on",
    "supplier", "by", "for",
)  # fmt: skip
_PAST = _plain("bottle", "item", "condition", "good_until", "decided_by", "matters_for")
_USAGE: Columns = (
    *_plain("item", "strength", "form", "amount", "unit", "spare", "groups"),
    ("bookings", lambda row: list(row["by_booking"])),
    ("year before", _year_before("amount")),
    ("unit then", _year_before("unit")),
    ("groups then", _year_before("groups")),
)
_SHORT = _plain("ref", "booking", "item", "strength", "amount", "unit", "reason")
_LEVELS = _plain("item", "on", "left", "level", "unit", "runs_out")
_FOUND: Columns = (("subject", _subject), ("what", "text"))
