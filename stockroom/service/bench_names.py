"""What a bench sum knows of a name: the house's own lines, then the tables that travel along.

A sum must work with no store at all, so the tables of substances and lines that are
shipped (`bench_tables.py`) stand behind the store; a formula stands behind both.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import replace
from functools import lru_cache
from typing import TYPE_CHECKING

from stockroom.chemistry.formula import molar_mass
from stockroom.errors import BadAmount, BadInput, StoreTrouble, UnknownName
from stockroom.planning.facts import Form, Line
from stockroom.service import bench_tables as shipped
from stockroom.service.bench_spelling import known_spelling, nearest
from stockroom.service.bench_stuff import Stuff as Stuff
from stockroom.service.bench_tables import Row, spelt
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain

if TYPE_CHECKING:
    from stockroom.store.reading import Reader

_FORMULA = re.compile(r"[1-9]?[A-Z(\[][A-Za-z0-9()\[\].·•*]*")


def solute(of: str, lines: Iterable[Stuff] = ()) -> Stuff:
    """What is dissolved, for a name or a formula.

    The item of that name, else the substance. `lines` are the house's own and
    come first. Raises: UnknownName with the nearest names; BadAmount for a bad formula.
    """
    # one's own line comes first: its assay and density are off the bottle in hand
    own = list(lines)
    known = [*own, *_shipped_lines()]
    of = _as_held(of, known)
    meant = shipped.hydrate_meant(of)
    if meant and not any(each.form and plain(each.name) == plain(of) for each in own):
        return _by_formula(meant, [])
    asked = shipped.formulas().get(spelt(of)) or _substance_of(of)
    wanted = {plain(of), plain(asked)}
    for stuff in known:
        if plain(stuff.name) in wanted:
            return stuff
    row = shipped.substances().get(plain(asked))
    if row is not None:
        return _of_substance(row)
    for stuff in known:
        if plain(stuff.substance) == plain(asked):
            return stuff
    return _by_formula(of, known)


def solid(of: str, lines: Iterable[Stuff] = ()) -> Stuff:
    """The form that is weighed, for a name or a formula.

    A substance that stands on the shelf in two forms is asked about: the
    anhydrous salt weighed for the hydrate makes a solution half as strong again.
    Raises: BadInput naming the forms; UnknownName; BadAmount.
    """
    house = list(lines)
    own = [each for each in house if each.form is Form.SOLID]
    solids = [*own, *(each for each in _shipped_lines() if each.form is Form.SOLID)]
    of = _as_held(of, house)
    substance = shipped.formulas().get(spelt(of))
    # a formula names its hydrate itself, so there is no form left to ask about; what is
    # bought as a liquid alone is that liquid, and no litre is weighed of a gas
    if substance and (_forms(solids, plain(substance)) or not _poured(substance, house)):
        return _by_formula(of, [])
    exact = [stuff for stuff in solids if plain(stuff.name) == plain(of)]
    if exact:
        return exact[0]
    substance = _substance_of(of)
    # what stands on one's own shelf is meant, before what might stand on any
    forms = _forms(own, plain(substance))
    meant = shipped.hydrate_meant(of)
    if meant:
        hydrate = _by_formula(meant, [])
        same = {name: each for name, each in forms.items() if _alike(each, hydrate)}
        forms = same or forms or {hydrate.name: hydrate}
    forms = forms or _sold(substance, solids)
    if len({_weighed_as(form) for form in forms.values()}) == 1:
        return next(iter(forms.values()))
    if forms:
        raise BadInput(
            f"{of!r}: which form is in the bottle? {' or '.join(sorted(forms))}.",
            f'Write --of "{shipped.bought_as(substance) or min(forms)}".',
        )
    return solute(of, house)


def jar_of(stuff: Stuff) -> Stuff | None:
    """The shipped line of that very solid, as it is bought; None where none is of its mass."""
    same = [each for each in _shipped_lines() if plain(each.substance) == plain(stuff.substance)]
    solids = (each for each in same if each.form is Form.SOLID)
    return next((each for each in solids if _weighed_as(each) == _weighed_as(stuff)), None)


def house_lines(store: StoreAt | None) -> list[Stuff]:
    """The lines of one's own store; none for the practice college, whose tables are built in.

    Behind them its substances, each by all its names, for what it holds and never lists.
    """
    if store is None or not store.exists():
        return []
    from stockroom.service.database import is_practice
    from stockroom.store.reading import reading
    from stockroom.store.snapshot_lines import lines_of

    try:
        if is_practice(store):
            return []
        with reading(store) as reader:
            lines = [of_line(line) for line in lines_of(reader).values()]
            return lines + _own_substances(reader)
    except StoreTrouble:
        return []  # a sum needs no store, so a damaged one must not stop it


def of_line(line: Line) -> Stuff:
    """What a stock line says, as a bench sum wants it."""
    return Stuff(
        line.item,
        line.substance,
        line.form,
        line.molar_mass,
        line.assay,
        line.density,
        line.strength_text,
        line.storage_group,
    )


def density_of(percent_ww: float, stuff: Stuff, lines: Iterable[Stuff] = ()) -> float | None:
    """The g/cm³ of that substance at that % w/w, where one's own line says; else None."""
    text = f"{percent_ww:g} % w/w"
    # a formula was asked for, and the lines are kept under names
    named = plain(shipped.formulas().get(stuff.substance, stuff.substance))
    for line in lines:
        if line.density and line.strength_text == text and plain(line.substance) == named:
            return line.density
    return None


