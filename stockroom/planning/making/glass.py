"""The measuring glass that is in on a day, and the piece of it a volume is measured with."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from datetime import date
from functools import lru_cache

from stockroom.chemistry.glassware import GlassKind, Ware, ware
from stockroom.errors import StockroomError
from stockroom.planning.facts import Facts, Glass

_PER_CM3 = 1000
_SAME = 1e-9

_WITH_EASE = 1 / 5
"""The part of a closeness that a cylinder may use up: ours, after the rule of `fine_enough`."""

# what runs down the wall of an emptied piece is lost anew each time: common practice, no source
_MOST_FILLS = {GlassKind.PIPETTE: 4, GlassKind.GRADUATED: 3, GlassKind.BURETTE: 3}


@dataclass(frozen=True, slots=True)
class Measure:
    """One volume by one piece, filled so often; `part` is how much of it the marks leave open."""

    piece: Ware
    fills: int
    part: float

    @property
    def words(self) -> str:
        """The piece by its name, how often it is filled, and how near that comes."""
        often = {1: "", 2: ", filled twice"}.get(self.fills, f", filled {self.fills} times")
        return f"{self.piece.words}{often}, ±{per_cent(self.part)}"


def per_cent(fraction: float) -> str:
    """A fraction as a per cent to two figures: "1.3 %"."""
    return f"{100 * fraction:.2g} %"


def pieces(facts: Facts, on: date | None = None) -> list[Ware]:
    """The glass the house has written down that a standard knows; with a day, what is in then."""
    here = (glass for glass in facts.glassware if on is None or glass.here(on))
    # a size or class no standard has: nothing is known of it, so nothing is said
    return [piece for piece in map(_ware, here) if piece is not None]


def measures(glass: Iterable[Ware]) -> bool:
    """True when there is anything among it that a draw can be measured with."""
    return any(piece.kind is not GlassKind.FLASK for piece in glass)


def best(glass: Iterable[Ware], volume: float, closeness: float) -> Measure | None:
    """What measures `volume` cm³ to a `closeness` with the fewest fillings, then the nearest.

    A cylinder that does it with ease goes before anything finer.
    """

    def rank(way: Measure) -> tuple[int, bool, float, int, float, str]:
        easy = way.piece.kind is GlassKind.CYLINDER and way.part <= closeness * _WITH_EASE
        return way.fills, not easy, *_nearest_first(way)

    good = [way for way in _ways(glass, volume) if way.part <= closeness * (1 + _SAME)]
    return min(good, key=rank, default=None)


def nearest(glass: Iterable[Ware], volume: float) -> Measure | None:
    """What comes nearest to `volume` cm³, however near that is; None with nothing to measure by."""
    return min(_ways(glass, volume), key=_nearest_first, default=None)


def vessel_for(glass: Iterable[Ware], volume: float) -> Measure | None:
    """What `volume` cm³ is made up in: a flask of that very size, else a cylinder."""
    held = list(glass)
    for piece in sorted(held, key=_smallest_first):
        if piece.kind is GlassKind.FLASK and abs(piece.size - volume) <= _SAME * volume:
            return Measure(piece, 1, piece.tolerance / volume)
    cylinders = [piece for piece in held if piece.kind is GlassKind.CYLINDER]
    ways = list(_ways(cylinders, volume))
    return min(ways, key=lambda way: (way.fills, *_smallest_first(way.piece)), default=None)


def _nearest_first(way: Measure) -> tuple[float, int, float, str]:
    # to six figures: two pieces of one kind may differ in the last bits only
    return float(f"{way.part:.6g}"), way.fills, *_smallest_first(way.piece)


def _smallest_first(piece: Ware) -> tuple[float, str]:
    return piece.size, piece.words


def _ways(glass: Iterable[Ware], volume: float) -> Iterator[Measure]:
    for piece in glass:
        fills = max(1, math.ceil(volume / piece.size - _SAME))
        whole = abs(volume - fills * piece.size) <= _SAME * volume
        if piece.kind is GlassKind.FLASK or fills > _MOST_FILLS.get(piece.kind, fills):
            continue
        # a bulb measures its size and nothing else
        if whole or not piece.kind.one_mark:
            yield Measure(piece, fills, fills * piece.resolution / volume)


@lru_cache(maxsize=256)
def _ware(glass: Glass) -> Ware | None:
    step = None if glass.step is None else glass.step / _PER_CM3
    try:
        return ware(
            glass.kind, glass.size / _PER_CM3, glass.glass_class, step=step, name=glass.name
        )
    except StockroomError:
        return None
