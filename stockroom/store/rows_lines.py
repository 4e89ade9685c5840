"""Readers for substances, stock lines and how they keep."""

from __future__ import annotations

from stockroom.chemistry.formula import check_cas, molar_mass
from stockroom.chemistry.strength import canonical
from stockroom.errors import BadAmount, BadInput, NotAllowed
from stockroom.keeping.laws import DAYS_PER_MONTH
from stockroom.keeping.rules import Origin, Purpose, RuleKind
from stockroom.measure.amounts import Kind
from stockroom.measure.formats import unit_mark
from stockroom.measure.parsing import parse_strength
from stockroom.measure.periods import parse_period
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.planning.facts import Form
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.likeness import unknown
from stockroom.store.names import find_substance, other_names, substance_of
from stockroom.store.rows_house import new_name, temperature_of
from stockroom.store.tables import KeepingRule, Line, OtherName, Substance

_MEASURED = {Form.SOLID: Kind.MASS, Form.LIQUID: Kind.VOLUME, Form.SOLUTION: Kind.VOLUME}
# the mean month and year: a rate is a physical quantity, not a calendar step
NAMED_LAWS = ("hypochlorite",)
DAYS_PER = {"day": 1.0, "month": DAYS_PER_MONTH, "year": 12 * DAYS_PER_MONTH}
_WORDS = (StrengthUnit.PARTS, StrengthUnit.SATURATED)
# ether at 0.71 is the lightest liquid on a bench, mercury at 13.5 the heaviest; common knowledge
_LIGHTEST, _HEAVIEST = 0.5, 20


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
        density=_density_of(fields),
        note=fields.text("note"),
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
    key = f"{item} {written}".strip()
    # the cell to look at is the item's, though the strength is part of the name
    fields.at("item")
    new_name(desk, Line, "key", key, what="stock line", typed="lines")
    density = _density_of(fields)
    strength, unit = _strength_of(fields, substance, density)
    formula = fields.text("formula")
    row = Line(
        key=key,
        item=item,
        substance_id=substance.id if substance else None,
        form=form,
        kind=kind,
        strength=strength,
        unit=unit,
        strength_text=written,
        formula=formula,
        molar_mass=_mass_inside(formula, substance),
        assay=_assay_of(fields),
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


def _density_of(fields: Fields) -> float | None:
    """A density in g/cm³, 0.5 to 20; None when blank. Raises: BadAmount."""
    return fields.within("density_g_cm3", _LIGHTEST, _HEAVIEST, "In g/cm³, and not in kg/m³?")


def _assay_of(fields: Fields) -> float:
    # below 1 % it is likelier a fraction, or a solution that wants a strength
    percent = fields.within("assay_percent", 1, 100, "In per cent, as on the label?")
    return 1.0 if percent is None else percent / 100


def _mass_inside(formula: str, substance: Substance | None) -> float | None:
    # without a formula for what dissolves, sums run in grams and a molar mass would mislead them
    if substance is None or substance.molar_mass is None:
        return None
    return molar_mass(formula) if formula else substance.molar_mass


def _strength_of(
    fields: Fields, substance: Substance | None, density: float | None
) -> tuple[float | None, str]:
    # the line's own strength settles the unit that all others are set beside
    unit = "mol/dm3" if substance and substance.molar_mass else "g/dm3"
    written = fields.text("strength")
    if not written:
        return None, unit
    return in_own_unit(parse_strength(written, where="strength"), substance, density, unit)


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


def beside(strength: Strength, substance: Substance | None, line: Line) -> float | None:
    """A strength as a number in its line's unit; None for "saturated" and "1 in 10".

    Raises: MissingFigure; BadAmount when it comes out in another unit than the line's.
    """
    value, unit = in_own_unit(strength, substance, line.density, line.unit)
    # set beside another unit it would be read as a strength it is not
    if unit != line.unit:
        raise _not_beside(strength, line)
    return value


def number_beside(strength: Strength, substance: Substance | None, line: Line) -> float:
    """As `beside`, for where words say nothing. Raises: BadAmount for those as well."""
    value = beside(strength, substance, line)
    if value is None:
        raise _not_beside(strength, line)
    return value


def _not_beside(strength: Strength, line: Line) -> BadAmount:
    counted = unit_mark(line.unit)
    return BadAmount(
        f'"{strength.text}" cannot be set beside {line.key}, which is counted in {counted}.',
        f"Give it in {line.unit}.",
    )


def check_has_strength(line: Line, number: str) -> None:
    """Pass when a strength can be found in a bottle of the line. Raises: NotAllowed."""
    if line.kind != Kind.VOLUME:
        raise NotAllowed(
            f"{number} {line.key} is measured by {line.kind}: it is no solution and has no"
            " strength to find.",
            "Enter the result for the solution made from it.",
        )


def read_rule(desk: Desk, fields: Fields) -> None:
    """One ageing rule of a line; rates are turned to the line's unit per day."""
    line = desk.line(fields.need("line"))
    kind = fields.choice("rule", RuleKind)
    dated = kind in (RuleKind.LIFE, RuleKind.RECHECK, RuleKind.LOOK, RuleKind.TEST)
    lasts = fields.need("lasts") if dated else fields.text("lasts")
    period = parse_period(lasts, where="lasts") if lasts else None
    fades = kind is RuleKind.FADES
    named = _named_law(fields) if fades else ""
    order, rate = (None, None) if named or not fades else _decay(desk, fields, line)
    factor, energy = _warmth(fields)
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
        at_c=temperature_of(fields, "at_c"),
        factor_per_10c=factor,
        ea_kj_mol=energy,
        named_law=named,
        above=_bound(desk, fields, line, "stronger_than"),
        upto=_bound(desk, fields, line, "up_to_strength"),
        colder_than=temperature_of(fields, "colder_than_c"),
        warmer_than=temperature_of(fields, "warmer_than_c"),
        source=fields.text("source"),
    )
    desk.save(row)


