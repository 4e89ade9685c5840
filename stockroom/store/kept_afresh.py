"""The balances kept beside the ledger, reckoned anew from its entries: they are what counts."""

from __future__ import annotations

from dataclasses import dataclass

from sqlalchemy import text
from sqlmodel import Session

from stockroom.errors import StoreTrouble
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.store.engine import reader_in
from stockroom.store.ledger import Stamp
from stockroom.store.tables import RowChange
from stockroom.store.verify_cells import cells


@dataclass(frozen=True, slots=True)
class Rekept:
    """One bottle whose kept balance was changed, and both in words."""

    number: str
    before: str
    after: str


def keep_afresh(session: Session, stamp: Stamp) -> tuple[Rekept, ...]:
    """Set every kept balance to the sum of the bottle's entries, and note each that was changed.

    What the ledger itself says is left alone, a balance below nothing too: count that bottle.
    Raises: StoreTrouble where a cell of the ledger cannot be added up.
    """
    reader = reader_in(session)
    odd = [fault for fault in cells(reader) if fault.subject != "kept_balance"]
    if odd:
        raise StoreTrouble(f"{odd[0].subject}: {odd[0].text}; nothing was saved.", odd[0].mend)
    sums = reader.pairs("SELECT bottle_id, SUM(change) FROM entry GROUP BY bottle_id")
    kept = reader.pairs("SELECT bottle_id, held FROM kept_balance")
    off = {
        one: int(sums.get(one, 0))
        for one in sorted(kept.keys() | sums.keys())
        if kept.get(one) != sums.get(one)
    }
    known = {
        row[0]: (str(row[1]), Kind(row[2]))
        for row in reader.ask(
            "SELECT bottle.id, number, line.kind FROM bottle JOIN line ON line.id = line_id"
        )
    }
    done = []
    for bottle, held in off.items():
        number, kind = known.get(bottle, (f"bottle row {bottle}", Kind.ITEMS))
        before = _said(kind, kept.get(bottle))
        _keep(session, bottle, held, gone=bottle not in sums)
        done.append(Rekept(number, before, format_amount(Amount(kind, held))))
    session.add_all(_noted(each, stamp) for each in done)
    return tuple(done)


def _said(kind: Kind, held: object) -> str:
    if held is None:
        return "nothing kept"
    return format_amount(Amount(kind, held)) if isinstance(held, int) else repr(held)


def _keep(session: Session, bottle: int, held: int, *, gone: bool) -> None:
    link, values = session.connection(), {"bottle": bottle, "held": held}
    link.execute(text("DELETE FROM kept_balance WHERE bottle_id = :bottle"), values)
    if not gone:
        link.execute(text("INSERT INTO kept_balance VALUES (:bottle, :held)"), values)


def _noted(each: Rekept, stamp: Stamp) -> RowChange:
    return RowChange(
        table_name="kept_balance",
        row_key=each.number,
        column_name="held",
        before=each.before,
        after=each.after,
        why="kept otherwise than its entries come to",
        by=stamp.by,
        entered_on=stamp.entered_on,
        entered_at=stamp.entered_at.isoformat(sep=" "),
    )
