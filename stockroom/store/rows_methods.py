"""Readers for how stock lines are made, and how they are bought."""

from __future__ import annotations

from sqlmodel import col, select

from stockroom.errors import BadInput
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.tables import Ingredient, Method, Pack

_USUAL_MINUTES = 15
# over a year of open days: a slip, or a supplier nobody would wait for
_LONGEST_LEAD = 400


def read_method(desk: Desk, fields: Fields) -> None:
    """How a line is made; blank minutes count as the usual, and are marked as a guess."""
    line = desk.line(fields.need("line"))
    assert line.id is not None
    if desk.session.exec(select(Method).where(Method.line_id == line.id)).first():
        raise BadInput(f"{line.key} has a method already.", "Give one method for each line.")
    minutes = fields.whole("minutes")
    row = Method(
        line_id=line.id,
        minutes=_USUAL_MINUTES if minutes is None else minutes,
        minutes_guessed=minutes is None,
        finish_minutes=fields.whole("finish_minutes") or 0,
        stands_hours=fields.number("stands_h") or 0.0,
        titrated=fields.flag("titrated"),
        smallest_batch=fields.volume("smallest_batch_cm3") or 0,
        steps=fields.text("steps"),
        cautions=fields.text("cautions"),
        source=fields.text("source"),
    )
    desk.save(row)


def read_ingredient(desk: Desk, fields: Fields) -> None:
    """One alternative for one ingredient of a line; nothing is made from itself."""
    line = desk.line(fields.need("line"))
    ingredient = desk.line(fields.need("ingredient"))
    if line.id == ingredient.id:
        raise BadInput(f"{line.key} would be made from itself.", "Name what it is made from.")
    assert line.id is not None and ingredient.id is not None
    role = fields.text("role") or "solute"
    per_dm3 = fields.amount("per_dm3", Kind(ingredient.kind))
    # a solvent's amount cannot be worked out from strengths
    if role != "solute" and per_dm3 is None:
        raise BadInput(
            f"How much {ingredient.key} per dm³ of {line.key}?", "Fill per_dm3_g or per_dm3_cm3."
        )
    row = Ingredient(
        line_id=line.id,
        ingredient_id=ingredient.id,
        alternative=fields.whole("alternative") or 1,
        role=role,
        per_dm3=per_dm3,
        only_if_held=fields.flag("only_if_held"),
        source=fields.text("source"),
    )
    desk.save(row)


def read_pack(desk: Desk, fields: Fields) -> None:
    """A size a supplier sells, and its price."""
    line = desk.line(fields.need("line"))
    assert line.id is not None
    kind = Kind(line.kind)
    size = fields.amount("size", kind)
    if not size:
        raise BadInput(f"The pack of {line.key} has no size.", "Fill the size column.")
    pence = price_of(fields)
    row = Pack(
        line_id=line.id,
        size=size,
        text=format_amount(Amount(kind, size)),
        pence=pence,
        lead=lead_of(fields),
        supplier=fields.text("supplier_ref"),
        source=fields.text("source"),
    )
    same = select(Pack).where(Pack.line_id == line.id, Pack.size == size).order_by(col(Pack.id))
    if any(other.supplier == row.supplier for other in desk.session.exec(same)):
        raise BadInput(f"{line.key} has a pack of {row.text} already.", "Give another size.")
    desk.save(row)


def price_of(fields: Fields) -> int:
    """What a pack costs, in pence; 0 is a price. Raises: BadInput when blank, BadAmount."""
    pence = fields.pence("price_gbp")
    if pence is None:
        raise BadInput('price_gbp "": a pack has a price.', "Fill price_gbp, 0 if it is free.")
    return pence


def lead_of(fields: Fields) -> int | None:
    """A lead time in open days, 0 to 400; None, the house's usual, when blank. Raises: BadAmount"""
    fields.within("lead_open_days", 0, _LONGEST_LEAD, "In open days?")
    return fields.whole("lead_open_days")
