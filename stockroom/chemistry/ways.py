"""The search behind `steps.py`: every chain of dilutions a bench can do, cheapest kept.

It runs backwards, from the solution that is wanted to the one that is weighed for. A
state is how strong the solution before must be, how much of it is taken, and how much
of the allowed error the steps after it use up; of two states alike in strength only one
that is better in some way is kept. Errors are logarithms, so that they add. Volumes in cm³.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from dataclasses import dataclass

from stockroom.chemistry.glassware import GlassKind, Ware, least_measurable

# Dilutions that a person can check in the head; bulb pipettes bring ratios of their own.
_RATIOS = (2, 2.5, 4, 5, 10, 20, 25, 40, 50, 100, 200, 250, 500, 1000)
_FILLS = (1, 2)
"""How often a pipette may be filled for one step: a third filling is a larger pipette's job."""

_REFILLS = 3

_SAME = 1e-9


@dataclass(frozen=True, slots=True)
class Vessel:
    """A volume to make up to, the piece it is made up in, and the logarithms of its error.

    `up` is how much stronger a solution may turn out for it, `down` how much weaker.
    """

    piece: Ware
    volume: float
    up: float
    down: float


@dataclass(frozen=True, slots=True)
class Way:
    """One dilution: so much by that piece, so many times, made up in that vessel.

    `ratio` is how many times weaker it makes the solution; `up` and `down` as above.
    """

    taken: float
    fills: int
    piece: Ware
    vessel: Vessel
    ratio: float
    up: float
    down: float


@dataclass(frozen=True, slots=True)
class Chain:
    """The dilutions at the end of a design, the first done first, and what they ask for.

    The solution before them must be `ratio` times as strong as the one wanted, and
    `need` of it is taken; `poured` is what is left over of all that follows.
    """

    ways: tuple[Way, ...]
    ratio: float
    need: float
    up: float = 0.0
    down: float = 0.0
    poured: float = 0.0

    def before(self, way: Way, times: int = 1) -> Chain:
        """The chain with one more dilution in front, which is done so many times."""
        return Chain(
            (way, *self.ways),
            self.ratio * way.ratio,
            times * way.taken,
            self.up + way.up,
            self.down + way.down,
            self.poured + times * (way.vessel.volume - self.need),
        )


class Search:
    """The chains that a bench's glass can do for one volume, to one closeness.

    The last dilution is done so many `times`, each for the volume.
    """

    def __init__(
        self, glassware: Iterable[Ware], volume: float, closeness: float, times: int = 1
    ) -> None:
        self.closeness, self.times = closeness, times
        self.most_up, self.most_down = math.log1p(closeness), _log1p(-closeness)
        self.start = Chain((), 1.0, volume)
        pieces = _one_of_each(glassware)
        self.tools = [each for each in pieces if each.kind is not GlassKind.FLASK]
        self.spans = list(self._spans())
        self.ends = list(self._vessels(pieces, volume))
        # a cylinder is a poor vessel for what is measured from again
        flasks = [each for each in pieces if each.kind is GlassKind.FLASK]
        self.vessels = list(self._vessels(flasks or pieces, None))
        self.last_ways = self._ways(self.ends)
        self.ways = _best_of(self._ways(self.vessels))

    def within(self, up: float, down: float) -> bool:
        """True while an error up and one down keep to the closeness."""
        return up <= self.most_up + _SAME and down >= self.most_down - _SAME

    def vessels_for(self, chain: Chain) -> list[Vessel]:
        """Where the solution before a chain can be made up: more than is taken of it."""
        if not chain.ways:
            return self.ends
        # the last drop of a flask cannot be pipetted
        return [each for each in self.vessels if each.volume > chain.need * (1 + _SAME)]

    def before(self, chain: Chain, way: Way) -> Chain:
        """The chain with that dilution in front; the last one is done for every batch."""
        return chain.before(way, 1 if chain.ways else self.times)

    def longer(self, chains: list[Chain], strongest: float) -> list[Chain]:
        """Every chain with one dilution more, while the first stays below `strongest`."""
        found = [
            self.before(chain, way)
            for chain in chains
            for way in (self.ways if chain.ways else self.last_ways)
            if way.vessel.volume > chain.need * (1 + _SAME) or not chain.ways
            if chain.ratio * way.ratio <= strongest
            if self.within(chain.up + way.up, chain.down + way.down)
        ]
        return _undominated(found)

    def near(self, taken: float, vessel: Vessel) -> Iterator[Way]:
        """The ways to measure about `taken` into a vessel: at the nearest mark, or by bulb."""
        for piece, least, most in self.spans:
            # rounding to a mark moves it, and what it may move by is the closeness
            if not least * (1 - self.closeness) <= taken <= most * (1 + self.closeness):
                continue
            for fills, measured in _takes(piece, taken):
                close = abs(measured / taken - 1) <= self.closeness
                fits = measured < vessel.volume and measured <= most * (1 + _SAME)
                if close and fits and measured / fills >= least * (1 - _SAME):
                    yield _way(measured, fills, piece, vessel)

    def _spans(self) -> Iterator[tuple[Ware, float, float]]:
        """Each piece that measures closely enough, with the least and most it is good for."""
        for piece in self.tools:
            least = least_measurable(piece, self.closeness)
            if least is not None:
                most = piece.size * _most_fills(piece)
                yield piece, least, most

    def _vessels(self, pieces: list[Ware], volume: float | None) -> Iterator[Vessel]:
        """Flasks and whole cylinders; for a volume that is asked for, those that hold it."""
        for piece in pieces:
            held = piece.size if volume is None else _least_that_holds(piece, volume)
            if held and holds(piece) and measurable(piece, held, self.closeness):
                yield _vessel(piece, held)

    def _ways(self, vessels: list[Vessel]) -> list[Way]:
        return [
            way
            for vessel in vessels
            for piece in self.tools
            for way in self._with(piece, vessel)
            if self.within(way.up, way.down)
        ]

    def _with(self, piece: Ware, vessel: Vessel) -> Iterator[Way]:
        if piece.kind.one_mark:
            takes = [(fills, fills * piece.size) for fills in _FILLS]
        else:
            takes = [(1, vessel.volume / ratio) for ratio in _RATIOS]
        for fills, taken in takes:
            at_a_mark = piece.kind.one_mark or _on_mark(taken, piece.step)
            fits = taken < vessel.volume and taken <= fills * piece.size * (1 + _SAME)
            if at_a_mark and fits and measurable(piece, taken / fills, self.closeness):
                yield _way(taken, fills, piece, vessel)


