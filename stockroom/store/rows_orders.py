"""Readers for buying: leave to be asked first, and what a term gone by used."""

from __future__ import annotations

from sqlmodel import select

from stockroom.errors import BadInput
from stockroom.measure.amounts import Kind
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.rows_house import LONGEST_LEAD
from stockroom.store.tables import FormerUse


def ask_days_of(fields: Fields) -> int:
    """The open days it takes to get leave, 0 to 400; 0 when blank. Raises: BadAmount."""
    fields.within("ask_days", 0, LONGEST_LEAD, "In open days?")
    return fields.whole("ask_days") or 0


def read_former_use(desk: Desk, fields: Fields) -> None:
    """What a term gone by used of a line, in its own unit.

    Raises: BadInput without an amount, or for the same term twice; BadDate.
    """
    line = desk.line(fields.need("line"))
    assert line.id is not None
    first, last = fields.span("from", "to")
    amount = fields.amount("amount", Kind(line.kind))
    if amount is None:
        raise BadInput(
            f"How much {line.key} was used from {first} to {last}?", "Fill an amount column."
        )
    same = select(FormerUse).where(FormerUse.line_id == line.id, FormerUse.starts_on == first)
    if any(other.ends_on == last for other in desk.session.exec(same)):
        raise BadInput(
            f"The use of {line.key} from {first} to {last} is written down already.",
            "Give other days, or leave it out.",
        )
    row = FormerUse(
        line_id=line.id,
        starts_on=first,
        ends_on=last,
        amount=amount,
        groups=fields.whole("groups"),
        source=fields.text("source"),
    )
    desk.save(row)
