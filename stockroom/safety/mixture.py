"""The general rules for mixtures: skin, eyes, lungs, lasting harm, water life.

Each rule gives every ingredient an edge, the per cent at which it alone would reach
the class, and adds up how far the ingredients have come together. For one ingredient
that is its limit; for several it is the sum the regulation asks for.
Source: Regulation (EC) No 1272/2008, Annex I, parts 3 and 4, from memory, save the
5 % edge of corrosion (Czech guide) and the organs' limits (German guide), which were
seen. Acute poisons are in `acute.py`; what decides fire and reaction in `physical.py`.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable
from dataclasses import dataclass

from stockroom.safety.classes import CLASSES
from stockroom.safety.grounds import RULE, RULE_SEEN, Ground, distinct
from stockroom.safety.limits import (
    BREATHING,
    NEAR,
    Basis,
    Found,
    Ingredient,
    Limit,
    Part,
    grounds_of,
    in_words,
    nearly,
    reached,
    summed,
)

Share = Callable[[Ingredient], Part | None]
"""An ingredient's part on the way to one class; None when it has none, or too little to count."""

_TRACE = 0.1
_RELEVANT = 1.0
_CORROSIVE = ("Skin Corr. 1A", "Skin Corr. 1B", "Skin Corr. 1C", "Skin Corr. 1")
_SKIN, _EYE = "Skin Irrit. 2", "Eye Irrit. 2"
_DAMAGE = "Eye Dam. 1"


@dataclass(frozen=True, slots=True)
class General:
    """A general limit in per cent, and by itself for a strong acid or base, which adds to nothing.

    `seen` when the limit was read; by itself none was.
    """

    limit: float
    by_itself: float
    seen: bool = False

    def edge(self, row: Limit) -> float:
        """Where the row's class begins by this limit."""
        return self.by_itself if row.basis is Basis.NOT_ADDITIVE else self.limit

    def rule(self, row: Limit) -> Ground:
        """The rule that says so, with its mark."""
        return RULE_SEEN if self.seen and row.basis is not Basis.NOT_ADDITIVE else RULE


_BURNS = General(5.0, 1.0, seen=True)
_DAMAGES = General(3.0, 1.0)
_IRRITATES = General(10.0, 3.0)
# a corrosive ingredient irritates from a tenth of what an irritant needs
_BURNS_A_LITTLE = 1.0


def found_in(ingredients: Iterable[Ingredient]) -> list[Found]:
    """Every class these rules give the mixture, the worst of each ladder."""
    mixture = list(ingredients)
    return [*_skin_and_eyes(mixture), *_breathing(mixture), *_aspiration(mixture), *_alone(mixture)]


def highest(rungs: Iterable[tuple[str, str, list[Part]]]) -> list[Found]:
    """The first rung whose parts together reach it; (class, statement, parts), worst first."""
    for name, h_code, parts in rungs:
        share = summed(parts)
        if parts and nearly(share):
            words, near = in_words(h_code, parts), not reached(share)
            return [Found(CLASSES[name], h_code, words, near, grounds=grounds_of(parts))]
    return []


def shares(mixture: Iterable[Ingredient], share: Share) -> list[Part]:
    """The parts of all ingredients that have one."""
    return [part for each in mixture if (part := share(each)) is not None]


def nearest(parts: Iterable[Part], relevant: float = _RELEVANT) -> Part | None:
    """The part that has come furthest; None for one too small to be relevant.

    Under 1 % nothing counts unless its own edge is lower. Source: Annex I, 3.2.3.3.1, seen.
    """
    part = max(parts, key=lambda each: each.share, default=None)
    return part if part and part.percent >= min(relevant, part.edge) * NEAR else None


def edge_of(row: Limit, general: General) -> float:
    """Where a row's class begins: its own limit, else the general one for its kind."""
    if row.basis is Basis.SPECIFIC:
        # a limit with no lower end holds from the least that is ever relevant
        return row.from_percent or _TRACE
    return general.edge(row)


def own_part(each: Ingredient, row: Limit, general: General) -> Part:
    """The part by the row's own class: by its own limit, else by the general one."""
    rule = None if row.basis is Basis.SPECIFIC else general.rule(row)
    return each.part(row, edge_of(row, general), rule)


# -- skin and eyes ----------------------------------------------------------------------


def _skin_and_eyes(mixture: list[Ingredient]) -> list[Found]:
    burning = [(name, "H314", shares(mixture, _burning(name))) for name in _CORROSIVE]
    skin = highest([*burning, (_SKIN, "H315", shares(mixture, _irritating_skin))])
    if skin and skin[0].kind.name in _CORROSIVE:
        # what burns skin burns eyes; H314 says so, and makes the second statement needless
        grounds = distinct([*skin[0].grounds, RULE])
        burnt = Found(CLASSES[_DAMAGE], "H318", "H318: corrosive to skin", grounds=grounds)
        return [*skin, burnt]
    damaging = (_DAMAGE, "H318", shares(mixture, _damaging_eyes))
    return [*skin, *highest([damaging, (_EYE, "H319", shares(mixture, _irritating_eyes))])]


def _burning(name: str) -> Share:
    """The share of a burn at least as bad as the class `name`."""

    def share(each: Ingredient) -> Part | None:
        rows = [row for row in _burns(each) if row.kind.rank <= CLASSES[name].rank]
        return nearest(own_part(each, row, _BURNS) for row in rows)

    return share


def _burns(each: Ingredient) -> list[Limit]:
    return [row for row in each.held("skin") if row.hazard_class in _CORROSIVE]


