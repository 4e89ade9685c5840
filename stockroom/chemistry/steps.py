"""Too little to weigh or to measure: the fewest steps that still come close enough.

A step weighs a solid, or measures a liquid, and makes it up to a volume. What one step
cannot do closely enough, a larger batch can, or a stronger solution that is then
diluted, once or more. Two rules hold for every step. The house's own: a mark of the
instrument is no more than the closeness asks (`least_weighable`). And all steps
together, each off by as much as its instrument allows and all in the same direction,
stay within the closeness. g and cm³.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from dataclasses import dataclass, replace

from stockroom.chemistry.figures import positive
from stockroom.chemistry.glassware import Ware
from stockroom.chemistry.ways import Chain, Search, Vessel, Way, holds, on_marks
from stockroom.chemistry.weighing import Scale, batch_to_weigh, least_weighable
from stockroom.errors import BadAmount

MOST_STEPS = 4
"""A longer chain is not designed. The plan's own chains end here too."""

STRONGEST = 0.25
"""The g/cm³ no intermediate is made stronger than: much of a bench's salts still dissolve.

Common practice, no source; the solubility itself is better where it is known.
"""

_EXACT_ENOUGH = 1e-9
_TENFOLD = 10.0
_LARGE_FLASK = 1000.0
_LARGEST_BATCH = 10_000.0  # a trace is not worth a bath of solution


@dataclass(frozen=True, slots=True)
class Bench:
    """The balances and the measuring glass that are there on the day."""

    scales: tuple[Scale, ...] = ()
    glassware: tuple[Ware, ...] = ()


@dataclass(frozen=True, slots=True)
class Step:
    """So much, weighed or measured, made up to a volume.

    `amount` is in g where `tool` is a balance, else in cm³ and taken in so many
    `fills`. Without a `tool` or a `vessel` nothing is known of it, and it counts as
    exact. The first step takes from the bottle, each other one from the step before.
    More than 1 `times`: it is done so often, and what it makes is mixed.
    """

    amount: float
    volume: float
    tool: Scale | Ware | None = None
    vessel: Ware | None = None
    fills: int = 1
    times: int = 1

    @property
    def amount_error(self) -> float:
        """How far off the amount may be: half a step of a tared balance, or the glass's."""
        if isinstance(self.tool, Scale):
            # its zero is set and not read, so the display rounds once
            return self.tool.step / 2
        return self.fills * self.tool.error if self.tool else 0.0

    @property
    def volume_error(self) -> float:
        """How far off the volume may be."""
        return self.vessel.error if self.vessel else 0.0


@dataclass(frozen=True, slots=True)
class Design:
    """Steps that make a solution closely enough, in order.

    `error` is the worst they can do, as a fraction of the strength. `waste` is what is
    taken from the bottle beyond the need, in g or cm³ (rounding to a mark is none), and
    `poured` the cm³ of solutions left over.
    """

    steps: tuple[Step, ...]
    error: float
    waste: float
    poured: float


@dataclass(frozen=True, slots=True)
class _Wanted:
    """The amount that one batch's volume holds, in g of a solid or cm³ of a liquid."""

    amount: float
    volume: float
    closeness: float
    liquid: bool
    times: int = 1

    @property
    def per_cm3(self) -> float:
        return self.amount / self.volume


