"""An arrangement read back by somebody who did not make it: what in it cannot be done.

Nothing here is shared with the planner or the solver, so that a mistake of theirs is not
made twice. One line for each fault; no lines: it can be carried out as written.
"""

from __future__ import annotations

from collections import Counter, defaultdict
from collections.abc import Iterator
from math import exp, isfinite

from stockroom.lots.model import Arrangement, Batch, Gift, Lot, Part, Problem

SLACK = 1e-5
"""cm³ by which two sums may differ: far below what can be measured, above rounding errors."""

STRENGTH_SLACK = 1e-9
"""The same for strengths, which are fractions."""


def faults(problem: Problem, arrangement: Arrangement) -> list[str]:
    """Everything in the arrangement that breaks the problem's rules, in order of kind.

    Batches: known sort, working day, vessels within their sizes, whole steps or full vessels,
    one batch of a sort a day.
    Gifts: one giver and one taker, of the same sort, in time, strong enough, good on the day.
    Sums: nothing given twice, each part in full, demands met but for what is said to be
    short, and with `whole` one giver to each taker, a demand served in full or not at all.
    Sums may be `SLACK` cm³ apart. A batch or a gift that names what is not there is told of
    alone: the sums would mean nothing.
    """
    strangers = list(_strangers(problem, arrangement))
    if strangers:
        return strangers
    return [
        *_batch_faults(problem, arrangement.batches),
        *_gift_faults(problem, arrangement),
        *_given_twice(problem, arrangement),
        *_parts_unmet(problem, arrangement),
        *_demands_unmet(problem, arrangement),
        *(_not_whole(problem, arrangement) if problem.whole else ()),
    ]


def _strangers(problem: Problem, arrangement: Arrangement) -> Iterator[str]:
    """Numbers that name no sort, day, batch, lot, demand or part; and impossible figures."""
    batches = arrangement.batches
    for n, batch in enumerate(batches):
        if not 0 <= batch.sort < len(problem.sorts):
            yield f"batch {n}: there is no sort {batch.sort}"
        if not 0 <= batch.day < problem.days:
            yield f"batch {n}: day {batch.day} is not one of the {problem.days} days"
        if not isfinite(batch.volume):
            yield f"batch {n}: {batch.volume} cm³ is no volume"
    for n, gift in enumerate(arrangement.gifts):
        if (gift.batch == -1) == (gift.lot == -1):
            yield f"gift {n}: from batch {gift.batch} and lot {gift.lot}: it must be one of them"
        if (gift.demand == -1) == (gift.into == -1):
            yield f"gift {n}: to demand {gift.demand} and batch {gift.into}: it must be one of them"
        if not isfinite(gift.volume):
            yield f"gift {n}: {gift.volume} cm³ is no volume"
        for what, number, rows in (
            ("batch", gift.batch, len(batches)),
            ("lot", gift.lot, len(problem.lots)),
            ("demand", gift.demand, len(problem.demands)),
            ("batch", gift.into, len(batches)),
        ):
            if not -1 <= number < rows:
                yield f"gift {n}: there is no {what} {number}"
            elif what == "batch" and number == gift.into != -1:
                into = batches[number].sort
                parts = problem.sorts[into].parts if 0 <= into < len(problem.sorts) else ()
                if not 0 <= gift.part < len(parts):
                    yield f"gift {n}: batch {number} has no part {gift.part}"
    if arrangement.short and len(arrangement.short) != len(problem.demands):
        yield f"{len(arrangement.short)} shortages for {len(problem.demands)} demands"


def _batch_faults(problem: Problem, batches: tuple[Batch, ...]) -> Iterator[str]:
    working = set(problem.working)
    for n, batch in enumerate(batches):
        sort = problem.sorts[batch.sort]
        if batch.day not in working:
            yield f"batch {n} of {sort.name}: day {batch.day} is not a working day"
        if batch.vessels < 1:
            yield f"batch {n} of {sort.name}: {batch.vessels} vessels"
        if batch.volume <= 0:
            yield f"batch {n} of {sort.name}: {batch.volume} cm³ is no volume"
        if batch.volume > sort.largest * batch.vessels + SLACK:
            yield (
                f"batch {n} of {sort.name}: {batch.volume} cm³ do not go into "
                f"{batch.vessels} × {sort.largest} cm³"
            )
        if batch.volume < sort.smallest * batch.vessels - SLACK:
            yield (
                f"batch {n} of {sort.name}: {batch.volume} cm³ are too little for "
                f"{batch.vessels} × {sort.smallest} cm³"
            )
        if not _in_steps(batch.volume, sort.step) and not (
            abs(batch.volume - sort.largest * batch.vessels) <= SLACK
        ):
            yield (
                f"batch {n} of {sort.name}: {batch.volume} cm³ is neither whole steps of "
                f"{sort.step} cm³ nor all its vessels hold"
            )
    for (number, day), times in Counter((each.sort, each.day) for each in batches).items():
        if times > 1:
            yield f"{times} batches of {problem.sorts[number].name} on day {day}: they are one"


def _in_steps(volume: float, step: float) -> bool:
    return step <= 0 or abs(volume - round(volume / step) * step) <= SLACK


def _gift_faults(problem: Problem, arrangement: Arrangement) -> Iterator[str]:
    for n, gift in enumerate(arrangement.gifts):
        if gift.volume < -SLACK:
            yield f"gift {n}: {gift.volume} cm³ is negative"
        if gift.demand >= 0:
            reason = _wrong_for_demand(problem, arrangement.batches, gift)
        else:
            reason = _wrong_for_part(problem, arrangement.batches, gift)
        if reason:
            yield f"gift {n}: {reason}"


