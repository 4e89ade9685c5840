"""The published law by which hypochlorite loses strength: second order, by salt and warmth.

−dC/dt = k₂ C², with C in mol/dm³ of hypochlorite. The rate constant goes with the
ionic strength μ, and that stays as it was when the bleach was made: 3 OCl⁻ → ClO₃⁻ + 2 Cl⁻
and 2 OCl⁻ → O₂ + 2 Cl⁻ both leave as many single charges as they find. So an
old weak bleach fades faster than a fresh one diluted to the same strength, and
for one bottle the law is a plain second order.

Source: Adam and Gordon 1999, Inorg. Chem. 38:1299, abstract. That −dC/dt is
once, and not twice, k₂C² cannot be read in the abstract: taken here at once.
"""

from __future__ import annotations

import math

from stockroom.errors import BadAmount
from stockroom.keeping.arrhenius import Response, kelvin
from stockroom.measure.formats import format_number

NAME = "hypochlorite"
"""What the law is called in a line's table of rules."""

SOURCE = (
    "Adam and Gordon 1999, Inorg. Chem. 38:1299 (abstract seen; that the loss is once k₂C²"
    " is taken here, and not to be read there)"
)

UNIT = "mol/dm3"
"""The unit the line must be counted in, since the law is in mol/dm³."""

OWN_C = 25.0
"""The °C its rate is given at where a place has no temperature."""

# the abstract writes 8.314, and its constants were fitted with that
_R = 8.314
_PREFACTOR = 2.083e10  # Boltzmann's constant over Planck's, per K and s
_ENTHALPY, _ENTROPY = 1.018e5, -56.5  # J/mol and J/(mol·K)
_BY_SALT = 0.149  # log₁₀ k₂ per unit of ionic strength
_SPARE_SALT = 0.05  # the soda and soda ash bleach is kept alkaline with
_SECONDS_PER_DAY = 86_400.0

COLDEST_C, WARMEST_C = 15.0, 55.0
WEAKEST, STRONGEST = 0.7, 3.0
LEAST_SALT, MOST_SALT = 1.0, 6.0


def ionic_strength(made_as: float) -> float:
    """μ in mol/dm³ of a bleach made at so many mol/dm³: 2 C + 0.05.

    Making bleach from chlorine leaves one chloride for each hypochlorite, so
    there are two salts; the rest is the alkali it is kept with.
    """
    return 2.0 * made_as + _SPARE_SALT


def rate_constant(celsius: float, ionic: float) -> float:
    """k₂ in dm³/(mol·s) at a temperature and an ionic strength in mol/dm³.

    Raises: BadAmount below no salt at all, and at no temperature.

    >>> f"{rate_constant(25, 1):.3g}"
    '1.43e-08'
    """
    if ionic < 0:
        raise BadAmount(f"An ionic strength of {ionic:g} is below none.", "Give 0 or more.")
    hot = kelvin(celsius)
    bare = _PREFACTOR * hot * math.exp(-_ENTHALPY / (_R * hot) + _ENTROPY / _R)
    return float(bare * 10.0 ** (_BY_SALT * ionic))


def rate_per_day(made_as: float, at_c: float) -> float:
    """The second-order rate in dm³/(mol·day) of a bleach made at so many mol/dm³."""
    return rate_constant(at_c, ionic_strength(made_as)) * _SECONDS_PER_DAY


def response(at_c: float) -> Response:
    """How warmth changes that rate: the form of transition state theory, T exp(−ΔH/RT)."""
    return Response(at_c, theta=_ENTHALPY / _R, power=1.0)


def doubts(
    made_as: float | None, strength: float | None, coldest: float | None, warmest: float | None
) -> tuple[str, ...]:
    """Why the law is only a guess here, in words; none inside what it was fitted to.

    `made_as` and `strength` in mol/dm³, the warmth of its places in °C; None for unknown.
    """
    told = ["how strong it was made is not known: taken as what was found"] * (made_as is None)
    told += [_outside("at", each, (COLDEST_C, WARMEST_C), "°C") for each in _two(coldest, warmest)]
    # an old weak bleach was within it when it was made, and one made weak never was
    told.append(_outside("made at", made_as, (WEAKEST, STRONGEST), "mol/dm³"))
    if not told[-1]:
        told.append(_outside("down at", strength, (WEAKEST, STRONGEST), "mol/dm³"))
    told.append(_outside("of ionic strength", _salt(made_as), (LEAST_SALT, MOST_SALT), "mol/dm³"))
    return tuple(filter(None, told))


def _outside(word: str, value: float | None, fitted: tuple[float, float], unit: str) -> str:
    low, high = fitted
    if value is None or low <= value <= high:
        return ""
    shown = f"{word} {format_number(value, 2)} {unit} it is a guess"
    return f"{shown}: the law was fitted to {low:g} to {high:g} {unit}"


def _two(coldest: float | None, warmest: float | None) -> tuple[float | None, ...]:
    return (coldest,) if coldest == warmest else (coldest, warmest)


def _salt(made_as: float | None) -> float | None:
    return None if made_as is None else ionic_strength(made_as)
