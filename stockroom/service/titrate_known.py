"""The strength a titration starts from: typed in any unit, or that of a bottle."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace

from stockroom.chemistry.reaction_forms import moles_in
from stockroom.chemistry.reaction_names import names_it
from stockroom.chemistry.reactions import Side
from stockroom.chemistry.strength import PER_MOLE
from stockroom.chemistry.uncertainty import Input, normal
from stockroom.errors import BadAmount, BadInput, MissingFigure
from stockroom.measure.formats import format_strength
from stockroom.measure.parsing import parse_strength
from stockroom.measure.reading import read_number
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.service.bench_known import Asked as Beside
from stockroom.service.bench_known import known
from stockroom.service.bench_names import Stuff
from stockroom.service.titrate_stuff import (
    Reagent,
    Where,
    dissolved,
    forms_of,
    is_bottle,
    of_side,
    reagent,
    which_form,
)

# of these a strength says how many moles there are, whatever was dissolved
_IN_MOLES = frozenset({StrengthUnit.MOLAR, StrengthUnit.NORMAL, StrengthUnit.VOL})
_SHARE = re.compile(r"(?P<percent>[0-9][0-9.,]*) ?(?:%|per ?cent)")
_SAME_MASS = 1e-3


@dataclass(frozen=True, slots=True)
class Known:
    """The strength that is known, in mol/dm³ and in words; is it of the practice store.

    `exact_if` names what was taken as exact because nobody said how well it is known.
    """

    strength: Input
    words: tuple[str, ...]
    exact_if: str = ""
    practice: bool = False


def known_strength(text: str, side: Side, uncertainty: str, option: str, where: Where) -> Known:
    """A strength of what stands there in the reaction, typed or that of a bottle.

    `uncertainty` is the standard one of it, as typed; `option` names it in messages.
    Raises: BadAmount, BadInput, UnknownName, MissingFigure.
    """
    if is_bottle(text, where):
        return _of_bottle(text.strip(), side, uncertainty, where)
    strength, of = _split(text, option)
    molar, words = _molar(strength, of, side, where)
    doubt = _doubt_of(uncertainty, of, side, where, molar)
    called = f"the {side.name}'s"
    if doubt is None:
        said = f"{called} {format_strength(molar, PER_MOLE)} is taken as exact"
        exact_if = f"{called} strength"
        return Known(Input(f"{side.name} strength", molar), (*words, said), exact_if)
    doubtful = _with_doubt(f"{side.name} strength", molar, doubt)
    said = f"{called} standard uncertainty is {format_strength(doubt, PER_MOLE)}"
    return Known(doubtful, (*words, said))


def _of_bottle(number: str, side: Side, uncertainty: str, where: Where) -> Known:
    from stockroom.service.bottle_strength import strength_on

    assert where.store is not None
    held, practice = strength_on(where.store, number, where.as_at)
    if held.unit != PER_MOLE:
        raise MissingFigure(
            f"{held.number} is counted in {held.unit}, and no titration can use that.",
            "Give the strength in mol/dm3.",
        )
    per_mole = in_a_mole(held.substance, side, held.number, where)
    molar = (held.expected or 0.0) * per_mole
    typed = _doubt_of(uncertainty, "", side, where, molar)
    doubt = typed if typed is not None else (held.uncertainty or 0.0) * per_mole
    counted = "" if per_mole == 1 else f"; {per_mole:g} mol {side.name} in each"
    unknown = "" if doubt else "; its uncertainty is not known and counts as none"
    name = f"{held.number} strength"
    strength = _with_doubt(name, molar, doubt) if doubt else Input(name, molar)
    exact_if = "" if doubt else f"{held.number}'s strength"
    return Known(strength, (f"{held.words}{counted}{unknown}",), exact_if, practice)


def in_a_mole(
    substance: str, side: Side, number: str, where: Where, *, sure: bool = False
) -> float:
    """The mol of what the reaction counts in a mole of what a bottle holds.

    Raises: BadInput when it holds something else, unless `sure`: then it is one.
    """
    formula = _formula_in(substance, where)
    per_mole = moles_in(formula, side.name, side.formula) if formula else None
    if per_mole is not None:
        return per_mole
    # a mixture that goes by the name of what counts, as iodine in iodide does
    named = substance and not formula and side.name in substance
    if sure or named or (substance and names_it(substance, side)):
        return 1.0
    raise BadInput(
        f"{number} holds {substance or 'a mixture'}, and the reaction is of {side.name}.",
        "Name the reaction that was run, or confirm with --sure.",
    )


def _formula_in(substance: str, where: Where) -> str:
    from stockroom.store.reading import reading

    assert where.store is not None
    with reading(where.store) as reader:
        rows = reader.ask("SELECT formula FROM substance WHERE substance = ?", substance)
    return str(rows[0]["formula"] or "") if rows else ""


def _doubt_of(uncertainty: str, of: str, side: Side, where: Where, molar: float) -> float | None:
    """A typed standard uncertainty in mol/dm³, of the same thing unless it names another.

    A per cent is of `molar` itself.
    """
    if not uncertainty:
        return None
    share = _SHARE.fullmatch(uncertainty.strip())
    if share:
        return float(read_number(share["percent"], where="--uncertainty")) / 100 * molar
    spread, named = _split(uncertainty, "--uncertainty")
    return _molar(spread, named or of, side, where)[0]


def _molar(strength: Strength, of: str, side: Side, where: Where) -> tuple[float, tuple[str, ...]]:
    """A typed strength as mol/dm³ of what the reaction counts, and what it was counted by."""
    taken = _taken(strength, of, side, where)
    settled, said = _settled(strength, side)
    # the normality of it may be held under what the reaction calls it
    stuff = Stuff(side.name, taken.name, None, taken.grams_per_mole, formula=taken.formula)
    found = known(settled, Beside(stuff, tuple(where.lines)), by_mass=False)
    if found.conc.value <= 0:
        raise BadAmount(f'"{strength.text}" is nothing at all.', "Give a strength above 0.")
    molar = found.conc.value * taken.per_mole
    # a titration takes no density: the strength may be given per volume instead
    notes = tuple(note.replace("; give --density off the label", "") for note in found.notes)
    told = (said,) if said else notes
    if strength.unit is StrengthUnit.NORMAL:
        told = (f"{strength.text} is {format_strength(molar, PER_MOLE)}: {'; '.join(told)}",)
    if strength.unit not in _IN_MOLES or taken.per_mole != 1:
        told = (*told, f"counted as {taken.words}")
    return molar, told


def _taken(strength: Strength, of: str, side: Side, where: Where) -> Reagent:
    """What the strength is of, in the form that it counts."""
    if strength.unit in _IN_MOLES:
        return dissolved(of, side, strength.text, where) if of else of_side(side)
    if of:
        return reagent(of, side, strength.text, where)
    _refuse_any_form(strength, side, where)
    return of_side(side)


def _split(text: str, option: str) -> tuple[Strength, str]:
    """A strength and what it is said to be of, "3.567 g/dm3 KIO3"; "" where nothing is said."""
    try:
        return parse_strength(text, where=option), ""
    except BadAmount as trouble:
        words = text.split()
        for end in range(len(words) - 1, 0, -1):
            try:
                strength = parse_strength(" ".join(words[:end]), where=option)
            except BadAmount:
                continue
            of = " ".join(words[end:]).removeprefix("of ")
            return strength, of
        raise trouble


def _refuse_any_form(strength: Strength, side: Side, where: Where) -> None:
    """Pass for what is one thing by mass. Raises: BadInput where a hydrate of it is usual."""
    usual = of_side(side).grams_per_mole
    if any(abs(grams / usual - 1) > _SAME_MASS for grams in forms_of(side, where).values()):
        raise which_form(side, strength.text, strength.text, where)


def _settled(strength: Strength, side: Side) -> tuple[Strength, str]:
    """A normality that names no reaction, counted by this one, and that in words."""
    # "0.1 N KMnO4" names what is in it, and no reaction
    stated = strength.reaction and not names_it(strength.reaction, side)
    if strength.unit is not StrengthUnit.NORMAL or stated or side.equivalents is None:
        return strength, ""
    counted = "equivalent" if side.equivalents == 1 else "equivalents"
    said = f"in this reaction a mole of {side.name} has {side.equivalents:g} {counted}"
    return replace(strength, reaction=f"{side.equivalents!r} eq per mol"), said


def _with_doubt(name: str, molar: float, doubt: float) -> Input:
    # as wide as the strength itself says that nothing is known
    if doubt >= molar:
        raise BadAmount(
            f"An uncertainty of {format_strength(doubt, PER_MOLE)} on"
            f" {format_strength(molar, PER_MOLE)} cannot be.",
            "Give the standard uncertainty, in the strength's own unit.",
        )
    return Input(name, molar, (normal("", doubt),))
