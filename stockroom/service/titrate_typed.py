"""The words of a titration to measured figures: volumes with their glass, strengths in mol/dm³."""

from __future__ import annotations

from stockroom.chemistry.glassware import Ware, ware
from stockroom.chemistry.titration import Dilution, Measured
from stockroom.errors import BadAmount, BadInput
from stockroom.measure.amounts import Kind
from stockroom.measure.parsing import parse_amount, parse_strength
from stockroom.measure.strengths import StrengthUnit

_PIPETTES = (0.5, 1.0, 2.0, 5.0, 10.0, 20.0, 25.0, 50.0, 100.0)
_FLASKS = (*_PIPETTES[1:], 200.0, 250.0, 500.0, 1000.0, 2000.0, 5000.0)
# the mark that usual burettes of each size have
_BURETTES = {1.0: 0.01, 2.0: 0.01, 5.0: 0.02, 10.0: 0.05, 25.0: 0.1, 50.0: 0.1, 100.0: 0.2}


def dilution_of(text: str, glass_class: str) -> Dilution | None:
    """ "10 cm3 to 250 cm3" as a dilution; None for nothing. Raises: BadInput, BadAmount."""
    if not text:
        return None
    taken, to, made = text.partition(" to ")
    if not to:
        raise BadInput(f"--dilution {text!r}: from what to what?", 'Write "10 cm3 to 250 cm3".')
    return Dilution(
        pipetted(volume_of(taken, "--dilution"), glass_class),
        _made_up(volume_of(made, "--dilution"), glass_class),
    )


def volume_of(text: str, where: str) -> float:
    """A volume in cm³. Raises: BadAmount for anything else, or nothing."""
    amount = parse_amount(text, where=where)
    if amount.kind is not Kind.VOLUME or amount.micro <= 0:
        raise BadAmount(f"{where} {text!r} is not a volume above 0.", "Give it in cm3.")
    return amount.number


def pipetted(cm3: float, glass_class: str) -> Measured:
    """A volume measured into the flask: by a bulb pipette of that size, else from a burette."""
    if cm3 in _PIPETTES:
        return Measured(cm3, ware("pipette", cm3, glass_class))
    # no bulb pipette of that size: it was run from a burette
    size = next((each for each in _BURETTES if each >= cm3), 100.0)
    return Measured(cm3, ware("burette", size, glass_class, step=_BURETTES[size]))


def _made_up(cm3: float, glass_class: str) -> Measured:
    size = next((each for each in _FLASKS if each >= cm3), _FLASKS[-1])
    return Measured(cm3, ware("flask", size, glass_class))


def burette_of(cm3: float, glass_class: str) -> Ware:
    """The burette of that size. Raises: BadAmount for a size there is none of."""
    return ware("burette", cm3, glass_class, step=_BURETTES.get(cm3))


def molar_of(text: str, formula: str, where: str) -> float:
    """A strength as mol/dm³, its formula used where the unit needs it. Raises: BadAmount."""
    from stockroom.chemistry.formula import molar_mass
    from stockroom.chemistry.strength import canonical

    strength = parse_strength(text, where=where)
    plain = strength.unit is StrengthUnit.MOLAR
    # the formula library is loaded for the units that need it alone
    found = canonical(strength, molar_mass=None if plain else molar_mass(formula), of=where)
    if found.value <= 0:
        raise BadAmount(f"{where} {text!r} is nothing at all.", "Give a strength above 0.")
    return found.value
