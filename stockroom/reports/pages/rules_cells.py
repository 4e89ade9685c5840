"""What stands in a row of the house that may be changed, as it would be typed again."""

from __future__ import annotations

from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.planning.facts import Facts, Line

_LEVEL = {Kind.MASS: "level_g", Kind.VOLUME: "level_cm3", Kind.ITEMS: "level_items"}


def cells_of(table: str, key: str, known: Facts) -> dict[str, str]:
    """The columns of a row that may be changed, with what stands there; empty for no such row.

    Columns the row has no use for are left out: a level in g of what is measured in cm³.
    """
    if table == "lines" and key in known.lines:
        return _line(known.lines[key])
    if table == "packs":
        return _pack(known, key)
    for place in known.places if table == "places" else ():
        if place.name == key:
            warm = "" if place.temperature_c is None else f"{place.temperature_c:g}"
            return {"name": place.title, "temperature_c": warm, "meant_for": place.meant_for}
    for payer in known.departments if table == "departments" else ():
        if payer.code == key:
            return {"name": payer.name, "left_gbp": _pounds(payer.left_pence)}
    return {}


def _line(line: Line) -> dict[str, str]:
    level = "" if line.level is None else f"{line.level / PER_UNIT[line.kind]:.9g}"
    return {
        _LEVEL[line.kind]: level,
        "keep_note": line.keep_note,
        "ask_first": line.ask_first,
        "ask_days": str(line.ask_days) if line.ask_days else "",
    }


def _pack(known: Facts, key: str) -> dict[str, str]:
    for line in known.lines.values():
        for pack in line.packs:
            sold = f"{line.key}, {pack.text}"
            if key in (sold, f"{sold}, {pack.supplier}"):
                lead = "" if pack.lead is None else str(pack.lead)
                return {"price_gbp": _pounds(pack.pence), "lead_open_days": lead}
    return {}


def _pounds(pence: int | None) -> str:
    return "" if pence is None else f"{pence / 100:.2f}"
