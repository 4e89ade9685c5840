"""Why a make is not done on another day, or in another amount."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import date

from stockroom.chemistry.weighing import least_weighable
from stockroom.keeping.rules import Purpose
from stockroom.measure.amounts import PER_UNIT, Amount, Kind
from stockroom.measure.days import format_time
from stockroom.measure.formats import format_number
from stockroom.planning.amounts import say
from stockroom.planning.decisions import Draw, Make
from stockroom.planning.explode import Need
from stockroom.planning.facts import TOLERANCE
from stockroom.planning.making.batch import keeps
from stockroom.planning.timing import Moment, deadline_for, hours, ready_at
from stockroom.planning.whys.of_things import minutes_on
from stockroom.planning.whys.planned_shelf import PlannedShelf
from stockroom.planning.windows import good_until, will_do

_MICROGRAMS = PER_UNIT[Kind.MASS]


# -- another day ---------------------------------------------------------------------------


def another_day(planned: PlannedShelf, make: Make, day: date) -> list[str]:
    """Why a make is not started on a day: the calendar, its keeping, its standing, what it takes.

    Where nothing speaks against the day, that is said, with what speaks for the one chosen.
    """
    head = f"{make.id} on {day}"
    if day == make.on:
        return [f"{make.id} is started on {day}", *make.reasons[-1:]]
    against = [*_calendar(planned, day), *_keeping(planned, make, day)]
    against = against or [*_too_late(planned, make, day), *_takes(planned, make, day)]
    if against:
        return [f"{head}: {against[0]}", *against[1:]]
    load = minutes_on(planned.plan, day)
    limit, total = planned.facts.house.day_minutes, load + make.minutes - make.finishing
    if limit and total > limit:
        return [f"{head}: the day is full: {load} min of work, {total} with it, {limit} at most"]
    why = (
        f"the latest day is taken, {make.on}, so that it is freshest"
        if day < make.on
        else f"{make.on} was taken: {minutes_on(planned.plan, make.on)} min of work there, "
        f"{total} here with it"
    )
    return [f"{head} would do as well (from {make.earliest} to {make.latest}): {why}"]


def _calendar(planned: PlannedShelf, day: date) -> Iterable[str]:
    if day < planned.facts.as_at:
        yield f"past: today is {planned.facts.as_at}"
    elif not planned.facts.calendar.is_open(day):
        yield f"a closed day ({day:%A})" if day.weekday() > 4 else "the house is closed that day"


def _keeping(planned: PlannedShelf, make: Make, day: date) -> list[str]:
    """Whom a make of that day would no longer be good for."""
    if day >= make.on:
        return []
    line = planned.facts.lines[make.line]
    until = good_until(line, day)
    keeps_till = f"it keeps until {until}" if until else "it would be too old or too weak"
    for need in planned.served(make):
        fresh = need.fresh and day != need.on
        if fresh:
            return [f"too early: {need.ref} is made fresh on the morning of {need.on}"]
        if not will_do(line, need.requirement, day, need.on):
            freshest = need.requirement.freshest_days
            asks = f", {freshest} d old at most" if freshest is not None else ""
            return [f"too early to keep: {keeps_till}, and {need.ref} is on {need.on}{asks}"]
    for other in planned.feeds(make):
        if not will_do(line, None, day, other.on):
            return [f"too early to keep: {keeps_till}, and {other.id} is made on {other.on}"]
    if day < make.earliest:
        return [f"too early: {make.earliest} is the first day it keeps for all it serves"]
    return []


def _too_late(planned: PlannedShelf, make: Make, day: date) -> list[str]:
    if day <= make.latest and day <= make.on:
        return []
    method, calendar = planned.facts.methods[make.line], planned.facts.calendar
    ready = ready_at((day, calendar.open_from), method, calendar)
    stands = f"standing {hours(method.stands_hours)}, " if method.stands_hours else ""
    begun = f"{stands}it is ready {ready[0]} {format_time(ready[1])}"
    for need in planned.served(make):
        due = _deadline(planned, make, need)
        if ready > due:
            return [f"too late: {begun}, and {need.ref} wants it by {due[0]} {format_time(due[1])}"]
    for other in planned.feeds(make):
        if ready[0] > other.on:
            return [f"too late: {begun}, and {other.id} takes it on {other.on}"]
    if day > make.latest:
        return [f"too late: {make.latest} is the last day it can be started for all it serves"]
    return []


def _deadline(planned: PlannedShelf, make: Make, need: Need) -> Moment:
    facts = planned.facts
    method = facts.methods[make.line]
    usual = deadline_for(
        need.on,
        need.booking.minute,
        fresh=need.fresh,
        method=method,
        calendar=facts.calendar,
        house=facts.house,
    )
    # a make the plan itself could not have done by then is wanted by the class and no sooner
    begun = ready_at((make.on, facts.calendar.open_from), method, facts.calendar)
    return usual if begun <= usual else (need.on, need.booking.minute)


def _takes(planned: PlannedShelf, make: Make, day: date) -> list[str]:
    """What a make takes that is not there, not fit, or not to be weighed on a day."""
    rows = [_source_then(planned, make, source, day) for source in make.sources]
    return [*filter(None, rows), *_balance(planned, make, day)]


def _source_then(planned: PlannedShelf, make: Make, source: Draw, day: date) -> str:
    if source.bottle:
        judge = planned.judge_of(make, planned.facts.lines[source.line])
        shelf = planned.without(make.id)
        reason = shelf.unfit(source.bottle, day, Purpose.ANY, judge)
        return f"{source.bottle} would not do then: {reason}" if reason else ""
    by_id = {one.id: one for one in planned.plan.makes}
    if source.make in by_id and by_id[source.make].ready > day:
        return f"{source.make} {source.line}, which it takes, is ready {by_id[source.make].ready}"
    order = next((o for o in planned.plan.orders if o.line == source.line), None)
    if not source.make and order and order.arrives > day:
        return f"{source.line} ({order.id}) comes {order.arrives}, ordered by {order.order_by}"
    return ""


def _balance(planned: PlannedShelf, make: Make, day: date) -> list[str]:
    solids = [s for s in make.sources if s.kind is Kind.MASS]
    if not solids or not planned.facts.balances:
        return []
    here = [balance for balance in planned.facts.balances if balance.here(day)]
    away = sorted(balance.name for balance in planned.facts.balances if not balance.here(day))
    if not here:
        return [f"no balance that day: {', '.join(away)} away"]
    finest = min(here, key=lambda one: (one.step, one.name))
    tolerances = [_tolerance(need) for need in planned.served(make)]
    least = least_weighable(finest.step / _MICROGRAMS, min(tolerances, default=0.20))
    grams = min(source.amount for source in solids) / _MICROGRAMS
    # only where a balance is away: else it is as hard to weigh on the day chosen
    if not away or grams >= least:
        return []
    return [
        f"{', '.join(away)} away: {format_number(grams, 3)} g is too little for {finest.name}, "
        f"{format_number(least, 3)} g at least"
    ]


def _tolerance(need: Need) -> float:
    """How far off an amount for a need may be, as a fraction; a fifth where any will do."""
    requirement = need.requirement
    return requirement.tolerance or TOLERANCE[requirement.closeness] or 0.20


# -- another amount ------------------------------------------------------------------------


def another_amount(planned: PlannedShelf, make: Make, other: Amount) -> list[str]:
    """Why a make is not of another volume: who would go without, or what would be left over."""
    if other.kind is not Kind.VOLUME:
        return [f"{make.id} is {say(make.volume, Kind.VOLUME)} of a solution, not {other.kind}"]
    said = say(other.micro, Kind.VOLUME)
    if other.micro == make.volume:
        return [f"{make.id} makes {said}: {make.reasons[0] if make.reasons else ''}"]
    if other.micro < make.needed:
        short = say(make.needed - other.micro, Kind.VOLUME)
        asks = [f"{n.ref} {say(n.missing, Kind.VOLUME)}" for n in planned.served(make)]
        asks += [
            f"{m.id} {say(s.amount, Kind.VOLUME)}"
            for m in planned.feeds(make)
            for s in m.sources
            if s.make == make.id
        ]
        return [f"{said} of {make.id} is {short} too little: {' + '.join(asks)}"]
    return [_over(planned, make, other.micro), *_why_this_much(planned, make, other.micro)]


def _over(planned: PlannedShelf, make: Make, volume: int) -> str:
    facts, line = planned.facts, planned.facts.lines[make.line]
    over = say(volume - make.needed, Kind.VOLUME)
    kept = keeps(facts, line, volume - make.needed, make.on)
    fate = "kept as stock" if kept else "poured away"
    sizes = [size for size in (line.largest_batch, facts.house.largest_vessel) if size]
    vessels = -(-volume // min(sizes)) if sizes else 1
    now = -(-make.volume // min(sizes)) if sizes else 1
    more = f", in {vessels} vessels and not {now}" if vessels > now else ""
    head = f"{say(volume, Kind.VOLUME)} of {make.id}: {over} over what is needed, {fate}{more}"
    drawn = [
        f"{say(round(source.amount * volume / make.volume), source.kind)} of "
        f"{source.bottle or source.item}"
        for source in make.sources
    ]
    return f"{head}; it takes {', '.join(drawn)}"


def _why_this_much(planned: PlannedShelf, make: Make, volume: int) -> list[str]:
    """Why the volume chosen is above the need, where the one asked about lies between."""
    if volume >= make.volume:
        return []
    method = planned.facts.methods[make.line]
    reasons = [r for r in make.reasons if "too little to weigh" in r or "never less than" in r]
    if volume < method.smallest_batch or reasons:
        return reasons or [f"never less than {say(method.smallest_batch, Kind.VOLUME)} is made"]
    step = say(planned.facts.house.batch_step, Kind.VOLUME)
    return [f"{say(make.volume, Kind.VOLUME)} is the need rounded up to the next {step}"]
