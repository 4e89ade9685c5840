"""The density of ethanol-water mixtures: the formula of OIML R 22, -20 to 40 °C.

The twelve figures that stand alone at 20 °C were seen. Those for other temperatures are
from memory, and were compared with the older table of the US Bureau of Standards (also
from memory) at 0, 10, 30, 50 and 100 % from 10 to 40 °C: never 0.15 kg/m³ apart, and that
offset is the same at 20 °C; for pure water they give its known density at 0 to 40 °C.

Source: OIML R 22 (1973), Directive 76/766/EEC, Annex.
"""

from __future__ import annotations

from stockroom.errors import BadAmount

SOURCE = "OIML R 22 formula"
NAMES = frozenset({"ethanol", "ethyl alcohol", "c2h6o", "c2h5oh", "ch3ch2oh"})
"""What ethanol is called, in small letters."""

COLDEST_C, WARMEST_C = -20.0, 40.0

_AT_20C = (
    9.982012300e2, -1.929769495e2, 3.891238958e2, -1.668103923e3, 1.352215441e4, -8.829278388e4,
    3.062874042e5, -6.138381234e5, 7.470172998e5, -5.478461354e5, 2.234460334e5, -3.903285426e4,
)  # fmt: skip
"""kg/m³, for the mass fraction to the powers 0 to 11."""

_WATER = (
    -2.0618513e-1, -5.2682542e-3, 3.6130013e-5, -3.8957702e-7, 7.1693540e-9, -9.9739231e-11,
)  # fmt: skip
"""For the degrees above 20 to the powers 1 to 6."""

_MIXED = (
    (
        1.693443461530087e-1, -1.046914743455169e1, 7.196353469546523e1, -7.047478054272792e2,
        3.924090430035045e3, -1.210164659068747e4, 2.248646550400788e4, -2.605562982188164e4,
        1.852373922069467e4, -7.420201433430137e3, 1.285617841998974e3,
    ),
    (
        -1.193013005057010e-2, 2.517399633803461e-1, -2.170575700536993, 1.353034988843029e1,
        -5.029988758547014e1, 1.096355666577570e2, -1.422753946421155e2, 1.080435942856230e2,
        -4.414153236817392e1, 7.442971530188783,
    ),
    (
        -6.802995733503803e-4, 1.876837790289664e-2, -2.002561813734156e-1, 1.022992966719220,
        -2.895696483903638, 4.810060584300675, -4.672147440794683, 2.458043105903461,
        -5.411227621436812e-1,
    ),
    (4.075376675622027e-6, -8.763058573471110e-6, 6.515031360099368e-6, -1.515784836987210e-6),
    (-2.788074354782409e-8, 1.345612883493354e-8),
)  # fmt: skip
"""One row for each power of the degrees above 20, from 1; in it the fraction to 1, 2, ..."""


def ethanol_density(percent_ww: float, temperature_c: float = 20.0) -> float:
    """The g/cm³ of ethanol and water at so many % of ethanol by mass, 0 to 100.

    Raises: BadAmount for a per cent or a temperature (-20 to 40 °C) outside the formula.
    Source: OIML R 22 (1973).

    >>> round(ethanol_density(50), 5)
    0.91377
    """
    if not 0 <= percent_ww <= 100:
        raise BadAmount(f"ethanol {percent_ww:g} % by mass: not from 0 to 100.", "Read it again.")
    if not COLDEST_C <= temperature_c <= WARMEST_C:
        raise BadAmount(
            f"{temperature_c:g} °C: the ethanol formula runs from {COLDEST_C:g} to {WARMEST_C:g}.",
            "Bring it to room temperature.",
        )
    share, above = percent_ww / 100, temperature_c - 20.0
    kilograms = _powers(_AT_20C, share) + above * _powers(_WATER, above)
    kilograms += sum(
        share * _powers(row, share) * above**power for power, row in enumerate(_MIXED, start=1)
    )
    return kilograms / 1000


def _powers(factors: tuple[float, ...], of: float) -> float:
    """factors[0] + factors[1] × of + factors[2] × of² ..., from the far end as Horner did."""
    total = 0.0
    for factor in reversed(factors):
        total = total * of + factor
    return total
