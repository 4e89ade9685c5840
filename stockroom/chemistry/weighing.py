"""What a balance can be trusted with: the least mass, and the batch that reaches it.

The sums are the same for a graduated pipette, with cm³ in the place of g.
"""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.chemistry.figures import positive
from stockroom.errors import BadAmount

USP_LIMIT = 0.0010
"""The 0.10 % that twice the repeatability may be of the mass. Source: USP <41>."""

USP_FLOOR = 0.41
"""Steps of the display that a repeatability never counts below.

Source: USP <41>: the floor of 820 steps was seen, this figure is from memory.
"""


@dataclass(frozen=True, slots=True)
class Scale:
    """A balance as the sums see it: its step, and the least it may weigh whatever the step.

    In g; `least` is 0 where only the closeness rule counts, `repeatability` (the spread
    of repeated weighings, as a standard deviation) where nobody found it.
    """

    name: str
    step: float
    least: float = 0.0
    repeatability: float = 0.0


def least_weighable(step_g: float, closeness: float) -> float:
    """The least g to weigh on a balance of `step_g` for a relative `closeness`.

    `closeness` is a fraction: ±5 % is 0.05. One step of the display is taken as the
    error, whatever the load.
    Raises: BadAmount for a figure not above 0.
    Source: common practice, no source.

    >>> round(least_weighable(0.01, 0.02), 3)
    0.5
    """
    return positive(step_g, "balance step", "g") / positive(closeness, "closeness")


def least_by_pharmacopoeia(*, repeatability_g: float | None = None, step_g: float = 0.0) -> float:
    """The least g to weigh so that twice the repeatability is 0.10 % of it.

    `repeatability_g` is the standard deviation of ten or more weighings of one mass;
    one below 0.41 of the step counts as that, and so does one nobody has found.
    Raises: BadAmount with neither figure, or for one below 0.
    Source: USP <41>; Ph. Eur. 2.1.7 has the same figures (from memory).

    >>> round(least_by_pharmacopoeia(repeatability_g=0.00015), 5)
    0.3
    """
    found = 0.0 if repeatability_g is None else positive(repeatability_g, "repeatability", "g")
    # ten equal weighings show a spread of 0, and no balance is as good as that
    floor = USP_FLOOR * positive(step_g, "balance step", "g") if step_g else 0.0
    if not max(found, floor):
        raise BadAmount(
            f"repeatability {repeatability_g}, balance step {step_g:g} g: nothing to go by.",
            "Give the balance's step, or the spread of ten weighings.",
        )
    return 2 * max(found, floor) / USP_LIMIT


def batch_to_weigh(mass_g: float, volume_cm3: float, least_g: float) -> tuple[float, float]:
    """Mass and volume of the batch, scaled up together until the mass can be weighed.

    Already heavy enough, both come back as they are; the strength never changes.
    Raises: BadAmount for a figure not above 0.
    """
    positive(mass_g, "mass", "g")
    positive(volume_cm3, "volume", "cm³")
    if mass_g >= positive(least_g, "least mass", "g"):
        return mass_g, volume_cm3
    # both by one factor, so that the strength stays what it was
    return least_g, volume_cm3 * (least_g / mass_g)


def relative_error(step: float, mass: float) -> float:
    """One step of the display as a fraction of the mass: 0.01 on 0.176 is 0.057.

    Raises: BadAmount for a figure not above 0.
    """
    return positive(step, "balance step") / positive(mass, "mass")
