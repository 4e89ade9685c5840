"""Orders placed with a supplier: written once, then only added to."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from sqlmodel import Session, col, select

from stockroom.measure.amounts import Amount
from stockroom.planning.facts import Placed as Order
from stockroom.store.booking_limits import next_number
from stockroom.store.engine import reader_in
from stockroom.store.ledger import Stamp
from stockroom.store.likeness import plain, unknown
from stockroom.store.names import find_department
from stockroom.store.snapshot_orders import placed_of
from stockroom.store.tables import (
    Entry,
    Line,
    Placed,
    PlacedCame,
    PlacedChange,
    PlacedShare,
)


@dataclass(frozen=True, slots=True)
class Sent:
    """What is sent to a supplier: packs of a size and text, pence for all, and who pays."""

    size: Amount
    text: str
    packs: int
    pence: int
    expected: date
    supplier: str
    shares: tuple[tuple[str, int], ...]
    note: str = ""


def place(session: Session, line: Line, sent: Sent, stamp: Stamp) -> Placed:
    """Write one order, with the next number, and whose money it is."""
    assert line.id is not None
    row = Placed(
        # that of a cancelled one stays its own
        number=next_number("P", session.exec(select(Placed.number)).all()),
        line_id=line.id,
        size=sent.size.micro,
        pack=sent.text,
        packs=sent.packs,
        pence=sent.pence,
        supplier=sent.supplier,
        ordered_on=stamp.happened_on,
        expected_on=sent.expected,
        entered_on=stamp.entered_on,
        entered_at=stamp.entered_at.isoformat(sep=" "),
        by=stamp.by.strip(),
        note=sent.note,
    )
    session.add(row)
    session.flush()
    assert row.id is not None
    for code, pence in sent.shares:
        department = find_department(session, code)
        assert department.id is not None
        share = PlacedShare(placed_id=row.id, department_id=department.id, pence=pence)
        session.add(share)
    session.flush()
    return row


def find_order(session: Session, text: str) -> Placed:
    """The order with that number. Raises: UnknownName with the nearest three."""
    rows = list(session.exec(select(Placed).order_by(col(Placed.id))))
    for row in rows:
        if plain(row.number) == plain(text) != "":
            return row
    raise unknown("order", text, [row.number for row in rows])


def as_it_stands(session: Session, row: Placed, on: date) -> Order:
    """An order as on a day: what has come of it, when the rest is expected."""
    found = placed_of(reader_in(session), on)
    return next(order for order in found if order.number == row.number)


def outstanding_of(session: Session, line: Line, on: date) -> list[Order]:
    """The orders of a line with something still to come on a day."""
    row = placed_of(reader_in(session), on)
    return [order for order in row if order.line == line.key and order.outstanding]


def record_came(session: Session, row: Placed, entries: list[Entry]) -> None:
    """Write that these arrivals came of an order."""
    for entry in entries:
        assert row.id is not None and entry.id is not None
        session.add(PlacedCame(placed_id=row.id, entry_id=entry.id))
    session.flush()


def record_change(
    session: Session, row: Placed, what: str, change: tuple[str, str], why: str, stamp: Stamp
) -> None:
    """Append one change of an order: what it was, what it is, why, and who says so."""
    assert row.id is not None
    written = PlacedChange(
        placed_id=row.id,
        what=what,
        before=change[0],
        after=change[1],
        why=why,
        happened_on=stamp.happened_on,
        entered_on=stamp.entered_on,
        entered_at=stamp.entered_at.isoformat(sep=" "),
        by=stamp.by.strip(),
    )
    session.add(written)
    session.flush()
