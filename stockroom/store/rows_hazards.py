"""Reader for the house's own hazard limits, which stand in place of the shipped ones."""

from __future__ import annotations

import re

from stockroom.chemistry.formula import molar_mass
from stockroom.errors import BadAmount, BadInput
from stockroom.safety.limits import Basis, Route
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.hazards import limit_from
from stockroom.store.likeness import unknown
from stockroom.store.names import find_substance
from stockroom.store.tables import Hazard

BASES = tuple(Basis)
ROUTES = tuple(Route)
CHLORINE = "available chlorine"
"""A per cent that counts this is turned into it; any other way is the formula of a hydrate."""

_CODE = re.compile(r"(H[2-4][0-9]{2}[A-Za-z]{0,2}|EUH[0-9]{3}[A-Z]?)")


def read_hazard(desk: Desk, fields: Fields) -> None:
    """One limit or class of a substance. Raises: BadInput, BadAmount, UnknownName."""
    substance = find_substance(desk.session, fields.need("substance"))
    basis = fields.need("basis").lower()
    if basis not in BASES:
        raise unknown("basis", basis, BASES)
    route = fields.text("route").lower()
    if route and route not in ROUTES:
        raise unknown("route", route, ROUTES)
    lowest, below = _band(fields)
    assert substance.id is not None
    row = Hazard(
        substance_id=substance.id,
        hazard_class=_class(fields, basis),
        h_code=_code(fields) if basis != Basis.NONE else "",
        from_percent=lowest,
        below_percent=below,
        basis=basis,
        route=route,
        ate=_above_nothing(fields, "ate"),
        m_factor=_above_nothing(fields, "m_factor"),
        percent_of=_counted(fields),
        how=fields.text("how"),
        source=fields.text("source"),
    )
    fields.at("hazard_class")
    # read as it will be when it is asked for, so that a row nobody can read is never saved
    limit_from(row.model_dump())
    desk.save(row)


def _above_nothing(fields: Fields, column: str) -> float | None:
    found = fields.number(column)
    if found == 0:
        raise BadAmount(f"{column} 0 is none.", "Give one above 0, or leave it blank.")
    return found


def _counted(fields: Fields) -> str:
    """What the per cent counts: the substance as dissolved, its chlorine, or a formula."""
    way = fields.text("percent_of")
    # a formula nobody can read would stop every later question about the substance
    if way and way != CHLORINE:
        molar_mass(way)
    return way


def _class(fields: Fields, basis: str) -> str:
    return fields.text("hazard_class") if basis == Basis.NONE else fields.need("hazard_class")


def _code(fields: Fields) -> str:
    code = fields.need("h_code")
    if _CODE.fullmatch(code) is None:
        raise BadInput(f'h_code "{code}" is no hazard statement.', "It looks like H314 or EUH031.")
    return code


def _band(fields: Fields) -> tuple[float | None, float | None]:
    lowest = fields.within("from_percent", 0, 100, "In per cent by mass?")
    below = fields.within("below_percent", 0, 100, "In per cent by mass?")
    if lowest is not None and below is not None and below <= lowest:
        raise BadAmount(
            f"from {lowest:g} % to below {below:g} % holds nothing.", "Swap the two, or leave one."
        )
    return lowest, below
