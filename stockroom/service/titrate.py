"""A titration: titres in, a found strength out.

Works with no store; with one, a solution or a standard may be named by its bottle. What
the flask held is read in `titrate_standard.py`, a known strength in `titrate_known.py`,
and `titrate_bottle.py` writes the result to a bottle.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import date
from decimal import ROUND_HALF_UP, Decimal

from stockroom.chemistry.peroxide import MOLAR_MASS, convention, molar_to_vol
from stockroom.chemistry.reactions import Titration
from stockroom.chemistry.titration import (
    CONCORDANT_CM3,
    REPEATABILITY,
    Titres,
    found_in_burette,
    found_in_flask,
    repeatability_of,
)
from stockroom.chemistry.uncertainty import Budget, exact_enough, with_spread
from stockroom.errors import BadAmount, BadInput
from stockroom.measure.formats import format_number, format_strength
from stockroom.planning.facts import EXACT
from stockroom.service import titrate_standard
from stockroom.service.bench_names import house_lines
from stockroom.service.titrate_known import known_strength
from stockroom.service.titrate_standard import in_flask
from stockroom.service.titrate_stuff import Reagent, Where, reaction_of
from stockroom.service.titrate_typed import burette_of, dilutions_of, pipetted, volume_of
from stockroom.settings import StoreAt

_STRONGEST = 100.0
"""mol/dm³: as in `measure/parsing.py`, beyond it a unit has slipped."""


@dataclass(frozen=True, slots=True)
class Asked:
    """A titration as typed. Exactly one of `titrant` and `standard` is given.

    `titrant`: the strength in the burette, or its bottle. `standard`: what the flask
    held, "25.00 cm3 of 0.0167 mol/dm3", "0.1675 g of sodium oxalate", or "… in 250 cm3".
    `sample` is the aliquot of an unknown, or of a standard that was made up; `dilution`
    "10 cm3 to 250 cm3" what was done to an unknown before, in steps; `uncertainty` the standard
    uncertainty of the strength that is known.
    """

    reaction: str
    titres: Sequence[float]
    titrant: str = ""
    standard: str = ""
    uncertainty: str = ""
    sample: str = ""
    dilution: str = ""
    assay_percent: float | None = None
    assay_within: float = 0.0
    blank_cm3: float = 0.0
    within_cm3: float = CONCORDANT_CM3
    burette_cm3: float = 50.0
    glass_class: str = "B"


@dataclass(frozen=True, slots=True)
class Shown:
    """The same strength in another unit, with its standard uncertainty in it."""

    value: float
    uncertainty: float
    unit: str

    @property
    def text(self) -> str:
        """The strength with its expanded uncertainty."""
        return with_spread(self.value, 2 * self.uncertainty, unit=self.unit)


@dataclass(frozen=True, slots=True)
class Titrated:
    """What a titration came to: the strength found of `substance`, with its budget.

    `weighed` is the standard that was; `also` says the result in other units;
    `repeatability` is the titres' relative standard deviation, a fraction.
    """

    reaction: Titration
    substance: str
    formula: str
    budget: Budget
    details: tuple[str, ...]
    practice: bool = False
    weighed: Reagent | None = None
    also: tuple[Shown, ...] = ()
    repeatability: float | None = None
    standardised: bool = False

    @property
    def assay(self) -> float:
        """What part of the standard that was weighed counted, a fraction; 1 where none was."""
        return self.weighed.assay if self.weighed else 1.0

    @property
    def text(self) -> str:
        """The answer in a sentence."""
        shown = with_spread(self.budget.value, self.budget.expanded(), unit="mol/dm3")
        return f"{self.substance} found {shown} (k = 2)"


def titrate(asked: Asked, *, store: StoreAt | None = None, as_at: date | None = None) -> Titrated:
    """The strength a titration finds. Raises: BadInput, BadAmount, UnknownName, MissingFigure."""
    where = Where(store, as_at, house_lines(store))
    reaction = reaction_of(asked.reaction, where)
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
    work = _standardised if asked.standard else _sampled
    found = work(asked, reaction, titres, where)
    _refuse_absurd(found)
    return replace(found, repeatability=repeatability_of(titres.cm3))


def _refuse_absurd(found: Titrated) -> None:
    if found.budget.value > _STRONGEST:
        raise BadAmount(
            f"{found.substance} would be {format_strength(found.budget.value, 'mol/dm3')}: nothing"
            " is that strong.",
            "Check the units of the mass, the volumes and the strength.",
        )


def _standardised(asked: Asked, reaction: Titration, titres: Titres, where: Where) -> Titrated:
    if asked.dilution:
        raise BadInput(
            f"--dilution beside --standard {asked.standard!r}: that is for a sample.",
            'Write what it was made up to with it: "0.3562 g of sodium oxalate in 250 cm3".',
        )
    held = in_flask(
        titrate_standard.Asked(
            asked.standard,
            asked.sample,
            asked.uncertainty,
            asked.assay_percent,
            asked.glass_class,
            asked.assay_within,
        ),
        reaction,
        where,
    )
    budget = found_in_burette(reaction, titres, standard=held.standard)
    repeat = volumetric_repeatability(repeatability_of(titres.cm3))
    told = (*_how(reaction, titres), *held.words, *_told(budget, held.exact_if), *repeat)
    return _titrated(
        reaction, reaction.titrant, reaction.titrant_formula, budget, told,
        practice=held.practice, weighed=held.weighed, standardised=True,
    )  # fmt: skip


def _sampled(asked: Asked, reaction: Titration, titres: Titres, where: Where) -> Titrated:
    if not asked.sample:
        raise BadInput(
            f"How much {reaction.titrand} was in the flask for --titrant {asked.titrant!r}?",
            'Add --sample "25.00 cm3": what the pipette measured.',
        )
    if asked.assay_percent is not None:
        raise BadInput(
            f"--assay {asked.assay_percent:g} beside --titrant {asked.titrant!r}: nothing was"
            " weighed.",
            "Leave --assay out: it is of a solid that was weighed.",
        )
    known = known_strength(asked.titrant, reaction.burette, asked.uncertainty, "--titrant", where)
    aliquot = pipetted(volume_of(asked.sample, "--sample"), asked.glass_class)
    dilutions = dilutions_of(asked.dilution, asked.glass_class)
    budget = found_in_flask(
        reaction, titres, titrant=known.strength, aliquot=aliquot, dilutions=dilutions
    )
    told = (*_how(reaction, titres), *known.words, *_told(budget, known.exact_if))
    return _titrated(
        reaction, reaction.titrand, reaction.titrand_formula, budget, told, practice=known.practice
    )


def _titrated(
    reaction: Titration,
    substance: str,
    formula: str,
    budget: Budget,
    told: tuple[str, ...],
    *,
    practice: bool,
    weighed: Reagent | None = None,
    standardised: bool = False,
) -> Titrated:
    """The result, and how bottles of it are labelled where that is not in mol/dm³."""
    also, by = _also(budget, formula)
    said = (f"that is {' or '.join(each.text for each in also)}; {by}",) if also else ()
    return Titrated(
        reaction, substance, formula, budget, (*said, *told), practice, weighed, also,
        standardised=standardised,
    )  # fmt: skip


def _also(budget: Budget, formula: str) -> tuple[tuple[Shown, ...], str]:
    if formula == "H2O2":
        vol, percent = molar_to_vol(1.0), MOLAR_MASS / 10
        return (_scaled(budget, vol, "vol"), _scaled(budget, percent, "% w/v")), convention()
    if formula in ("NaOCl", "Ca(OCl)2"):
        return _chlorine(budget, formula)
    return (), ""


def _chlorine(budget: Budget, formula: str) -> tuple[tuple[Shown, ...], str]:
    from stockroom.chemistry.formula import molar_mass
    from stockroom.chemistry.strength import Concentration, express
    from stockroom.measure.strengths import StrengthUnit

    unit = StrengthUnit.CHLORINE
    one = express(Concentration(1.0, "mol/dm3"), unit, molar_mass=molar_mass(formula))
    return (_scaled(budget, one, unit),), "one ClO⁻ oxidises as one Cl2 does"


def _scaled(budget: Budget, one: float, unit: str) -> Shown:
    return Shown(budget.value * one, budget.standard * one, unit)


def _how(reaction: Titration, titres: Titres) -> tuple[str, ...]:
    listed = ", ".join(f"{titre:.2f}" for titre in titres.cm3)
    spread = max(titres.cm3) - min(titres.cm3)
    mean = f"mean titre {_to_hundredths(titres.mean())} cm³ of {listed}"
    mean += f"; they lie {spread:.2f} cm³ apart" if len(titres.cm3) > 1 else "; one alone"
    mean += f"; blank {titres.blank_cm3:.2f} cm³ taken off" if titres.blank_cm3 else ""
    ending = f", to the {reaction.end_point}" if reaction.end_point else ""
    return (mean, f"{reaction.equation}: {_ratio(reaction)}{ending}")


def _to_hundredths(cm3: float) -> Decimal:
    # by what is written: 22.425 lies below its half in binary, and 25.325 above
    return Decimal(repr(round(cm3, 6))).quantize(Decimal("0.01"), ROUND_HALF_UP)


def _ratio(reaction: Titration) -> str:
    flask, burette = reaction.per_titrant, 1.0
    # whole numbers as the equation has them: 5 to 2 and not 2.5 to 1
    scale = next(n for n in range(1, 13) if abs(flask * n - round(flask * n)) < 1e-9)
    return (
        f"{round(burette * scale)} mol {reaction.titrant} for {round(flask * scale)} mol"
        f" {reaction.titrand}"
    )


def _told(budget: Budget, exact_if: str) -> tuple[str, ...]:
    parts = ", ".join(f"{name} {format_number(share, 2)}" for name, share in budget.components[:3])
    line = f"an exact line (±{EXACT:.1%})".replace("%", " %")
    if exact_enough(budget.value, budget.standard, EXACT):
        percent = format_number(100 * budget.expanded() / budget.value, 3)
        enough = f"known to ±{percent} % (k = 2): not exact enough for {line}"
    else:
        enough = f"exact enough for {line}"
        # what nobody knows the doubt of may spoil it all: it is never called exact without a word
        enough += f", if {exact_if} is exact: its uncertainty is not known" if exact_if else ""
    return (
        f"standard uncertainty {format_number(budget.standard, 2)} mol/dm³; most from {parts}",
        enough,
    )


def volumetric_repeatability(found: float | None) -> tuple[str, ...]:
    """A word where titres repeat less well than a volumetric solution's should."""
    if found is None or found <= REPEATABILITY:
        return ()
    return (
        f"repeatability {format_number(found * 100, 2)} % (relative standard deviation): over the"
        f" {REPEATABILITY * 100:g} % that the British Pharmacopoeia allows a volumetric solution",
    )
