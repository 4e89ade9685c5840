"""Precautionary statements: their wording, and which few stand on a label.

Codes and wording follow the tenth revised edition of the Globally Harmonised
System, which says "get medical help" in P316 to P319; the European regulation
still prints the older P310 to P315, so a European bottle will differ there.
a = read in the list of that edition, c = from memory.
"""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.safety.statements import Statement

NUMBERING = "GHS, tenth revised edition"
"""Whose numbers the P codes are."""

MOST = 6
"""No more than this many on a label, as a rule. Source: CLP Art. 28, from memory."""


def _table(rows: str) -> dict[str, Statement]:
    parts = [row.split(maxsplit=2) for row in rows.strip().splitlines()]
    return {code: Statement(code, text, how) for code, how, text in parts}


PRECAUTIONS = _table("""
P280 a Wear protective gloves, protective clothing, eye protection and face protection as needed
P305+P351+P338 a IF IN EYES: Rinse cautiously with water for several minutes. Remove contact \
lenses, if present and easy to do. Continue rinsing
P303+P361+P353 a IF ON SKIN (or hair): Take off immediately all contaminated clothing. Rinse \
skin with water
P301+P330+P331 a IF SWALLOWED: Rinse mouth. Do NOT induce vomiting
P304+P340 a IF INHALED: Remove person to fresh air and keep comfortable for breathing
P316 a Get emergency medical help immediately
P210 a Keep away from heat, hot surfaces, sparks, open flames and other ignition sources. No \
smoking
P223 a Do not allow contact with water
P231+P232 a Handle and store contents under inert gas. Protect from moisture
P220 a Keep away from clothing and other combustible materials
P203 a Obtain, read and follow all safety instructions before use
P260 a Do not breathe dust, fume, gas, mist, vapours or spray
P302+P352 a IF ON SKIN: Wash with plenty of water
P301+P317 c IF SWALLOWED: Get medical help
P273 a Avoid release to the environment
P284 a In case of inadequate ventilation wear respiratory protection
P261 a Avoid breathing dust, fume, gas, mist, vapours or spray
P271 a Use only outdoors or in a well-ventilated area
P318 a If exposed or concerned, get medical advice
P333+P317 a If skin irritation or rash occurs: Get medical help
P337+P317 a If eye irritation persists: Get medical help
P332+P317 a If skin irritation occurs: Get medical help
P317 a Get medical help
P319 a Get medical help if you feel unwell
P240 a Ground and bond container and receiving equipment
P233 a Keep container tightly closed
P391 a Collect spillage
P390 a Absorb spillage to prevent material damage
P234 a Keep only in original container
P264 a Wash hands thoroughly after handling
P270 a Do not eat, drink or smoke when using this product
P272 a Contaminated work clothing should not be allowed out of the workplace
P362+P364 a Take off contaminated clothing and wash it before reuse
P370+P378 a In case of fire: use what the supplier's sheet names to extinguish
P403+P233 a Store in a well-ventilated place. Keep container tightly closed
P403+P235 a Store in a well-ventilated place. Keep cool
P405 a Store locked up
P501 a Dispose of contents and container as local rules say
""")
"""In the order they are worth a place: what to wear and first aid, then keeping it away."""

_CORROSIVE = "P260 P280 P301+P330+P331 P303+P361+P353 P305+P351+P338 P316"
_FLAMMABLE = "P210 P233 P240 P280 P303+P361+P353 P370+P378 P403+P235"
_WATER_REACTIVE = "P223 P231+P232 P280 P370+P378"
_OXIDISER = "P210 P220 P280 P370+P378"
_LASTING_HARM = "P203 P280 P318 P405 P501"
_ORGANS = "P260 P264 P270 P319 P501"

CALLED_FOR: dict[str, str] = {
    **dict.fromkeys(("H220", "H221", "H224", "H225", "H226"), _FLAMMABLE),
    "H228": "P210 P240 P280 P370+P378",
    **dict.fromkeys(("H240", "H241", "H242"), "P210 P220 P234 P280 P370+P378"),
    "H250": "P210 P231+P232 P280 P370+P378",
    **dict.fromkeys(("H251", "H252"), "P210 P280"),
    **dict.fromkeys(("H260", "H261"), _WATER_REACTIVE),
    "H270": "P220 P370+P378",
    **dict.fromkeys(("H271", "H272"), _OXIDISER),
    "H290": "P234 P390",
    **dict.fromkeys(("H300", "H301"), "P264 P270 P301+P317 P316 P405 P501"),
    "H302": "P264 P270 P301+P317",
    "H304": "P301+P330+P331 P316 P405 P501",
    **dict.fromkeys(("H310", "H311"), "P280 P302+P352 P316 P405 P501"),
    "H312": "P280 P302+P352 P317",
    "H314": _CORROSIVE,
    "H315": "P264 P280 P302+P352 P332+P317 P362+P364",
    "H317": "P261 P272 P280 P302+P352 P333+P317 P362+P364",
    "H318": "P280 P305+P351+P338 P317",
    "H319": "P264 P280 P305+P351+P338 P337+P317",
    "H330": "P260 P271 P284 P304+P340 P316 P403+P233 P405",
    "H331": "P261 P271 P304+P340 P316 P403+P233 P405",
    "H332": "P261 P271 P304+P340 P317",
    "H334": "P260 P284 P304+P340 P316",
    **dict.fromkeys(("H335", "H336"), "P261 P271 P304+P340 P319 P403+P233 P405"),
    **dict.fromkeys(("H340", "H341", "H350", "H351", "H360", "H361", "H362"), _LASTING_HARM),
    "H370": "P260 P264 P270 P316 P405 P501",
    **dict.fromkeys(("H371", "H372", "H373"), _ORGANS),
    **dict.fromkeys(("H400", "H410", "H411"), "P273 P391 P501"),
    **dict.fromkeys(("H412", "H413"), "P273 P501"),
}
"""The precautions a hazard statement calls for; lettered codes as their number.

Sets for H314, H318, H272, H335, H372, H373 and H410 as read on suppliers' sheets
(a), in the newer numbering; the others from memory (c).
"""

# a stronger form of the same advice takes the weaker one's place
_STRONGER = {
    "P260": ("P261",),
    "P303+P361+P353": ("P302+P352",),
    "P301+P330+P331": ("P301+P317",),
    "P316": ("P317", "P319", "P301+P317", "P332+P317", "P333+P317", "P337+P317"),
    "P403+P233": ("P233",),
}


def precautions_for(statements: Iterable[str]) -> tuple[str, ...]:
    """At most six P codes for these H codes, the most pressing first.

    >>> precautions_for(["H318"])
    ('P280', 'P305+P351+P338', 'P317')
    """
    asked = {code for each in statements for code in CALLED_FOR.get(each[:4], "").split()}
    asked -= {less for code in asked for less in _STRONGER.get(code, ())}
    return tuple(code for code in PRECAUTIONS if code in asked)[:MOST]
