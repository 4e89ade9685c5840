"""Titrations of the teaching laboratory: what is in the burette, what in the flask, in what ratio.

Each is one line, "BURETTE on FLASK: equation", with the burette's formula first in the
equation and the flask's second; the ratio is counted from it, and a test balances every
one. Source: the equations themselves. Those of permanganate with oxalate and peroxide,
hydrogen phthalate, carbonate, iodate, bromate, peroxide and iodine with thiosulfate stand
in the British and Indian Pharmacopoeias and in OpenStax, Chemistry 2e (seen); the others
are common knowledge of any analytical text, from memory. What each is called is in
`reaction_names.py`, and which salts may stand for which in `reaction_forms.py`.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Side:
    """One substance of a reaction: its name there, its formula, and the equivalents in a mole.

    `equivalents` is None where normality is not used.
    """

    name: str
    formula: str
    equivalents: float | None


@dataclass(frozen=True, slots=True)
class Titration:
    """One reaction: `per_titrant` is the mol in the flask for one mol from the burette.

    `titrant` and `titrand` are substances with their formulas; `equivalents` are those in
    one mole of titrant here, None where normality is not used; `primary` says that the
    titrand's very formula is what is weighed as a standard; `end_point` is "first end
    point" and the like where there are two; `caution` belongs to the working.
    """

    titrant: str
    titrant_formula: str
    titrand: str
    titrand_formula: str
    per_titrant: float
    kind: str
    equation: str
    caution: str = ""
    equivalents: float | None = 1.0
    primary: bool = False
    end_point: str = ""

    @property
    def name(self) -> str:
        """What it is called: "thiosulfate on iodate"."""
        ending = f", {self.end_point}" if self.end_point else ""
        return f"{self.titrant} on {self.titrand}{ending}"

    @property
    def burette(self) -> Side:
        """What is in the burette."""
        return Side(self.titrant, self.titrant_formula, self.equivalents)

    @property
    def flask(self) -> Side:
        """What is in the flask."""
        shared = self.equivalents and self.equivalents / self.per_titrant
        return Side(self.titrand, self.titrand_formula, shared)


ACID_BASE, PERMANGANATE, OXIDISING = "acid–base", "permanganate", "dichromate and other oxidisers"
IODOMETRIC, SILVER, COMPLEX = "iodometric", "silver", "EDTA"

_ACID = "In dilute sulfuric acid, never in hydrochloric (chlorine): eye protection."
_HOT = f"Warm to about 60 °C; hot glass. {_ACID}"
_IODATE = "Excess iodide and acid in the flask; titrate at once, iodine is lost to the air."
_BLEACH = "Acid sets chlorine free from bleach: add iodide first, then acid, with good ventilation."
_HALOGEN = "Chlorine and bromine are toxic: fume cupboard; excess iodide in the flask first."
_CHROMIUM = "Dichromate is toxic and may cause cancer: gloves; collect chromium residues."
_SULFUR = "Acid sets sulfur dioxide free: good ventilation; keep it out of the air while titrating."
_ARSENIC = "Arsenic is a poison and causes cancer: gloves, no powder in the air; collect residues."
_SILVER = "Silver stains skin: gloves; collect the silver residues."
_BUFFER = "The ammonia buffer stings eyes and nose: good ventilation, eye protection."
_EYES = "Eye protection; fill the burette below eye level."

_ACIDS_AND_BASES = """
sodium hydroxide on hydrochloric acid: NaOH + HCl -> NaCl + H2O
sodium hydroxide on nitric acid: NaOH + HNO3 -> NaNO3 + H2O
sodium hydroxide on perchloric acid: NaOH + HClO4 -> NaClO4 + H2O
sodium hydroxide on sulfuric acid: 2 NaOH + H2SO4 -> Na2SO4 + 2 H2O
sodium hydroxide on sodium hydrogensulfate: NaOH + NaHSO4 -> Na2SO4 + H2O
sodium hydroxide on sulfamic acid: NaOH + H3NO3S -> NaH2NO3S + H2O
sodium hydroxide on boric acid: NaOH + H3BO3 -> NaB(OH)4
sodium hydroxide on phosphoric acid, first end point: NaOH + H3PO4 -> NaH2PO4 + H2O
sodium hydroxide on phosphoric acid, second end point: 2 NaOH + H3PO4 -> Na2HPO4 + 2 H2O
sodium hydroxide on formic acid: NaOH + CH2O2 -> CHO2Na + H2O
sodium hydroxide on acetic acid: NaOH + C2H4O2 -> C2H3O2Na + H2O
sodium hydroxide on lactic acid: NaOH + C3H6O3 -> C3H5O3Na + H2O
sodium hydroxide on benzoic acid: NaOH + C7H6O2 -> C7H5O2Na + H2O
sodium hydroxide on salicylic acid: NaOH + C7H6O3 -> C7H5O3Na + H2O
sodium hydroxide on acetylsalicylic acid: NaOH + C9H8O4 -> C9H7O4Na + H2O
sodium hydroxide on oxalic acid: 2 NaOH + H2C2O4 -> Na2C2O4 + 2 H2O
sodium hydroxide on succinic acid: 2 NaOH + C4H6O4 -> C4H4O4Na2 + 2 H2O
sodium hydroxide on malic acid: 2 NaOH + C4H6O5 -> C4H4O5Na2 + 2 H2O
sodium hydroxide on tartaric acid: 2 NaOH + C4H6O6 -> C4H4O6Na2 + 2 H2O
sodium hydroxide on citric acid: 3 NaOH + C6H8O7 -> C6H5O7Na3 + 3 H2O
sodium hydroxide on potassium hydrogen phthalate: NaOH + C8H5KO4 -> C8H4KNaO4 + H2O
sodium hydroxide on potassium hydrogentartrate: NaOH + KC4H5O6 -> KNaC4H4O6 + H2O
sodium hydroxide on potassium hydrogen iodate: NaOH + KH(IO3)2 -> KIO3 + NaIO3 + H2O
potassium hydroxide on hydrochloric acid: KOH + HCl -> KCl + H2O
potassium hydroxide on nitric acid: KOH + HNO3 -> KNO3 + H2O
potassium hydroxide on sulfuric acid: 2 KOH + H2SO4 -> K2SO4 + 2 H2O
potassium hydroxide on acetic acid: KOH + C2H4O2 -> C2H3O2K + H2O
potassium hydroxide on oxalic acid: 2 KOH + H2C2O4 -> K2C2O4 + 2 H2O
potassium hydroxide on potassium hydrogen phthalate: KOH + C8H5KO4 -> C8H4K2O4 + H2O
hydrochloric acid on sodium carbonate: 2 HCl + Na2CO3 -> 2 NaCl + H2O + CO2
hydrochloric acid on sodium carbonate, first end point: HCl + Na2CO3 -> NaCl + NaHCO3
hydrochloric acid on potassium carbonate: 2 HCl + K2CO3 -> 2 KCl + H2O + CO2
hydrochloric acid on calcium carbonate: 2 HCl + CaCO3 -> CaCl2 + H2O + CO2
hydrochloric acid on sodium hydrogencarbonate: HCl + NaHCO3 -> NaCl + H2O + CO2
hydrochloric acid on potassium hydrogencarbonate: HCl + KHCO3 -> KCl + H2O + CO2
hydrochloric acid on ammonia: HCl + NH3 -> NH4Cl
hydrochloric acid on calcium hydroxide: 2 HCl + Ca(OH)2 -> CaCl2 + 2 H2O
hydrochloric acid on barium hydroxide: 2 HCl + Ba(OH)2 -> BaCl2 + 2 H2O
hydrochloric acid on borax: 2 HCl + Na2B4O7 + 5 H2O -> 2 NaCl + 4 H3BO3
hydrochloric acid on Tris: HCl + C4H11NO3 -> C4H12NO3Cl
sulfuric acid on sodium carbonate: H2SO4 + Na2CO3 -> Na2SO4 + H2O + CO2
sulfuric acid on potassium carbonate: H2SO4 + K2CO3 -> K2SO4 + H2O + CO2
sulfuric acid on sodium hydrogencarbonate: H2SO4 + 2 NaHCO3 -> Na2SO4 + 2 H2O + 2 CO2
sulfuric acid on ammonia: H2SO4 + 2 NH3 -> (NH4)2SO4
sulfuric acid on borax: H2SO4 + Na2B4O7 + 5 H2O -> Na2SO4 + 4 H3BO3
nitric acid on sodium carbonate: 2 HNO3 + Na2CO3 -> 2 NaNO3 + H2O + CO2
"""
_HOT_OXALATE = """
permanganate on oxalate: \
2 KMnO4 + 5 Na2C2O4 + 8 H2SO4 -> K2SO4 + 2 MnSO4 + 5 Na2SO4 + 10 CO2 + 8 H2O
permanganate on oxalic acid: 2 KMnO4 + 5 H2C2O4 + 3 H2SO4 -> K2SO4 + 2 MnSO4 + 10 CO2 + 8 H2O
"""
_WITH_PERMANGANATE = """
permanganate on iron(II): 2 KMnO4 + 10 FeSO4 + 8 H2SO4 -> K2SO4 + 2 MnSO4 + 5 Fe2(SO4)3 + 8 H2O
permanganate on hydrogen peroxide: 2 KMnO4 + 5 H2O2 + 3 H2SO4 -> K2SO4 + 2 MnSO4 + 5 O2 + 8 H2O
permanganate on nitrite: 2 KMnO4 + 5 NaNO2 + 3 H2SO4 -> K2SO4 + 2 MnSO4 + 5 NaNO3 + 3 H2O
"""
_DICHROMATE_ON_IRON = """
dichromate on iron(II): K2Cr2O7 + 6 FeSO4 + 7 H2SO4 -> Cr2(SO4)3 + 3 Fe2(SO4)3 + K2SO4 + 7 H2O
"""
_OTHER_OXIDISERS = """
cerium(IV) on iron(II): 2 Ce(SO4)2 + 2 FeSO4 -> Ce2(SO4)3 + Fe2(SO4)3
cerium(IV) on oxalate: 2 Ce(SO4)2 + Na2C2O4 -> Ce2(SO4)3 + Na2SO4 + 2 CO2
cerium(IV) on hydrogen peroxide: 2 Ce(SO4)2 + H2O2 -> Ce2(SO4)3 + H2SO4 + O2
iodate on ascorbic acid: KIO3 + 3 C6H8O6 -> KI + 3 C6H6O6 + 3 H2O
DCPIP on ascorbic acid: C12H7Cl2NO2 + C6H8O6 -> C12H9Cl2NO2 + C6H6O6
"""
_IODINE = """
thiosulfate on iodine: 2 Na2S2O3 + I2 -> Na2S4O6 + 2 NaI
iodine on ascorbic acid: I2 + C6H8O6 -> 2 HI + C6H6O6
iodine on tin(II): I2 + SnCl2 + 2 HCl -> SnCl4 + 2 HI
iodine on hydrogen sulfide: I2 + H2S -> S + 2 HI
"""
_IODINE_ON_SULFITES = """
iodine on sulfite: I2 + Na2SO3 + H2O -> Na2SO4 + 2 HI
iodine on hydrogensulfite: I2 + NaHSO3 + H2O -> NaHSO4 + 2 HI
iodine on metabisulfite: 2 I2 + Na2S2O5 + 3 H2O -> 2 NaHSO4 + 4 HI
iodine on sulfur dioxide: I2 + SO2 + 2 H2O -> H2SO4 + 2 HI
"""
_OXIDISERS_ON_ARSENIC = """
permanganate on arsenic(III) oxide: \
4 KMnO4 + 5 As2O3 + 6 H2SO4 + 9 H2O -> 2 K2SO4 + 4 MnSO4 + 10 H3AsO4
cerium(IV) on arsenic(III) oxide: 4 Ce(SO4)2 + As2O3 + 5 H2O -> 2 Ce2(SO4)3 + 2 H3AsO4 + 2 H2SO4
bromate on arsenic(III) oxide: 2 KBrO3 + 3 As2O3 + 9 H2O -> 2 KBr + 6 H3AsO4
iodine on arsenic(III) oxide: 2 I2 + As2O3 + 5 H2O -> 2 H3AsO4 + 4 HI
"""
_SETS_IODINE_FREE = """
thiosulfate on iodate: 6 Na2S2O3 + KIO3 + 6 HCl -> 3 Na2S4O6 + KI + 6 NaCl + 3 H2O
thiosulfate on bromate: 6 Na2S2O3 + KBrO3 + 6 HCl -> 3 Na2S4O6 + KBr + 6 NaCl + 3 H2O
thiosulfate on hydrogen peroxide: 2 Na2S2O3 + H2O2 + 2 HCl -> Na2S4O6 + 2 NaCl + 2 H2O
thiosulfate on permanganate: \
10 Na2S2O3 + 2 KMnO4 + 16 HCl -> 5 Na2S4O6 + 2 MnCl2 + 2 KCl + 10 NaCl + 8 H2O
thiosulfate on persulfate: 2 Na2S2O3 + K2S2O8 + 2 KI -> Na2S4O6 + 2 NaI + 2 K2SO4
thiosulfate on iron(III): 2 Na2S2O3 + 2 FeCl3 + 2 KI -> Na2S4O6 + 2 FeCl2 + 2 KCl + 2 NaI
thiosulfate on dissolved oxygen: 4 Na2S2O3 + O2 + 4 HCl -> 2 Na2S4O6 + 4 NaCl + 2 H2O
"""
_SETS_IODINE_FREE_FROM_CHROMIUM = """
thiosulfate on dichromate: \
6 Na2S2O3 + K2Cr2O7 + 14 HCl -> 3 Na2S4O6 + 2 CrCl3 + 2 KCl + 6 NaCl + 7 H2O
"""
_SETS_IODINE_FREE_FROM_BLEACH = """
thiosulfate on hypochlorite: 2 Na2S2O3 + NaOCl + 2 HCl -> Na2S4O6 + 3 NaCl + H2O
thiosulfate on calcium hypochlorite: \
4 Na2S2O3 + Ca(OCl)2 + 4 HCl -> 2 Na2S4O6 + CaCl2 + 4 NaCl + 2 H2O
"""
_SETS_IODINE_FREE_AS_A_HALOGEN = """
thiosulfate on bromine: 2 Na2S2O3 + Br2 + 2 KI -> Na2S4O6 + 2 NaI + 2 KBr
thiosulfate on chlorine: 2 Na2S2O3 + Cl2 + 2 KI -> Na2S4O6 + 2 NaI + 2 KCl
"""
_SETS_IODINE_FREE_WITH_COPPER = """
thiosulfate on copper(II): 2 Na2S2O3 + 2 CuSO4 + 4 KI -> Na2S4O6 + 2 CuI + 2 K2SO4 + 2 NaI
"""
_WITH_SILVER = """
silver nitrate on chloride: AgNO3 + NaCl -> AgCl + NaNO3
silver nitrate on bromide: AgNO3 + KBr -> AgBr + KNO3
silver nitrate on iodide: AgNO3 + KI -> AgI + KNO3
silver nitrate on thiocyanate: AgNO3 + KSCN -> AgSCN + KNO3
"""
_WITH_EDTA = """
EDTA on calcium: C10H14N2Na2O8 + CaCl2 -> CaC10H12N2Na2O8 + 2 HCl
EDTA on magnesium: C10H14N2Na2O8 + MgSO4 -> MgC10H12N2Na2O8 + H2SO4
EDTA on zinc: C10H14N2Na2O8 + ZnSO4 -> ZnC10H12N2Na2O8 + H2SO4
EDTA on copper(II): C10H14N2Na2O8 + CuSO4 -> CuC10H12N2Na2O8 + H2SO4
"""

_TERM = re.compile(r"(?:(?P<count>[0-9]+) )?(?P<formula>\S+)")
_ONE_OF_TWO = re.compile(r"(?P<flask>.+), (?P<end_point>\w+ end point)")
# of a mole of titrant as it reacts here; 1 where it is not named
_EQUIVALENTS: dict[str, float | None] = {
    "sulfuric acid": 2, "permanganate": 5, "dichromate": 6, "iodine": 2, "iodate": 6,
    "bromate": 6, "DCPIP": 2,
    # a mole of it takes one of metal whatever the charge, so its normality is not used
    "EDTA": None,
}  # fmt: skip
_PRIMARY = frozenset(
    {
        "potassium hydrogen phthalate", "potassium hydrogentartrate", "potassium hydrogen iodate",
        "benzoic acid", "sulfamic acid", "succinic acid", "acetylsalicylic acid", "Tris",
        "sodium carbonate", "potassium hydrogencarbonate", "calcium carbonate", "oxalate",
        "iodate", "bromate", "dichromate", "iodine", "arsenic(III) oxide", "ascorbic acid",
        "silver nitrate", "chloride",
    }
)  # fmt: skip
"""What is weighed as it stands in the equation, without water: common practice, no source."""

# gases, and what does not dissolve
_NEVER_IN_BURETTE = frozenset({"calcium carbonate", "hydrogen sulfide", "sulfur dioxide"})


def _rows(kind: str, table: str, caution: str = _EYES) -> Iterator[Titration]:
    """The titrations of a table, each followed by the other way round where that can be done."""
    for line in table.strip().splitlines():
        name, equation = line.split(": ")
        row = _row(kind, name, equation, caution)
        yield row
        if _turns(row):
            yield _turned(row)


def _turns(row: Titration) -> bool:
    # another oxidiser run into thiosulfate would take it beyond tetrathionate; and a first
    # end point has one direction alone
    beyond = row.titrant == "thiosulfate" and row.titrand not in ("iodine", "iodate")
    return not (beyond or row.end_point or row.titrand in _NEVER_IN_BURETTE)


def _row(kind: str, name: str, equation: str, caution: str) -> Titration:
    titrant, titrand = name.split(" on ")
    two = _ONE_OF_TWO.fullmatch(titrand)
    titrand, end_point = (two["flask"], two["end_point"]) if two else (titrand, "")
    (burette, burette_formula), (flask, flask_formula) = _first_two(equation)
    return Titration(
        titrant, burette_formula, titrand, flask_formula, flask / burette, kind, equation, caution,
        _EQUIVALENTS.get(titrant, 1), titrand in _PRIMARY, end_point,
    )  # fmt: skip


def _turned(row: Titration) -> Titration:
    """The same reaction with the flask's substance in the burette."""
    left, right = row.equation.split(" -> ")
    burette, flask, *others = left.split(" + ")
    return Titration(
        row.titrand, row.titrand_formula, row.titrant, row.titrant_formula, 1 / row.per_titrant,
        row.kind, f"{' + '.join([flask, burette, *others])} -> {right}", row.caution,
        row.flask.equivalents, row.titrant in _PRIMARY,
    )  # fmt: skip