def design(
    amount: float,
    volume: float,
    *,
    closeness: float,
    bench: Bench,
    liquid: bool = False,
    strongest: float = STRONGEST,
    most: int = 3,
) -> tuple[Design, ...]:
    """The ways to make `volume` cm³ that holds `amount`, the best first; none: empty.

    `amount` is in g of the solid, or with `liquid` in cm³ of the stock solution.
    `closeness` is a fraction below 1; `strongest` the g/cm³ a solid is dissolved to, but
    for what is asked itself. The fewest steps come first, and of those the
    least waste; a longer way is given where it wastes less. With no glass on the bench,
    volumes count as exact. At most `most` are given.
    Raises: BadAmount for a figure not above 0, a closeness of 1 or more, or a stock
    weaker than what is made of it.
    Source: the least weighable, common practice; the search is ours.
    """
    wanted = _Wanted(
        positive(amount, "amount"), positive(volume, "volume", "cm³"), closeness, liquid
    )
    if positive(closeness, "closeness") >= 1:
        raise BadAmount(f"closeness {closeness:g} is no fraction below 1.", "5 % is 0.05.")
    if liquid and amount > volume * (1 + _EXACT_ENOUGH):
        raise BadAmount(
            f"{amount:g} cm³ of the stock do not go into {volume:g} cm³.", "Take a stronger stock."
        )
    if not any(holds(each) for each in bench.glassware):
        return () if liquid else tuple(_by_weight_alone(wanted, bench.scales))[:most]
    times = _times(wanted, bench)
    batch = _Wanted(amount / times, volume / times, closeness, liquid, times)
    return _pick(_every(batch, bench, strongest), most)


def worst_error(steps: Iterable[Step], per_cm3: float) -> float:
    """The furthest that steps can end from `per_cm3`, as a fraction of it.

    Every amount and volume off by as much as its instrument allows, in the direction
    that does the most harm.
    """
    high = low = 1.0
    for step in steps:
        high *= (step.amount + step.amount_error) / (step.volume - step.volume_error)
        low *= (step.amount - step.amount_error) / (step.volume + step.volume_error)
    return max(high / per_cm3 - 1, 1 - low / per_cm3)


def _times(wanted: _Wanted, bench: Bench) -> int:
    """How many batches a volume takes that no vessel of the bench holds."""
    largest = max(each.size for each in bench.glassware if holds(each))
    return math.ceil(wanted.volume / largest - _EXACT_ENOUGH)


def _every(wanted: _Wanted, bench: Bench, strongest: float) -> list[Design]:
    """All designs of the fewest steps, and those of two where one is enough."""
    search = Search(bench.glassware, wanted.volume, wanted.closeness, wanted.times)
    # a stock is never made stronger by diluting it, and a solid has to dissolve
    most = 1.0 if wanted.liquid else max(strongest, wanted.per_cm3)
    chains, found = [search.start], list[Design]()
    for depth in range(1, MOST_STEPS + 1):
        for chain in chains:
            found += _designs(wanted, _firsts(wanted, bench.scales, search, chain))
        if depth == 2 and wanted.liquid:
            found += _designs(wanted, _bulb_first(wanted, search))
        if found and depth > 1:
            break
        chains = search.longer(chains, most / wanted.per_cm3 * (1 + _EXACT_ENOUGH))
    return found


def _firsts(
    wanted: _Wanted, scales: tuple[Scale, ...], search: Search, chain: Chain
) -> Iterator[tuple[Chain, Step]]:
    """The first steps that give a chain what it asks for."""
    for vessel in search.vessels_for(chain):
        amount = wanted.per_cm3 * chain.ratio * vessel.volume
        if wanted.liquid:
            yield from ((chain, _step(way)) for way in search.near(amount, vessel))
        else:
            yield from ((chain, step) for step in _weighed(wanted, scales, amount, vessel))


def _weighed(
    wanted: _Wanted, scales: tuple[Scale, ...], grams: float, vessel: Vessel
) -> Iterator[Step]:
    for scale in scales:
        shown = on_marks(grams, scale.step)
        least = max(least_weighable(scale.step, wanted.closeness), scale.least)
        if shown >= least * (1 - _EXACT_ENOUGH):
            yield Step(shown, vessel.volume, scale, vessel.piece)


def _bulb_first(wanted: _Wanted, search: Search) -> Iterator[tuple[Chain, Step]]:
    """A bulb pipette of stock first, and then the odd volume from marks: 1 in 100, then 35."""
    for first in search.ways:
        if not first.piece.kind.one_mark:
            continue
        held = first.taken / first.vessel.volume
        for end in search.ends:
            taken = wanted.per_cm3 * end.volume / held
            for way in search.near(taken, end):
                chain = search.before(search.start, way)
                if chain.need < first.vessel.volume and way.taken < end.volume:
                    yield chain, _step(first)


