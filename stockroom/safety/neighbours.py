"""Groups that must not share a place, and caps that must let gas out.

Common practice, no source looked up; the house's own rules come first.
"""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.findings import Finding

APART: dict[frozenset[str], str] = {
    frozenset({"acid", "hypochlorite"}): "bleach beside acid: chlorine if they meet",
    frozenset({"acid", "alkali"}): "acid beside alkali: heat if they meet",
    frozenset({"oxidiser", "flammable"}): "oxidiser beside flammable: fire",
    frozenset({"peroxide", "flammable"}): "peroxide beside flammable: fire",
    frozenset({"hypochlorite", "flammable"}): "bleach beside flammable: heat and fumes",
}


def wrong_neighbours(standing: Iterable[tuple[str, str, str]]) -> list[Finding]:
    """Findings on bottles that stand where they should not.

    `standing` is (bottle, its storage group, the place's own group or the
    groups beside it) pair by pair; a pair without a rule is passed over.
    """
    found = []
    for bottle, group, beside in standing:
        reason = APART.get(frozenset({group, beside}))
        if reason:
            found.append(Finding(bottle, f"{reason}: move it"))
    return found


def tight_caps(bottles: Iterable[tuple[str, str, bool]]) -> list[Finding]:
    """Findings on (bottle, cap as written, must it be vented): tight where gas is made."""
    text = "tight cap on a solution that gives off gas: vent it with care, change the cap"
    return [Finding(number, text) for number, cap, vented in bottles if vented and cap == "tight"]
