"""What a titration is done with, by its name: reactions, and standards in the form they had.

The anhydrous formula of an equation is not what stands on the shelf. So a name is looked
up like any other at the bench, and what it comes to is counted from its own formula.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from datetime import date

from stockroom.chemistry.reaction_forms import moles_in
from stockroom.chemistry.reaction_names import names_it, sides_of, titration_of
from stockroom.chemistry.reactions import Side, Titration
from stockroom.errors import BadInput, MissingFigure, UnknownName
from stockroom.planning.facts import Form
from stockroom.service import bench_tables as shipped
from stockroom.service.bench_names import Stuff, of_line, solid, solute
from stockroom.service.bench_tables import spelt
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain

_BOTTLE = re.compile(r"[A-Za-z][0-9]+[a-z]?")
# what stands in the tables under its full name alone
_TRADE = {
    "fas": "ammonium iron(II) sulfate hexahydrate",
    "mohr salt": "ammonium iron(II) sulfate hexahydrate",
    "soda ash": "sodium carbonate, anhydrous",
    "soda crystals": "sodium carbonate decahydrate",
    "arsenic trioxide": "As2O3",
    "arsenic(iii) oxide": "As2O3",
    "arsenious oxide": "As2O3",
    "potassium tetroxalate": "KHC2O4.H2C2O4.2H2O",
    "potassium biiodate": "KH(IO3)2",
    "potassium hydrogen iodate": "KH(IO3)2",
}
_PURE = re.compile(r"(?:(?:pure|dried|AR|analytical|primary[- ]standard)\s+)+", re.IGNORECASE)
# a metal is the same in any shape
_SHAPE = re.compile(
    r"\s+(?:metal|wire|foil|powder|turnings|filings|granules|shot|wool|strip|ribbon|sheet)\b",
    re.IGNORECASE,
)
_MOST_FORMS = 6
_BRACKETED = re.compile(r"(?P<name>.+?)\s+\((?P<formula>[^()]*(?:\([^()]*\)[^()]*)*)\)")


@dataclass(frozen=True, slots=True)
class Reagent:
    """What was weighed, or what a strength is of.

    `per_mole` is the mol of what the reaction counts in one mole of it; `assay` a fraction,
    and `label` the strength of what is bought as a liquid or a solution.
    """

    name: str
    formula: str
    grams_per_mole: float
    assay: float
    per_mole: float
    label: str = ""
    practice: bool = False

    @property
    def words(self) -> str:
        """Its name, its formula where that is known and not the name itself, and its g/mol."""
        formula = f", {self.formula}" if self.formula not in ("", self.name) else ""
        return f"{self.name}{formula}, {self.grams_per_mole:.3f} g/mol"


@dataclass(frozen=True, slots=True)
class Where:
    """The store a name or a bottle is looked up in, the day, and the house's own lines."""

    store: StoreAt | None
    as_at: date | None
    lines: Sequence[Stuff] = ()


def is_bottle(text: str, where: Where) -> bool:
    """Is that the number of a bottle? I2 is iodine, whatever stands on the shelf."""
    named = _BOTTLE.fullmatch(text.strip()) is not None
    return where.store is not None and named and spelt(text) not in shipped.formulas()


def reaction_of(text: str, where: Where) -> Titration:
    """The titration called so, by any name of the tables too. Raises: UnknownName, BadInput."""
    try:
        return titration_of(text)
    except UnknownName as unknown:
        names = [_formula_named(side, where) or side for side in sides_of(text)]
        try:
            return titration_of(" on ".join(names))
        except UnknownName:
            raise unknown from None


def reagent(of: str, side: Side, amount: str, where: Where, *, primary: bool = False) -> Reagent:
    """What `of` names, when it is a form of what stands there in the reaction.

    `amount` is what stood before it, and is quoted; `primary` says that the reaction's own
    formula is what is weighed.
    Raises: BadInput where it is something else, and where it may be one of several forms;
    UnknownName with the nearest names.
    """
    if is_bottle(of, where):
        return _in_bottle(of.strip(), side, amount, where)
    try:
        return _counted(_named(of, amount, where), side, f"{amount} of {of}", where)
    except UnknownName as unknown:
        if not names_it(of, side):
            raise _unknown(unknown, side, amount) from None
    if primary:
        return of_side(side)
    raise which_form(side, f"{amount} of {of}", amount, where)


def dissolved(of: str, side: Side, amount: str, where: Where) -> Reagent:
    """As `reagent`, of what is counted in moles, where its form does not matter."""
    if names_it(of, side):
        return of_side(side)
    try:
        return _counted(solute(of, where.lines), side, f"{amount} of {of}", where)
    except UnknownName as unknown:
        raise _unknown(unknown, side, amount) from None


