"""How a bottle's strength is known, in the words that stand behind the figure."""

from __future__ import annotations

from stockroom.keeping.strength import Strengths
from stockroom.planning.facts import Bottle


def how_known(bottle: Bottle, strengths: Strengths) -> str:
    """Found and the day, else by dilution of what was found, else by its label."""
    if strengths.found is not None:
        return f"found {strengths.found_on}"
    return bottle.known_by or "label, not checked"


def by_dilution(source: Bottle, strengths: Strengths) -> str:
    """How what is diluted from this bottle is known; "" where the bottle itself is not.

    It keeps the factor, since it was measured by it, and names the check; but the check is
    none of its own. Common practice, no source.
    """
    if strengths.found is None and not source.known_by:
        return ""
    return f"by dilution of {source.number}, {how_known(source, strengths)}"
