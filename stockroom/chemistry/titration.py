"""Titres to a found strength: do they agree, what do they come to, and how well is it known.

One sum serves both ways round. With the burette's strength known, the titre finds
what is in the flask; with a standard weighed or pipetted into the flask, it finds
what is in the burette. Which reaction, and so in what ratio, is in `reactions.py`.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from stockroom.chemistry.figures import positive
from stockroom.chemistry.glassware import Ware
from stockroom.chemistry.made import volume_input, warmth
from stockroom.chemistry.reactions import Titration
from stockroom.chemistry.uncertainty import (
    Budget,
    Doubt,
    Input,
    normal,
    quotient,
    rectangular,
    repeatability,
    triangular,
)
from stockroom.errors import BadAmount
from stockroom.measure.formats import format_number

CONCORDANT_CM3 = 0.1
"""How far apart titres may lie. Common practice, no source."""

FACTORS, REPEATABILITY = (0.90, 1.10), 0.002
"""What a volumetric solution may be of its nominal strength, and its titres' relative spread.

Source: British Pharmacopoeia, appendix on volumetric solutions, as seen in a reprint; that
the 0.2 % is a relative standard deviation is from memory.
"""

_AGREE = 2
_CM3_PER_DM3 = 1000.0
_BINARY_DUST = 1e-9


def mean_titre(titres_cm3: Sequence[float], *, within_cm3: float = CONCORDANT_CM3) -> float:
    """The mean of concordant titres, in cm³; a single titre is its own mean.

    Raises: BadAmount when there is none, when one is not above 0, and when the
    highest and lowest lie further apart than `within_cm3`.
    """
    if not titres_cm3:
        raise BadAmount(f"{len(titres_cm3)} titres say nothing.", "Give at least one, in cm³.")
    # each one first: a misread zero would otherwise show as mere disagreement
    for titre in titres_cm3:
        positive(titre, "titre", "cm³")
    spread = max(titres_cm3) - min(titres_cm3)
    if spread > within_cm3 + _BINARY_DUST:
        raise BadAmount(
            f"Not concordant ({format_number(spread, 2)} cm³).", _leave_out(titres_cm3, within_cm3)
        )
    return sum(titres_cm3) / len(titres_cm3)


def _leave_out(titres_cm3: Sequence[float], within_cm3: float) -> str:
    """What to do with titres that disagree: the most that do agree, and those that do not."""
    rising = sorted(titres_cm3)
    runs = [
        [each for each in rising[start:] if each - rising[start] <= within_cm3 + _BINARY_DUST]
        for start in range(len(rising))
    ]
    agreeing = max(runs, key=len)
    # to the burette's hundredth, upwards: within what is said here they do agree
    apart = math.ceil((rising[-1] - rising[0]) * 100 - _BINARY_DUST) / 100
    rough = f"keep as rough: --within {apart:g}"
    # two runs of one length: nobody but the one who titrated can tell which
    if len(agreeing) < _AGREE or sum(len(run) == len(agreeing) for run in runs) > 1:
        return f"Add another, or {rough}."
    rest = ", ".join(f"{each:.2f}" for each in rising if each not in agreeing)
    kept = ", ".join(f"{each:.2f}" for each in agreeing)
    return f"{kept} agree: leave out {rest}, add another, or {rough}."


def repeatability_of(titres_cm3: Sequence[float]) -> float | None:
    """The relative standard deviation of the titres, a fraction; None for fewer than two."""
    count = len(titres_cm3)
    if count < _AGREE:
        return None
    # of one titre, where `repeatability` has that of their mean
    single = repeatability("", titres_cm3).standard * math.sqrt(count)
    return single * count / math.fsum(titres_cm3)


def found_by_titre(moles: float, titre_cm3: float, *, ratio: float) -> float:
    """The mol/dm³ of a titrant that took `titre_cm3` for `moles` of the standard.

    `ratio` is mol of titrant per mol of standard in the balanced equation: 6 for
    thiosulfate on iodate, 0.4 for permanganate on oxalate.
    Raises: BadAmount for a figure not above 0.
    """
    taken = positive(moles, "standard", "mol") * positive(ratio, "ratio")
    return taken * _CM3_PER_DM3 / positive(titre_cm3, "titre", "cm³")


def factor(found: float, nominal: float) -> float:
    """Found strength over nominal, both in one unit; 1 is exactly as labelled.

    Raises: BadAmount for a figure not above 0.
    """
    return positive(found, "found strength") / positive(nominal, "nominal strength")


@dataclass(frozen=True, slots=True)
class Titres:
    """What the burette said: titres in cm³, the blank taken off each, and the burette."""

    cm3: tuple[float, ...]
    burette: Ware
    blank_cm3: float = 0.0
    within_cm3: float = CONCORDANT_CM3

    def mean(self) -> float:
        """The mean less the blank, in cm³. Raises: BadAmount as `mean_titre`, and at or below 0."""
        mean = mean_titre(self.cm3, within_cm3=self.within_cm3)
        if not math.isfinite(self.blank_cm3) or self.blank_cm3 < 0 or self.blank_cm3 >= mean:
            raise BadAmount(
                f"blank {self.blank_cm3:g} cm³ against a titre of {mean:g} cm³ leaves nothing.",
                "Read the blank again.",
            )
        if mean > self.burette.size:
            raise BadAmount(
                f"titre {mean:g} cm³ is more than the {self.burette.words} holds.",
                "Name the burette that was used, or take a smaller sample.",
            )
        return mean - self.blank_cm3

    def as_input(self) -> Input:
        """The titre with its doubts: the burette, the room, and how well the end point repeats."""
        mean = self.mean()
        return Input(
            "titre",
            mean,
            (
                triangular("burette", self.burette.tolerance),
                warmth(mean),
                self._end_point(),
            ),
        )

    def _end_point(self) -> Doubt:
        # two readings, each to half a mark; titres that happen to be equal are no better than that
        read = rectangular("end point", self.burette.step / 2, times=2).standard
        read /= math.sqrt(len(self.cm3))
        if len(self.cm3) < 2:
            return normal("end point", read)
        return normal("end point", max(read, repeatability("", self.cm3).standard))


@dataclass(frozen=True, slots=True)
class Measured:
    """A volume as it was measured out, in cm³, and with what."""

    cm3: float
    ware: Ware

    def as_input(self, name: str) -> Input:
        """The volume, named so, with its doubts: the glass, its filling or reading, the room.

        The rule is that of what is made, `made.volume_input`: one flask, one doubt.
        Raises: BadAmount not above 0.
        """
        return volume_input(positive(self.cm3, name, "cm³"), self.ware, name=name)


@dataclass(frozen=True, slots=True)
class Dilution:
    """So much of the sample made up to so much, before the aliquot was taken."""

    taken: Measured
    made_up_to: Measured

    def check(self) -> None:
        """Pass when it thins. Raises: BadAmount for a volume made up to less than itself."""
        if self.made_up_to.cm3 < self.taken.cm3:
            raise BadAmount(
                f"{self.taken.cm3:g} cm³ made up to {self.made_up_to.cm3:g} cm³ is no dilution.",
                "Write what was taken first: 10 cm3 to 250 cm3.",
            )


@dataclass(frozen=True, slots=True)
class Standard:
    """What the flask held of a known substance, as inputs multiplied and divided to mol.

    `over` and `under` are in g, g/mol, mol/dm³ and cm³ so that their quotient times
    `scale` is in mol.
    """

    over: tuple[Input, ...]
    under: tuple[Input, ...] = ()
    scale: float = 1.0

    @staticmethod
    def weighed(mass: Input, molar_mass: Input, assay: Input, *, per_mole: float = 1.0) -> Standard:
        """A solid weighed straight into the flask; a mole of it holds `per_mole` of what counts."""
        return Standard((mass, assay), (molar_mass,), per_mole)

    @staticmethod
    def pipetted(strength: Input, volume: Measured) -> Standard:
        """So many cm³ of a standard solution in mol/dm³."""
        over = (strength, volume.as_input("standard volume"))
        return Standard(over, scale=1 / _CM3_PER_DM3)

    def aliquot(self, taken: Measured, made_up_to: Measured) -> Standard:
        """Of this, made up to so much, so much was taken. Raises: BadAmount for more than all."""
        if taken.cm3 > made_up_to.cm3:
            raise BadAmount(
                f"{taken.cm3:g} cm³ out of {made_up_to.cm3:g} cm³ is more than there is.",
                "The flask it was made up in comes with the standard, the pipette with --sample.",
            )
        over = (*self.over, taken.as_input("aliquot"))
        return Standard(over, (*self.under, made_up_to.as_input("made up to")), self.scale)


def found_in_flask(
    reaction: Titration,
    titres: Titres,
    *,
    titrant: Input,
    aliquot: Measured,
    dilutions: Sequence[Dilution] = (),
) -> Budget:
    """The mol/dm³ of the sample, from a titrant of known strength (mol/dm³).

    `aliquot` is what was pipetted into the flask; where the sample was diluted first, in
    one step or in more, its `dilutions` are undone. Raises: BadAmount for figures that cannot be.

    >>> from stockroom.chemistry.glassware import ware
    >>> from stockroom.chemistry.reaction_names import titration_of
    >>> titres = Titres((18.72,), ware("burette", 50, "B", step=0.1))
    >>> twenty = Measured(20, ware("pipette", 20, "B"))
    >>> found = found_in_flask(
    ...     titration_of("KMnO4 on H2O2"), titres, titrant=Input("permanganate", 0.021),
    ...     aliquot=twenty,
    ... )
    >>> round(found.value, 5)
    0.04914
    """
    over = [titrant, titres.as_input()]
    under = [aliquot.as_input("aliquot")]
    for number, dilution in enumerate(dilutions, start=1):
        dilution.check()
        which = f" {number}" if len(dilutions) > 1 else ""
        over.append(dilution.made_up_to.as_input(f"made up to{which}"))
        under.append(dilution.taken.as_input(f"taken{which}"))
    return quotient(over, under, scale=reaction.per_titrant)


def found_in_burette(reaction: Titration, titres: Titres, *, standard: Standard) -> Budget:
    """The mol/dm³ of the titrant, from a known amount of standard in the flask.

    Raises: BadAmount for figures that cannot be.
    """
    scale = standard.scale * _CM3_PER_DM3 / reaction.per_titrant
    return quotient(standard.over, (*standard.under, titres.as_input()), scale=scale)
