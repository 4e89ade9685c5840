"""What a balance can be trusted with: the least mass, and the batch that reaches it.

The sums are the same for a graduated pipette, with cm³ in the place of g.
"""

from __future__ import annotations

from stockroom.chemistry.figures import positive


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


def batch_to_weigh(mass_g: float, volume_cm3: float, least_g: float) -> tuple[float, float]:
    """Mass and volume of the batch, scaled up together until the mass can be weighed.

    Already heavy enough, both come back as they are; the strength never changes.
    Raises: BadAmount for a figure not above 0.
    """
    positive(mass_g, "mass", "g")
    positive(volume_cm3, "volume", "cm³")
    if mass_g >= positive(least_g, "least mass", "g"):
        return mass_g, volume_cm3
    return least_g, volume_cm3 * (least_g / mass_g)


def relative_error(step: float, mass: float) -> float:
    """One step of the display as a fraction of the mass: 0.01 on 0.176 is 0.057.

    Raises: BadAmount for a figure not above 0.
    """
    return positive(step, "balance step") / positive(mass, "mass")