def _first_two(equation: str) -> list[tuple[int, str]]:
    terms = (_TERM.fullmatch(term) for term in equation.split(" -> ")[0].split(" + ")[:2])
    return [(int(term["count"] or 1), term["formula"]) for term in terms if term]


TITRATIONS: tuple[Titration, ...] = (
    *_rows(ACID_BASE, _ACIDS_AND_BASES),
    *_rows(PERMANGANATE, _HOT_OXALATE, _HOT),
    *_rows(PERMANGANATE, _WITH_PERMANGANATE, _ACID),
    *_rows(OXIDISING, _DICHROMATE_ON_IRON, _CHROMIUM),
    *_rows(OXIDISING, _OTHER_OXIDISERS),
    *_rows(OXIDISING, _OXIDISERS_ON_ARSENIC, _ARSENIC),
    *_rows(IODOMETRIC, _IODINE),
    *_rows(IODOMETRIC, _IODINE_ON_SULFITES, _SULFUR),
    *_rows(IODOMETRIC, _SETS_IODINE_FREE, _IODATE),
    *_rows(IODOMETRIC, _SETS_IODINE_FREE_FROM_CHROMIUM, _CHROMIUM),
    *_rows(IODOMETRIC, _SETS_IODINE_FREE_FROM_BLEACH, _BLEACH),
    *_rows(IODOMETRIC, _SETS_IODINE_FREE_AS_A_HALOGEN, _HALOGEN),
    *_rows(IODOMETRIC, _SETS_IODINE_FREE_WITH_COPPER, "Collect copper residues."),
    *_rows(SILVER, _WITH_SILVER, _SILVER),
    *_rows(COMPLEX, _WITH_EDTA, _BUFFER),
)
"""Every titration known, by kind; hydrates and other salts of the same ion count alike."""