def _bound(desk: Desk, fields: Fields, line: Line, column: str) -> float | None:
    written = fields.text(column)
    if not written:
        return None
    # a bound without a number would bound nothing, and the rule hold for every strength
    strength = parse_strength(written, where=column)
    return number_beside(strength, substance_of(desk.session, line), line)


def _named_law(fields: Fields) -> str:
    named = fields.text("named_law").lower()
    if named and named not in NAMED_LAWS:
        raise unknown("named law", named, NAMED_LAWS)
    return named


def _warmth(fields: Fields) -> tuple[float | None, float | None]:
    """The factor per 10 °C or the activation energy in kJ/mol: one of them at most."""
    factor, energy = fields.number("factor_per_10c"), fields.number("ea_kj_mol")
    if factor is not None and energy is not None:
        raise BadInput(
            f"factor_per_10c {factor:g} and ea_kj_mol {energy:g} say the same thing twice.",
            "Give one of them.",
        )
    # above any reaction a bottle lasts through; a figure in J/mol would land here
    if energy is not None and not 0 < energy <= 400:
        raise BadAmount(f"ea_kj_mol {energy:g} is not between 0 and 400.", "In kJ/mol?")
    return factor, energy


def _decay(desk: Desk, fields: Fields, line: Line) -> tuple[int, float]:
    order = fields.whole("order")
    if order not in (0, 1, 2):
        raise BadInput(f"order {order} is not a law we know.", "Give 0, 1 or 2.")
    rate = fields.number("rate")
    if rate is None:
        raise BadInput("rate is blank.", "Give the rate, in the unit rate_of per rate_per.")
    per = fields.need("rate_per")
    if per not in DAYS_PER:
        raise BadInput(f'rate_per "{per}" is not a time.', "Give day, month or year.")
    # a first-order rate is a share per time and has no unit of strength
    own = 1.0 if order == 1 else _own_units(desk, fields, line)
    # a zero-order rate is strength per time, a second-order one the inverse of strength per time
    scale = own if order == 0 else 1 / own
    return order, rate * scale / DAYS_PER[per]


def _own_units(desk: Desk, fields: Fields, line: Line) -> float:
    unit = fields.need("rate_of")
    one = parse_strength(f"1 {unit}", where="rate_of")
    return number_beside(one, substance_of(desk.session, line), line)