def _irritating_skin(each: Ingredient) -> Part | None:
    own = [row for row in each.held("skin") if row.hazard_class == _SKIN]
    if own:
        return nearest(own_part(each, row, _IRRITATES) for row in own)
    edges = [(row, min(_BURNS_A_LITTLE, edge_of(row, _BURNS))) for row in _burns(each)]
    return nearest(each.part(row, edge, RULE) for row, edge in edges)


def _damaging_eyes(each: Ingredient) -> Part | None:
    damaging, burning = _eye_rows(each)
    parts = [own_part(each, row, _DAMAGES) for row in damaging]
    # without eye limits of its own the general 3 % holds, though it burns skin only from more
    most = math.inf if _has_own_eye_limits(each) else _DAMAGES.limit
    edges = [(row, min(most, edge_of(row, _BURNS))) for row in burning]
    return nearest([*parts, *(each.part(row, edge, RULE) for row, edge in edges)])


def _irritating_eyes(each: Ingredient) -> Part | None:
    own = [row for row in each.held("eye") if row.hazard_class == _EYE]
    if own:
        return nearest(own_part(each, row, _IRRITATES) for row in own)
    damaging, burning = _eye_rows(each)
    rows = damaging if _has_own_eye_limits(each) else [*damaging, *burning]
    edges = [(row, min(_BURNS_A_LITTLE, edge_of(row, _DAMAGES))) for row in rows]
    return nearest(each.part(row, edge, RULE) for row, edge in edges)


def _eye_rows(each: Ingredient) -> tuple[list[Limit], list[Limit]]:
    """The rows that say it damages eyes, and those that say it burns skin."""
    return [row for row in each.held("eye") if row.hazard_class == _DAMAGE], _burns(each)


def _has_own_eye_limits(each: Ingredient) -> bool:
    return any(row.basis is Basis.SPECIFIC for row in each.held("eye"))


# -- lungs --------------------------------------------------------------------------------

_BREATHED = General(20.0, 20.0)
"""The guide value of Annex I, 3.8.3.4.5, from memory."""

_ASPIRATED = General(10.0, 10.0, seen=True)


def _breathing(mixture: list[Ingredient]) -> list[Found]:
    return [
        found
        for h_code in ("H335", "H336")
        for found in highest([("STOT SE 3", h_code, shares(mixture, _by_breath(h_code)))])
    ]


def _by_breath(h_code: str) -> Share:
    def share(each: Ingredient) -> Part | None:
        rows = each.held(f"{BREATHING} {h_code}")
        return nearest(own_part(each, row, _BREATHED) for row in rows)

    return share


def _aspiration(mixture: list[Ingredient]) -> list[Found]:
    """Counted by the sum alone: how runny the mixture is nobody has measured, so it counts."""

    def share(each: Ingredient) -> Part | None:
        rows = each.held("aspiration")
        return nearest(own_part(each, row, _ASPIRATED) for row in rows)

    return highest([("Asp. Tox. 1", "H304", shares(mixture, share))])


# -- what is not added up -----------------------------------------------------------------

_ALONE = {
    "Resp. Sens. 1A": _TRACE,
    "Resp. Sens. 1B": 1.0,
    "Resp. Sens. 1": 1.0,
    "Skin Sens. 1A": _TRACE,
    "Skin Sens. 1B": 1.0,
    "Skin Sens. 1": 1.0,
    "Muta. 1A": _TRACE,
    "Muta. 1B": _TRACE,
    "Muta. 2": 1.0,
    "Carc. 1A": _TRACE,
    "Carc. 1B": _TRACE,
    "Carc. 2": 1.0,
    "Repr. 1A": 0.3,
    "Repr. 1B": 0.3,
    "Repr. 2": 3.0,
    "Lact.": 0.3,
    "STOT SE 1": 10.0,
    "STOT SE 2": 10.0,
    "STOT RE 1": 10.0,
    "STOT RE 2": 10.0,
    "Ozone 1": _TRACE,
}
"""From how many per cent one ingredient gives the mixture its class.

Source: Annex I, from memory; organs harmed by repeated exposure as a German guide has it, seen.
"""
_SEEN_LADDER = "organs, repeated"

_LESSER = {"STOT SE 1": ("STOT SE 2", "H371"), "STOT RE 1": ("STOT RE 2", "H373")}
"""Category 1 from 1 to below 10 % makes the mixture category 2.

Source: a German guide for STOT RE, seen; for STOT SE from memory.
"""


def _alone(mixture: list[Ingredient]) -> list[Found]:
    ladders = dict.fromkeys(CLASSES[name].ladder for name in _ALONE)
    return [found for ladder in ladders for found in _worst_alone(mixture, ladder)]


def _worst_alone(mixture: list[Ingredient], ladder: str) -> list[Found]:
    rungs = [
        (name, h_code, [part])
        for each in mixture
        for row in each.held(ladder)
        for name, h_code, part in _rungs_of(each, row)
        if nearly(part.share)
    ]
    # the worst last, so that it is the one kept of each statement
    rungs.sort(key=lambda rung: -CLASSES[rung[0]].rank)
    if not rungs:
        return []
    gravest = CLASSES[rungs[-1][0]].statement
    # categories 1A and 1B are marked alike, and one may harm the unborn, the other fertility
    chosen = {rung[1]: rung for rung in rungs if CLASSES[rung[0]].statement == gravest}
    return [found for code in sorted(chosen) for found in highest([chosen[code]])]


def _rungs_of(each: Ingredient, row: Limit) -> list[tuple[str, str, Part]]:
    limit = _ALONE[row.hazard_class]
    general = General(limit, limit, seen=row.ladder == _SEEN_LADDER)
    own = (row.hazard_class, row.h_code, own_part(each, row, general))
    lesser = _LESSER.get(row.hazard_class)
    if lesser is None or row.basis is Basis.SPECIFIC:
        return [own]
    return [own, (*lesser, each.part(row, _RELEVANT, general.rule(row)))]
