"""Titrations of the teaching laboratory: what is in the burette, what in the flask, in what ratio.

Each is balanced on paper once and held here as the moles in the flask that one
mole from the burette uses up. Source of the ratios: the equations themselves; those of
permanganate with oxalate and peroxide, hydrogen phthalate, carbonate, iodate,
bromate, peroxide and iodine with thiosulfate stand in the British and Indian
Pharmacopoeias and in OpenStax, Chemistry 2e (seen); the others are common
knowledge of any analytical text, from memory, and a test balances all of them.
"""

from __future__ import annotations

from dataclasses import dataclass
from difflib import get_close_matches

from stockroom.errors import UnknownName
from stockroom.measure.reading import tidy


@dataclass(frozen=True, slots=True)
class Titration:
    """One reaction: `per_titrant` is the mol in the flask for one mol from the burette.

    `titrant` and `titrand` are substances with their formulas; `caution` belongs to
    the working, and is shown beside the sum.
    """

    titrant: str
    titrant_formula: str
    titrand: str
    titrand_formula: str
    per_titrant: float
    kind: str
    equation: str
    caution: str = ""

    @property
    def name(self) -> str:
        """What it is called: "thiosulfate on iodate"."""
        return f"{self.titrant} on {self.titrand}"


ACID_BASE, PERMANGANATE, IODOMETRIC, SILVER = "acid–base", "permanganate", "iodometric", "silver"

_ACID = "In dilute sulfuric acid, never in hydrochloric (chlorine): eye protection."
_HOT = f"Warm to about 60 °C; hot glass. {_ACID}"
_IODATE = "Excess iodide and acid in the flask; titrate at once, iodine is lost to the air."
_BLEACH = "Acid sets chlorine free from bleach: add iodide first, then acid, with good ventilation."
_SILVER = "Silver stains skin: gloves; collect the silver residues."
_EYES = "Eye protection; fill the burette below eye level."


def _row(
    kind: str, titrant: str, titrand: str, per_titrant: float, equation: str, caution: str = _EYES
) -> Titration:
    (in_burette, burette_formula), (in_flask, flask_formula) = (
        text.rsplit(" ", 1) for text in (titrant, titrand)
    )
    return Titration(
        in_burette, burette_formula, in_flask, flask_formula, per_titrant, kind, equation, caution
    )


