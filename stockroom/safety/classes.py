"""The hazard classes: what each category of them is marked with, and which is worse.

One row for each category, the worst of a ladder first: ladder, category, pictogram,
signal word, statement. Two categories on one ladder never stand on one label.
Source: Regulation (EC) No 1272/2008, Annex I label tables, from memory except
where `statements.py` marks the statement as seen.
"""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.errors import BadInput


@dataclass(frozen=True, slots=True)
class HazardClass:
    """One category: its name, ladder, place on it (0 is worst), and what it is marked with.

    `statement` is without letters; of a class with a route, or with one of two
    statements, "" stands until the row that has it says which.
    """

    name: str
    ladder: str
    rank: int
    pictogram: str
    signal: str
    statement: str


_ROWS = """
explosive            Unst. Expl.        GHS01  Danger   H200
explosive            Expl. 1.1          GHS01  Danger   H201
explosive            Expl. 1.2          GHS01  Danger   H202
explosive            Expl. 1.3          GHS01  Danger   H203
explosive            Expl. 1.5          -      Danger   H205
explosive            Expl. 1.4          GHS01  Warning  H204
flammable gas        Flam. Gas 1        GHS02  Danger   H220
flammable gas        Flam. Gas 2        -      Warning  H221
flammable liquid     Flam. Liq. 1       GHS02  Danger   H224
flammable liquid     Flam. Liq. 2       GHS02  Danger   H225
flammable liquid     Flam. Liq. 3       GHS02  Warning  H226
flammable solid      Flam. Sol. 1       GHS02  Danger   H228
flammable solid      Flam. Sol. 2       GHS02  Warning  H228
self-reactive        Self-react. A      GHS01  Danger   H240
self-reactive        Self-react. B      GHS01+GHS02 Danger H241
self-reactive        Self-react. C      GHS02  Danger   H242
self-reactive        Self-react. D      GHS02  Danger   H242
self-reactive        Self-react. E      GHS02  Warning  H242
self-reactive        Self-react. F      GHS02  Warning  H242
pyrophoric           Pyr. Liq. 1        GHS02  Danger   H250
pyrophoric           Pyr. Sol. 1        GHS02  Danger   H250
self-heating         Self-heat. 1       GHS02  Danger   H251
self-heating         Self-heat. 2       GHS02  Warning  H252
water-reactive       Water-react. 1     GHS02  Danger   H260
water-reactive       Water-react. 2     GHS02  Danger   H261
water-reactive       Water-react. 3     GHS02  Warning  H261
oxidising gas        Ox. Gas 1          GHS03  Danger   H270
oxidising liquid     Ox. Liq. 1         GHS03  Danger   H271
oxidising liquid     Ox. Liq. 2         GHS03  Danger   H272
oxidising liquid     Ox. Liq. 3         GHS03  Warning  H272
oxidising solid      Ox. Sol. 1         GHS03  Danger   H271
oxidising solid      Ox. Sol. 2         GHS03  Danger   H272
oxidising solid      Ox. Sol. 3         GHS03  Warning  H272
organic peroxide     Org. Perox. A      GHS01  Danger   H240
organic peroxide     Org. Perox. B      GHS01+GHS02 Danger H241
organic peroxide     Org. Perox. C      GHS02  Danger   H242
organic peroxide     Org. Perox. D      GHS02  Danger   H242
organic peroxide     Org. Perox. E      GHS02  Warning  H242
organic peroxide     Org. Perox. F      GHS02  Warning  H242
gas under pressure   Press. Gas         GHS04  Warning  H280
gas under pressure   Refrig. Gas        GHS04  Warning  H281
metals               Met. Corr. 1       GHS05  Warning  H290
acute                Acute Tox. 1       GHS06  Danger   -
acute                Acute Tox. 2       GHS06  Danger   -
acute                Acute Tox. 3       GHS06  Danger   -
acute                Acute Tox. 4       GHS07  Warning  -
skin                 Skin Corr. 1A      GHS05  Danger   H314
skin                 Skin Corr. 1B      GHS05  Danger   H314
skin                 Skin Corr. 1C      GHS05  Danger   H314
skin                 Skin Corr. 1       GHS05  Danger   H314
skin                 Skin Irrit. 2      GHS07  Warning  H315
eye                  Eye Dam. 1         GHS05  Danger   H318
eye                  Eye Irrit. 2       GHS07  Warning  H319
lung allergy         Resp. Sens. 1A     GHS08  Danger   H334
lung allergy         Resp. Sens. 1B     GHS08  Danger   H334
lung allergy         Resp. Sens. 1      GHS08  Danger   H334
skin allergy         Skin Sens. 1A      GHS07  Warning  H317
skin allergy         Skin Sens. 1B      GHS07  Warning  H317
skin allergy         Skin Sens. 1       GHS07  Warning  H317
genes                Muta. 1A           GHS08  Danger   H340
genes                Muta. 1B           GHS08  Danger   H340
genes                Muta. 2            GHS08  Warning  H341
cancer               Carc. 1A           GHS08  Danger   H350
cancer               Carc. 1B           GHS08  Danger   H350
cancer               Carc. 2            GHS08  Warning  H351
reproduction         Repr. 1A           GHS08  Danger   H360
reproduction         Repr. 1B           GHS08  Danger   H360
reproduction         Repr. 2            GHS08  Warning  H361
nursing              Lact.              -      -        H362
organs, once         STOT SE 1          GHS08  Danger   H370
organs, once         STOT SE 2          GHS08  Warning  H371
breathing            STOT SE 3          GHS07  Warning  -
organs, repeated     STOT RE 1          GHS08  Danger   H372
organs, repeated     STOT RE 2          GHS08  Warning  H373
aspiration           Asp. Tox. 1        GHS08  Danger   H304
water life           Aquatic Acute 1    GHS09  Warning  H400
water life, lasting  Aquatic Chronic 1  GHS09  Warning  H410
water life, lasting  Aquatic Chronic 2  GHS09  -        H411
water life, lasting  Aquatic Chronic 3  -      -        H412
water life, lasting  Aquatic Chronic 4  -      -        H413
ozone                Ozone 1            GHS07  Warning  H420
"""


def _read(rows: str) -> dict[str, HazardClass]:
    classes: dict[str, HazardClass] = {}
    ranks: dict[str, int] = {}
    for row in rows.strip().splitlines():
        # the ladder and the name hold spaces, so the columns are cut where they start
        ladder, name = row[:21].strip(), row[21:40].strip()
        pictogram, signal, code = ("" if cell == "-" else cell for cell in row[40:].split())
        rank = ranks[ladder] = ranks.get(ladder, -1) + 1
        classes[name] = HazardClass(name, ladder, rank, pictogram, signal, code)
    return classes


CLASSES = _read(_ROWS)

PHYSICAL = frozenset(
    "explosive|flammable gas|flammable liquid|flammable solid|self-reactive|pyrophoric"
    "|self-heating|water-reactive|oxidising gas|oxidising liquid|oxidising solid"
    "|organic peroxide|gas under pressure|metals".split("|")
)
"""Ladders that a test of the mixture decides, and no sum of its ingredients."""


def class_of(name: str) -> HazardClass:
    """The category of that name. Raises: BadInput for one not in the table."""
    if name not in CLASSES:
        raise BadInput(
            f"{name!r} is no hazard class I know.",
            "Write it as the regulation does: Skin Corr. 1B, Acute Tox. 4, Aquatic Chronic 2.",
        )
    return CLASSES[name]
