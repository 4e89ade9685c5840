"""Other spellings of a name or a formula that a bench sum is asked for.

"sodium thiosulphate", "copper sulfate pentahydrate", "anhydrous sodium carbonate" and
"Na₂CO₃ 10H2O" are all somebody's way of writing what the tables hold under one name.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from datetime import date
from difflib import get_close_matches

from stockroom.errors import BadInput, NotAllowed, UnknownName
from stockroom.service import bench_tables as shipped
from stockroom.service.bench_tables import spelt
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain

_SPELT = (
    (re.compile("sulph", re.IGNORECASE), "sulf"),
    (re.compile("aluminum", re.IGNORECASE), "aluminium"),
    (re.compile(r"\bcesium", re.IGNORECASE), "caesium"),
)
_BOTTLE = re.compile(r"[BS][0-9]+[a-z]?", re.IGNORECASE)
_SULFUR = "S8"  # the one molecule that is written so
_FORM_FIRST = re.compile(r"(?P<form>anhydrous|glacial|dry)\s+(?P<name>.+)", re.IGNORECASE)
_FORM_LAST = re.compile(
    r"(?P<name>.+?),?\s+(?P<form>anhydrous|glacial|(?:mono|hemi|di|tri|tetra|penta|hexa|hepta|octa"
    r"|nona|deca|dodeca)hydrate)",
    re.IGNORECASE,
)
_WATERS = {
    "hemi": 0.5,
    "mono": 1, "di": 2, "tri": 3, "tetra": 4, "penta": 5, "hexa": 6, "hepta": 7, "octa": 8,
    "nona": 9, "deca": 10, "dodeca": 12,
}  # fmt: skip


def known_spelling(of: str) -> str:
    """The way of writing `of` that the shipped tables know; `of` itself where none is known.

    Raises: BadInput for nothing at all; UnknownName for the number of a bottle.
    """
    if not of.strip():
        raise BadInput(f'--of "{of.strip()}": of what?', "Write a name or a formula: --of Na2CO3.")
    if bottle_number(of):
        # "B17" would be seventeen atoms of boron
        raise UnknownName(
            f"{of.strip()} looks like a bottle number; a name or a formula is wanted.",
            f"Is {of.strip()} a bottle? Give the name of what it holds.",
        )
    for each in _spellings(of):
        if plain(each) in shipped.names():
            return each
        if spelt(each).partition(".")[0] in shipped.formulas():
            return spelt(each)
    return of


def bottle_number(of: str) -> bool:
    """Is it written like the number of a bottle, B17 or S10a, and no molecule of sulfur?"""
    return of.strip() != _SULFUR and _BOTTLE.fullmatch(of.strip()) is not None


def name_in(of: str, store: StoreAt, as_at: date | None, *, weighed: bool = False) -> str:
    """The name to go by: for the number of a bottle that of what it holds, else `of` itself.

    `weighed`: it is to be put on a balance, as what is bought by its strength is not.
    Raises: UnknownName for a bottle that is not there; NotAllowed for one past its safety
    date, or one that is not weighed from.
    """
    if not bottle_number(of) or not store.exists():
        return of
    from stockroom.planning.facts import Form
    from stockroom.service.bottle_strength import bottle_among, standing
    from stockroom.service.database import day_for
    from stockroom.store.snapshot import facts

    known = facts(store, day_for(store, as_at))
    bottle = bottle_among(known, of)
    line = known.lines[bottle.line]
    standing(bottle, line, known.as_at)
    if weighed and line.strength_text and line.form is not Form.SOLID:
        raise NotAllowed(
            f"{bottle.number} holds {line.item} {line.strength_text}: it is not weighed from.",
            f"Use: stockroom dilute, with --from {bottle.number}.",
        )
    return line.item if line.form is Form.SOLID else line.substance or line.item


def formula_meant(of: str) -> str:
    """The formula held that differs from `of` in its capitals alone; empty where none does."""
    asked = spelt(of).casefold()
    return next((each for each in shipped.formulas() if each.casefold() == asked), "")


def nearest(of: str, names: Iterable[str]) -> str:
    """What to try instead of a name nobody knows, in a sentence."""
    meant = formula_meant(of)
    if meant:
        return f"Capitals count in a formula: {meant} is {shipped.formulas()[meant]}."
    # a name held twice, in capitals and without, is one name
    held = {each.casefold(): each for each in names}
    # by the standard library: a slip in a bench sum must not load the matcher of the store
    near = [held[each] for each in get_close_matches(of.casefold(), held, n=3, cutoff=0.3)]
    first = f"Nearest: {'; '.join(near)}. " if near else ""
    return f"{first}Or give its formula, as --of Na2CO3."


def _spellings(of: str) -> Iterator[str]:
    yield of
    for pattern, instead in _SPELT:
        of = pattern.sub(instead, of)
    yield of
    form = _FORM_FIRST.fullmatch(of.strip()) or _FORM_LAST.fullmatch(of.strip())
    if form:
        word = "anhydrous" if form["form"].lower() == "dry" else form["form"].lower()
        for name in (form["name"], shipped.other_names().get(plain(form["name"]), "")):
            yield from (f"{name} {word}", f"{name}, {word}")
        if word == "glacial":
            yield form["name"]
        yield _with_water(form["name"], word)


def _with_water(name: str, word: str) -> str:
    # a hydrate that no line is of is its salt's formula, and so many of water
    row = shipped.row_of(name) or {}
    formula = row.get("formula", "")
    if word == "anhydrous" and shipped.bought_as(row.get("substance", "")):
        return formula
    waters = _WATERS.get(word.removesuffix("hydrate"))
    return f"{formula}.{waters}H2O" if formula and waters else ""