TITRATIONS: tuple[Titration, ...] = (
    _row(ACID_BASE, "sodium hydroxide NaOH", "hydrochloric acid HCl", 1,
         "NaOH + HCl -> NaCl + H2O"),
    _row(ACID_BASE, "sodium hydroxide NaOH", "nitric acid HNO3", 1,
         "NaOH + HNO3 -> NaNO3 + H2O"),
    _row(ACID_BASE, "sodium hydroxide NaOH", "sulfuric acid H2SO4", 1 / 2,
         "2 NaOH + H2SO4 -> Na2SO4 + 2 H2O"),
    _row(ACID_BASE, "sodium hydroxide NaOH", "acetic acid C2H4O2", 1,
         "NaOH + C2H4O2 -> C2H3O2Na + H2O"),
    _row(ACID_BASE, "sodium hydroxide NaOH", "oxalic acid H2C2O4", 1 / 2,
         "2 NaOH + H2C2O4 -> Na2C2O4 + 2 H2O"),
    _row(ACID_BASE, "sodium hydroxide NaOH", "potassium hydrogen phthalate C8H5KO4", 1,
         "NaOH + C8H5KO4 -> C8H4KNaO4 + H2O"),
    _row(ACID_BASE, "sodium hydroxide NaOH", "citric acid C6H8O7", 1 / 3,
         "3 NaOH + C6H8O7 -> C6H5O7Na3 + 3 H2O"),
    _row(ACID_BASE, "potassium hydroxide KOH", "hydrochloric acid HCl", 1,
         "KOH + HCl -> KCl + H2O"),
    _row(ACID_BASE, "hydrochloric acid HCl", "sodium hydroxide NaOH", 1,
         "HCl + NaOH -> NaCl + H2O"),
    _row(ACID_BASE, "hydrochloric acid HCl", "potassium hydroxide KOH", 1,
         "HCl + KOH -> KCl + H2O"),
    _row(ACID_BASE, "hydrochloric acid HCl", "sodium carbonate Na2CO3", 1 / 2,
         "2 HCl + Na2CO3 -> 2 NaCl + H2O + CO2"),
    _row(ACID_BASE, "hydrochloric acid HCl", "sodium hydrogencarbonate NaHCO3", 1,
         "HCl + NaHCO3 -> NaCl + H2O + CO2"),
    _row(ACID_BASE, "hydrochloric acid HCl", "ammonia NH3", 1,
         "HCl + NH3 -> NH4Cl"),
    _row(ACID_BASE, "hydrochloric acid HCl", "calcium hydroxide Ca(OH)2", 1 / 2,
         "2 HCl + Ca(OH)2 -> CaCl2 + 2 H2O"),
    _row(ACID_BASE, "hydrochloric acid HCl", "borax Na2B4O7", 1 / 2,
         "2 HCl + Na2B4O7 + 5 H2O -> 2 NaCl + 4 H3BO3"),
    _row(ACID_BASE, "sulfuric acid H2SO4", "sodium hydroxide NaOH", 2,
         "H2SO4 + 2 NaOH -> Na2SO4 + 2 H2O"),
    _row(ACID_BASE, "sulfuric acid H2SO4", "sodium carbonate Na2CO3", 1,
         "H2SO4 + Na2CO3 -> Na2SO4 + H2O + CO2"),
    _row(PERMANGANATE, "permanganate KMnO4", "oxalate Na2C2O4", 5 / 2,
         "2 KMnO4 + 5 Na2C2O4 + 8 H2SO4 -> K2SO4 + 2 MnSO4 + 5 Na2SO4 + 10 CO2 + 8 H2O", _HOT),
    _row(PERMANGANATE, "permanganate KMnO4", "oxalic acid H2C2O4", 5 / 2,
         "2 KMnO4 + 5 H2C2O4 + 3 H2SO4 -> K2SO4 + 2 MnSO4 + 10 CO2 + 8 H2O", _HOT),
    _row(PERMANGANATE, "permanganate KMnO4", "iron(II) FeSO4", 5,
         "2 KMnO4 + 10 FeSO4 + 8 H2SO4 -> K2SO4 + 2 MnSO4 + 5 Fe2(SO4)3 + 8 H2O", _ACID),
    _row(PERMANGANATE, "permanganate KMnO4", "hydrogen peroxide H2O2", 5 / 2,
         "2 KMnO4 + 5 H2O2 + 3 H2SO4 -> K2SO4 + 2 MnSO4 + 5 O2 + 8 H2O", _ACID),
    _row(PERMANGANATE, "permanganate KMnO4", "nitrite NaNO2", 5 / 2,
         "2 KMnO4 + 5 NaNO2 + 3 H2SO4 -> K2SO4 + 2 MnSO4 + 5 NaNO3 + 3 H2O", _ACID),
    _row(IODOMETRIC, "thiosulfate Na2S2O3", "iodine I2", 1 / 2,
         "2 Na2S2O3 + I2 -> Na2S4O6 + 2 NaI"),
    _row(IODOMETRIC, "thiosulfate Na2S2O3", "iodate KIO3", 1 / 6,
         "6 Na2S2O3 + KIO3 + 6 HCl -> 3 Na2S4O6 + KI + 6 NaCl + 3 H2O", _IODATE),
    _row(IODOMETRIC, "thiosulfate Na2S2O3", "bromate KBrO3", 1 / 6,
         "6 Na2S2O3 + KBrO3 + 6 HCl -> 3 Na2S4O6 + KBr + 6 NaCl + 3 H2O", _IODATE),
    _row(IODOMETRIC, "thiosulfate Na2S2O3", "dichromate K2Cr2O7", 1 / 6,
         "6 Na2S2O3 + K2Cr2O7 + 14 HCl -> 3 Na2S4O6 + 2 CrCl3 + 2 KCl + 6 NaCl + 7 H2O",
         "Dichromate is toxic and may cause cancer: gloves; collect chromium residues."),
    _row(IODOMETRIC, "thiosulfate Na2S2O3", "hydrogen peroxide H2O2", 1 / 2,
         "2 Na2S2O3 + H2O2 + 2 HCl -> Na2S4O6 + 2 NaCl + 2 H2O", _IODATE),
    _row(IODOMETRIC, "thiosulfate Na2S2O3", "hypochlorite NaOCl", 1 / 2,
         "2 Na2S2O3 + NaOCl + 2 HCl -> Na2S4O6 + 3 NaCl + H2O", _BLEACH),
    _row(IODOMETRIC, "thiosulfate Na2S2O3", "copper(II) CuSO4", 1,
         "2 Na2S2O3 + 2 CuSO4 + 4 KI -> Na2S4O6 + 2 CuI + 2 K2SO4 + 2 NaI",
         "Collect copper residues."),
    _row(IODOMETRIC, "thiosulfate Na2S2O3", "permanganate KMnO4", 1 / 5,
         "10 Na2S2O3 + 2 KMnO4 + 16 HCl -> 5 Na2S4O6 + 2 MnCl2 + 2 KCl + 10 NaCl + 8 H2O",
         _IODATE),
    _row(IODOMETRIC, "iodine I2", "ascorbic acid C6H8O6", 1,
         "I2 + C6H8O6 -> 2 HI + C6H6O6"),
    _row(IODOMETRIC, "iodine I2", "thiosulfate Na2S2O3", 2,
         "I2 + 2 Na2S2O3 -> Na2S4O6 + 2 NaI"),
    _row(IODOMETRIC, "iodine I2", "sulfite Na2SO3", 1,
         "I2 + Na2SO3 + H2O -> Na2SO4 + 2 HI"),
    _row(SILVER, "silver nitrate AgNO3", "chloride NaCl", 1,
         "AgNO3 + NaCl -> AgCl + NaNO3", _SILVER),
    _row(SILVER, "silver nitrate AgNO3", "bromide KBr", 1,
         "AgNO3 + KBr -> AgBr + KNO3", _SILVER),
    _row(SILVER, "silver nitrate AgNO3", "iodide KI", 1,
         "AgNO3 + KI -> AgI + KNO3", _SILVER),
    _row(SILVER, "thiocyanate KSCN", "silver nitrate AgNO3", 1,
         "KSCN + AgNO3 -> AgSCN + KNO3", _SILVER),
)  # fmt: skip
"""Every titration known, by kind; hydrates and other salts of the same ion count alike."""


