"""Readers for how stock lines are made, and how they are bought."""

from __future__ import annotations

from sqlmodel import col, select

from stockroom.errors import BadInput
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.rows_house import LONGEST_LEAD
from stockroom.store.tables import Ingredient, Line, Method, Pack

_USUAL_MINUTES = 15


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
    """One alternative for one ingredient of a line; nothing is made from itself.

    Raises: BadInput for an amount that differs from that of an alternative already there.
    """
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
    _check_alternatives(desk, line, role, (ingredient, per_dm3))
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


def _check_alternatives(desk: Desk, line: Line, role: str, new: tuple[Line, int | None]) -> None:
    # one amount serves all alternatives: 30 g beside 500 cm³ would be planned as one of them
    same = select(Ingredient).where(Ingredient.line_id == line.id, Ingredient.role == role)
    for row in desk.session.exec(same.order_by(col(Ingredient.id))):
        old = desk.session.get_one(Line, row.ingredient_id), row.per_dm3
        if _amount_asked(*old) != _amount_asked(*new):
            raise BadInput(
                f"{line.key}, {role}: {_said(*old)} or {_said(*new)}? Alternatives stand in for"
                " each other, so their amounts must be the same.",
                "Give both the same amount, or add the other way as a stock line of its own.",
            )


def _amount_asked(ingredient: Line, per_dm3: int | None) -> tuple[int, str] | None:
    # worked out from the strengths, solids and solutions may stand side by side
    return None if per_dm3 is None else (per_dm3, ingredient.kind)


def _said(ingredient: Line, per_dm3: int | None) -> str:
    if per_dm3 is None:
        return f"{ingredient.key} as its strength asks"
    return f"{format_amount(Amount(Kind(ingredient.kind), per_dm3))} of {ingredient.key} per dm³"


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
    fields.within("lead_open_days", 0, LONGEST_LEAD, "In open days?")
    return fields.whole("lead_open_days")
