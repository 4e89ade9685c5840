"""What the flask held of a standard: weighed into it, out of a flask made up, or pipetted."""

from __future__ import annotations

from dataclasses import dataclass, replace

from stockroom.chemistry.made import assay_input
from stockroom.chemistry.reactions import Titration
from stockroom.chemistry.titration import Standard
from stockroom.chemistry.uncertainty import Input
from stockroom.errors import BadAmount, BadInput
from stockroom.measure.amounts import Kind
from stockroom.measure.formats import format_number
from stockroom.measure.parsing import parse_amount, parse_strength
from stockroom.measure.strengths import StrengthUnit
from stockroom.service.titrate_known import known_strength
from stockroom.service.titrate_stuff import Reagent, Where, of_side, reagent, which_form
from stockroom.service.titrate_typed import Held, held_of, made_up, mass_of, pipetted, volume_of


@dataclass(frozen=True, slots=True)
class Asked:
    """A standard as typed, and what was said beside it.

    `sample` is what was pipetted out of a standard that was made up; `uncertainty` the
    standard one of a strength; `assay_percent` that of a solid, `assay_within` how far off
    it may be by the label.
    """

    text: str
    sample: str = ""
    uncertainty: str = ""
    assay_percent: float | None = None
    glass_class: str = "B"
    assay_within: float = 0.0


@dataclass(frozen=True, slots=True)
class InFlask:
    """What the flask held: the standard, the words for it, and what was taken as exact."""

    standard: Standard
    words: tuple[str, ...]
    exact_if: str = ""
    practice: bool = False
    weighed: Reagent | None = None


def in_flask(asked: Asked, reaction: Titration, where: Where) -> InFlask:
    """What the flask held. Raises: BadInput, BadAmount, UnknownName, MissingFigure."""
    held = held_of(asked.text)
    _refuse_a_strength(held)
    amount = parse_amount(held.amount, where="--standard")
    if _weighed_before(held, asked):
        # "25.00 cm3 of 0.892 g in 250 cm3" says all of it at once
        text = f"{held.of} in {held.made_up_to}"
        return in_flask(replace(asked, text=text, sample=held.amount), reaction, where)
    if amount.kind is Kind.MASS:
        return _weighed(held, asked, reaction, where)
    if held.made_up_to or asked.sample:
        raise BadInput(
            f"--standard {asked.text!r} was pipetted as it is: the flask holds one.",
            'Write "25.00 cm3 of 0.0167 mol/dm3" alone, of the solution that was pipetted.',
        )
    if asked.assay_percent is not None:
        raise BadInput(
            f"--assay {asked.assay_percent:g} beside {asked.text!r}: nothing was weighed.",
            "Leave it out; a strength has it counted already.",
        )
    return _pipetted(held, volume_of(held.amount, "--standard"), asked, reaction, where)


def _refuse_a_strength(held: Held) -> None:
    """Pass for an amount. Raises: BadInput for "0.0167 mol/dm3", asking how much of it."""
    try:
        parse_amount(held.amount, where="--standard")
    except BadAmount as trouble:
        try:
            parse_strength(held.amount)
        except BadAmount:
            raise trouble from None
        raise BadInput(
            f"--standard {held.amount!r}: how much of it was in the flask?",
            f'Write "25.00 cm3 of {held.amount}": what the pipette measured.',
        ) from None


def _weighed_before(held: Held, asked: Asked) -> bool:
    """Is it so much out of a flask that a mass was made up in?"""
    if not held.made_up_to or asked.sample:
        return False
    try:
        return parse_amount(held.of.partition(" of ")[0]).kind is Kind.MASS
    except BadAmount:
        return False


def _pipetted(held: Held, cm3: float, asked: Asked, reaction: Titration, where: Where) -> InFlask:
    if not held.of:
        raise BadInput(
            f"--standard {asked.text!r}: how strong is it?",
            'Write "25.00 cm3 of 0.0167 mol/dm3", or the mass that was weighed into the flask.',
        )
    known = known_strength(held.of, reaction.flask, asked.uncertainty, "--standard", where)
    standard = Standard.pipetted(known.strength, pipetted(cm3, asked.glass_class))
    return InFlask(standard, known.words, known.exact_if, known.practice)