def _most_fills(piece: Ware) -> int:
    # a burette is refilled with no harm; a cylinder's rest runs down its wall each time
    refilled = piece.kind in (GlassKind.BURETTE, GlassKind.GRADUATED)
    return _REFILLS if refilled else _FILLS[-1] if piece.kind.one_mark else 1


def _takes(piece: Ware, taken: float) -> list[tuple[int, float]]:
    """How often a piece is filled for about so much, and what that comes to."""
    if piece.kind.one_mark:
        return [(fills, fills * piece.size) for fills in _FILLS]
    fills = math.ceil(taken / piece.size - _SAME)
    return [(fills, fills * on_marks(taken / fills, piece.step))]


def holds(piece: Ware) -> bool:
    """True for what a solution can be made up in."""
    return piece.kind in (GlassKind.FLASK, GlassKind.CYLINDER)


def measurable(piece: Ware, volume: float, closeness: float) -> bool:
    """True where one mark of the piece is within the closeness of the volume."""
    least = least_measurable(piece, closeness)
    return least is not None and volume >= least * (1 - _SAME)


def on_marks(amount: float, step: float) -> float:
    """The amount at the nearest mark, or as it is where there are none."""
    return round(amount / step) * step if step else amount


def _one_of_each(pieces: Iterable[Ware]) -> list[Ware]:
    """The pieces in order; of those that measure alike, the one whose name comes first."""
    unlike = {_order(piece)[:-1]: piece for piece in sorted(pieces, key=_order, reverse=True)}
    return list(reversed(unlike.values()))


def _order(piece: Ware) -> tuple[str, float, float, float, str]:
    return piece.kind, piece.size, piece.step, piece.tolerance, piece.words


def _vessel(piece: Ware, volume: float) -> Vessel:
    off = piece.error / volume
    # filled too little it comes out stronger
    return Vessel(piece, volume, -_log1p(-off), -math.log1p(off))


def _way(taken: float, fills: int, piece: Ware, vessel: Vessel) -> Way:
    off = fills * piece.error / taken
    up, down = math.log1p(off) + vessel.up, _log1p(-off) + vessel.down
    return Way(taken, fills, piece, vessel, vessel.volume / taken, up, down)


def _least_that_holds(piece: Ware, volume: float) -> float:
    if piece.size < volume * (1 - _SAME):
        return 0.0
    return math.ceil(volume / piece.step - _SAME) * piece.step if piece.step else piece.size


def _on_mark(volume: float, step: float) -> bool:
    marks = volume / step
    return marks > 0.5 and abs(marks - round(marks)) < 1e-6


def _undominated(chains: list[Chain]) -> list[Chain]:
    kept: dict[float, list[Chain]] = {}
    for chain in sorted(chains, key=_worth):
        alike = kept.setdefault(round(math.log(chain.ratio), 9), [])
        if not any(_no_worse(other, chain) for other in alike):
            alike.append(chain)
    return [chain for alike in kept.values() for chain in alike]


def _worth(chain: Chain) -> tuple[float, float, float]:
    # a tie stays in the order it was found in, which the pieces' own order settles
    return chain.need, chain.poured, chain.up - chain.down


def _no_worse(one: Chain, other: Chain) -> bool:
    return (
        one.need <= other.need
        and one.up <= other.up
        and one.down >= other.down
        and one.poured <= other.poured
    )


def _best_of(ways: list[Way]) -> list[Way]:
    """Of the dilutions alike in ratio, vessel and amount, the one with the least error."""
    best: dict[tuple[float, float, float], Way] = {}
    for way in ways:
        key = (round(way.ratio, 9), round(way.taken, 9), round(way.vessel.volume, 9))
        if key not in best or way.up - way.down < best[key].up - best[key].down:
            best[key] = way
    return list(best.values())


def _log1p(value: float) -> float:
    return math.log1p(value) if value > -1 else -math.inf
