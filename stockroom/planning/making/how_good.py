"""How good the strength of a make will be, from what it is weighed and measured with that day.

An exact line is served by a strength that was found, so this decides nothing: it tells
whoever makes it what balance, glass and stock leave open, and of an exact line whether
the titration will only confirm, or has to find.
"""

from __future__ import annotations

from datetime import date

from stockroom.chemistry.glassware import GlassKind, Ware
from stockroom.chemistry.made import mass_input, volume_input
from stockroom.chemistry.uncertainty import (
    COVERAGE,
    Input,
    exact_enough,
    normal,
    quotient,
    with_spread,
)
from stockroom.keeping.strength import strengths_on
from stockroom.measure.amounts import Kind
from stockroom.planning.amounts import label_scale
from stockroom.planning.choosing.fitness import exactness
from stockroom.planning.explode import Need
from stockroom.planning.facts import Closeness, Facts
from stockroom.planning.making.batch import Batch, Source
from stockroom.planning.making.glass import best, nearest, pieces, vessel_for
from stockroom.planning.making.measuring import closeness_of

_MICRO = 1_000_000
_PER_CM3 = 1000


def how_good(facts: Facts, batch: Batch) -> str:
    """A sentence on the strength a make will have; "" where none can be said.

    Said of one solid or one stock made up to a volume, where the house has written
    down its glassware. Balances and glass that are away that day are left out.
    """
    if not facts.glassware or len(batch.sources) != 1 or not batch.line.strength:
        return ""
    source, on = batch.sources[0], batch.run.on
    # each vessel is weighed for by itself, and each flask is off by as much as it is
    held = batch.volume / batch.vessels / _PER_CM3
    vessel = vessel_for(pieces(facts, on), held)
    taken = _taken(facts, batch, source.amount / batch.vessels)
    if vessel is None or taken is None:
        return ""
    part, with_what = taken
    volume = volume_input(held, vessel.piece, fills=vessel.fills)
    stock = _stock(facts, source, on)
    relative = quotient([part, *([stock] if stock else [])], [volume]).relative
    words = _words(batch, relative, _both(with_what, _named(vessel.piece)))
    unknown = source.line.kind is Kind.VOLUME and stock is None
    return words + (f", taking {source.bottle or 'the stock'} as it stands" if unknown else "")


def _words(batch: Batch, relative: float, tools: str) -> str:
    line, exact = batch.line, _exact(batch)
    scale, unit = label_scale(line)
    strength = (line.strength or 0.0) * scale
    standard = strength * relative
    closeness = min((exactness(need.requirement) for need in exact), default=None)
    if closeness is not None:
        how = f"with {tools}"
        poor = exact_enough(strength, standard, closeness, how=how, unit=unit)
        if poor:
            return f"made to {poor}; the titration finds it"
    shown = with_spread(strength, COVERAGE * standard, unit=unit)
    return f"made to {shown} with {tools}" + (", before titration" if exact else "")


def _exact(batch: Batch) -> list[Need]:
    return [need for need in batch.needs if need.requirement.closeness is Closeness.EXACT]


def _taken(facts: Facts, batch: Batch, amount: float) -> tuple[Input, str] | None:
    """What is weighed (µg) or measured out (µL), with its doubts, and the instrument's name."""
    on = batch.run.on
    if amount <= 0:
        return None
    if batch.sources[0].line.kind is Kind.MASS:
        here = [balance for balance in facts.balances if balance.here(on)]
        if not here:
            return None
        finest = min(here, key=lambda balance: (balance.step, balance.name))
        return mass_input(amount / _MICRO, finest.step / _MICRO), finest.name
    volume, glass = amount / _PER_CM3, pieces(facts, on)
    # as it is told to be measured: by what is close enough, else by what comes nearest
    found = best(glass, volume, closeness_of(batch)) or nearest(glass, volume)
    if found is None:
        return None
    taken = volume_input(volume, found.piece, fills=found.fills, name="taken")
    return taken, _named(found.piece)


def _stock(facts: Facts, source: Source, on: date) -> Input | None:
    """The stock's own strength as a factor of 1, with the doubt of what was found of it."""
    bottle = next((each for each in facts.bottles if each.number == source.bottle), None)
    if bottle is None or source.line.kind is not Kind.VOLUME:
        return None
    known = strengths_on(bottle.record, source.line.rules, on)
    if not known.found or not known.uncertainty:
        return None
    return Input("stock", 1.0, (normal("found", known.uncertainty / known.found),))


def _both(one: str, other: str) -> str:
    return f"{one.removeprefix('a ')}s" if one == other else f"{one} and {other}"


def _named(piece: Ware) -> str:
    kind = "measuring cylinder" if piece.kind is GlassKind.CYLINDER else str(piece.kind)
    return f"a class {piece.glass_class} {kind}"
