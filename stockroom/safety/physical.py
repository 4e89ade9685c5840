"""Fire, oxidising and reaction: classes that a test of the mixture decides, and no sum.

Published bands are used where they are held. Otherwise the class of the pure substance
holds for the pure substance; a flammable liquid keeps it in a mixture too, since that is
the safer side, and a note says to look the flash point up. Supplemental (EUH) statements
are here as well, as most of them tell of reactions.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass

from stockroom.safety.classes import CLASSES, PHYSICAL
from stockroom.safety.grounds import RULE, RULE_SEEN, SAFER_SIDE, Ground, distinct
from stockroom.safety.limits import (
    NEAR,
    Basis,
    Found,
    Ingredient,
    Limit,
    Part,
    in_words,
    nearly,
    reached,
)

PURE = 90.0
"""From this per cent a substance counts as pure: 96 % spirit is 94 % by mass. Ours, no source."""

_FLAMMABLE = "flammable liquid"
_FLAMMABLE_FROM = 1.0
_OF_LIQUIDS = frozenset({_FLAMMABLE, "oxidising liquid"})


def found_in(ingredients: Iterable[Ingredient]) -> list[Found]:
    """The physical classes of the mixture, the worst of each ladder."""
    mixture = list(ingredients)
    ladders = dict.fromkeys(each.ladder for each in CLASSES.values() if each.ladder in PHYSICAL)
    return [found for ladder in ladders for found in _worst(mixture, ladder)]


def _worst(mixture: list[Ingredient], ladder: str) -> list[Found]:
    found = [
        _found(row, part)
        for each in mixture
        for row in each.held(ladder)
        if nearly((part := _part(each, row)).share)
    ]
    return sorted(found, key=lambda each: (each.kind.rank, each.near, each.deciding))[:1]


def _found(row: Limit, part: Part) -> Found:
    near = not reached(part.share)
    return Found(row.kind, row.h_code, _in_words(row, part), near, grounds=part.grounds)


def _in_words(row: Limit, part: Part) -> str:
    if row.basis is not Basis.SPECIFIC and part.percent >= PURE:
        return f"{row.h_code}: {part.substance} as it is"
    return in_words(row.h_code, [part])


def _part(each: Ingredient, row: Limit) -> Part:
    if row.basis is Basis.SPECIFIC:
        return each.part(row, row.from_percent or 0.1)
    if row.ladder == _FLAMMABLE:
        return each.part(row, _FLAMMABLE_FROM, _unless_pure(each, row))
    return each.part(row, PURE)


def _unless_pure(each: Ingredient, row: Limit) -> Ground | None:
    return SAFER_SIDE if each.percent_for(row) < PURE else None


def notes_on(ingredients: Iterable[Ingredient]) -> list[str]:
    """What has to be looked up, because only a test of the mixture would tell."""
    return [
        note
        for each in ingredients
        for row in each.limits
        if row.basis is Basis.TRANSPORT
        or (row.ladder in _OF_LIQUIDS and row in each.held(row.ladder))
        if (note := _note_on(each, row))
    ]


def _note_on(each: Ingredient, row: Limit) -> str:
    percent = each.percent_for(row)
    if row.basis is Basis.TRANSPORT:
        return _by_transport(each, row) if _in_band(row, percent) else ""
    if row.basis is Basis.SPECIFIC or percent >= PURE or percent < _FLAMMABLE_FROM:
        return ""
    if row.ladder == _FLAMMABLE:
        return (
            f"{row.h_code}: the class of pure {each.substance}, taken as the safer side; "
            "look up the flash point of the mixture"
        )
    return f"{row.h_code} is the class of pure {each.substance}: look it up for this strength"


def _in_band(row: Limit, percent: float) -> bool:
    below = math.inf if row.below_percent is None else row.below_percent
    return (row.from_percent or 0.0) * NEAR <= percent < below


def _by_transport(each: Ingredient, row: Limit) -> str:
    return (
        f"{row.h_code} by the rules of transport, {each.substance} from {row.from_percent:g} %: "
        "no limit of the regulation is held, so look it up"
    )


# -- supplemental statements --------------------------------------------------------------

_SHOWN_FROM = {"EUH029": 1.0, "EUH031": 1.0, "EUH032": 1.0, "EUH066": 10.0, "EUH070": 1.0}
"""From what per cent a statement is carried over where no limit is published: ours, no source.

Those not named speak of the pure substance: what is dissolved in water no longer
reacts violently with it.
"""

_BY_CORROSION = "EUH071"


@dataclass(frozen=True, slots=True)
class Supplement:
    """An EUH statement the mixture has, the limit in words, a note on it, what it rests on."""

    code: str
    deciding: str
    note: str
    grounds: tuple[Ground, ...]


def supplemental_in(
    ingredients: Iterable[Ingredient], statements: Iterable[str]
) -> list[Supplement]:
    """Each EUH statement the mixture has; `statements` are its H codes.

    EUH071 goes with poison breathed in when the mixture is also corrosive: Annex II, seen.
    """
    codes = set(statements)
    breathed = codes & {"H330", "H331", "H332"} and "H314" in codes
    found: dict[str, Supplement] = {}
    for each in ingredients:
        for row in each.limits:
            if not row.supplemental or (row.h_code == _BY_CORROSION and not breathed):
                continue
            part = _supplemental_part(each, row)
            if nearly(part.share):
                note = _unpublished(row) if SAFER_SIDE in part.grounds else ""
                words = _euh_in_words(row, part)
                found.setdefault(row.h_code, Supplement(row.h_code, words, note, part.grounds))
    return list(found.values())


def _euh_in_words(row: Limit, part: Part) -> str:
    if row.h_code == _BY_CORROSION:
        return f"{row.h_code}: {part.substance}, corrosive and harmful to breathe at this strength"
    return _in_words(row, part)


def _supplemental_part(each: Ingredient, row: Limit) -> Part:
    if row.basis is Basis.SPECIFIC:
        return each.part(row, row.from_percent or 0.1)
    # it follows from the mixture's own classes, so no limit is wanting
    if row.h_code == _BY_CORROSION:
        return each.part(row, 0.1, RULE_SEEN)
    return each.part(row, _shown_from(row), _unless_pure(each, row))


def _shown_from(row: Limit) -> float:
    return _SHOWN_FROM.get(row.h_code, PURE)


def _unpublished(row: Limit) -> str:
    return f"{row.h_code}: no limit is published; shown from {_shown_from(row):g} %"


_ALLERGENS = {"Resp. Sens. 1A": 0.1, "Skin Sens. 1A": 0.1}


@dataclass(frozen=True, slots=True)
class Allergens:
    """The substances that EUH208 names, and what the limits behind it rest on."""

    names: tuple[str, ...] = ()
    grounds: tuple[Ground, ...] = ()


def allergens_in(ingredients: Iterable[Ingredient]) -> Allergens:
    """Substances that EUH208 names: sensitisers from a tenth of the limit that gives the class.

    Source: Annex II, 2.8 and Table 3.4.6, from memory.
    """
    parts = [
        part
        for each in ingredients
        for row in each.held("skin allergy", "lung allergy")
        if reached((part := _tenth(each, row)).share)
    ]
    return Allergens(
        tuple(dict.fromkeys(part.substance for part in parts)),
        distinct(ground for part in parts for ground in part.grounds),
    )


def _tenth(each: Ingredient, row: Limit) -> Part:
    limit = row.from_percent or _ALLERGENS.get(row.hazard_class, 1.0)
    return each.part(row, limit / 10, RULE)
