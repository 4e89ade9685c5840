"""Peroxide-formers: their classes, when to test or discard them, and what a result means.

Class A can be dangerous in a closed bottle, B when boiled down, C may set off its own
hardening, D may form peroxide and is not clearly any of these. 1 ppm is 1 mg/kg.
Sources: members from lists of Nevada-Reno, New Mexico State and Ohio universities (a),
the longer lists of Prudent Practices (NRC 2011) and Clark (2001) from memory (c).
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from stockroom.errors import BadAmount, BadInput
from stockroom.findings import DO_NOT_TOUCH
from stockroom.measure.formats import format_number

CLASSES: dict[str, str] = {
    "A": "dangerous peroxide in the closed bottle, without being boiled down",
    "B": "dangerous peroxide when boiled down or left to dry",
    "C": "its peroxide may start it hardening, with heat",
    "D": "may form peroxide; not clearly of class A, B or C",
}

_MEMBERS = """
A a diisopropyl ether|divinylacetylene|vinylidene chloride|potassium|sodium amide|potassium amide
B a diethyl ether|tetrahydrofuran|1,4-dioxane|acetal|ethanal|benzyl alcohol|butan-2-ol|propan-2-ol
B a cyclohexene|cumene|dicyclopentadiene|methylacetylene|cellosolve|chlorofluoroethylene
B c diglyme|glyme|decalin|tetralin|4-methylpentan-2-one|furan|diacetylene|cyclooctene
B c methylcyclopentane|hexan-2-ol|cyclohexanol|cyclopentene|4-methylpentan-2-ol|pentan-2-ol
B c heptan-4-ol|cyclohex-2-en-1-ol|1-phenylethanol|ethoxyethene
C a styrene|butadiene|tetrafluoroethylene|vinylacetylene|vinyl acetate|vinyl chloride
C a vinylpyridine|chloroprene
C c acrylic acid|acrylonitrile|methyl methacrylate|chlorotrifluoroethylene|buta-1,3-diene
D c acrolein|methyl tert-butyl ether|di-n-propyl ether|isoamyl ether|tetrahydropyran
"""
"""Class, mark, members."""

_LIQUID_MONOMERS = frozenset({"butadiene", "buta-1,3-diene", "chloroprene", "tetrafluoroethylene"})
"""Class C, and class A as liquid monomer. Source: the same university lists (a)."""

_VINYL_ETHER, _VINYL_ETHER_CLASS = "vinyl ether", "B"
"""The whole family, whatever it carries. Source: the Ohio and New Mexico State lists (a)."""

_CLASS_OF = {
    name: row.split(maxsplit=2)[0]
    for row in _MEMBERS.strip().splitlines()
    for name in row.split(maxsplit=2)[2].split("|")
}


def class_of(substance: str, *, liquid: bool = False) -> str:
    """The class of a substance by its name in the tables; "" for one not on the lists.

    `liquid` tells the liquid monomer from the gas, where the lists have them in two classes.

    >>> class_of("butadiene"), class_of("butadiene", liquid=True), class_of("ethyl vinyl ether")
    ('C', 'A', 'B')
    """
    name = " ".join(substance.split()).casefold()
    if liquid and name in _LIQUID_MONOMERS:
        return "A"
    return _CLASS_OF.get(name) or (_VINYL_ETHER_CLASS if _VINYL_ETHER in name else "")


@dataclass(frozen=True, slots=True)
class Interval:
    """So many months from an origin, what is due then, and who says so."""

    months: int
    counted_from: str
    due: str
    source: str
    how: str

    @property
    def in_words(self) -> str:
        """ "test or discard 6 months after it was opened"."""
        if not self.months:
            return self.due
        was = "it was opened" if self.counted_from == "opened" else "it was received"
        return f"{self.due} {self.months} months after {was}"


TEST_OR_DISCARD, DISCARD = "test or discard", "discard"

_USC = "Univ. of Southern California plan"
_SIX_FOR_ALL = "six months for every class once opened: Maryland, Virginia Tech, Iowa State"


def interval(cls: str, *, opened: bool, stabilised: bool) -> Interval:
    """The schedule offered for a class, opened or not, with a stabiliser in it or not.

    The one with a row for each case was chosen over "six months for all", because it is
    the stricter for class A and tells stabilised bottles apart; the maker's own date, where
    sooner, comes first. Class D has no row there and gets the six months for all.
    Raises: BadInput for a class that is none.

    >>> interval("B", opened=True, stabilised=False).months
    6
    """
    cls = _checked(cls)
    if cls == "D":
        return Interval(6, "opened" if opened else "received", TEST_OR_DISCARD, _SIX_FOR_ALL, "a")
    if cls == "C" and not stabilised:
        return Interval(
            0, "opened", "discard within 24 h, and hold no more than a few cm³", _USC, "a"
        )
    if cls == "C":
        return Interval(12, "received", TEST_OR_DISCARD, _USC, "a")
    if opened:
        if cls == "A":
            return Interval(3, "opened", DISCARD, _USC, "a")
        return Interval(12 if stabilised else 6, "opened", TEST_OR_DISCARD, _USC, "a")
    if stabilised:
        # those two cells were run together in the copy read, so the mark is memory's
        return Interval(24, "received", TEST_OR_DISCARD, _USC, "c")
    if cls == "A":
        return Interval(6, "received", "open or discard", _USC, "a")
    return Interval(12, "received", TEST_OR_DISCARD, _USC, "a")


GOES_ON_BELOW = 25.0
"""mg/kg as H2O2, from which it is waste. Source: Michigan State (a)."""

LEFT_ALONE_ABOVE = 100.0
"""mg/kg as H2O2, above which nobody moves it. Source: Michigan State; Iowa State: from 100 (a)."""

TAKEN_AWAY_UPTO = 20.0
"""mg/kg as H2O2 that one waste service takes without being asked. Source: MIT pages (a)."""

SIGNS = "crystals, solids, cloudiness, an oily layer, a stuck cap or no date on it"
"""Any of these: not opened, whatever a test said. Source: Michigan State; Virginia Tech (a)."""


@dataclass(frozen=True, slots=True)
class Outcome:
    """What a result means: passed or not, whether it may still be moved, and in words."""

    passed: bool
    may_be_moved: bool
    words: str
    notes: tuple[str, ...] = ()


def outcome(mg_kg: float, cls: str = "", *, seen: str = "") -> Outcome:
    """What so many mg/kg of peroxide (as H2O2) mean for a bottle; `seen` is what was noticed.

    Below 25 it goes on and the interval starts again; from 25 to 100 it is waste and is
    not used; above 100 it stays where it stands. Anything `seen` (crystals, a stuck cap)
    overrules the number. Raises: BadAmount for a number below nothing; BadInput for a
    class that is none.
    """
    if cls:
        cls = _checked(cls)
    if not math.isfinite(mg_kg) or mg_kg < 0:
        raise BadAmount(
            f"{mg_kg:g} mg/kg of peroxide cannot be.", "Read the strip again: 0 or more, in mg/kg."
        )
    shown = f"{format_number(mg_kg)} mg/kg"
    if seen.strip():
        return Outcome(False, False, f"{seen.strip()} seen: {DO_NOT_TOUCH}")
    if mg_kg > LEFT_ALONE_ABOVE:
        return Outcome(False, False, f"{shown}, above 100: leave it in place, {DO_NOT_TOUCH}")
    if mg_kg >= GOES_ON_BELOW:
        return Outcome(
            False, True, f"{shown}, from 25 to 100: do not use it, have it taken as waste"
        )
    return Outcome(True, True, f"{shown}, below 25: it may go on being used", _notes(mg_kg, cls))


def _notes(mg_kg: float, cls: str) -> tuple[str, ...]:
    notes = []
    if mg_kg > TAKEN_AWAY_UPTO:
        notes.append("above 20 mg/kg: ask the waste service before it is sent away")
    if cls == "A":
        notes.append("class A: usual practice is to discard it 3 months after opening all the same")
    if cls == "B":
        notes.append("test it again before boiling it down, and leave a tenth in the flask")
    return tuple(notes)


def _checked(cls: str) -> str:
    if cls.strip().upper() not in CLASSES:
        raise BadInput(f"{cls!r} is no class of peroxide-former.", f"Say {', '.join(CLASSES)}.")
    return cls.strip().upper()


def read_result(text: str) -> float:
    """The mg/kg of a result as written: "12 mg/kg", "12 ppm", "<5 mg/kg", which counts as 5.

    Raises: BadAmount without a unit, or with one that needs the liquid's density.
    """
    words = text.strip().casefold().replace(",", ".")
    number, unit = _split(words.lstrip("<≤ "))
    if number is None:
        raise BadAmount(f"peroxide {text!r} is not a number of mg/kg.", 'Write it as "12 mg/kg".')
    if unit not in ("mg/kg", "ppm", "mgkg-1", "mg kg-1", "ppm m/m", "ppm w/w"):
        raise BadAmount(
            f"peroxide {text!r}: in what?",
            "Give mg/kg (the same as ppm m/m); mg/dm3 divided by the liquid's g/cm3 is mg/kg.",
        )
    return number


def _split(words: str) -> tuple[float | None, str]:
    end = next((n for n, sign in enumerate(words) if sign not in "0123456789."), len(words))
    try:
        return float(words[:end]), words[end:].strip()
    except ValueError:
        return None, ""
