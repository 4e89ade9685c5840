"""What a bench sum knows of a name: the house's own lines, then the tables that travel along.

A sum must work with no store at all, so the practice college's tables of
substances and lines stand behind the store; a formula stands behind both.
"""

from __future__ import annotations

import csv
import re
from collections.abc import Iterable
from dataclasses import dataclass
from difflib import get_close_matches
from functools import lru_cache
from pathlib import Path

from stockroom.chemistry.formula import molar_mass
from stockroom.errors import BadAmount, BadInput, StoreTrouble, UnknownName
from stockroom.planning.facts import Form, Line
from stockroom.store.likeness import plain

_FORMULA = re.compile(r"[A-Z(\[][A-Za-z0-9()\[\].·•*]*")


@dataclass(frozen=True, slots=True)
class Stuff:
    """One form of a substance: g/mol, assay as a fraction, g/cm³; None where not known.

    `strength_text` is the label's strength, which the density belongs to.
    """

    name: str
    substance: str
    form: Form | None
    molar_mass: float | None
    assay: float = 1.0
    density: float | None = None
    strength_text: str = ""
    storage_group: str = ""


def solute(of: str, lines: Iterable[Stuff] = ()) -> Stuff:
    """What is dissolved, for a name or a formula.

    The item of that name, else the substance. `lines` are the house's own and
    come first. Raises: UnknownName with the nearest names; BadAmount for a bad formula.
    """
    # one's own line comes first: its assay and density are off the bottle in hand
    known = [*lines, *_shipped_lines()]
    asked = _formulas().get(of.strip()) or _substance_of(of)
    named = [stuff for stuff in known if _same(stuff.name, of, asked)]
    named += [stuff for stuff in _shipped_substances() if _same(stuff.name, asked)]
    named += [stuff for stuff in known if _same(stuff.substance, asked)]
    return named[0] if named else _by_formula(of, known)


def solid(of: str, lines: Iterable[Stuff] = ()) -> Stuff:
    """The form that is weighed, for a name or a formula.

    A substance that stands on the shelf in two forms is asked about: the
    anhydrous salt weighed for the hydrate makes a solution half as strong again.
    Raises: BadInput naming the forms; UnknownName; BadAmount.
    """
    # a formula names its hydrate itself, so there is no form left to ask about
    if of.strip() in _formulas():
        return _by_formula(of, [])
    asked = _substance_of(of)
    solids = [each for each in [*lines, *_shipped_lines()] if each.form is Form.SOLID]
    exact = [stuff for stuff in solids if _same(stuff.name, of)]
    forms = {stuff.name: stuff for stuff in reversed(solids) if _same(stuff.substance, asked)}
    if exact or len(forms) == 1:
        return exact[0] if exact else next(iter(forms.values()))
    if forms:
        raise BadInput(
            f"{of!r}: which form is in the bottle? {' or '.join(sorted(forms))}.",
            f'Write --of "{min(forms)}".',
        )
    return solute(of, lines)


def house_lines(store: Path | None) -> list[Stuff]:
    """The lines of one's own store; none for the practice college, whose tables are built in."""
    if store is None or not store.exists():
        return []
    from stockroom.service.database import day_for, is_practice
    from stockroom.store.snapshot import facts

    try:
        known = {} if is_practice(store) else facts(store, day_for(store, None)).lines
    except StoreTrouble:
        return []  # a sum needs no store, so a damaged one must not stop it
    return [of_line(line) for line in known.values()]


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
    """The g/cm³ of that substance at that % w/w, where a line says; else None."""
    text = f"{percent_ww:g} % w/w"
    # a formula was asked for, and the lines are kept under names
    named = _formulas().get(stuff.substance, stuff.substance)
    for line in [*lines, *_shipped_lines()]:
        if line.substance == named and line.strength_text == text and line.density:
            return line.density
    return None


def _by_formula(of: str, known: list[Stuff]) -> Stuff:
    trouble = ""
    if _FORMULA.fullmatch(of.strip()):
        try:
            return Stuff(of.strip(), of.strip(), None, molar_mass(of.strip()))
        except BadAmount as bad:
            trouble = f" {bad.message}"
    names = sorted({stuff.name for stuff in known} | set(_other_names()))
    # by the standard library: a slip in a bench sum must not load the matcher of the store
    near = get_close_matches(of.casefold(), names, n=3, cutoff=0.3)
    nearest = f"Nearest: {'; '.join(near)}." if near else ""
    raise UnknownName(
        f"{of!r} is neither a name I know nor a formula.{trouble}",
        f"{nearest} Or give its formula, as --of Na2CO3.".strip(),
    )


def _same(name: str, *asked: str) -> bool:
    return plain(name) in {plain(each) for each in asked}


def _substance_of(of: str) -> str:
    return _other_names().get(plain(of), of)


@lru_cache(maxsize=1)
def _other_names() -> dict[str, str]:
    return {
        plain(name): row["substance"]
        for row in _table("substances")
        for name in (row["substance"], *row["other_names"].split(";"))
        if name.strip()
    }


@lru_cache(maxsize=1)
def _formulas() -> dict[str, str]:
    return {row["formula"]: row["substance"] for row in _table("substances") if row["formula"]}


@lru_cache(maxsize=1)
def _shipped_substances() -> tuple[Stuff, ...]:
    return tuple(
        Stuff(
            row["substance"],
            row["substance"],
            None,
            molar_mass(row["formula"]) if row["formula"] else None,
            storage_group=row["storage_group"],
        )
        for row in _table("substances")
    )


@lru_cache(maxsize=1)
def _shipped_lines() -> tuple[Stuff, ...]:
    substances = {stuff.name: stuff for stuff in _shipped_substances()}
    return tuple(_stuff(row, substances.get(row["substance"])) for row in _table("lines"))


def _stuff(row: dict[str, str], substance: Stuff | None) -> Stuff:
    dissolved = substance.molar_mass if substance else None
    return Stuff(
        row["item"],
        row["substance"],
        Form(row["form"]),
        molar_mass(row["formula"]) if row["formula"] else dissolved,
        float(row["assay_percent"] or 100) / 100,
        float(row["density_g_cm3"]) if row["density_g_cm3"] else None,
        row["strength"],
        substance.storage_group if substance else "",
    )


def _table(name: str) -> list[dict[str, str]]:
    with (_folder() / f"{name}.csv").open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))


def _folder() -> Path:
    from stockroom.service.database import seeds_folder

    return seeds_folder() / "college"
