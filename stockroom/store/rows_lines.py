"""Readers for substances, stock lines, how they keep, how they are made, how they are bought."""

from __future__ import annotations

from sqlmodel import col, select

from stockroom.chemistry.formula import check_cas, molar_mass
from stockroom.chemistry.strength import canonical
from stockroom.errors import BadInput, MissingFigure
from stockroom.keeping.rules import Origin, Purpose, RuleKind
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.measure.parsing import parse_strength
from stockroom.measure.periods import parse_period
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.planning.facts import Form
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.names import find_substance, other_names, substance_of
from stockroom.store.rows_house import new_name
from stockroom.store.tables import (
    Ingredient,
    KeepingRule,
    Line,
    Method,
    OtherName,
    Pack,
    Substance,
)

_MEASURED = {Form.SOLID: Kind.MASS, Form.LIQUID: Kind.VOLUME, Form.SOLUTION: Kind.VOLUME}
# the mean month and year: a rate is a physical quantity, not a calendar step
_DAYS_PER = {"day": 1.0, "month": 30.4375, "year": 365.25}
_WORDS = (StrengthUnit.PARTS, StrengthUnit.SATURATED)
_USUAL_MINUTES = 15


def read_substance(desk: Desk, fields: Fields) -> None:
    """A substance, its other names, and its molar mass worked out here once for all."""
    name = new_name(desk, Substance, "substance", fields.need("substance"))
    cas = fields.text("cas")
    if cas:
        check_cas(cas)
    formula = fields.text("formula")
    row = Substance(
        substance=name,
        formula=formula,
        # worked out now, so that reading never loads the formula library
        molar_mass=molar_mass(formula) if formula else None,
        cas=cas,
        storage_group=fields.text("storage_group"),
        peroxide_former=fields.text("peroxide_former"),
        source=fields.text("source"),
    )
    desk.save(row)
    others = (other.strip() for other in fields.text("other_names").split(";"))
    for other in dict.fromkeys(other for other in others if other):
        assert row.id is not None
        desk.save(OtherName(substance_id=row.id, name=other))


def read_line(desk: Desk, fields: Fields) -> None:
    """A stock line; its strength is turned to mol/dm³, or g/dm³ without a formula."""
    item = fields.need("item")
    named = fields.text("substance")
    substance = find_substance(desk.session, named) if named else None
    fields.other_names = other_names(desk.session, substance)
    form = fields.choice("form", Form)
    # only sundries may be counted, weighed or measured as the house likes
    kind = _MEASURED.get(form) or fields.choice("measured_in", Kind)
    written = fields.text("strength")
    density = fields.number("density_g_cm3")
    strength, unit = strength_of(fields, "strength", substance, density)
    formula = fields.text("formula")
    row = Line(
        key=new_name(desk, Line, "key", f"{item} {written}".strip()),
        item=item,
        substance_id=substance.id if substance else None,
        form=form,
        kind=kind,
        strength=strength,
        unit=unit,
        strength_text=written,
        formula=formula,
        molar_mass=_mass_inside(formula, substance),
        assay=fields.part("assay_percent", most=100) or 1.0,
        density=density,
        level=fields.amount("level", kind),
        largest_batch=fields.volume("largest_batch_cm3"),
        never_kept=fields.text("never_kept"),
        vented_cap=fields.flag("vented_cap"),
        keep_note=fields.text("keep_note"),
        source=fields.text("source"),
    )
    desk.save(row)
    desk.lines.add(row)


def _mass_inside(formula: str, substance: Substance | None) -> float | None:
    # without a formula for what dissolves, sums run in grams and a molar mass would mislead them
    if substance is None or substance.molar_mass is None:
        return None
    return molar_mass(formula) if formula else substance.molar_mass


def strength_of(
    fields: Fields, column: str, substance: Substance | None, density: float | None
) -> tuple[float | None, str]:
    """The strength in a cell in its line's own unit; None for "saturated" and "1 in 10"."""
    unit = "mol/dm3" if substance and substance.molar_mass else "g/dm3"
    written = fields.text(column)
    if not written:
        return None, unit
    return in_own_unit(parse_strength(written, where=column), substance, density, unit)


