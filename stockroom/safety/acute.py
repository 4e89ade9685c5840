"""Acute poisons: the estimate for the mixture, by each way in.

100/ATE of the mixture is the sum of per cent over ATE of each ingredient. Written
as an edge for each ingredient (100 × its ATE over the category's limit) the sum of
shares says the same thing, and one way of counting serves every rule. What is not
known, once it is over 10 %, is left out of the hundred, as the regulation asks.
Source: Regulation (EC) No 1272/2008, Annex I, 3.1, from memory; the edges of 25 and
30 % for hydrogen peroxide agree with a sheet that was seen.
"""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.safety.classes import CLASSES
from stockroom.safety.grounds import RULE
from stockroom.safety.limits import (
    ACUTE,
    NEAR,
    Basis,
    Found,
    Ingredient,
    Limit,
    Part,
    Route,
    grounds_of,
    in_words,
    nearly,
    reached,
    summed,
)

LIMITS: dict[Route, tuple[float, float, float, float]] = {
    Route.ORAL: (5, 50, 300, 2000),
    Route.DERMAL: (50, 200, 1000, 2000),
    Route.VAPOUR: (0.5, 2, 10, 20),
    Route.DUST: (0.05, 0.5, 1, 5),
    Route.GAS: (100, 500, 2500, 20000),
}
"""The highest estimate of categories 1 to 4: mg/kg; breathed, mg/dm³ of air, or ppm of a gas."""

CONVERTED: dict[Route, tuple[float, float, float, float]] = {
    Route.ORAL: (0.5, 5, 100, 500),
    Route.DERMAL: (5, 50, 300, 1100),
    Route.VAPOUR: (0.05, 0.5, 3, 11),
    Route.DUST: (0.005, 0.05, 0.5, 1.5),
    Route.GAS: (10, 100, 700, 4500),
}
"""The estimate that stands for a category where nothing better is held; units as `LIMITS`."""

CODES: dict[str, tuple[str, str, str, str]] = {
    "oral": ("H300", "H300", "H301", "H302"),
    "dermal": ("H310", "H310", "H311", "H312"),
    "inhaled": ("H330", "H330", "H331", "H332"),
}

_MUCH_UNKNOWN, _ALL_KNOWN = 10.0, 100.0
_RELEVANT = (0.1, 0.1, 0.1, 1.0)
"""From how many per cent an ingredient of category 1 to 4 counts. Source: Annex I, c."""


def found_in(ingredients: Iterable[Ingredient], unknown: float) -> list[Found]:
    """The mixture's category by each way in; `unknown` is the per cent nothing is held of."""
    mixture = list(ingredients)
    return [found for way_in in CODES for found in _worst(mixture, way_in, unknown)]


def _worst(mixture: list[Ingredient], way_in: str, unknown: float) -> list[Found]:
    rows = [(each, row) for each in mixture if (row := _row_of(each, way_in)) is not None]
    if not rows:
        return []
    # a mixture is never a worse poison than what is in it, whatever rounding an estimate has
    begin = min(_category(row) for _, row in rows)
    whole = _ALL_KNOWN - unknown if unknown > _MUCH_UNKNOWN else _ALL_KNOWN
    for category in range(begin, 5):
        parts = [_part(each, row, category, whole) for each, row in rows if _adds(row, category)]
        share = summed(parts)
        if nearly(share):
            code = CODES[way_in][category - 1]
            words = in_words(code, parts) + _estimate(rows, category, share)
            kind = CLASSES[f"Acute Tox. {category}"]
            return [Found(kind, code, words, not reached(share), way_in, grounds_of(parts))]
    return []


def _row_of(each: Ingredient, way_in: str) -> Limit | None:
    """The row that makes it most poisonous this way in, when there is enough of it to count."""
    rows = each.held(f"{ACUTE} {way_in}")
    row = min(rows, key=lambda row: _edge(row, 4), default=None)
    if row is None:
        return None
    relevant = min(_RELEVANT[_category(row) - 1], _edge(row, 4))
    return row if each.percent_for(row) >= relevant * NEAR else None


def _category(row: Limit) -> int:
    return int(row.hazard_class[-1])


def _adds(row: Limit, category: int) -> bool:
    # a lesser poison cannot bring a mixture into a worse category than its own
    return category >= _category(row)


def _part(each: Ingredient, row: Limit, category: int, whole: float) -> Part:
    # by its estimate; by its own limit the rule is asked only for what of the rest is unknown
    rule = None if _published(row) and whole == _ALL_KNOWN else RULE
    return each.part(row, _edge(row, category) * whole / _ALL_KNOWN, rule)


def _published(row: Limit) -> bool:
    return row.basis is Basis.SPECIFIC and bool(row.from_percent)


def _edge(row: Limit, category: int) -> float:
    """The per cent at which this ingredient alone brings a mixture into the category."""
    # a published limit says from where its own category holds; the rest follows from the estimate
    if row.from_percent and _published(row):
        return row.from_percent
    limit = LIMITS[row.counted_by][category - 1]
    return min(100.0, 100.0 * estimate_of(row) / limit)


def estimate_of(row: Limit) -> float:
    """The acute toxicity estimate of a row, or the one that stands for its category."""
    return row.ate or CONVERTED[row.counted_by][_category(row) - 1]


def _estimate(rows: list[tuple[Ingredient, Limit]], category: int, share: float) -> str:
    routes = {row.counted_by for _, row in rows}
    # estimates of a vapour and of a dust are in the same unit and do not compare
    if len(routes) > 1:
        return ""
    (route,) = routes
    limit, unit = LIMITS[route][category - 1], _UNITS[route]
    return f" (estimate {limit / share:.4g} {unit}, limit {limit:g})"


_UNITS = {
    Route.ORAL: "mg/kg",
    Route.DERMAL: "mg/kg",
    Route.VAPOUR: "mg/dm³ of vapour",
    Route.DUST: "mg/dm³ of mist",
    Route.GAS: "ppm",
}
