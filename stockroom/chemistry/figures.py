"""One check for the figures that sums are made of: finite, and above zero."""

from __future__ import annotations

import math

from stockroom.errors import BadAmount


def positive(value: float, name: str, unit: str = "") -> float:
    """`value` itself, when it is finite and above 0.

    Raises: BadAmount naming the figure, otherwise.
    """
    if math.isfinite(value) and value > 0:
        return value
    shown = f"{value:g} {unit}".strip()
    raise BadAmount(f"{name} {shown}: it must be above 0.", f"Check the {name}.")


def fraction(value: float, name: str) -> float:
    """`value` itself, when it lies above 0 and not above 1.

    Raises: BadAmount naming the figure, otherwise; a per cent typed as such is asked about.
    """
    if math.isfinite(value) and 0 < value <= 1:
        return value
    raise BadAmount(f"{name} {value:g}: it must be above 0 and at most 1.", "97 % is 0.97.")