# what else the bench calls them; the salt named above stands for its ion
_ALSO = {
    "hydroxide": "sodium hydroxide",
    "naoh": "sodium hydroxide",
    "koh": "potassium hydroxide",
    "hcl": "hydrochloric acid",
    "hydrochloric": "hydrochloric acid",
    "h2so4": "sulfuric acid",
    "hno3": "nitric acid",
    "khp": "potassium hydrogen phthalate",
    "phthalate": "potassium hydrogen phthalate",
    "carbonate": "sodium carbonate",
    "na2co3": "sodium carbonate",
    "kmno4": "permanganate",
    "potassium permanganate": "permanganate",
    "sodium oxalate": "oxalate",
    "na2c2o4": "oxalate",
    "iron": "iron(II)",
    "fe2+": "iron(II)",
    "iron(ii) sulfate": "iron(II)",
    "ammonium iron(ii) sulfate": "iron(II)",
    "peroxide": "hydrogen peroxide",
    "h2o2": "hydrogen peroxide",
    "na2s2o3": "thiosulfate",
    "sodium thiosulfate": "thiosulfate",
    "thio": "thiosulfate",
    "hypo": "thiosulfate",
    "kio3": "iodate",
    "potassium iodate": "iodate",
    "potassium bromate": "bromate",
    "potassium dichromate": "dichromate",
    "k2cr2o7": "dichromate",
    "i2": "iodine",
    "iodine in iodide": "iodine",
    "bleach": "hypochlorite",
    "sodium hypochlorite": "hypochlorite",
    "copper": "copper(II)",
    "copper(ii) sulfate": "copper(II)",
    "silver": "silver nitrate",
    "agno3": "silver nitrate",
    "sodium chloride": "chloride",
    "nacl": "chloride",
    "potassium iodide": "iodide",
    "potassium bromide": "bromide",
    "potassium thiocyanate": "thiocyanate",
    "ethanoic acid": "acetic acid",
    "vitamin c": "ascorbic acid",
    "sodium sulfite": "sulfite",
}


def titration_of(text: str) -> Titration:
    """The titration called so: "thiosulfate on iodate", "KMnO4 on Fe2+", "NaOH / KHP".

    What is in the burette comes first. Raises: UnknownName with the nearest three.
    """
    plain = tidy(text).lower()
    for between in (" on ", " against ", " with ", "/", "–", " - "):
        burette, found, flask = plain.partition(between)
        if found:
            held = _find(_proper(burette), _proper(flask))
            if held is not None:
                return held
            break
    names = {each.name.lower(): each.name for each in TITRATIONS}
    near = ", ".join(names[one] for one in get_close_matches(plain, names, n=3, cutoff=0.3))
    raise UnknownName(
        f'No titration "{text}" is held.',
        f"Nearest: {near}. The burette's comes first." if near else "See: stockroom titrate",
    )


def _find(burette: str, flask: str) -> Titration | None:
    wanted = (burette.lower(), flask.lower())
    return next(
        (each for each in TITRATIONS if (each.titrant.lower(), each.titrand.lower()) == wanted),
        None,
    )


def _proper(word: str) -> str:
    return _ALSO.get(word.strip(), word.strip())
