"""The ways of mixing: ethanol and water, two strengths by volume or by mass, and by mass alone."""

from __future__ import annotations

from stockroom.chemistry import ethanol as spirit
from stockroom.chemistry import mixing
from stockroom.chemistry.ethanol import is_ethanol
from stockroom.chemistry.mixing import Mixed, Weighed
from stockroom.chemistry.strength import PER_MOLE
from stockroom.errors import BadInput, NotAllowed
from stockroom.measure.formats import format_number, format_strength
from stockroom.measure.strengths import StrengthUnit
from stockroom.service.bench import Sum, cm3, grams
from stockroom.service.bench_held import Held, Task

_FORMULA = "OIML R 22 formula, 20 °C"
_ADDITIVE = "volumes taken as additive: near enough for dilute solutions"
_SPIRIT_ASKS = "if it is ethanol they do not: add --of ethanol"
_SAME = 1e-9


def by_mass(task: Task) -> Sum:
    """A mass to make, from strengths by mass: exact, and no density is asked for.

    Without a second source the rest is water.
    Raises: BadInput for an amount that is nothing; MissingFigure; NotAllowed.
    """
    whole = task.volume.number
    if whole <= 0:
        raise BadInput(f"{grams(whole)} is nothing to make.", "Give a mass above 0.")
    wanted, *percents = _percents(task)
    second = percents[1] if len(percents) > 1 else 0.0
    one, other = mixing.by_mass(whole, wanted, percents[0], second)
    answer = f"{_parts(task, grams(one), grams(other))}, {grams(whole)} in all"
    turned = [
        f"{held.typed} is {_ww(percent)} by its density table"
        for held, percent in zip(task.all, (wanted, *percents), strict=True)
        if not held.by_mass
    ]
    return Sum(answer, one, "g", (*turned, *task.notes(), "by mass: exact, since masses add"))


def two(task: Task) -> Sum:
    """Two strengths to a third: by mass and density where per cents by mass are written.

    Raises: NotAllowed when what is wanted lies outside the two; MissingFigure.
    """
    return _two_by_density(task) if any(held.by_mass for held in task.all) else _two_by_volume(task)


def ethanol(task: Task) -> Sum:
    """Ethanol with water, or two ethanols: the masses add and the volumes do not.

    Raises: NotAllowed, BadAmount.
    """
    wanted, *stocks = vols = [_vol(held) for held in task.all]
    _refuse_outside(task, wanted, stocks if len(stocks) > 1 else [0.0, *stocks])
    if len(stocks) > 1:
        mixed = mixing.by_mass_and_density(task.volume.number, *(_spirit(vol) for vol in vols))
    else:
        made = spirit.dilute(task.volume.number, wanted, stocks[0])
        mixed = Mixed(made.stock_g, made.water_g, made.stock_cm3, made.water_cm3, made.total_cm3)
    told = ", ".join(
        f"{format_number(vol)} % v/v is {_ww(spirit.mass_from_vol(vol))} at"
        f" {spirit.density_from_vol(vol):.4f} g/cm³"
        for vol in dict.fromkeys(vols)
    )
    unused = (f"density {task.given:g} g/cm³ is not used: the formula's is",) if task.given else ()
    return _mixed_sum(task, mixed, (f"{told} ({_FORMULA})", *unused, *task.notes()))


def _two_by_volume(task: Task) -> Sum:
    unit, wanted, (first, second) = task.beside()
    one, other = mixing.by_volume(task.volume.number, wanted, first, second, unit=unit)
    answer = f"{_parts(task, cm3(one), cm3(other))}, {cm3(task.volume.number)} in all"
    asks = (_SPIRIT_ASKS,) if unit == StrengthUnit.VV and not task.stuff.name else ()
    return Sum(answer, one, "cm3", (*task.words(), _ADDITIVE, *asks))


def _two_by_density(task: Task) -> Sum:
    weighed, words = [], []
    for held, percent in zip(task.all, _percents(task), strict=True):
        density, whose = held.density()
        weighed.append(Weighed(percent, density))
        words.append(f"{_ww(percent)}: {whose}")
    mixed = mixing.by_mass_and_density(task.volume.number, *weighed)
    return _mixed_sum(task, mixed, (*dict.fromkeys(words), *task.notes()))


def _mixed_sum(task: Task, mixed: Mixed, details: tuple[str, ...]) -> Sum:
    parts = _parts(task, cm3(mixed.first_cm3), cm3(mixed.second_cm3))
    answer = f"{parts}, which come to {cm3(mixed.total_cm3)}"
    other = "water" if len(task.held) == 1 else task.held[1].typed
    weights = f"by mass {grams(mixed.first_g)} and {grams(mixed.second_g)}"
    lost, plain = mixed.lost_cm3, mixed.total_cm3 - mixed.first_cm3
    change = f"{'lose' if lost >= 0 else 'gain'} {format_number(abs(lost), 3)} cm³ on mixing"
    shrinks = f"volumes do not add: they {change}, so {cm3(plain)} of {other} would be wrong"
    return Sum(answer, mixed.first_cm3, "cm3", (*details, weights, shrinks))


def _parts(task: Task, one: str, other: str) -> str:
    second = task.held[1].name if len(task.held) > 1 else "water"
    return f"{one} of {task.held[0].name} and {other} of {second}"


def _percents(task: Task) -> list[float]:
    """% w/w of what is wanted and of each source, in this order."""
    if is_ethanol(task.stuff.substance):
        return [spirit.mass_from_vol(_vol(held)) for held in task.all]
    return [held.percent_ww() for held in task.all]


def _vol(held: Held) -> float:
    """The % by volume at 20 °C of an ethanol, from whatever it was written in."""
    if held.found is None and held.strength.unit is StrengthUnit.VV:
        return held.strength.value
    if held.by_mass:
        return spirit.vol_from_mass(held.percent_ww())
    conc = held.known().conc
    molar = conc.value if conc.unit == PER_MOLE else conc.value / spirit.MOLAR_MASS
    return spirit.vol_from_molar(molar)


def _refuse_outside(task: Task, wanted: float, ends: list[float]) -> None:
    # in the words that were typed, before the sum would refuse in its own
    if not min(ends) * (1 - _SAME) <= wanted <= max(ends) * (1 + _SAME):
        named = " and ".join(held.typed for held in task.held)
        raise NotAllowed(
            f"Cannot reach {task.wanted.typed} from {named}.",
            "Open a stronger bottle or lower the need.",
        )


def _spirit(vol: float) -> Weighed:
    return Weighed(spirit.mass_from_vol(vol), spirit.density_from_vol(vol))


def _ww(percent: float) -> str:
    return format_strength(percent, StrengthUnit.WW)