def shipped_density_of(percent_ww: float, stuff: Stuff) -> float | None:
    """The g/cm³ that a line of the shipped tables has at that % w/w; else None."""
    return density_of(percent_ww, stuff, _shipped_lines())


def _own_substances(reader: Reader) -> list[Stuff]:
    rows = {row["id"]: row for row in reader.rows("substance")}
    named = [(row["substance"], row) for row in rows.values()]
    named += [(row["name"], rows[row["substance_id"]]) for row in reader.rows("other_name")]
    return [
        Stuff(
            name,
            row["substance"],
            None,
            row["molar_mass"],
            storage_group=row["storage_group"],
            formula=row["formula"],
            liquid_density=row["density"],
        )
        for name, row in named
    ]


def _sold(substance: str, solids: Iterable[Stuff]) -> dict[str, Stuff]:
    """The forms that the shipped tables know of a substance; empty where they list none."""
    forms = _forms(map(_plainly, solids), plain(substance))
    usual, row = shipped.bought_as(substance), shipped.row_of(substance)
    if not (usual and row):
        return forms
    if not forms:
        dry = replace(_of_substance(row), name=row["formula"])
        forms[dry.name] = dry
    return forms | {usual: _by_formula(usual, [])}


def _forms(solids: Iterable[Stuff], asked: str) -> dict[str, Stuff]:
    found: dict[str, Stuff] = {}
    for stuff in solids:
        if plain(stuff.substance) == asked:
            found.setdefault(stuff.name, stuff)
    return found


def _alike(one: Stuff, other: Stuff) -> bool:
    return _weighed_as(one) == _weighed_as(other)


def _plainly(stuff: Stuff) -> Stuff:
    # marble chips are one way to buy calcium carbonate, and no other form of it
    other = plain(stuff.substance) not in plain(stuff.name) and not stuff.is_hydrate
    return replace(stuff, name=stuff.substance) if other and stuff.formula else stuff


def _weighed_as(stuff: Stuff) -> float | str:
    # two jars of one form, lumps and powder, weigh the same
    return stuff.name if stuff.molar_mass is None else round(stuff.molar_mass, 2)


def _as_held(of: str, known: Iterable[Stuff]) -> str:
    # one's own name for it is not to be spelt otherwise
    return of if any(plain(of) == plain(each.name) for each in known) else known_spelling(of)


def _poured(substance: str, house: Iterable[Stuff]) -> bool:
    """Is it bought as a liquid, or as a solution that nobody weighs?"""
    row, named = shipped.row_of(substance) or {}, plain(substance)
    lines = (*house, *_shipped_lines())
    liquid = any(each.form is Form.LIQUID and plain(each.substance) == named for each in lines)
    return liquid or row.get("storage_group") == "peroxide"


def _by_formula(of: str, known: list[Stuff]) -> Stuff:
    trouble, hint = "", ""
    if _FORMULA.fullmatch(spelt(of)):
        try:
            return _of_formula(spelt(of))
        except BadAmount as bad:
            trouble = f" {bad.message}"
            # no name is near to it, and the formula knows where its number belongs
            hint = bad.hint if of.strip()[0].isdigit() else ""
    names = [*shipped.other_names(), *(stuff.name for stuff in known)]
    raise UnknownName(
        f"{of!r} is neither a name I know nor a formula.{trouble}", hint or nearest(of, names)
    )


def _of_formula(of: str) -> Stuff:
    # of a hydrate, the substance is what stands before the dot
    substance = shipped.formulas().get(spelt(of).partition(".")[0], of)
    row = shipped.row_of(substance)
    group = row["storage_group"] if row else ""
    whole = shipped.formulas().get(spelt(of), of)
    # a formula that two substances have is called by neither's name
    name = (shipped.form_named(of) if substance != of else "") or whole
    return Stuff(name, substance, None, molar_mass(of), storage_group=group, formula=of)


def _substance_of(of: str) -> str:
    return shipped.other_names().get(plain(of), of)


def _of_substance(row: Row) -> Stuff:
    name = row["substance"]
    return Stuff(name, name, None, None, storage_group=row["storage_group"], formula=row["formula"])


@lru_cache(maxsize=1)
def _shipped_lines() -> tuple[Stuff, ...]:
    return tuple(_of_row(row) for row in shipped.lines())


def _of_row(row: Row) -> Stuff:
    substance = shipped.substances().get(plain(row["substance"]), {})
    return Stuff(
        row["item"],
        row["substance"],
        Form(row["form"]),
        None,
        float(row["assay_percent"] or 100) / 100,
        shipped.density_in(row),
        row["strength"],
        substance.get("storage_group", ""),
        row["formula"] or substance.get("formula", ""),
    )
