"""What balances and vessels away on a day change: the size of a batch, and what is weighed before.

A solid too little for the balances that are in may be weighed dry while the finer one is
still there, if it keeps so.
"""

from __future__ import annotations

from collections.abc import Iterable
from datetime import date

from stockroom.chemistry.weighing import least_weighable
from stockroom.findings import Finding
from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.measure.formats import format_number
from stockroom.planning.amounts import say
from stockroom.planning.decisions import Order
from stockroom.planning.facts import Balance, Facts, Line
from stockroom.planning.making.batch import Batch
from stockroom.planning.making.weighed import grams_of

_MICROGRAMS = PER_UNIT[Kind.MASS]
_DAMP = (
    "takes up water", "draws water", "hygroscopic", "deliquescent",
    "loses water", "air turns it", "air spoils it",
)  # fmt: skip


def largest_vessel(facts: Facts) -> int | None:
    """What the largest vessel holds on a day when all are in, µL; None where nothing bounds it."""
    return max((vessel.size for vessel in facts.vessels), default=facts.house.largest_vessel)


def largest_vessel_on(facts: Facts, day: date) -> int | None:
    """What the largest vessel that is in on a day holds, µL.

    None where no vessel is written down, so that none bounds a batch; 0 when all are away.
    """
    if not facts.vessels:
        return facts.house.largest_vessel
    return max((vessel.size for vessel in facts.vessels if vessel.here(day)), default=0)


def equipment_notes(
    facts: Facts, batches: Iterable[Batch], orders: Iterable[Order]
) -> Iterable[Finding]:
    """For each batch: what it is too big for that day, and what is better weighed before."""
    on_order = {order.line: order for order in orders}
    for batch in batches:
        yield from _too_big(facts, batch)
        for line, grams in grams_of(batch).items():
            yield from _weigh_before(facts, batch, line, grams, on_order)


def _too_big(facts: Facts, batch: Batch) -> Iterable[Finding]:
    day = batch.start[0]
    largest, each = largest_vessel_on(facts, day), -(-batch.volume // batch.vessels)
    if largest is None or each <= largest:
        return
    # without one that would hold it nothing is missing that day in particular
    away = [v for v in facts.vessels if v.size >= each and not v.here(day)]
    if away:
        gone = ", ".join(sorted(f"{v.name} is {_away(v.away, day)}" for v in away))
        way = "no vessel is in that day"
        if largest:
            way = f"in {-(-batch.volume // largest)} of {say(largest, Kind.VOLUME)} at most"
        yield Finding(batch.id, f"{say(each, Kind.VOLUME)} on {day}, and {gone}: {way}")


def _weigh_before(
    facts: Facts, batch: Batch, line: Line, grams: float, on_order: dict[str, Order]
) -> Iterable[Finding]:
    day, each = batch.start[0], batch.volume / batch.vessels
    finest = min(facts.balances, key=_finest, default=None)
    here = min((b for b in facts.balances if b.here(day)), key=_finest, default=None)
    if finest is None or finest.here(day) or (here and here.step <= finest.step):
        return
    exact = max(batch.run.needed, batch.method.smallest_batch) / batch.vessels
    tolerance = min(want.tolerance or 0.20 for want in batch.wants)
    wanted = grams * exact / each if each else 0.0
    if not wanted or (here and wanted >= least_weighable(here.step / _MICROGRAMS, tolerance)):
        return
    # as little as the finer balance weighs closely enough, if it is less than is made now
    least = max(wanted, least_weighable(finest.step / _MICROGRAMS, tolerance))
    if least > grams * (1 + 1e-9) or not _keeps_dry(line):
        return
    before = _last_day_with(facts, finest, day)
    sent = _order_by(facts, batch, line, before, on_order) if before else None
    if before is None or sent is None:
        return
    text = f"{finest.name} is {_away(finest.away, day)}: weigh "
    text += f"{batch.vessels} × " if batch.vessels > 1 else ""
    text += f"{format_number(least, 3)} g of {line.item} by {before} and keep it dry, labelled"
    text += f" (order it by {sent} for that)" if sent > date.min else ""
    volume = round(each * least / grams) * batch.vessels
    if volume < batch.volume:
        less = say(volume, Kind.VOLUME)
        text += f": {less} is then enough, where {say(batch.volume, Kind.VOLUME)} is planned"
    if "dry" not in line.keep_note:
        text += "; check first that it keeps dry, which its storage words do not say"
    yield Finding(batch.id, text)


def _finest(balance: Balance) -> tuple[int, str]:
    return balance.step, balance.name


def _keeps_dry(line: Line) -> bool:
    """False for what its storage words say changes in the air."""
    words = line.keep_note.casefold()
    return not any(each in words for each in _DAMP)


def _order_by(
    facts: Facts, batch: Batch, line: Line, before: date, on_order: dict[str, Order]
) -> date | None:
    """The day a solid still to come must be ordered by to be in hand before a day.

    The earliest of dates where it is in the house, or comes by then as it is; None when no
    order can bring it.
    """
    if all(source.bottle for source in batch.sources if source.line.key == line.key):
        return date.min
    order = on_order.get(line.key)
    if order is None:
        return None
    if order.arrives <= before:
        return date.min
    calendar = facts.calendar
    lead = calendar.between(max(order.order_by, facts.as_at), order.arrives)
    sent = calendar.before(before, lead)
    return sent if sent >= facts.as_at else None


def _last_day_with(facts: Facts, balance: Balance, before: date) -> date | None:
    """The last open day before a day on which the balance is in; None from today on."""
    day = facts.calendar.before(before, 1)
    while day >= facts.as_at:
        if balance.here(day):
            return day
        day = facts.calendar.before(day, 1)
    return None


def _away(spans: tuple[tuple[date, date], ...], day: date) -> str:
    first, last = min((a, b) for a, b in spans if a <= day <= b)
    return f"away {first} to {last}" if first != last else f"away on {first}"
