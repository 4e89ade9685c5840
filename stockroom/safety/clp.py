"""The classification of a solution or a mixture from its strength, with the limit that decides.

Order: a specific limit where one is held, else the general mixture rules. Tests and
the pH rule come before both in law and are not held here, so the notes say so. What
comes out is a starting point: local rules, the supplier's safety data sheet and the
employer's risk assessment come first.
Source: Regulation (EC) No 1272/2008, Art. 10, Annex I and Annex VI.

Not worked out: corrosion of metals (H290), explosives, gases under pressure in mixtures.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from stockroom.safety import acute, mixture, physical, water_life
from stockroom.safety.grounds import Ground, RestsOn, distinct
from stockroom.safety.limits import Found, Ingredient
from stockroom.safety.physical import Allergens, Supplement
from stockroom.safety.pictograms import pictograms_of, signal_word
from stockroom.safety.precautions import precautions_for
from stockroom.safety.statements import without_duplicates

NOT_ENTERED = "not entered: look it up"
"""What is said where no limit is held; nothing is ever guessed."""

PH_RULE = (
    "the pH is not held: at pH 2 and below, or 11.5 and above, count it as corrosive"
    " unless a test says otherwise"
)
"""Source: Annex I, 3.2.3.1.2, seen."""

METALS_RULE = (
    "H290, corrosive to metals, is not worked out: suppliers print it on most mineral acids,"
    " alkalis and bleach, and a weak one may have nothing else on its label"
)
"""From memory; a teaching handout seen has it on 1 to 3 mol/dm³ acids."""


@dataclass(frozen=True, slots=True)
class Classification:
    """What a mixture is classed and marked as, and why.

    `classes` names each with its category; `statements` are H codes less the needless
    ones, `supplemental` EUH codes; `deciding` has one line for each of them, and `rests_on`
    how each is known and whose figure it is. `weighed` is every figure that was asked,
    those that gave no statement too. `notes` say what was taken on the safer side or has
    to be looked up. `unknown` names ingredients of which nothing is held; `entered` is
    False when that is all of them.
    """

    classes: tuple[str, ...] = ()
    statements: tuple[str, ...] = ()
    supplemental: tuple[str, ...] = ()
    signal_word: str = ""
    pictograms: tuple[str, ...] = ()
    precautions: tuple[str, ...] = ()
    deciding: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()
    unknown: tuple[str, ...] = ()
    allergens: tuple[str, ...] = ()
    entered: bool = True
    rests_on: tuple[RestsOn, ...] = ()
    weighed: tuple[Ground, ...] = ()


def classify(ingredients: Iterable[Ingredient]) -> Classification:
    """Class and mark a mixture of these ingredients, each at the highest strength it could be.

    What is not listed counts as water. Just under a limit (within 5 % of it) the safer
    side is taken, with a note. An ingredient nothing is held of is named in `unknown`.
    """
    given = [each for each in ingredients if each.percent > 0]
    known = [each for each in given if each.entered]
    unknown = tuple(dict.fromkeys(each.substance for each in given if not each.entered))
    found = _all_found(known, sum(each.percent for each in given if not each.entered))
    codes = [each.h_code for each in found]
    supplemental = physical.supplemental_in(known, codes)
    allergens = _allergens(known, codes)
    named = [_NAMING] if allergens.names else []
    statements = without_duplicates([*codes, *(each.code for each in supplemental), *named])
    kinds = [each.kind for each in found]
    rests_on = _rests_on(found, supplemental, allergens, statements)
    return Classification(
        classes=tuple(each.name for each in found),
        statements=tuple(code for code in statements if not code.startswith("EUH")),
        supplemental=tuple(code for code in statements if code.startswith("EUH")),
        signal_word=signal_word(kinds),
        pictograms=pictograms_of(kinds),
        precautions=precautions_for(statements),
        deciding=_deciding(found, supplemental, allergens, statements),
        notes=_notes(known, found, supplemental, unknown),
        unknown=unknown,
        allergens=allergens.names if _NAMING in statements else (),
        entered=bool(known) or not given,
        rests_on=rests_on,
        weighed=_weighed(known, rests_on),
    )


def _all_found(known: Sequence[Ingredient], unknown: float) -> list[Found]:
    found = [
        *physical.found_in(known),
        *acute.found_in(known, unknown),
        *mixture.found_in(known),
        *water_life.found_in(known),
    ]
    return sorted(found, key=lambda each: (each.h_code, each.name))


_NAMING = "EUH208"


def _allergens(known: Sequence[Ingredient], codes: Sequence[str]) -> Allergens:
    # a mixture that is itself classed as sensitising says so, and names nothing
    return Allergens() if {"H317", "H334"} & set(codes) else physical.allergens_in(known)


def _deciding(
    found: Sequence[Found],
    supplemental: Sequence[Supplement],
    allergens: Allergens,
    kept: Sequence[str],
) -> tuple[str, ...]:
    words = [(each.h_code, each.deciding) for each in found]
    words += [(each.code, each.deciding) for each in supplemental]
    words += [(_NAMING, f"{_NAMING}: contains {', '.join(allergens.names)}")]
    return tuple(dict.fromkeys(text for code, text in words if code in kept))


def _rests_on(
    found: Sequence[Found],
    supplemental: Sequence[Supplement],
    allergens: Allergens,
    kept: Sequence[str],
) -> tuple[RestsOn, ...]:
    behind: dict[str, list[Ground]] = {code: [] for code in kept}
    pairs = [(each.h_code, each.grounds) for each in found]
    pairs += [(each.code, each.grounds) for each in supplemental]
    for code, grounds in (*pairs, (_NAMING, allergens.grounds)):
        if code in behind:
            behind[code] += grounds
    return tuple(
        RestsOn(code, ground.how, ground.source)
        for code, grounds in behind.items()
        for ground in distinct(grounds)
    )


def _weighed(known: Sequence[Ingredient], rests_on: Sequence[RestsOn]) -> tuple[Ground, ...]:
    rows = [row.ground for each in known for row in each.limits]
    # of the general rules only those behind what is kept: H314 needs none for its H318
    return distinct([*rows, *(Ground(each.how, each.source) for each in rests_on)])


def _notes(
    known: Sequence[Ingredient],
    found: Sequence[Found],
    supplemental: Sequence[Supplement],
    unknown: Sequence[str],
) -> tuple[str, ...]:
    notes = [f"{name}: hazards {NOT_ENTERED}" for name in unknown]
    notes += [f"near a limit, so the safer side: {each.deciding}" for each in found if each.near]
    notes += physical.notes_on(known)
    notes += [each.note for each in supplemental if each.note]
    if any(_acid_or_alkali(each) for each in known) and not _corrosive(found):
        notes.append(PH_RULE)
    if any(_eats_metals(each) for each in known):
        notes.append(METALS_RULE)
    return tuple(dict.fromkeys(notes))


def _corrosive(found: Sequence[Found]) -> bool:
    return any(each.h_code == "H314" for each in found)


def _acid_or_alkali(each: Ingredient) -> bool:
    """By its name or storage group; without a group, whatever burns skin might be either."""
    if any(word in f"{each.group} {each.substance}" for word in _ACIDS_AND_ALKALIS):
        return True
    return not each.group and any(row.h_code == "H314" for row in each.limits)


def _eats_metals(each: Ingredient) -> bool:
    return each.group in _EATING and each.percent >= _EATING_FROM


_EATING = frozenset({"acid", "oxidising acid", "alkali", "hypochlorite"})
_EATING_FROM = 0.1
"""Per cent by mass from which the note on metals is worth its line: ours, no source."""

_ACIDS_AND_ALKALIS = ("acid", "alkali", "hypochlorite")


def severity(result: Classification, ladder: str) -> int:
    """How bad it is on one ladder: 0 for nothing, more for worse.

    Ladders are those of `classes.py`, with the way in after "acute" ("acute oral").
    """
    from stockroom.safety.classes import CLASSES

    name, _, way_in = ladder.partition(" ") if ladder.startswith("acute") else (ladder, "", "")
    found = [CLASSES[each.partition(" (")[0]] for each in result.classes if way_in in each]
    length = sum(each.ladder == name for each in CLASSES.values())
    return max((length - each.rank for each in found if each.ladder == name), default=0)
