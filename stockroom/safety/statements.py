"""The wording of hazard statements, each with how it was come by, and which make others needless.

Every row is: code, mark, wording. The mark says: a = read on an English or German
sheet, c = from memory, not seen. Source: hazard statements of the Globally
Harmonised System, as used by Regulation (EC) No 1272/2008, Annexes II and III;
legal wording changes, so the supplier's own text comes first.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass

from stockroom.errors import BadInput


@dataclass(frozen=True, slots=True)
class Statement:
    """One statement: its code, its wording, and "a" (seen) or "c" (from memory)."""

    code: str
    text: str
    how: str


def _table(rows: str) -> dict[str, Statement]:
    parts = [row.split(maxsplit=2) for row in rows.strip().splitlines()]
    return {code: Statement(code, text, how) for code, how, text in parts}


HAZARD = _table("""
H200 c Unstable explosive
H201 c Explosive; mass explosion hazard
H202 c Explosive; severe projection hazard
H203 c Explosive; fire, blast or projection hazard
H204 c Fire or projection hazard
H205 c May mass explode in fire
H220 c Extremely flammable gas
H221 c Flammable gas
H224 c Extremely flammable liquid and vapour
H225 c Highly flammable liquid and vapour
H226 c Flammable liquid and vapour
H228 c Flammable solid
H240 c Heating may cause an explosion
H241 c Heating may cause a fire or explosion
H242 c Heating may cause a fire
H250 c Catches fire spontaneously if exposed to air
H251 c Self-heating; may catch fire
H252 c Self-heating in large quantities; may catch fire
H260 c In contact with water releases flammable gases which may ignite spontaneously
H261 c In contact with water releases flammable gases
H270 c May cause or intensify fire; oxidiser
H271 a May cause fire or explosion; strong oxidiser
H272 a May intensify fire; oxidiser
H280 c Contains gas under pressure; may explode if heated
H281 c Contains refrigerated gas; may cause cryogenic burns or injury
H290 a May be corrosive to metals
H300 c Fatal if swallowed
H301 a Toxic if swallowed
H302 a Harmful if swallowed
H304 c May be fatal if swallowed and enters airways
H310 c Fatal in contact with skin
H311 a Toxic in contact with skin
H312 a Harmful in contact with skin
H314 a Causes severe skin burns and eye damage
H315 a Causes skin irritation
H317 a May cause an allergic skin reaction
H318 a Causes serious eye damage
H319 a Causes serious eye irritation
H330 a Fatal if inhaled
H331 a Toxic if inhaled
H332 a Harmful if inhaled
H334 a May cause allergy or asthma symptoms or breathing difficulties if inhaled
H335 a May cause respiratory irritation
H336 a May cause drowsiness or dizziness
H340 a May cause genetic defects
H341 a Suspected of causing genetic defects
H350 a May cause cancer
H350i c May cause cancer by inhalation
H351 c Suspected of causing cancer
H360 a May damage fertility or the unborn child
H360F c May damage fertility
H360D c May damage the unborn child
H360FD c May damage fertility. May damage the unborn child
H360Fd c May damage fertility. Suspected of damaging the unborn child
H360Df c May damage the unborn child. Suspected of damaging fertility
H361 c Suspected of damaging fertility or the unborn child
H361f c Suspected of damaging fertility
H361d c Suspected of damaging the unborn child
H361fd c Suspected of damaging fertility. Suspected of damaging the unborn child
H362 c May cause harm to breast-fed children
H370 a Causes damage to organs
H371 a May cause damage to organs
H372 a Causes damage to organs through prolonged or repeated exposure
H373 a May cause damage to organs through prolonged or repeated exposure
H400 a Very toxic to aquatic life
H410 a Very toxic to aquatic life with long lasting effects
H411 c Toxic to aquatic life with long lasting effects
H412 c Harmful to aquatic life with long lasting effects
H413 c May cause long lasting harmful effects to aquatic life
H420 c Harms public health and the environment by destroying ozone in the upper atmosphere
""")

SUPPLEMENTAL = _table("""
EUH001 c Explosive when dry
EUH014 a Reacts violently with water
EUH018 c In use may form flammable or explosive vapour-air mixture
EUH019 a May form explosive peroxides
EUH029 c Contact with water liberates toxic gas
EUH031 a Contact with acids liberates toxic gas
EUH032 a Contact with acids liberates very toxic gas
EUH044 c Risk of explosion if heated under confinement
EUH066 a Repeated exposure may cause skin dryness or cracking
EUH070 c Toxic by eye contact
EUH071 a Corrosive to the respiratory tract
EUH206 a Warning! Do not use together with other products. May release dangerous gases (chlorine)
EUH208 a Contains (name of sensitising substance). May produce an allergic reaction
EUH210 a Safety data sheet available on request
""")
"""EUH019 was later taken out of the regulation (c): kept, since it tells the store-room something.

Source: Annex II of the regulation.
"""

NEEDLESS_BESIDE: dict[str, tuple[str, ...]] = {
    "H314": ("H318", "H315", "H319", "EUH066"),
    "H318": ("H319",),
    "H315": ("EUH066",),
    "H410": ("H400", "H411", "H412", "H413"),
    "H411": ("H412", "H413"),
    "H412": ("H413",),
    "H317": ("EUH208",),
    # H350 is by any route, so "by inhalation" says less
    "H350": ("H350i",),
    "H334": ("EUH208",),
}
"""Which statements one makes needless. Source: CLP Art. 27, from memory; the sheets seen agree."""

_CODE = re.compile(r"\b(?:EU)?H\d{3}[A-Za-z]{0,2}\b")


def statement(code: str) -> Statement:
    """The statement of a code. Raises: BadInput for a code not in the tables."""
    found = HAZARD.get(code) or SUPPLEMENTAL.get(code)
    if found is None:
        raise BadInput(
            f"{code!r} is no hazard statement I know.",
            "Read the code again off the sheet: H314, H360FD, EUH031.",
        )
    return found


def codes_in(text: str) -> tuple[str, ...]:
    """The statement codes written in a text, each once, in the order they stand.

    Raises: BadInput for something that looks like a code and is none.

    >>> codes_in("Danger. H314 Causes severe burns; H335, H314.")
    ('H314', 'H335')
    """
    return tuple(statement(code).code for code in dict.fromkeys(_CODE.findall(text)))


def without_duplicates(codes: Iterable[str]) -> tuple[str, ...]:
    """The codes in order of number, less those another one makes needless.

    H400 stands beside H411, since only H410 says as much.

    >>> without_duplicates(["H318", "H314", "H400", "H410", "H360D", "H360FD"])
    ('H314', 'H360FD', 'H410')
    """
    kept = set(codes)
    needless = {less for code in kept for less in NEEDLESS_BESIDE.get(code, ())}
    needless |= {less for less in kept for code in kept if _says_more(code, less)}
    return tuple(sorted(kept - needless, key=lambda code: (code.startswith("EUH"), code)))


def _says_more(code: str, less: str) -> bool:
    # of two letterings of one number the one with more letters says it all: FD beside D
    head = code.startswith("EUH")
    if head or code == less or code[:4] != less[:4] or code[:4] == "H350":
        return False
    return set(less[4:]) < set(code[4:])
