"""What warmth does to a rate: Arrhenius, the factor per 10 °C, mean kinetic temperature.

Temperatures come in °C and activation energies in kJ/mol.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

from stockroom.errors import BadAmount

R = 8.314462618
"""The gas constant in J/(mol·K). Source: 2019 SI (CODATA), exact to these digits."""

ZERO_C = 273.15

MKT_EA, MKT_R = 83.144, 8.3144e-3
"""The usual energy of a mean kinetic temperature, kJ/mol, and the R it goes with, kJ/(mol·K).

Together they are 10 000 K. Source: USP 29 <1160>, seen as a page copy.
"""

LARGEST_EA = 1000.0
"""kJ/mol; above it somebody has typed J/mol. Breaking the strongest bond takes about as much."""

# beyond this the exponential leaves the numbers there are, and "at once" is answer enough
_LARGEST_POWER = 700.0


def kelvin(celsius: float) -> float:
    """A temperature in °C in kelvin. Raises: BadAmount at or below absolute zero."""
    if not math.isfinite(celsius) or celsius <= -ZERO_C:
        raise BadAmount(f"{celsius:g} °C is not a temperature.", "Give it in °C, as 21.5.")
    return celsius + ZERO_C


@dataclass(frozen=True, slots=True)
class Response:
    """How many times faster something runs at a temperature than at its own, `at_c`.

    Three laws in one: a factor per 10 °C (`per_c` is its logarithm over 10), an
    activation energy (`theta` is E/R in kelvin), and a prefactor that goes with the
    `power` of the kelvin temperature (1 in transition state theory, else 0).
    """

    at_c: float
    per_c: float = 0.0
    theta: float = 0.0
    power: float = 0.0

    def pace(self, celsius: float) -> float:
        """Times faster at `celsius` than at `at_c`, where it is 1."""
        own, here = kelvin(self.at_c), kelvin(celsius)
        exponent = self.per_c * (celsius - self.at_c) + self.theta * (1 / own - 1 / here)
        paced = math.exp(max(-_LARGEST_POWER, min(exponent, _LARGEST_POWER)))
        return paced * math.pow(here / own, self.power)


def by_factor(at_c: float, factor_per_10c: float) -> Response:
    """The response of a constant factor per 10 °C. Raises: BadAmount for a factor of 0 or less."""
    return Response(at_c, per_c=math.log(_factor(factor_per_10c)) / 10.0)


def by_energy(at_c: float, ea_kj_mol: float) -> Response:
    """The response of an activation energy. Raises: BadAmount for one that cannot be."""
    return Response(at_c, theta=_energy(ea_kj_mol) * 1000.0 / R)


def ratio(ea_kj_mol: float, from_c: float, to_c: float) -> float:
    """How many times faster at `to_c` than at `from_c`: exp[(Ea/R)(1/T₁ − 1/T₂)].

    Raises: BadAmount. Source: the equation of Arrhenius, any physical chemistry text.

    >>> round(ratio(83.144, 25, 35), 3)
    2.97
    """
    return by_energy(from_c, ea_kj_mol).pace(to_c)


def q10_of(ea_kj_mol: float, from_c: float, to_c: float | None = None) -> float:
    """The factor per 10 °C that an activation energy comes to between two temperatures.

    `to_c` is `from_c` + 10 when left out. It falls as the temperatures rise: a
    constant factor and a constant energy agree only where they were compared.
    Raises: BadAmount.

    >>> round(q10_of(83.144, 20), 3)
    3.081
    """
    cold = kelvin(from_c)
    warm = kelvin(from_c + 10.0 if to_c is None else to_c)
    # (1/T₁ − 1/T₂)/(T₂ − T₁), written so that it holds at one single temperature too
    return math.exp(10.0 * _energy(ea_kj_mol) * 1000.0 / (R * cold * warm))


def ea_of(factor_per_10c: float, from_c: float, to_c: float | None = None) -> float:
    """The activation energy in kJ/mol that a factor per 10 °C comes to; `q10_of` undone.

    Raises: BadAmount.

    >>> round(ea_of(2, 20), 2)
    51.22
    """
    cold = kelvin(from_c)
    warm = kelvin(from_c + 10.0 if to_c is None else to_c)
    return R * math.log(_factor(factor_per_10c)) * cold * warm / 10_000.0


def ea_between(times: float, from_c: float, to_c: float) -> float:
    """The activation energy in kJ/mol of what runs `times` faster at `to_c` than at `from_c`.

    Raises: BadAmount for one and the same temperature, and for a ratio of 0 or less.
    """
    if from_c == to_c:
        raise BadAmount(f"{from_c:g} °C and {to_c:g} °C are the same.", "Give two temperatures.")
    return R * math.log(_factor(times)) / (1 / kelvin(from_c) - 1 / kelvin(to_c)) / 1000.0


def kinetic_response(ea_kj_mol: float = MKT_EA) -> Response:
    """The response a mean kinetic temperature is worked out with, with the R that goes with it."""
    return Response(20.0, theta=_energy(ea_kj_mol) / MKT_R)


def temperature_at(response: Response, pace: float) -> float:
    """The °C at which a response of an energy alone has this pace (above 0); `pace` undone."""
    return 1.0 / (1.0 / kelvin(response.at_c) - math.log(pace) / response.theta) - ZERO_C


def mean_kinetic(
    celsius: Sequence[float],
    weights: Sequence[float] | None = None,
    *,
    ea_kj_mol: float = MKT_EA,
) -> float:
    """The one temperature in °C that would have done as much as all these did.

    `weights` are the lengths of time each held, alike when left out. Never below
    the plain mean, and higher for a higher energy.
    Raises: BadAmount for no temperatures, and for weights that are none.
    Source: USP 29 <1160>: T = (ΔH/R) / −ln(Σ wᵢ exp(−ΔH/RTᵢ) / Σ wᵢ).

    >>> round(mean_kinetic([20, 30]), 4)
    26.2599
    """
    shares = [1.0] * len(celsius) if weights is None else list(weights)
    total = math.fsum(shares)
    if len(shares) != len(celsius) or not celsius or min(shares) < 0 or total <= 0:
        raise BadAmount(
            f"{len(celsius)} temperatures with {len(shares)} weights that come to {total:g}.",
            "Give one weight, 0 or more, for each temperature.",
        )
    response = kinetic_response(ea_kj_mol)
    paces = (share * response.pace(each) for share, each in zip(shares, celsius, strict=True))
    return temperature_at(response, math.fsum(paces) / total)


def mean_kinetic_over(
    hours: Sequence[float],
    celsius: Sequence[float],
    *,
    ea_kj_mol: float = MKT_EA,
    stepwise: bool = False,
) -> float:
    """The mean kinetic temperature of readings at these times, which need not be evenly spread.

    Between two readings the mean of their exponentials counts (trapezoid); with
    `stepwise` each reading holds until the next one. Raises: BadAmount.
    Source: Tong and Lock 2015, JSM proceedings 2065-2070, as restated in a repository.
    """
    response = kinetic_response(ea_kj_mol)
    spans = [later - earlier for earlier, later in pairwise(hours)]
    if len(hours) != len(celsius) or not spans or min(spans) <= 0:
        raise BadAmount(
            f"{len(celsius)} temperatures at {len(hours)} times that do not run forward.",
            "Give two or more, in order of time.",
        )
    paces = [response.pace(each) for each in celsius]
    if not stepwise:
        paces = [(one + two) / 2 for one, two in pairwise(paces)]
    held = math.fsum(span * pace for span, pace in zip(spans, paces, strict=False))
    return temperature_at(response, held / math.fsum(spans))


def _factor(factor: float) -> float:
    if not math.isfinite(factor) or factor <= 0:
        raise BadAmount(f"A factor of {factor:g} is none.", "Give one above 0, as 2.5.")
    return factor


def _energy(ea_kj_mol: float) -> float:
    if not 0 < ea_kj_mol <= LARGEST_EA:
        raise BadAmount(
            f"{ea_kj_mol:g} kJ/mol is not between 0 and {LARGEST_EA:g}.",
            "In kJ/mol? 83 144 J/mol are 83.144.",
        )
    return ea_kj_mol
