"""Reactions in the trade that a normality may refer to, with the equivalents in one mole.

Each row is a half-equation (or the neutralisation, the precipitation, or the cations
alone where their charge is what counts) for what is dissolved; the equivalents follow
from it by counting, and a test counts them and balances every row. An equivalent is what
gives or takes one H+, one electron or one unit of charge. Source: IUPAC, Compendium of
Analytical Nomenclature, on equivalent entities, from memory; the half-equations are
common knowledge, from memory.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Reaction:
    """One reading of a normality: who takes part, how it is said, and what is counted.

    `names` are lower-case names and formulas of substances. `words` are what somebody may
    write for this row and no other of the substance, `kinds` what may fit several; both
    lower case. `said` is a wording that is read back as this very row.
    """

    names: tuple[str, ...]
    change: str
    per_mole: int
    said: str
    words: frozenset[str]
    kinds: frozenset[str]


# words that name a kind of reaction: enough where one row of the substance has them
_KINDS = {
    "#acid": "acid-base;acid base;neutralisation;neutralization;neutralising;as an acid;"
    "as a base;as an alkali;acidimetry;alkalimetry;acidimetric;h+;oh-;protons",
    "#redox": "redox;oxidation;reduction;oxidising;oxidizing;reducing;oxidant;reductant;electrons",
    "#iodine": "iodometric;iodometry;iodimetric;iodimetry;thiosulfate;thiosulphate;"
    "sodium thiosulfate;na2s2o3",
    "#permanganate": "permanganate;potassium permanganate;kmno4;permanganometric",
    "#silver": "precipitation;argentometric;argentometry;silver;silver nitrate;agno3",
    "#charge": "by charge;charge;ions;as ions;ionic;electrolyte;ion exchange;metathesis",
}

_PERMANGANATE = (
    "potassium permanganate;potassium manganate(vii);permanganate;kmno4;sodium permanganate;namno4"
)
_DICHROMATE = (
    "potassium dichromate;potassium dichromate(vi);k2cr2o7;sodium dichromate;na2cr2o7;"
    "ammonium dichromate;(nh4)2cr2o7"
)
_IODATE = "potassium iodate;potassium iodate(v);kio3;sodium iodate;naio3"
_BROMATE = "potassium bromate;potassium bromate(v);kbro3;sodium bromate;nabro3"
_THIOSULFATE = "sodium thiosulfate;sodium thiosulphate;na2s2o3"
_OXALIC = "oxalic acid;ethanedioic acid;h2c2o4;c2h2o4;(cooh)2"
_CARBONATE = "sodium carbonate;na2co3;potassium carbonate;k2co3"
_NITRIC = "nitric acid;nitric(v) acid;hno3"
_PHOSPHORIC = "phosphoric acid;phosphoric(v) acid;orthophosphoric acid;h3po4"

_IN_ACID = (
    "in acid;in acid solution;acid solution;acidic;acidified;acid medium;acidic solution;"
    "in sulfuric acid;in sulphuric acid"
)


def _row(names: str, change: str, per_mole: int, said: str, words: str = "") -> Reaction:
    given = words.split(";")
    kinds = ";".join(_KINDS[word] for word in given if word in _KINDS)
    own = [word for word in given if word and word not in _KINDS]
    # "acid-base" alone is a kind; "acid-base, to CO2" is this row
    own += [] if said in kinds.split(";") else [said.lower().replace(",", "")]
    return Reaction(
        tuple(names.split(";")),
        change,
        per_mole,
        said,
        frozenset(own),
        frozenset(kinds.split(";")) - {""},
    )


REACTIONS: tuple[Reaction, ...] = (
    # oxidising agents
    _row(_PERMANGANATE, "MnO4⁻ + 8 H⁺ + 5 e⁻ → Mn²⁺ + 4 H2O", 5, "to Mn2+",
         f"mn2+;mn++;mn(ii);manganese(ii);manganese(2+);manganous;{_IN_ACID};iron(ii);fe2+;"
         "oxalate;oxalic acid;hydrogen peroxide;peroxide;h2o2"),
    _row(_PERMANGANATE, "MnO4⁻ + 2 H2O + 3 e⁻ → MnO2 + 4 OH⁻", 3, "to MnO2",
         "mno2;manganese dioxide;manganese(iv) oxide;manganese(iv);mn(iv);mn4+;neutral;"
         "in neutral solution;neutral solution;weakly alkaline;faintly alkaline"),
    _row(_PERMANGANATE, "MnO4⁻ + e⁻ → MnO4²⁻", 1, "to MnO4 2-",
         "mno42-;manganate;manganate(vi);mn(vi);strongly alkaline"),
    _row(_DICHROMATE, "Cr2O7²⁻ + 14 H⁺ + 6 e⁻ → 2 Cr³⁺ + 7 H2O", 6, "to Cr3+",
         f"cr3+;cr(iii);chromium(iii);{_IN_ACID};iron(ii);fe2+;#redox;#iodine"),
    _row("potassium chromate;k2cro4;sodium chromate;na2cro4",
         "CrO4²⁻ + 8 H⁺ + 3 e⁻ → Cr³⁺ + 4 H2O", 3, "to Cr3+",
         f"cr3+;cr(iii);chromium(iii);{_IN_ACID};#redox;#iodine"),
    _row("iodine;i2", "I2 + 2 e⁻ → 2 I⁻", 2, "to iodide", "iodide;i-;#redox;#iodine"),
    _row("bromine;br2", "Br2 + 2 e⁻ → 2 Br⁻", 2, "to bromide", "bromide;br-;#redox;#iodine"),
    _row("chlorine;cl2", "Cl2 + 2 e⁻ → 2 Cl⁻", 2, "to chloride", "chloride;cl-;#redox;#iodine"),
    _row(_IODATE, "IO3⁻ + 6 H⁺ + 6 e⁻ → I⁻ + 3 H2O", 6, "to iodide",
         "iodide;i-;potassium iodide;#iodine"),
    _row(_IODATE, "2 IO3⁻ + 12 H⁺ + 10 e⁻ → I2 + 6 H2O", 5, "to iodine", "iodine;i2"),
    _row(_IODATE, "IO3⁻ + 6 H⁺ + 2 Cl⁻ + 4 e⁻ → ICl2⁻ + 3 H2O", 4, "Andrews",
         "andrews;to icl;icl;icl2-;i+;iodine monochloride;iodine chloride;concentrated acid"),
    _row(_BROMATE, "BrO3⁻ + 6 H⁺ + 6 e⁻ → Br⁻ + 3 H2O", 6, "to bromide",
         "bromide;br-;#redox;#iodine"),
    _row(_BROMATE, "2 BrO3⁻ + 12 H⁺ + 10 e⁻ → Br2 + 6 H2O", 5, "to bromine", "bromine;br2"),
    _row("potassium periodate;kio4;sodium periodate;naio4", "IO4⁻ + 2 H⁺ + 2 e⁻ → IO3⁻ + H2O", 2,
         "to iodate", "iodate;io3-"),
    _row("potassium periodate;kio4;sodium periodate;naio4", "IO4⁻ + 8 H⁺ + 8 e⁻ → I⁻ + 4 H2O", 8,
         "to iodide", "iodide;i-"),
    _row("potassium chlorate;potassium chlorate(v);kclo3;sodium chlorate;naclo3",
         "ClO3⁻ + 6 H⁺ + 6 e⁻ → Cl⁻ + 3 H2O", 6, "to chloride", "chloride;cl-;#redox;#iodine"),
    _row("sodium hypochlorite;sodium chlorate(i);bleach;naocl;naclo;potassium hypochlorite;kocl",
         "ClO⁻ + 2 H⁺ + 2 e⁻ → Cl⁻ + H2O", 2, "to chloride",
         "chloride;cl-;available chlorine;#redox;#iodine"),
    _row("calcium hypochlorite;bleaching powder;ca(ocl)2;ca(clo)2",
         "Ca(ClO)2 + 4 H⁺ + 4 e⁻ → Ca²⁺ + 2 Cl⁻ + 2 H2O", 4, "to chloride",
         "chloride;cl-;available chlorine;#redox;#iodine"),
    _row("hydrogen peroxide;peroxide;h2o2", "H2O2 + 2 H⁺ + 2 e⁻ → 2 H2O", 2, "to water",
         "water;h2o;oxidising;oxidizing;oxidation;redox;#iodine;iodide"),
    _row("hydrogen peroxide;peroxide;h2o2", "H2O2 → O2 + 2 H⁺ + 2 e⁻", 2, "to oxygen",
         "oxygen;o2;reducing;redox;#permanganate"),
    _row("cerium(iv) sulfate;ceric sulfate;ce(so4)2;ammonium cerium(iv) sulfate;(nh4)4ce(so4)4;"
         "ammonium cerium(iv) nitrate;(nh4)2ce(no3)6", "Ce⁴⁺ + e⁻ → Ce³⁺", 1, "to Ce3+",
         "ce3+;ce(iii);cerium(iii);#redox"),
    _row("potassium persulfate;k2s2o8;sodium persulfate;na2s2o8;ammonium persulfate;(nh4)2s2o8",
         "S2O8²⁻ + 2 e⁻ → 2 SO4²⁻", 2, "to sulfate", "sulfate;sulphate;so42-;#redox;#iodine"),
    _row("iron(iii) chloride;ferric chloride;fecl3;iron(iii) nitrate;fe(no3)3;"
         "ammonium iron(iii) sulfate;nh4fe(so4)2", "Fe³⁺ + e⁻ → Fe²⁺", 1, "to Fe2+",
         "fe2+;fe(ii);iron(ii);#redox;#iodine"),
    _row("potassium hexacyanoferrate(iii);potassium ferricyanide;k3fe(cn)6",
         "Fe(CN)6³⁻ + e⁻ → Fe(CN)6⁴⁻", 1, "to ferrocyanide",
         "hexacyanoferrate(ii);#redox;#iodine"),
    _row("copper(ii) sulfate;copper sulfate;cuso4;copper(ii) nitrate;cu(no3)2;copper(ii) chloride;"
         "cucl2", "Cu²⁺ + I⁻ + e⁻ → CuI", 1, "to CuI", "cui;cu+;copper(i);#redox;#iodine"),
    _row(_NITRIC, "NO3⁻ + 4 H⁺ + 3 e⁻ → NO + 2 H2O", 3, "to NO", "no;nitric oxide"),
    _row(_NITRIC, "NO3⁻ + 2 H⁺ + e⁻ → NO2 + H2O", 1, "to NO2", "no2;nitrogen dioxide"),
    # reducing agents
    _row(_THIOSULFATE, "2 S2O3²⁻ → S4O6²⁻ + 2 e⁻", 1, "to tetrathionate",
         "tetrathionate;s4o62-;iodine;i2;iodate;dichromate;redox;reducing;#iodine"),
    _row(_THIOSULFATE, "S2O3²⁻ + 5 H2O → 2 SO4²⁻ + 10 H⁺ + 8 e⁻", 8, "to sulfate",
         "sulfate;sulphate;so42-;chlorine;bromine"),
    _row("potassium iodide;ki;sodium iodide;nai", "2 I⁻ → I2 + 2 e⁻", 1, "to iodine",
         "iodine;i2;#redox"),
    _row("iron(ii) sulfate;ferrous sulfate;feso4;ammonium iron(ii) sulfate;mohr's salt;"
         "ferrous ammonium sulfate;(nh4)2fe(so4)2;iron(ii) chloride;fecl2",
         "Fe²⁺ → Fe³⁺ + e⁻", 1, "to Fe3+",
         "fe3+;fe(iii);iron(iii);#redox;#permanganate;dichromate"),
    _row(f"{_OXALIC};sodium oxalate;sodium ethanedioate;na2c2o4;potassium oxalate;k2c2o4;"
         "ammonium oxalate;(nh4)2c2o4", "C2O4²⁻ → 2 CO2 + 2 e⁻", 2, "to CO2",
         "co2;carbon dioxide;#redox;#permanganate"),
    _row("sodium sulfite;na2so3;potassium sulfite;k2so3", "SO3²⁻ + H2O → SO4²⁻ + 2 H⁺ + 2 e⁻", 2,
         "to sulfate", "sulfate;sulphate;so42-;iodine;#redox;#iodine"),
    _row("sodium metabisulfite;na2s2o5;potassium metabisulfite;k2s2o5",
         "S2O5²⁻ + 3 H2O → 2 SO4²⁻ + 6 H⁺ + 4 e⁻", 4, "to sulfate",
         "sulfate;sulphate;so42-;iodine;#redox;#iodine"),
    _row("sodium nitrite;nano2;potassium nitrite;kno2", "NO2⁻ + H2O → NO3⁻ + 2 H⁺ + 2 e⁻", 2,
         "to nitrate", "nitrate;no3-;#permanganate"),
    _row("sodium nitrite;nano2;potassium nitrite;kno2", "NO2⁻ + 2 H⁺ + e⁻ → NO + H2O", 1,
         "to NO", "no;nitric oxide;iodide"),
    _row("tin(ii) chloride;stannous chloride;sncl2", "Sn²⁺ → Sn⁴⁺ + 2 e⁻", 2, "to Sn4+",
         "sn4+;sn(iv);tin(iv);#redox;#iodine"),
    _row("titanium(iii) chloride;ticl3", "Ti³⁺ → Ti⁴⁺ + e⁻", 1, "to Ti4+",
         "ti4+;ti(iv);titanium(iv);#redox"),
    _row("arsenic(iii) oxide;arsenic trioxide;as2o3", "As2O3 + 5 H2O → 2 H3AsO4 + 4 H⁺ + 4 e⁻", 4,
         "to arsenate", "as(v);arsenic(v);iodine;#redox;#iodine"),
    _row("sodium arsenite;sodium metaarsenite;naaso2", "AsO2⁻ + 2 H2O → AsO4³⁻ + 4 H⁺ + 2 e⁻", 2,
         "to arsenate", "as(v);arsenic(v);iodine;#redox;#iodine"),
    _row("ascorbic acid;vitamin c;c6h8o6", "C6H8O6 → C6H6O6 + 2 H⁺ + 2 e⁻", 2,
         "to dehydroascorbic acid", "dehydroascorbic;iodine;#redox;#iodine"),
    _row("potassium hexacyanoferrate(ii);potassium ferrocyanide;k4fe(cn)6",
         "Fe(CN)6⁴⁻ → Fe(CN)6³⁻ + e⁻", 1, "to ferricyanide", "hexacyanoferrate(iii);#redox"),
    # acids
    _row(f"hydrochloric acid;hydrogen chloride;hcl;hydrobromic acid;hbr;{_NITRIC};"
         "hydriodic acid;hi;perchloric acid;hclo4;ethanoic acid;acetic acid;c2h4o2;ch3cooh;"
         "ch3co2h;methanoic acid;"
         "formic acid;ch2o2;hcooh;benzoic acid;c7h6o2;sulfamic acid;h3nso3;hydrofluoric acid;hf;"
         "potassium hydrogen phthalate;potassium hydrogenphthalate;khp;c8h5ko4;khc8h4o4;"
         "sodium hydrogensulfate;nahso4;potassium hydrogensulfate;khso4;lactic acid;c3h6o3;"
         "ascorbic acid;vitamin c;c6h8o6", "HA + OH⁻ → A⁻ + H2O", 1, "acid-base", "#acid"),
    _row("sulfuric acid;sulphuric acid;h2so4;tartaric acid;c4h6o6;succinic acid;butanedioic acid;"
         f"c4h6o4;malonic acid;c3h4o4;maleic acid;c4h4o4;{_OXALIC}", "H2A + 2 OH⁻ → A²⁻ + 2 H2O", 2,
         "acid-base", "#acid"),
    _row("citric acid;c6h8o7", "H3A + 3 OH⁻ → A³⁻ + 3 H2O", 3, "acid-base", "#acid"),
    _row(_PHOSPHORIC, "H3PO4 + OH⁻ → H2PO4⁻ + H2O", 1, "acid-base, to H2PO4-",
         "h2po4-;dihydrogenphosphate;dihydrogen phosphate;one proton;monoprotic;"
         "methyl orange;#acid"),
    _row(_PHOSPHORIC, "H3PO4 + 2 OH⁻ → HPO4²⁻ + 2 H2O", 2, "acid-base, to HPO4 2-",
         "hpo42-;hydrogenphosphate;hydrogen phosphate;two protons;diprotic;"
         "phenolphthalein;#acid"),
    _row(_PHOSPHORIC, "H3PO4 + 3 OH⁻ → PO4³⁻ + 3 H2O", 3, "acid-base, to PO4 3-",
         "po43-;phosphate;three protons;triprotic;complete neutralisation;"
         "all protons;#acid"),
    # bases
    _row("sodium hydroxide;caustic soda;naoh;potassium hydroxide;caustic potash;koh;"
         "lithium hydroxide;lioh;tetramethylammonium hydroxide", "OH⁻ + H⁺ → H2O", 1,
         "acid-base", "#acid"),
    _row("ammonia;ammonia solution;ammonium hydroxide;nh3;nh4oh", "NH3 + H⁺ → NH4⁺", 1,
         "acid-base", "#acid"),
    _row("calcium hydroxide;limewater;slaked lime;ca(oh)2;barium hydroxide;ba(oh)2;"
         "magnesium hydroxide;mg(oh)2;strontium hydroxide;sr(oh)2",
         "M(OH)2 + 2 H⁺ → M²⁺ + 2 H2O", 2, "acid-base", "#acid"),
    _row("aluminium hydroxide;al(oh)3", "Al(OH)3 + 3 H⁺ → Al³⁺ + 3 H2O", 3, "acid-base", "#acid"),
    _row("calcium oxide;cao;magnesium oxide;mgo", "MO + 2 H⁺ → M²⁺ + H2O", 2, "acid-base", "#acid"),
    _row(_CARBONATE, "CO3²⁻ + 2 H⁺ → H2O + CO2", 2, "acid-base, to CO2",
         "co2;carbon dioxide;carbonic acid;methyl orange;methyl red;complete neutralisation;#acid"),
    _row(_CARBONATE, "CO3²⁻ + H⁺ → HCO3⁻", 1, "acid-base, to HCO3-",
         "hco3-;hydrogencarbonate;bicarbonate;phenolphthalein;#acid"),
    _row("sodium hydrogencarbonate;sodium bicarbonate;nahco3;potassium hydrogencarbonate;khco3",
         "HCO3⁻ + H⁺ → H2O + CO2", 1, "acid-base", "#acid"),
    _row("calcium carbonate;caco3;magnesium carbonate;mgco3", "CO3²⁻ + 2 H⁺ → H2O + CO2", 2,
         "acid-base", "#acid"),
    _row("borax;sodium tetraborate;disodium tetraborate;na2b4o7",
         "B4O7²⁻ + 2 H⁺ + 5 H2O → 4 H3BO3", 2, "acid-base", "#acid"),
    # precipitation, and salts by the charge they carry
    _row("silver nitrate;agno3", "Ag⁺ + Cl⁻ → AgCl", 1, "precipitation",
         "chloride;halide;halides;bromide;iodide;thiocyanate;#silver;#charge"),
    _row("potassium thiocyanate;kscn;ammonium thiocyanate;nh4scn", "SCN⁻ + Ag⁺ → AgSCN", 1,
         "precipitation", "#silver;#charge"),
    _row("sodium chloride;common salt;nacl;potassium chloride;kcl;ammonium chloride;nh4cl",
         "Cl⁻ + Ag⁺ → AgCl", 1, "precipitation", "#silver;#charge"),
    _row("potassium bromide;kbr;sodium bromide;nabr", "Br⁻ + Ag⁺ → AgBr", 1, "precipitation",
         "#silver;#charge"),
    _row("potassium iodide;ki;sodium iodide;nai", "I⁻ + Ag⁺ → AgI", 1, "precipitation",
         "#silver;#charge"),
    _row("barium chloride;bacl2;barium nitrate;ba(no3)2", "Ba²⁺ + SO4²⁻ → BaSO4", 2,
         "precipitation", "#silver;sulfate;sulphate;#charge"),
    _row("sodium sulfate;na2so4;potassium sulfate;k2so4;magnesium sulfate;mgso4",
         "SO4²⁻ + Ba²⁺ → BaSO4", 2, "precipitation", "#silver;barium;#charge"),
    _row("calcium chloride;cacl2;calcium nitrate;ca(no3)2;magnesium chloride;mgcl2;"
         "strontium chloride;srcl2;lead(ii) nitrate;pb(no3)2;zinc sulfate;znso4;"
         "copper(ii) sulfate;copper sulfate;cuso4;calcium carbonate;caco3",
         "M²⁺", 2, "by charge", "#charge"),
    _row("potassium nitrate;kno3;sodium nitrate;nano3;sodium acetate;c2h3nao2;ch3coona",
         "M⁺", 1, "by charge", "#charge"),
    _row("aluminium chloride;alcl3;aluminium nitrate;al(no3)3;iron(iii) chloride;fecl3",
         "M³⁺", 3, "by charge", "#charge"),
    _row("aluminium sulfate;al2(so4)3;iron(iii) sulfate;fe2(so4)3", "2 M³⁺", 6,
         "by charge", "#charge"),
)  # fmt: skip
"""Every reading held, in the order they are offered in."""
