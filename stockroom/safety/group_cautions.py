"""The usual caution for a storage group, where the house wrote none for a method.

Common practice, no source; what the substance itself asks for is in `cautions.py`.
"""

from __future__ import annotations

from collections.abc import Iterable

_LIQUIDS = {
    "acid": "Acid into water, slowly and stirring, never water into acid; let it cool.",
    "alkali": "Corrosive: eye protection; open in the fume cupboard if it is concentrated.",
    "oxidiser": "Oxidiser: keep away from anything that burns; eye protection.",
    "peroxide": "Peroxide: eye protection, clean glass, nothing metal, nothing poured back.",
    "hypochlorite": "Bleach never meets acid (chlorine) or ammonia; rinse apart.",
    "flammable": "Flammable: no flame in the room.",
}
_SOLIDS = {
    "alkali": "Alkali into water in small portions, stirring: it boils if hurried.",
    "oxidiser": "Oxidiser: keep off paper and off anything that burns; wipe up spills wet.",
}
_VENTED = "Vented cap, cool and dark, never filled to the brim."


def cautions_for(
    groups: Iterable[tuple[str, bool]], *, vented: bool = False, never_kept: str = ""
) -> tuple[str, ...]:
    """Cautions for a make from its ingredients' storage groups (group, is it a solid).

    A group without an entry adds nothing. Order follows the ingredients.
    """
    words = []
    for group, solid in groups:
        caution = (_SOLIDS if solid else _LIQUIDS).get(group)
        words += [caution] if caution else []
    if vented:
        words.append(_VENTED)
    if never_kept:
        words.append(f"Never kept: {never_kept}")
    # two acids in one make ask for the same care: it is said once, where it first came
    return tuple(dict.fromkeys(words))
