"""Titres to a found strength: are they concordant, and what do they come to."""

from __future__ import annotations

from collections.abc import Sequence

from stockroom.chemistry.figures import positive
from stockroom.errors import BadAmount
from stockroom.measure.formats import format_number

CONCORDANT_CM3 = 0.1
"""How far apart titres may lie. Common practice, no source."""

_CM3_PER_DM3 = 1000.0
_BINARY_DUST = 1e-9


def mean_titre(titres_cm3: Sequence[float], *, within_cm3: float = CONCORDANT_CM3) -> float:
    """The mean of concordant titres, in cm³; a single titre is its own mean.

    Raises: BadAmount when there is none, when one is not above 0, and when the
    highest and lowest lie further apart than `within_cm3`.
    """
    if not titres_cm3:
        raise BadAmount(f"{len(titres_cm3)} titres say nothing.", "Give at least one, in cm³.")
    # each one first: a misread zero would otherwise show as mere disagreement
    for titre in titres_cm3:
        positive(titre, "titre", "cm³")
    spread = max(titres_cm3) - min(titres_cm3)
    if spread > within_cm3 + _BINARY_DUST:
        raise BadAmount(
            f"Not concordant ({format_number(spread, 2)} cm³).", "Add another or keep as rough."
        )
    return sum(titres_cm3) / len(titres_cm3)


def found_by_titre(moles: float, titre_cm3: float, *, ratio: float) -> float:
    """The mol/dm³ of a titrant that took `titre_cm3` for `moles` of the standard.

    `ratio` is mol of titrant per mol of standard in the balanced equation: 6 for
    thiosulfate on iodate, 0.4 for permanganate on oxalate.
    Raises: BadAmount for a figure not above 0.
    """
    taken = positive(moles, "standard", "mol") * positive(ratio, "ratio")
    return taken * _CM3_PER_DM3 / positive(titre_cm3, "titre", "cm³")


def factor(found: float, nominal: float) -> float:
    """Found strength over nominal, both in one unit; 1 is exactly as labelled.

    Raises: BadAmount for a figure not above 0.
    """
    return positive(found, "found strength") / positive(nominal, "nominal strength")