def in_own_unit(
    strength: Strength, substance: Substance | None, density: float | None, unit: str
) -> tuple[float | None, str]:
    """A strength as (value, unit) for the ledger. Raises: MissingFigure, BadAmount.

    Per cents by volume need the pure liquid's density, which no table holds: they
    are kept as text alone, like "saturated".
    """
    if strength.unit in (*_WORDS, StrengthUnit.VV):
        return None, unit
    found = canonical(
        strength,
        molar_mass=substance.molar_mass if substance else None,
        density=density,
        of=substance.substance if substance else "",
    )
    return found.value, found.unit


def read_rule(desk: Desk, fields: Fields) -> None:
    """One ageing rule of a line; rates are turned to the line's unit per day."""
    line = desk.line(fields.need("line"))
    kind = fields.choice("rule", RuleKind)
    dated = kind in (RuleKind.LIFE, RuleKind.RECHECK, RuleKind.LOOK, RuleKind.TEST)
    lasts = fields.need("lasts") if dated else fields.text("lasts")
    period = parse_period(lasts, where="lasts") if lasts else None
    fades = kind is RuleKind.FADES
    order, rate = _decay(desk, fields, line) if fades else (None, None)
    assert line.id is not None
    row = KeepingRule(
        line_id=line.id,
        rule=kind,
        lasts_count=period.count if period else None,
        lasts_unit=period.unit if period else "",
        counted_from=fields.choice("counted_from", Origin, Origin.MADE),
        purpose=fields.choice("purpose", Purpose, Purpose.ANY),
        safety=fields.flag("safety"),
        decay_order=order,
        rate=rate,
        at_c=fields.signed("at_c"),
        factor_per_10c=fields.number("factor_per_10c"),
        above=_bound(desk, fields, line, "stronger_than"),
        upto=_bound(desk, fields, line, "up_to_strength"),
        colder_than=fields.signed("colder_than_c"),
        warmer_than=fields.signed("warmer_than_c"),
        source=fields.text("source"),
    )
    desk.save(row)


def _bound(desk: Desk, fields: Fields, line: Line, column: str) -> float | None:
    return strength_of(fields, column, substance_of(desk.session, line), line.density)[0]


def _decay(desk: Desk, fields: Fields, line: Line) -> tuple[int, float]:
    order = fields.whole("order")
    if order not in (0, 1, 2):
        raise BadInput(f"order {order} is not a law we know.", "Give 0, 1 or 2.")
    rate = fields.number("rate")
    if rate is None:
        raise BadInput("rate is blank.", "Give the rate, in the unit rate_of per rate_per.")
    per = fields.need("rate_per")
    if per not in _DAYS_PER:
        raise BadInput(f'rate_per "{per}" is not a time.', "Give day, month or year.")
    # a first-order rate is a share per time and has no unit of strength
    own = 1.0 if order == 1 else _own_units(desk, fields, line)
    # a zero-order rate is strength per time, a second-order one the inverse of strength per time
    scale = own if order == 0 else 1 / own
    return order, rate * scale / _DAYS_PER[per]


def _own_units(desk: Desk, fields: Fields, line: Line) -> float:
    unit = fields.need("rate_of")
    one = parse_strength(f"1 {unit}", where="rate_of")
    value, _ = in_own_unit(one, substance_of(desk.session, line), line.density, line.unit)
    if value is None:
        raise MissingFigure(f'A rate cannot be given in "{unit}".', "Give it in % w/v or mol/dm3.")
    return value


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
    pence = fields.pence("price_gbp")
    if pence is None:
        raise BadInput(f"The pack of {line.key} has no price.", "Fill price_gbp, 0 if it is free.")
    row = Pack(
        line_id=line.id,
        size=size,
        text=format_amount(Amount(kind, size)),
        pence=pence,
        lead=fields.whole("lead_open_days"),
        supplier=fields.text("supplier_ref"),
        source=fields.text("source"),
    )
    same = select(Pack).where(Pack.line_id == line.id, Pack.size == size).order_by(col(Pack.id))
    if any(other.supplier == row.supplier for other in desk.session.exec(same)):
        raise BadInput(f"{line.key} has a pack of {row.text} already.", "Give another size.")
    desk.save(row)
