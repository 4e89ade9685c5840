"""A titration: titres in, a found strength out, and the bottle re-dated by it.

Works with no store; with one, the burette's solution may be named by its bottle,
and the result may be written to a bottle as a found strength with its uncertainty.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import date
from pathlib import Path

from stockroom.chemistry.reactions import Titration, titration_of
from stockroom.chemistry.titration import (
    CONCORDANT_CM3,
    Standard,
    Titres,
    found_in_burette,
    found_in_flask,
)
from stockroom.chemistry.uncertainty import Budget, Input, exact_enough, normal, with_spread
from stockroom.errors import BadAmount, BadInput, MissingFigure
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_number, format_strength
from stockroom.measure.parsing import parse_amount
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.service.answers import Done
from stockroom.service.titrate_typed import burette_of, dilution_of, molar_of, pipetted, volume_of

_EXACT = 0.005
_BOTTLE = re.compile(r"[A-Za-z]\d+[a-z]?")


@dataclass(frozen=True, slots=True)
class Asked:
    """A titration as typed. Exactly one of `titrant` and `standard` is given.

    `titrant`: the strength in the burette, or its bottle. `standard`: what the flask
    held, "25.00 cm3 of 0.0167 mol/dm3" or "0.1675 g". `sample` is the aliquot of
    an unknown; `dilution` "10 cm3 to 250 cm3" what was done to it before;
    `uncertainty` the standard uncertainty of the strength that is known.
    """

    reaction: str
    titres: Sequence[float]
    titrant: str = ""
    standard: str = ""
    uncertainty: str = ""
    sample: str = ""
    dilution: str = ""
    assay_percent: float | None = None
    blank_cm3: float = 0.0
    within_cm3: float = CONCORDANT_CM3
    burette_cm3: float = 50.0
    glass_class: str = "B"


@dataclass(frozen=True, slots=True)
class Titrated:
    """What a titration came to: the strength found of `substance`, with its budget."""

    reaction: Titration
    substance: str
    formula: str
    budget: Budget
    details: tuple[str, ...]
    practice: bool = False

    @property
    def text(self) -> str:
        """The answer in a sentence."""
        shown = with_spread(self.budget.value, self.budget.expanded(), unit="mol/dm3")
        return f"{self.substance} found {shown} (k = 2)"


def titrate(asked: Asked, *, store: Path | None = None, as_at: date | None = None) -> Titrated:
    """The strength a titration finds. Raises: BadInput, BadAmount, UnknownName, MissingFigure."""
    reaction = titration_of(asked.reaction)
    titres = Titres(
        tuple(asked.titres),
        burette_of(asked.burette_cm3, asked.glass_class),
        asked.blank_cm3,
        asked.within_cm3,
    )
    if bool(asked.titrant) == bool(asked.standard):
        given = "both" if asked.titrant else "neither"
        raise BadInput(
            f"{reaction.name}: which strength is known? {given} was said.",
            f"--titrant for the {reaction.titrant} in the burette, or --standard for the"
            f" {reaction.titrand} in the flask.",
        )
    where = _Where(store, as_at)
    if asked.standard:
        return _standardised(asked, reaction, titres, where)
    return _sampled(asked, reaction, titres, where)


def _standardised(asked: Asked, reaction: Titration, titres: Titres, where: _Where) -> Titrated:
    if asked.sample or asked.dilution:
        raise BadInput(
            f"--sample or --dilution beside --standard {asked.standard!r}: the flask holds one.",
            "Say what the flask held as --standard alone.",
        )
    standard, said, practice = _standard(asked, reaction, where)
    budget = found_in_burette(reaction, titres, standard=standard)
    told = (*_how(reaction, titres), said, *_told(budget))
    return Titrated(reaction, reaction.titrant, reaction.titrant_formula, budget, told, practice)


def _sampled(asked: Asked, reaction: Titration, titres: Titres, where: _Where) -> Titrated:
    if not asked.sample:
        raise BadInput(
            f"How much {reaction.titrand} was in the flask?",
            'Add --sample "25.00 cm3": what the pipette measured.',
        )
    named = (reaction.titrant, reaction.titrant_formula)
    known = _known(asked.titrant, named, asked, where, "--titrant")
    aliquot = pipetted(volume_of(asked.sample, "--sample"), asked.glass_class)
    dilution = dilution_of(asked.dilution, asked.glass_class)
    budget = found_in_flask(
        reaction, titres, titrant=known.strength, aliquot=aliquot, dilution=dilution
    )
    told = (*_how(reaction, titres), known.words, *_told(budget))
    titrand, formula = reaction.titrand, reaction.titrand_formula
    return Titrated(reaction, titrand, formula, budget, told, known.practice)


def _how(reaction: Titration, titres: Titres) -> tuple[str, ...]:
    listed = ", ".join(f"{titre:.2f}" for titre in titres.cm3)
    spread = max(titres.cm3) - min(titres.cm3)
    mean = f"mean titre {titres.mean():.2f} cm³ of {listed}"
    mean += f"; they lie {spread:.2f} cm³ apart" if len(titres.cm3) > 1 else "; one alone"
    mean += f"; blank {titres.blank_cm3:.2f} cm³ taken off" if titres.blank_cm3 else ""
    return (mean, f"{reaction.equation}: {_ratio(reaction)}")


def _ratio(reaction: Titration) -> str:
    flask, burette = reaction.per_titrant, 1.0
    # whole numbers as the equation has them: 5 to 2 and not 2.5 to 1
    scale = next(n for n in range(1, 13) if abs(flask * n - round(flask * n)) < 1e-9)
    return (
        f"{round(burette * scale)} mol {reaction.titrant} for {round(flask * scale)} mol"
        f" {reaction.titrand}"
    )


def _told(budget: Budget) -> tuple[str, ...]:
    parts = ", ".join(f"{name} {format_number(share, 2)}" for name, share in budget.components[:3])
    enough = exact_enough(budget.value, budget.standard, _EXACT, how="for an exact line")
    return (
        f"standard uncertainty {format_number(budget.standard, 2)} mol/dm³; most from {parts}",
        enough or "exact enough for an exact line (±0.5 %)",
    )


def _standard(asked: Asked, reaction: Titration, where: _Where) -> tuple[Standard, str, bool]:
    amount, _, strength = asked.standard.partition(" of ")
    held = parse_amount(amount, where="--standard")
    if held.kind is Kind.MASS:
        return (*_weighed(asked, reaction, amount, held), False)
    if not strength:
        raise BadInput(
            f"--standard {asked.standard!r}: how strong is it?",
            'Write "25.00 cm3 of 0.0167 mol/dm3", or the mass that was weighed into the flask.',
        )
    named = (reaction.titrand, reaction.titrand_formula)
    known = _known(strength, named, asked, where, "--standard")
    volume = pipetted(held.number, asked.glass_class)
    return Standard.pipetted(known.strength, volume), known.words, known.practice


def _weighed(asked: Asked, reaction: Titration, text: str, held: Amount) -> tuple[Standard, str]:
    from stockroom.chemistry.formula import molar_mass
    from stockroom.chemistry.uncertainty import rectangular

    # the last figure written is what the balance showed
    decimals = len(text.strip().split()[0].replace(",", ".").partition(".")[2])
    step = 10.0**-decimals
    mass = Input("mass", held.number, (rectangular("balance", step, times=2),))
    assay = 1.0 if asked.assay_percent is None else asked.assay_percent / 100
    if not 0 < assay <= 1:
        raise BadAmount(f"assay {asked.assay_percent:g} % is not above 0 and at most 100.", "")
    grams_per_mole = molar_mass(reaction.titrand_formula)
    said = (
        f"{format_number(held.number)} g of {reaction.titrand_formula},"
        f" {grams_per_mole:.2f} g/mol, assay {format_number(assay * 100)} %, weighed to {step:g} g"
    )
    return Standard.weighed(mass, Input("molar mass", grams_per_mole), Input("assay", assay)), said


@dataclass(frozen=True, slots=True)
class _Known:
    """The strength that is known, as an input and in words; is it of the practice store."""

    strength: Input
    words: str
    practice: bool = False


@dataclass(frozen=True, slots=True)
class _Where:
    """The store a bottle is looked up in, and the day."""

    store: Path | None
    as_at: date | None


def _known(text: str, named: tuple[str, str], asked: Asked, where: _Where, option: str) -> _Known:
    """A strength typed, or that of a bottle; `named` is its substance and formula."""
    substance, formula = named
    if where.store is not None and _BOTTLE.fullmatch(text.strip()):
        return _of_bottle(text.strip(), substance, where.store, where.as_at)
    molar = molar_of(text, formula, option)
    if not asked.uncertainty:
        said = f"the {substance}'s {format_strength(molar, 'mol/dm3')} is taken as exact"
        return _Known(Input(f"{substance} strength", molar), said)
    spread = molar_of(asked.uncertainty, formula, "--uncertainty")
    said = f"the {substance}'s standard uncertainty is {format_strength(spread, 'mol/dm3')}"
    return _Known(Input(f"{substance} strength", molar, (normal("", spread),)), said)


def _of_bottle(number: str, substance: str, store: Path, as_at: date | None) -> _Known:
    from stockroom.service.bottle_strength import bottle_strength

    held = bottle_strength(store, number, as_at)
    if held.unit != "mol/dm3":
        raise MissingFigure(
            f"{held.number} is counted in {held.unit}, and no titration can use that.",
            "Give the strength in mol/dm3.",
        )
    check_substance(substance, held.number, held.substance, sure=False)
    doubts = (normal("", held.uncertainty),) if held.uncertainty else ()
    known = "" if doubts else "; its uncertainty is not known and counts as none"
    strength = Input(f"{held.number} strength", held.value, doubts)
    return _Known(strength, f"{held.words}{known}", held.practice)


def check_substance(named: str, number: str, substance: str, *, sure: bool) -> None:
    """Pass when a bottle may hold what a reaction names. Raises: BadInput, unless `sure`."""
    if sure or named in substance:
        return
    raise BadInput(
        f"{number} holds {substance or 'a mixture'}, and the reaction is of {named}.",
        "Name the reaction that was run, or confirm with --sure.",
    )


def record(
    path: Path,
    bottle: str,
    found: Titrated,
    *,
    sure: bool = False,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Write what a titration found to a bottle: a dated strength with its uncertainty.

    Raises: BadInput when the bottle holds something else; NotAllowed when it is more than
    25 % from the label; both unless `sure`.
    """
    from stockroom.service import checks
    from stockroom.service.bottle_strength import substance_in

    held = substance_in(path, bottle)
    check_substance(found.substance, bottle, held, sure=sure)
    value, spread = found.budget.value, found.budget.standard
    note = f"{found.reaction.name}; {found.details[0]}"
    done = checks.found(
        path,
        bottle,
        _as_strength(value),
        spread=_as_strength(spread, 2),
        note=note,
        sure=sure,
        on=on,
        today=today,
        by=by,
    )
    return replace(
        done, details=(*done.details, *found.details, f"! {found.reaction.caution}", NEW_LABEL)
    )


NEW_LABEL = "Write a new label: the strength found, the day, your initials."


def _as_strength(molar: float, figures: int = 5) -> Strength:
    # rounded in words alone: the ledger keeps the number whole
    return Strength(molar, StrengthUnit.MOLAR, f"{format_number(molar, figures)} mol/dm3")
