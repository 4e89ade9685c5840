"""How good a make for an exact line is, from what it is weighed and measured with that day.

An exact line is served by a strength that was found, so this decides nothing: it tells
whoever makes it whether the titration will only confirm, or has to find.
"""

from __future__ import annotations

import math
from datetime import date

from stockroom.chemistry.glassware import GlassKind, Ware, ware
from stockroom.chemistry.made import mass_input, volume_input
from stockroom.chemistry.uncertainty import COVERAGE, Input, exact_enough, quotient, with_spread
from stockroom.errors import StockroomError
from stockroom.measure.amounts import Kind
from stockroom.planning.batch import Batch, Source
from stockroom.planning.explode import Need
from stockroom.planning.facts import Closeness, Facts, Glass
from stockroom.planning.fitness import exactness

_MICRO = 1_000_000
_PER_CM3 = 1000


def how_good(facts: Facts, batch: Batch) -> str:
    """A sentence on the strength a make for an exact line will have; "" where none can be said.

    Said of one solid or one stock made up to a volume, where the house has written
    down its glassware. Balances and glass that are away that day are left out.
    """
    needs = [need for need in batch.needs if need.requirement.closeness is Closeness.EXACT]
    if not needs or not facts.glassware or len(batch.sources) != 1 or not batch.line.strength:
        return ""
    source, on = batch.sources[0], batch.run.on
    vessel = _vessel(facts, batch.volume / batch.vessels, on)
    taken = _taken(facts, source, on)
    if vessel is None or taken is None:
        return ""
    part, with_what = taken
    piece, fills = vessel
    volume = volume_input(batch.volume / batch.vessels / _PER_CM3, piece, fills=fills)
    relative = quotient([part], [volume]).relative
    tools = " and ".join((with_what, _named(piece)))
    return _words(batch.line.strength, relative, tools, batch.line.unit, _closest(needs))


def _words(strength: float, relative: float, tools: str, unit: str, closeness: float) -> str:
    standard = strength * relative
    poor = exact_enough(strength, standard, closeness, how=f"with {tools}", unit=unit)
    if poor:
        return f"made to {poor}; the titration finds it"
    shown = with_spread(strength, COVERAGE * standard, unit=unit)
    return f"made to {shown} with {tools}, before titration"


def _closest(needs: list[Need]) -> float:
    return min(exactness(need.requirement) for need in needs)


def _taken(facts: Facts, source: Source, on: date) -> tuple[Input, str] | None:
    """What is weighed or measured out, with its doubts, and the instrument's name."""
    if source.amount <= 0:
        return None
    if source.line.kind is Kind.MASS:
        here = [balance for balance in facts.balances if balance.here(on)]
        if not here:
            return None
        finest = min(here, key=lambda balance: (balance.step, balance.name))
        return mass_input(source.amount / _MICRO, finest.step / _MICRO), finest.name
    found = _measure(facts, source.amount, on)
    if found is None:
        return None
    piece, fills = found
    return volume_input(source.amount / _PER_CM3, piece, fills=fills, name="taken"), _named(piece)


def _vessel(facts: Facts, volume: float, on: date) -> tuple[Ware, int] | None:
    """What it is made up in: a flask of that very size, else a cylinder, filled so often."""
    flasks = [glass for glass in _here(facts, on, GlassKind.FLASK) if glass.size == round(volume)]
    if flasks:
        return _ware(flasks[0]), 1
    return _by_cylinder(facts, volume, on)


def _measure(facts: Facts, volume: float, on: date) -> tuple[Ware, int] | None:
    """The pipette that fits up to four times without rest; else a burette; else a cylinder."""
    pipettes = sorted(_here(facts, on, GlassKind.PIPETTE), key=_largest_first)
    for glass in pipettes:
        if volume % glass.size == 0 and volume // glass.size <= 4:
            return _ware(glass), round(volume // glass.size)
    burettes = [glass for glass in _here(facts, on, GlassKind.BURETTE) if glass.size >= volume]
    if burettes:
        return _ware(min(burettes, key=_smallest_first)), 1
    return _by_cylinder(facts, volume, on)


def _by_cylinder(facts: Facts, volume: float, on: date) -> tuple[Ware, int] | None:
    cylinders = sorted(_here(facts, on, GlassKind.CYLINDER), key=_smallest_first)
    if not cylinders:
        return None
    fitting = next((glass for glass in cylinders if glass.size >= volume), cylinders[-1])
    return _ware(fitting), math.ceil(volume / fitting.size)


def _smallest_first(glass: Glass) -> tuple[int, str]:
    return glass.size, glass.name


def _largest_first(glass: Glass) -> tuple[int, str]:
    return -glass.size, glass.name


def _here(facts: Facts, on: date, kind: GlassKind) -> list[Glass]:
    found = (glass for glass in facts.glassware if glass.kind == kind and glass.here(on))
    # a size or class no standard has: nothing is known of it, so nothing is said
    return [glass for glass in found if _standard(glass)]


def _standard(glass: Glass) -> bool:
    try:
        _ware(glass)
    except StockroomError:
        return False
    return True


def _ware(glass: Glass) -> Ware:
    step = None if glass.step is None else glass.step / _PER_CM3
    return ware(glass.kind, glass.size / _PER_CM3, glass.glass_class, step=step, name=glass.name)


def _named(piece: Ware) -> str:
    kind = "measuring cylinder" if piece.kind is GlassKind.CYLINDER else str(piece.kind)
    return f"a class {piece.glass_class} {kind}"
