"""Harm to life in water: sums of what is in the mixture, with their multiplying factors.

Source: Regulation (EC) No 1272/2008, Annex I, 4.1.3, summation method, from memory.
"""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.safety.grounds import RULE
from stockroom.safety.limits import Basis, Found, Ingredient, Limit, Part
from stockroom.safety.mixture import Share, highest, nearest, shares

_ACUTE = "Aquatic Acute 1"
_CHRONIC = tuple(f"Aquatic Chronic {category}" for category in (1, 2, 3, 4))
_SUM = 25.0
_TRACE, _RELEVANT = 0.1, 1.0

_WEIGHTS = {
    "Aquatic Chronic 1": (1.0,),
    "Aquatic Chronic 2": (10.0, 1.0),
    "Aquatic Chronic 3": (100.0, 10.0, 1.0),
    "Aquatic Chronic 4": (1.0, 1.0, 1.0, 1.0),
}
"""What a per cent of chronic 1, 2, 3, 4 counts on the way to each class; 25 in all reach it.

The factor of category 1 multiplies it too, but not on the way to category 4.
"""

_CODES = dict(zip(_CHRONIC, ("H410", "H411", "H412", "H413"), strict=True))


def found_in(ingredients: Iterable[Ingredient]) -> list[Found]:
    """What the mixture does to water life at once, and lastingly."""
    mixture = list(ingredients)
    lasting = [(name, _CODES[name], shares(mixture, _lasting(name))) for name in _CHRONIC]
    return [*highest([(_ACUTE, "H400", shares(mixture, _at_once))]), *highest(lasting)]


def _at_once(each: Ingredient) -> Part | None:
    rows = each.held("water life")
    return nearest((_part(each, row, 1.0) for row in rows), _relevant(rows))


def _lasting(name: str) -> Share:
    weights = _WEIGHTS[name]

    def share(each: Ingredient) -> Part | None:
        rows = [row for row in each.held("water life, lasting") if _place(row) < len(weights)]
        parts = (_part(each, row, weights[_place(row)], name) for row in rows)
        return nearest(parts, _relevant(rows))

    return share


def _place(row: Limit) -> int:
    return row.kind.rank


def _part(each: Ingredient, row: Limit, weight: float, name: str = "") -> Part:
    if row.basis is Basis.SPECIFIC and row.from_percent:
        return each.part(row, row.from_percent)
    # category 4 is a safety net without figures, so nothing is multiplied on the way to it
    factor = 1.0 if name == _CHRONIC[-1] else row.m_factor
    return each.part(row, _SUM / (weight * factor), RULE)


def _relevant(rows: Iterable[Limit]) -> float:
    """From how many per cent it counts: 0.1 over its factor for category 1, else 1."""
    return min(
        (_TRACE / row.m_factor if row.kind.rank == 0 else _RELEVANT for row in rows),
        default=_RELEVANT,
    )