def _step(way: Way) -> Step:
    return Step(way.taken, way.vessel.volume, way.piece, way.vessel.piece, way.fills)


def _designs(wanted: _Wanted, firsts: Iterable[tuple[Chain, Step]]) -> Iterator[Design]:
    for chain, first in firsts:
        *before, last = (first, *map(_step, chain.ways))
        steps = (*before, replace(last, times=wanted.times))
        error = worst_error(steps, wanted.per_cm3)
        if error <= wanted.closeness * (1 + _EXACT_ENOUGH):
            taken, often = first.amount * steps[0].times, steps[0].times
            poured = chain.poured + often * (first.volume - chain.need)
            yield Design(steps, error, _waste(wanted, taken), poured)


def _waste(wanted: _Wanted, taken: float) -> float:
    need = wanted.amount * wanted.times
    return taken - need if taken > need * (1 + wanted.closeness) else 0.0


def _pick(designs: list[Design], most: int) -> tuple[Design, ...]:
    """The best of each number of steps that wastes less, then the next best of the fewest."""
    ranked = sorted(designs, key=_rank)
    picked: list[Design] = []
    for each in ranked:
        if not picked or (
            len(each.steps) > len(picked[-1].steps) and _wasted(each) < _wasted(picked[-1])
        ):
            picked.append(each)
    others = [each for each in ranked if each not in picked]
    seen = {_outline(each) for each in picked}
    for each in others:
        if len(picked) < most and _outline(each) not in seen:
            picked.append(each)
            seen.add(_outline(each))
    return tuple(sorted(picked[:most], key=_rank))


def _rank(each: Design) -> tuple[int, float, float, float, tuple[str, ...]]:
    names = tuple(f"{step.tool and step.tool.name} {step.volume:g}" for step in each.steps)
    return len(each.steps), *_wasted(each), each.error, names


def _wasted(each: Design) -> tuple[float, float]:
    # to six figures: two routes to one amount differ in the last bits
    return float(f"{each.waste:.6g}"), float(f"{each.poured:.6g}")


def _outline(each: Design) -> tuple[float, ...]:
    """What a person would call the same way: the amounts, in whichever flasks."""
    return tuple(round(step.amount, 6) for step in each.steps)


def _by_weight_alone(wanted: _Wanted, scales: tuple[Scale, ...]) -> Iterator[Design]:
    """With no glass entered: as it is, or a larger batch, or ten times as strong and diluted."""
    finest = min(scales, key=lambda each: (each.step, each.name), default=None)
    if finest is None:
        return
    least = max(least_weighable(finest.step, wanted.closeness), finest.least)
    # up to the next figure that the display can show
    least = math.ceil(least / finest.step - _EXACT_ENOUGH) * finest.step
    grams, batch = batch_to_weigh(wanted.amount, wanted.volume, least)
    weighed = Step(on_marks(grams, finest.step), batch, finest)
    offers: list[tuple[Step, ...]] = (
        [(weighed,)] if batch <= max(wanted.volume, _LARGEST_BATCH) else []
    )
    offers += [_tenfold(weighed, wanted.volume)] if batch > wanted.volume else []
    yield from (_exact(wanted, steps) for steps in offers if len(steps) <= MOST_STEPS)


def _tenfold(weighed: Step, volume: float) -> tuple[Step, ...]:
    """The same mass in a smaller flask, and one in ten of it as often as that takes."""
    flask, dilutions = weighed.volume / _TENFOLD, 1
    while flask > max(volume, _LARGE_FLASK):
        flask, dilutions = flask / _TENFOLD, dilutions + 1
    part = Step(volume / _TENFOLD, volume)
    return (Step(weighed.amount, flask, weighed.tool), *(part,) * dilutions)


def _exact(wanted: _Wanted, steps: tuple[Step, ...]) -> Design:
    poured = sum(step.volume for step in steps) - wanted.volume
    poured -= sum(step.amount for step in steps[1:])
    waste = _waste(wanted, steps[0].amount)
    return Design(steps, worst_error(steps, wanted.per_cm3), waste, poured)
