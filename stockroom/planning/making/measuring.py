"""What every liquid of a make is measured with, and the way out where nothing is fine enough."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

from stockroom.chemistry.glassware import Ware
from stockroom.measure.amounts import Kind
from stockroom.measure.formats import format_number
from stockroom.planning.amounts import say
from stockroom.planning.facts import Closeness, Facts
from stockroom.planning.making.batch import Batch, Source, keeps
from stockroom.planning.making.glass import best, measures, nearest, per_cent, pieces
from stockroom.planning.wants import Want

if TYPE_CHECKING:
    from stockroom.chemistry.steps import Design, Step

_PER_CM3 = 1000


def measured(facts: Facts, batch: Batch) -> tuple[list[str], list[str]]:
    """The draws of liquid that can be measured closely enough, and those that cannot, in words.

    Both are empty where the house has written down nothing to measure with.
    """
    if not measures(pieces(facts)):
        return [], []
    good: list[str] = []
    poor: list[str] = []
    for source in batch.sources:
        # what the whole is made up in is measured by the vessel's own mark
        if source.line.kind is Kind.VOLUME and 0 < source.amount < batch.volume:
            fine, words = _one(facts, batch, source)
            (good if fine else poor).append(words)
    return good, poor


def _one(facts: Facts, batch: Batch, source: Source) -> tuple[bool, str]:
    """Whether this draw can be measured closely enough that day, and what is said of it."""
    # every vessel has its own share measured into it
    volume, closeness = source.amount / batch.vessels / _PER_CM3, closeness_of(batch)
    here, all_of_it = pieces(facts, batch.run.on), pieces(facts)
    found, usual = best(here, volume, closeness), best(all_of_it, volume, closeness)
    what = _called(source, batch.vessels)
    away = f" ({usual.piece.words} is away)" if usual and usual != found else ""
    if found:
        return True, f"{what}: {found.words}{away}"
    near = nearest(here, volume)
    told = f"nearest {near.words}" if near else "no pipette, burette or cylinder that day"
    words = f"{what}: nothing here measures it to {per_cent(closeness)} ({told}){away}"
    return False, f"{words}; {_way_out(facts, batch, volume, closeness)}"


def _called(source: Source, vessels: int) -> str:
    each = say(round(source.amount / vessels), Kind.VOLUME)
    often = f"{vessels} × " if vessels > 1 else ""
    return f"{often}{each} of {source.bottle or source.line.key}"


def closeness_of(batch: Batch) -> float:
    """How closely the tightest of its needs wants its amounts; "present" counts as rough."""
    return min(_wanted(want) for want in batch.wants)


def _wanted(want: Want) -> float:
    requirement = want.need.requirement
    # a class that is told the true strength may have one this far from nominal
    if requirement.closeness is Closeness.EXACT and requirement.may_differ:
        return requirement.may_differ
    return want.tolerance or 0.20


def _way_out(facts: Facts, batch: Batch, volume: float, closeness: float) -> str:
    """A larger batch where the rest keeps, else an intermediate; in cm³."""
    # a search through every chain of dilutions: loaded for the few draws that need it
    from stockroom.chemistry.steps import Bench, design

    each = batch.volume / batch.vessels / _PER_CM3
    bench = Bench(glassware=tuple(pieces(facts, batch.run.on)))
    # the design asks for a fraction; what may be off by all of itself is measured by eye
    near = min(closeness, 0.99)
    found = design(volume, each, closeness=near, bench=bench, liquid=True, most=8)
    kept = [one for one in found if len(one.steps) > 1 or _keeps(facts, batch, one)]
    if not found:
        return "wants a weaker stock, or finer glass"
    return _in_words((kept or found)[0].steps, poured=not kept)


def _keeps(facts: Facts, batch: Batch, larger: Design) -> bool:
    heel = round(larger.steps[-1].volume * _PER_CM3) * batch.vessels - batch.run.needed
    return keeps(facts, batch.line, heel, batch.run.on)


def _in_words(steps: Sequence[Step], *, poured: bool) -> str:
    first, *rest = steps
    made = f"{_taken(first)} to {_volume(first)}"
    if not rest:
        return f"make more: {made}" + (", the rest poured away" if poured else "")
    then = [f"then {_taken(step)} of that to {_volume(step)}" for step in rest]
    return f"through an intermediate: {', '.join([made, *then])}"


def _taken(step: Step) -> str:
    by = f" ({step.tool.words})" if isinstance(step.tool, Ware) else ""
    return f"{format_number(step.amount)} cm³{by}"


def _volume(step: Step) -> str:
    often = f", {step.times} times and mixed" if step.times > 1 else ""
    return f"{format_number(step.volume)} cm³{often}"
