"""How well molar masses are known: the limits of the elements' atomic weights.

The value of a molar mass comes from `formula.py`; this is only its doubt, which
matters beside a good balance and a class A flask and nowhere else.
"""

from __future__ import annotations

import math
import re
import unicodedata
from collections import Counter
from collections.abc import Mapping

from stockroom.chemistry.formula import molar_mass
from stockroom.chemistry.uncertainty import Doubt
from stockroom.errors import MissingFigure

# Elements whose weight differs from one natural source to another: the lowest and highest.
# Source: CIAAW, Standard atomic weights of the elements 2021; seen.
_SEEN_BETWEEN = {
    "H": (1.00784, 1.00811),
    "O": (15.99903, 15.99977),
    "S": (32.059, 32.076),
    "Cl": (35.446, 35.457),
    "Br": (79.901, 79.907),
}
# Source: the same, from memory.
_BETWEEN = {
    "Li": (6.938, 6.997),
    "B": (10.806, 10.821),
    "C": (12.0096, 12.0116),
    "N": (14.00643, 14.00728),
    "Mg": (24.304, 24.307),
    "Si": (28.084, 28.086),
    "Pb": (206.14, 207.94),
}
# The figure in brackets after the weight. Source: the same; seen.
_SEEN_WITHIN = {
    "Na": 2e-8, "K": 1e-4, "Fe": 2e-3, "Cu": 3e-3, "Ag": 2e-4, "I": 3e-5,
}  # fmt: skip
# Source: the same, from memory.
_WITHIN = {
    "F": 5e-9, "Al": 3e-7, "P": 5e-9, "Ca": 4e-3, "Ti": 1e-3, "V": 1e-4, "Cr": 6e-4,
    "Mn": 2e-6, "Co": 3e-6, "Ni": 4e-4, "Zn": 2e-2, "As": 6e-6, "Se": 8e-3, "Sr": 1e-2,
    "Mo": 1e-2, "Cd": 4e-3, "Sn": 7e-3, "Ba": 7e-3, "Ce": 1e-3, "Hg": 3e-3, "Bi": 1e-5,
}  # fmt: skip

LIMITS: dict[str, float] = {
    symbol: (high - low) / 2 for symbol, (low, high) in (_SEEN_BETWEEN | _BETWEEN).items()
} | (_SEEN_WITHIN | _WITHIN)
"""How far the atomic weight of an element may lie from its middle, in g/mol."""

# the same dots as in `formula.py`, which has refused everything else by then
_PART = re.compile(r"([0-9]*) ?([^.*·•∙⋅ ]+)")


def molar_mass_doubt(formula: str) -> Doubt:
    """The doubt of the molar mass of a formula, in g/mol, from its elements' limits.

    Raises: BadAmount as `molar_mass`; MissingFigure for an element whose limits are
    not held.
    """
    return Doubt("elements", molar_mass_standard(element_counts(formula)))


def molar_mass_standard(
    counts: Mapping[str, int], limits: Mapping[str, float] | None = None
) -> float:
    """The standard uncertainty in g/mol of a molar mass with so many of each element.

    Each limit is taken as rectangular; the atoms of one element are off together, so
    their number multiplies, and different elements add as squares.
    Raises: MissingFigure for an element without a limit.
    Source: EURACHEM/CITAC QUAM:2012, example A2.

    >>> round(molar_mass_standard({"C": 8}, {"C": 0.0008}), 4)
    0.0037
    """
    held = LIMITS if limits is None else limits
    for symbol in counts:
        if symbol not in held:
            raise MissingFigure(
                f'How well the atomic weight of "{symbol}" is known is not held.',
                "Leave the molar mass out of the budget: it is seldom a large part.",
            )
    parts = (count * held[symbol] for symbol, count in counts.items())
    return math.hypot(*parts) / math.sqrt(3)


def element_counts(formula: str) -> Counter[str]:
    """How many atoms of each element a formula has, water of crystallisation included.

    Raises: BadAmount as `molar_mass`, which reads the same spellings.

    >>> sorted(element_counts("CuSO4·5H2O").items())
    [('Cu', 1), ('H', 10), ('O', 9), ('S', 1)]
    """
    from molmass import Formula

    molar_mass(formula)  # refuses in words whatever the library would misread
    total: Counter[str] = Counter()
    for times, units in _PART.findall(unicodedata.normalize("NFKC", formula)):
        for symbol, item in Formula(units).composition().items():
            total[symbol] += int(times or 1) * item.count
    return total
