"""Readers for substances, stock lines and how they keep."""

from __future__ import annotations

from stockroom.chemistry.densities.labels import density_findings
from stockroom.chemistry.formula import check_cas, molar_mass
from stockroom.chemistry.strength import canonical
from stockroom.errors import BadAmount, NotAllowed
from stockroom.measure.amounts import Kind
from stockroom.measure.formats import unit_mark
from stockroom.measure.parsing import parse_strength
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.planning.facts import Form
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.names import find_substance, other_names
from stockroom.store.rows_house import new_name
from stockroom.store.rows_orders import ask_days_of
from stockroom.store.tables import Line, OtherName, Substance

_MEASURED = {Form.SOLID: Kind.MASS, Form.LIQUID: Kind.VOLUME, Form.SOLUTION: Kind.VOLUME}
_WORDS = (StrengthUnit.PARTS, StrengthUnit.SATURATED)
# ether at 0.71 is the lightest liquid on a bench, mercury at 13.5 the heaviest; common knowledge
_LIGHTEST, _HEAVIEST = 0.5, 20
# labels round, and are read at another temperature; swapped figures are further off than this
_DENSITY_WITHIN = 0.05


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
    _check_density(fields, substance, density)
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
        ask_first=fields.text("ask_first"),
        ask_days=ask_days_of(fields),
        source=fields.text("source"),
    )
    desk.save(row)
    desk.lines.add(row)


def _density_of(fields: Fields) -> float | None:
    """A density in g/cm³, 0.5 to 20; None when blank. Raises: BadAmount."""
    return fields.within("density_g_cm3", _LIGHTEST, _HEAVIEST, "In g/cm³, and not in kg/m³?")


def _check_density(fields: Fields, substance: Substance | None, density: float | None) -> None:
    """Ask about a density that no solution of that strength has. Raises: BadAmount."""
    written = fields.text("strength")
    if density is None or substance is None or not written:
        return
    strength = parse_strength(written, where="strength")
    if strength.unit is not StrengthUnit.WW:
        return
    findings = density_findings(
        substance.substance, strength.value, density, within=_DENSITY_WITHIN
    )
    fields.at("density_g_cm3")
    for finding in findings:
        raise BadAmount(
            f"{finding.text}.", "Read the density and the strength off the label again."
        )


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