def of_side(side: Side) -> Reagent:
    """The substance as its equation has it."""
    from stockroom.chemistry.formula import molar_mass

    name = shipped.formulas().get(spelt(side.formula), side.name)
    return Reagent(name, side.formula, molar_mass(side.formula), 1.0, 1.0)


def forms_of(side: Side, where: Where) -> dict[str, float]:
    """The solids known that hold what the reaction counts, one's own first: g for a mole of it."""
    from stockroom.chemistry.formula import molar_mass

    found: dict[str, float] = {}
    for name, formula, mass in _solids(where):
        per_mole = moles_in(formula, side.name, side.formula) if formula else None
        if per_mole is not None:
            found.setdefault(name, (mass or molar_mass(formula)) / per_mole)
    return found


def formula_of(stuff: Stuff, where: Where) -> str:
    """The formula of what it is, without the water where that is not written; "" where none is."""
    held = (line.formula for line in where.lines if plain(line.substance) == plain(stuff.substance))
    row = shipped.row_of(stuff.substance) or {}
    return stuff.formula or next((each for each in held if each), "") or row.get("formula", "")


def _unknown(unknown: UnknownName, side: Side, amount: str) -> UnknownName:
    # the bench sums' own option is none of a titration's
    hint = unknown.hint.replace("as --of Na2CO3", f'as "{amount} of {side.formula}"')
    return UnknownName(unknown.message, hint)


def _formula_named(word: str, where: Where) -> str:
    # an empty word, and one that no table knows, names nothing
    try:
        return formula_of(solute(word, where.lines), where) if word else ""
    except BadInput:
        return ""


def _solids(where: Where) -> Iterator[tuple[str, str, float | None]]:
    """Name, formula and g/mol, where that is not the formula's own."""
    for line in where.lines:
        if line.form is Form.SOLID:
            yield line.name, formula_of(line, where), line.given_mass
    for row in shipped.lines():
        if row["form"] == "solid":
            of_substance = (shipped.row_of(row["substance"]) or {}).get("formula", "")
            yield row["item"], spelt(row["formula"]) or of_substance, None


def _named(of: str, amount: str, where: Where) -> Stuff:
    for each in _spellings(of):
        try:
            return solid(each, where.lines)
        except UnknownName:
            continue
        except BadInput as which:
            raise BadInput(which.message, which.hint.replace('--of "', f'"{amount} of ')) from None
    return solid(of, where.lines)


def _spellings(of: str) -> Iterator[str]:
    yield of
    pure = _PURE.sub("", of).strip()
    for each in (pure, _SHAPE.sub("", pure)):
        yield _TRADE.get(each.lower(), each)
    both = _BRACKETED.fullmatch(pure)
    if both:
        yield from (both["formula"], both["name"])


def _in_bottle(number: str, side: Side, amount: str, where: Where) -> Reagent:
    from stockroom.service.bottle_strength import bottle_among, standing
    from stockroom.service.database import day_for
    from stockroom.store.snapshot import facts

    assert where.store is not None
    known = facts(where.store, day_for(where.store, where.as_at))
    bottle = bottle_among(known, number)
    line = known.lines[bottle.line]
    standing(bottle, line, known.as_at)  # refuses what is not to be opened
    found = _counted(of_line(line), side, f"{amount} of {number}", where)
    return replace(found, name=f"{bottle.number} {line.item}", practice=known.house.practice)


def _counted(stuff: Stuff, side: Side, typed: str, where: Where) -> Reagent:
    formula = formula_of(stuff, where)
    per_mole = moles_in(formula, side.name, side.formula) if formula else None
    if per_mole is None:
        shown = f"{stuff.name} ({formula})" if formula not in ("", stuff.name) else stuff.name
        forms = ", ".join(list(forms_of(side, where))[:_MOST_FORMS]) or side.formula
        raise BadInput(
            f'"{typed}": {shown} is not the {side.name} of this reaction.',
            f"Name the reaction that was run. This one counts {side.name}: {forms}.",
        )
    mass = stuff.molar_mass
    if mass is None:
        raise MissingFigure(f"{stuff.name}: its molar mass is not known.", "Give its formula.")
    own = stuff.formula or (formula if _mass_is_of(formula, mass) else "")
    return Reagent(stuff.name, own, mass, stuff.assay, per_mole, stuff.strength_text)


def _mass_is_of(formula: str, mass: float) -> bool:
    from stockroom.chemistry.formula import molar_mass

    # a line's mass may be that of a hydrate whose formula nobody wrote
    return abs(molar_mass(formula) - mass) < 1e-3


def which_form(side: Side, typed: str, amount: str, where: Where) -> BadInput:
    """The question to raise where nobody said in which form it was taken."""
    forms = list(forms_of(side, where)) or [side.formula]
    return BadInput(
        f'"{typed}": which form of {side.name}? {", ".join(forms[:_MOST_FORMS])}.',
        f'Write "{amount} of {forms[0]}".',
    )