def _weighed(held: Held, asked: Asked, reaction: Titration, where: Where) -> InFlask:
    if asked.uncertainty:
        raise BadInput(
            f"--uncertainty {asked.uncertainty!r} beside {asked.text!r}: no strength was given.",
            "Leave it out: the balance and the glass are counted by themselves.",
        )
    mass, step = mass_of(held.amount, "--standard")
    taken = _taken(held, reaction, where)
    taken = replace(taken, assay=_assay(taken, asked))
    standard = Standard.weighed(
        mass, _molar_mass(taken), _assay_input(taken, asked), per_mole=taken.per_mole
    )
    words = _words(taken, held.amount, step, asked.assay_within)
    exact_if = "" if asked.assay_within else "the standard's assay"
    if not (held.made_up_to or asked.sample):
        return InFlask(standard, (words,), exact_if, taken.practice, taken)
    cm3, aliquot = _aliquot(held, asked)
    out_of = made_up(cm3, asked.glass_class)
    standard = standard.aliquot(pipetted(aliquot, asked.glass_class), out_of)
    words += f"; made up to {format_number(cm3)} cm³, of which {format_number(aliquot)} cm³"
    return InFlask(standard, (words,), exact_if, taken.practice, taken)


def _aliquot(held: Held, asked: Asked) -> tuple[float, float]:
    """The cm³ it was made up to, and those that were pipetted."""
    if not asked.sample:
        raise BadInput(
            f"--standard {asked.text!r}: how much of the {held.made_up_to} was in the flask?",
            'Add --sample "25.00 cm3": what the pipette measured.',
        )
    if not held.made_up_to:
        raise BadInput(
            f"--sample {asked.sample!r} of what? {asked.text!r} went into the flask: it holds one.",
            f'Write --standard "{asked.text} in 250 cm3" where it was made up first.',
        )
    return volume_of(held.made_up_to, "--standard"), volume_of(asked.sample, "--sample")


def _taken(held: Held, reaction: Titration, where: Where) -> Reagent:
    side = reaction.flask
    if held.of:
        return reagent(held.of, side, held.amount, where, primary=reaction.primary)
    if not reaction.primary:
        raise which_form(side, held.amount, held.amount, where)
    return of_side(side)


def _assay(taken: Reagent, asked: Asked) -> float:
    """What part of what was weighed is the substance: as given, else as its label says."""
    percent = asked.assay_percent
    if percent is not None:
        if not 0 < percent <= 100:
            raise BadAmount(
                f"assay {percent:g} % is not above 0 and at most 100.",
                "Read it off the label again: a per cent, as --assay 99.9.",
            )
        return percent / 100
    if not taken.label:
        return taken.assay
    strength = parse_strength(taken.label)
    if strength.unit is StrengthUnit.WW:
        return strength.value / 100
    raise BadInput(
        f"--standard {asked.text!r}: {taken.name} {taken.label} is a solution.",
        'Say how much was pipetted, as "25.00 cm3 of 0.1 mol/dm3", or add its --assay.',
    )


def _molar_mass(taken: Reagent) -> Input:
    from stockroom.chemistry.atomic_weights import molar_mass_doubt
    from stockroom.errors import MissingFigure

    try:
        doubts = (molar_mass_doubt(taken.formula),) if taken.formula else ()
    except MissingFigure:
        doubts = ()  # an element whose limits are not held: far less than the balance in any case
    return Input("molar mass", taken.grams_per_mole, doubts)


def _assay_input(taken: Reagent, asked: Asked) -> Input:
    return assay_input(taken.assay, asked.assay_within / 100)


def _words(taken: Reagent, amount: str, step: float, within: float) -> str:
    spread = f" ± {format_number(within)}" if within else ""
    each = "" if taken.per_mole == 1 else f", {taken.per_mole:g} mol counted in each mole"
    return (
        f"{amount} of {taken.words}{each}, assay {format_number(taken.assay * 100)}{spread} %,"
        f" weighed to {format_number(step)} g"
    )