def _wrong_for_demand(problem: Problem, batches: tuple[Batch, ...], gift: Gift) -> str:
    demand = problem.demands[gift.demand]
    to = f"demand {gift.demand}"
    if gift.lot >= 0:
        lot = problem.lots[gift.lot]
        return _wrong_lot(lot, demand.sort, demand.use, demand.strength, f"lot {gift.lot}", to)
    batch = batches[gift.batch]
    if batch.sort != demand.sort:
        return f"batch {gift.batch} is of sort {batch.sort}, {to} of sort {demand.sort}"
    if not demand.first <= batch.day <= demand.last:
        return (
            f"batch {gift.batch} of day {batch.day} is outside days "
            f"{demand.first} to {demand.last} of {to}"
        )
    return ""


def _wrong_for_part(problem: Problem, batches: tuple[Batch, ...], gift: Gift) -> str:
    into = batches[gift.into]
    part = problem.sorts[into.sort].parts[gift.part]
    to = f"part {gift.part} of batch {gift.into}"
    if gift.lot >= 0:
        lot = problem.lots[gift.lot]
        return _wrong_lot(lot, part.sort, into.day, part.strength, f"lot {gift.lot}", to)
    batch = batches[gift.batch]
    if batch.sort != part.sort:
        return f"batch {gift.batch} is of sort {batch.sort}, {to} of sort {part.sort}"
    first, last = part.first[into.day], part.last[into.day]
    if first == -1 or last == -1:
        return f"no batch will do as {to}, made on day {into.day}"
    if not first <= batch.day <= last:
        return f"batch {gift.batch} of day {batch.day} is outside days {first} to {last} of {to}"
    return ""


def _wrong_lot(lot: Lot, sort: int, day: int, strength: float, name: str, to: str) -> str:
    """Why a lot will not do on a day at a strength; empty: it will."""
    if lot.sort != sort:
        return f"{name} is of sort {lot.sort}, {to} of sort {sort}"
    if day > lot.until:
        return f"{name} is good through day {lot.until}, {to} needs it on day {day}"
    held = lot.strength * exp(-lot.decay * day)
    if held < strength - STRENGTH_SLACK:
        return f"{name} holds {held:.6g} on day {day}, {to} asks for {strength:.6g}"
    return ""


def _given_twice(problem: Problem, arrangement: Arrangement) -> Iterator[str]:
    """More given than there is, from a batch or from a lot."""
    from_batch: defaultdict[int, float] = defaultdict(float)
    from_lot: defaultdict[int, float] = defaultdict(float)
    for gift in arrangement.gifts:
        if gift.batch >= 0:
            from_batch[gift.batch] += gift.volume
        else:
            from_lot[gift.lot] += gift.volume
    for n, given in sorted(from_batch.items()):
        if given > arrangement.batches[n].volume + SLACK:
            yield f"batch {n}: {given} cm³ given of {arrangement.batches[n].volume} cm³ made"
    for n, given in sorted(from_lot.items()):
        if given > problem.lots[n].volume + SLACK:
            yield f"lot {n}: {given} cm³ given of {problem.lots[n].volume} cm³ there"


def _parts_unmet(problem: Problem, arrangement: Arrangement) -> Iterator[str]:
    taken: defaultdict[tuple[int, int], float] = defaultdict(float)
    for gift in arrangement.gifts:
        if gift.into >= 0:
            taken[gift.into, gift.part] += gift.volume
    for n, batch in enumerate(arrangement.batches):
        parts: tuple[Part, ...] = problem.sorts[batch.sort].parts
        for p, part in enumerate(parts):
            wanted = part.share * batch.volume
            if abs(taken[n, p] - wanted) > SLACK:
                yield f"batch {n}: part {p} gets {taken[n, p]} cm³, its share is {wanted} cm³"


def _demands_unmet(problem: Problem, arrangement: Arrangement) -> Iterator[str]:
    short = arrangement.short or (0.0,) * len(problem.demands)
    got: defaultdict[int, float] = defaultdict(float)
    for gift in arrangement.gifts:
        if gift.demand >= 0:
            got[gift.demand] += gift.volume
    for n, (demand, lacking) in enumerate(zip(problem.demands, short, strict=True)):
        if lacking < -SLACK:
            yield f"demand {n}: {lacking} cm³ short is negative"
        if abs(got[n] + lacking - demand.volume) > SLACK:
            yield (
                f"demand {n}: {got[n]} cm³ given and {lacking} cm³ said to be short "
                f"are not {demand.volume} cm³"
            )


def _not_whole(problem: Problem, arrangement: Arrangement) -> Iterator[str]:
    """Demands and parts with more than one giver, and demands served in part.

    A trickle under `SLACK` counts as none.
    """
    givers: defaultdict[tuple[int, int, int], set[tuple[int, int]]] = defaultdict(set)
    for gift in arrangement.gifts:
        if gift.volume > SLACK:
            taker = gift.demand, gift.into, gift.part if gift.into >= 0 else 0
            givers[taker].add((gift.batch, gift.lot))
    for (taken, into, part), several in sorted(givers.items()):
        if len(several) > 1:
            words = f"demand {taken}" if taken >= 0 else f"part {part} of batch {into}"
            yield f"{words}: from {len(several)} batches or lots, and must be from one"
    for n, (demand, lacking) in enumerate(zip(problem.demands, arrangement.short, strict=False)):
        if SLACK < lacking < demand.volume - SLACK:
            yield f"demand {n}: {lacking} cm³ of {demand.volume} cm³ short, and must be all or none"
