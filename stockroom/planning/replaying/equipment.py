"""The equipment of a finished plan: vessels that hold a make, balances that weigh for it closely.

What is bigger or smaller than the house can handle passes only where the plan says so, with
another way.
"""

from __future__ import annotations

from collections.abc import Iterator

from stockroom.chemistry.weighing import least_weighable
from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.planning.decisions import Make
from stockroom.planning.facts import TOLERANCE, Facts, Form, Line, Method, Requirement
from stockroom.planning.replaying.rules import Broken, Fault
from stockroom.planning.replaying.walk import Walk

_MICROGRAMS = PER_UNIT[Kind.MASS]
_AS_ROUGH = 0.20
"""How closely what only has to be present is weighed, as a fraction. A house choice."""
_LAST_DIGITS = 1e-5
"""What rounding a batch to whole microlitres may take off a mass, as a fraction."""
_NO_BALANCE = "No balance that day"
_TOO_LITTLE = "is too little to weigh:"
"""How a make begins to say what else can be done; a larger batch is told in other words."""


def faults_of_equipment(laid: Walk) -> Iterator[Fault]:
    """What is wrong with the vessels and the weighing of makes, in the order of the makes."""
    for make in laid.plan.makes:
        line, method = laid.facts.lines.get(make.line), laid.facts.methods.get(make.line)
        if line is not None and method is not None:
            yield from _vessels(laid, make, line, method)
            yield from _weighing(laid, make)


def largest_of(facts: Facts, line: Line) -> int | None:
    """The most one vessel may hold of a line, µL; None where nothing bounds it.

    By the vessels written down, else by the house's word; and by the line's own.
    """
    sizes = [vessel.size for vessel in facts.vessels]
    house = max(sizes) if sizes else facts.house.largest_vessel
    return min(filter(None, (line.largest_batch, house)), default=None)


def _vessels(laid: Walk, make: Make, line: Line, method: Method) -> Iterator[Fault]:
    """Every vessel is work of its own, and none is filled over its brim."""
    largest, vessels = largest_of(laid.facts, line), max(1, make.vessels)
    share = -(-make.volume // vessels)
    if largest and share > largest:
        words = f"{make.volume} µL in {vessels} vessels, and the largest holds {largest}"
        yield Fault(Broken.VESSEL, make.id, words)
    if make.minutes < vessels * (method.minutes + method.finish_minutes):
        words = f"work on {vessels} vessels, and {make.minutes} min are planned"
        yield Fault(Broken.VESSEL, make.id, words)
    able = [vessel for vessel in laid.facts.vessels if vessel.size >= share]
    # whoever makes it is told beforehand, and how else it can be done
    texts = [note.text for note in laid.plan.notes if note.subject == make.id] if able else []
    said = all(any(vessel.name in text for text in texts) for vessel in able)
    if not said and not any(vessel.here(make.on) for vessel in able):
        gone = ", ".join(sorted(vessel.name for vessel in able))
        words = f"{share} µL on {make.on}, {gone} away, and nothing says so"
        yield Fault(Broken.VESSEL, make.id, words)


def _weighing(laid: Walk, make: Make) -> Iterator[Fault]:
    """Each solid is weighed for every vessel of its own, as closely as the tightest need asks."""
    masses = _masses(laid, make)
    if not masses or not laid.facts.balances:
        return
    here = [balance.step for balance in laid.facts.balances if balance.here(make.on)]
    said = (*make.reasons, *make.too_little)
    if not here:
        if _NO_BALANCE not in said:
            words = f"weighed on {make.on}, when no balance is in, and nothing says so"
            yield Fault(Broken.WEIGHED, make.id, words)
        return
    wanted = [_closeness(asked.requirement) for asked in laid.served[make.id]]
    closeness = min(wanted, default=_AS_ROUGH)
    least = least_weighable(min(here) / _MICROGRAMS, closeness) * _MICROGRAMS
    for item, mass in masses.items():
        little = 0 < mass < least * (1 - _LAST_DIGITS) - 1
        if little and not any(_TOO_LITTLE in text for text in said):
            words = f"{mass:.0f} µg of {item} to {closeness:g}, {least:.0f} can be weighed"
            yield Fault(Broken.WEIGHED, make.id, words)


def _masses(laid: Walk, make: Make) -> dict[str, float]:
    """The µg of each solid weighed for one vessel of a make."""
    row: dict[str, float] = {}
    for source in make.sources:
        line = laid.facts.lines.get(source.line)
        if line is not None and line.form is Form.SOLID:
            share = source.amount / max(1, make.vessels)
            row[line.item] = row.get(line.item, 0.0) + share
    return row


def _closeness(requirement: Requirement) -> float:
    """How far off an amount for a need may be, as a fraction."""
    return requirement.tolerance or TOLERANCE[requirement.closeness] or _AS_ROUGH
