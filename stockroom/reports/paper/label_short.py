"""Which statements a label of a small bottle may leave out, and when it may not.

The list was not seen in print: Regulation (EC) No 1272/2008 Annex I 1.5.2.1.1 (contents of
125 ml or less), from memory. So it is shown for somebody to confirm, and never taken as given.
"""

from __future__ import annotations

from stockroom.errors import NotAllowed
from stockroom.measure.amounts import Kind
from stockroom.planning.facts import Bottle, Line
from stockroom.reports.words import amount
from stockroom.safety.clp import NOT_ENTERED, PH_RULE
from stockroom.safety.hazards import Hazards

LARGEST = 125_000
"""µL: the most a bottle with a short label holds. Source: Annex I 1.5.2.1, from memory."""

RELAXED: dict[str, str] = {
    "flammable liquids 2 and 3": "H225 H226",
    "flammable solids 1 and 2": "H228",
    "self-reactive, organic peroxides, types C to F": "H242",
    "self-heating 2": "H252",
    "gives off flammable gases with water, 1 to 3": "H260 H261",
    "oxidising gases, and liquids and solids 2 and 3": "H270 H272",
    "gases under pressure": "H280 H281",
    "acute toxicity 4, not sold to the public": "H302 H312 H332",
    "skin irritation 2": "H315",
    "eye irritation 2": "H319",
    "single exposure 2 and 3, not sold to the public": "H371 H335 H336",
    "repeated exposure 2, not sold to the public": "H373",
    "water life, acute 1, chronic 1 and 2": "H400 H410 H411",
    "corrosive to metals 1": "H290",
}
"""The classes on the list, with the statements that mark them. From memory: see the top."""

CONFIRM = "Read the list against the regulation; if it holds for these bottles, add --confirm."

_CODES = frozenset(code for codes in RELAXED.values() for code in codes.split())


def check_short(bottle: Bottle, line: Line, hazards: Hazards) -> None:
    """Nothing if a bottle may have a short label. Raises: NotAllowed with what stands against it.

    It has to be small by its size in cm³, its hazards known, and each of them on the list.
    """
    use = "Use the full text: leave out --short."
    if not hazards.entered or hazards.worked_out.unknown:
        raise NotAllowed(f"{bottle.number}: hazard text {NOT_ENTERED}.", use)
    if hazards.sheet is None and PH_RULE in hazards.worked_out.notes:
        raise NotAllowed(f"{bottle.number}: its pH is not held, it may be corrosive.", use)
    full = [c for c in (*hazards.statements, *hazards.supplemental) if c not in _CODES]
    if full:
        raise NotAllowed(
            f"{bottle.number} {line.item}: {', '.join(full)}. Not on the relaxed list."
            " Use the full text.",
            "Leave out --short.",
        )
    if line.kind is not Kind.VOLUME or not bottle.size:
        raise NotAllowed(f"{bottle.number}: how many cm³ it holds is not known.", use)
    if bottle.size > LARGEST:
        raise NotAllowed(
            f"{bottle.number} holds {amount(bottle.size, line.kind)}, and a short label is for"
            f" {amount(LARGEST, Kind.VOLUME)} or less.",
            use,
        )


def listed_classes() -> str:
    """The list in one sentence, to be confirmed."""
    rows = "; ".join(f"{name} ({codes.replace(' ', ', ')})" for name, codes in RELAXED.items())
    return f"European law relaxes the wording at 125 cm³ or less for, from memory: {rows}."


def must_confirm() -> NotAllowed:
    """What is raised where nobody has confirmed the list."""
    return NotAllowed(f"--short: {listed_classes()}", CONFIRM)
