"""The ways of mixing: ethanol and water, two strengths by volume or by mass, and by mass alone."""

from __future__ import annotations

from stockroom.chemistry import ethanol as spirit
from stockroom.chemistry import mixing
from stockroom.chemistry.ethanol import is_ethanol
from stockroom.chemistry.mixing import Mixed, Weighed
from stockroom.chemistry.strength import PER_GRAM, PER_MOLE
from stockroom.errors import BadAmount, BadInput, MissingFigure, NotAllowed
from stockroom.measure.amounts import Kind
from stockroom.measure.formats import format_number, format_strength
from stockroom.measure.strengths import StrengthUnit
from stockroom.service.bench import Named, Sum, cm3, grams
from stockroom.service.bench_held import Held, Task

_FORMULA = "OIML R 22 formula, 20 °C"
_ADDITIVE = "volumes taken as additive: near enough for dilute solutions"
_STRONG_ADDITIVE = (
    "! Volumes taken as additive, and these are strong: no density is held that would tell."
)
_STRONG_GRAMS, _STRONG_MOLES = 200.0, 3.0  # of solute in 1 dm³
_NEAR_ENOUGH = 0.002  # of the whole: what is lost below it, no cylinder shows
_SPIRIT_ASKS = "if it is ethanol they do not: add --of ethanol"
_SAME = 1e-9


def shrinks(task: Task) -> bool:
    """Is it ethanol, whose volumes never add, made by volume?"""
    by_volume = task.volume.kind is Kind.VOLUME
    parts = task.wanted.strength.unit is StrengthUnit.PARTS and not task.wanted.strength.part_of
    return by_volume and not parts and is_ethanol(task.stuff.substance)


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
    told = (*turned, *task.notes(), "by mass: exact, since masses add")
    amounts = (*_amounts(task, one, other, "g"), Named("in all", whole, "g"))
    return Sum(answer, one, "g", told, amounts=amounts)


def two(task: Task) -> Sum:
    """Two strengths to a third: by mass and density where per cents by mass are written.

    Strengths per volume are mixed as volumes, as long as their densities, where they are
    held, say that little is lost by it.
    Raises: NotAllowed when what is wanted lies outside the two; MissingFigure.
    """
    if any(held.by_mass for held in task.all):
        mixed, words = _mixed_by_density(task)
        return _mixed_sum(task, mixed, words)
    try:
        mixed, words = _mixed_by_density(task)
    except (MissingFigure, BadAmount, NotAllowed):
        # no table, or one that ends too soon
        return _two_by_volume(task, known=False)
    if abs(mixed.lost_cm3) <= _NEAR_ENOUGH * mixed.total_cm3:
        return _two_by_volume(task, known=True)
    return _mixed_sum(task, mixed, words)


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


def _two_by_volume(task: Task, *, known: bool) -> Sum:
    """The two as volumes that add; `known`: their densities say that it is near enough."""
    unit, wanted, (first, second) = task.beside()
    one, other = mixing.by_volume(task.volume.number, wanted, first, second, unit=unit)
    answer = f"{_parts(task, cm3(one), cm3(other))}, {cm3(task.volume.number)} in all"
    asks = (_SPIRIT_ASKS,) if unit == StrengthUnit.VV and not task.stuff.name else ()
    limit = {PER_MOLE: _STRONG_MOLES, PER_GRAM: _STRONG_GRAMS}.get(unit)
    strong = not known and limit is not None and max(first, second) > limit
    told = (*task.words(), _STRONG_ADDITIVE if strong else _ADDITIVE, *asks)
    amounts = (*_amounts(task, one, other, "cm3"), Named("in all", task.volume.number, "cm3"))
    return Sum(answer, one, "cm3", told, amounts=amounts)


def _mixed_by_density(task: Task) -> tuple[Mixed, tuple[str, ...]]:
    """The two by their masses and densities, and whose figures those are."""
    weighed, words = [], []
    for held, percent in zip(task.all, _percents(task), strict=True):
        density, whose = held.density()
        weighed.append(Weighed(percent, density))
        words.append(f"{_ww(percent)}: {whose}")
    mixed = mixing.by_mass_and_density(task.volume.number, *weighed)
    return mixed, (*dict.fromkeys(words), *task.notes())


def _mixed_sum(task: Task, mixed: Mixed, details: tuple[str, ...]) -> Sum:
    parts = _parts(task, cm3(mixed.first_cm3), cm3(mixed.second_cm3))
    answer = f"{parts}, which come to {cm3(mixed.total_cm3)}"
    other = "water" if len(task.held) == 1 else task.held[1].typed
    weights = f"by mass {grams(mixed.first_g)} and {grams(mixed.second_g)}"
    lost, plain = mixed.lost_cm3, mixed.total_cm3 - mixed.first_cm3
    change = f"{'lose' if lost >= 0 else 'gain'} {format_number(abs(lost), 3)} cm³ on mixing"
    shrinks = f"volumes do not add: they {change}, so {cm3(plain)} of {other} would be wrong"
    amounts = (
        *_amounts(task, mixed.first_cm3, mixed.second_cm3, "cm3"),
        *_amounts(task, mixed.first_g, mixed.second_g, "g"),
        Named("come to", mixed.total_cm3, "cm3"),
    )
    return Sum(answer, mixed.first_cm3, "cm3", (*details, weights, shrinks), amounts=amounts)


def _amounts(task: Task, one: float, other: float, unit: str) -> tuple[Named, Named]:
    first, *rest = task.held
    second = rest[0].name or rest[0].typed if rest else "water"
    return Named(first.name or first.typed, one, unit), Named(second, other, unit)


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
