"""Tables as CSV by RFC 4180: commas, CRLF, quotes where they are needed, UTF-8."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterable, Sequence
from datetime import date

from stockroom.measure.amounts import BASE_UNIT, PER_UNIT, Kind
from stockroom.planning.decisions import PastBottle, Plan, Use
from stockroom.reports.files.harmless import harmless
from stockroom.reports.paper.buying_sheet import by_supplier, shared_by, why
from stockroom.reports.words import TIED, rounded

Cell = str | int | float | date | None

BOM = "\ufeff".encode()
"""The mark by which some spreadsheets tell UTF-8; RFC 4180 knows of none, so it is asked for."""

BUYING = (
    "order_by", "late_open_days", "supplier", "item", "packs", "pack", "cost", "need_by",
    "arrives", "falls_below", "runs_out", "ask_first", "departments", "bookings", "id", "instead",
    "why",
)  # fmt: skip
USAGE = (
    "form", "item", "strength", "amount", "unit", "spare", "year_before", "groups",
    "groups_year_before", "bookings",
)  # fmt: skip
PAST = ("bottle", "item", "condition", "good_until", "decided_by", "matters_for")


def csv_bytes(
    columns: Sequence[str], rows: Iterable[Sequence[Cell]], *, bom: bool = False
) -> bytes:
    """A table with its heading. Days are ISO text, nothing is an empty cell, text is harmless.

    `bom` puts a byte order mark before it, for spreadsheets that take it for another alphabet.
    """
    drawn = io.StringIO(newline="")
    writer = csv.writer(drawn, lineterminator="\r\n")
    writer.writerow(columns)
    writer.writerows([[_cell(cell) for cell in row] for row in rows])
    return (BOM if bom else b"") + drawn.getvalue().encode("utf-8")


def buying_csv(plan: Plan, *, bom: bool = False) -> bytes:
    """The term's orders, one a row: by supplier, order-by first, the reasons last."""
    rows = [
        (
            order.order_by, order.late, order.supplier, order.item, order.packs, order.pack,
            f"{order.pence // 100}.{order.pence % 100:02d}", order.need_by, order.arrives,
            order.falls_below, order.runs_out, order.ask_first, shared_by(order, sign=""),
            " ".join(order.for_bookings), order.id,
            "; ".join(one.text for one in order.instead), why(order),
        )
        for _, orders in by_supplier(plan)
        for order in orders
    ]  # fmt: skip
    return csv_bytes(BUYING, rows, bom=bom)


def usage_csv(plan: Plan, *, bom: bool = False) -> bytes:
    """What the term uses, one line of stock a row, with the year before where it is known."""
    uses = (*plan.usage, *plan.drawn, *plan.written_off)
    return csv_bytes(USAGE, [_use(use) for use in uses], bom=bom)


def past_csv(plan: Plan, *, bom: bool = False) -> bytes:
    """The bottles not to be counted on, one a row."""
    return csv_bytes(PAST, [_past(bottle) for bottle in plan.past], bom=bom)


def _use(use: Use) -> tuple[Cell, ...]:
    parts = "; ".join(f"{number} {_number(part, use.kind):g}" for number, part in use.by_booking)
    before = None if use.before is None else _number(use.before, use.kind)
    return (
        use.form, use.item, use.strength, _number(use.amount, use.kind), BASE_UNIT[use.kind],
        _number(use.spare, use.kind), before, use.groups or None, use.groups_before, parts,
    )  # fmt: skip


def _past(bottle: PastBottle) -> tuple[Cell, ...]:
    return (
        bottle.bottle, bottle.item, bottle.condition.value, bottle.good_until, bottle.decided_by,
        " ".join(bottle.matters_for),
    )  # fmt: skip


def _number(micro: int, kind: Kind) -> float:
    return rounded(micro / PER_UNIT[kind], 6)


def _cell(cell: Cell) -> str | int | float:
    if cell is None:
        return ""
    if isinstance(cell, date):
        return cell.isoformat()
    if isinstance(cell, str):
        return harmless(cell.replace(TIED, " "))
    return cell
