"""Titrations of the plan: for exact needs inside their interval, and rechecks before use.

Each bottle or batch is titrated as seldom as will do, and then all of them on as few days
as will do: setting up is the cost, whether one is titrated or three.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from datetime import date, timedelta

from stockroom.keeping.rules import Purpose, RuleKind
from stockroom.measure.periods import add
from stockroom.planning.choosing.fitness import found_valid_from
from stockroom.planning.choosing.shelf import Promise, Shelf
from stockroom.planning.decisions import CheckToDo
from stockroom.planning.explode import Need
from stockroom.planning.facts import Closeness, Facts, Line
from stockroom.planning.making.batch import Batch
from stockroom.planning.timing import ready_at
from stockroom.planning.wants import Settled, Want

Span = tuple[date, date]


@dataclass(frozen=True, slots=True)
class Stretch:
    """One titration of `subject` to come, and the days that will do for what it serves.

    `first` and `last` are open days to do it on, the last before it is wanted; `counts_from`
    is the first day a result would count, `by` the last that could help. `closed`: all of
    those days are.
    """

    subject: str
    line: Line
    counts_from: date
    first: date
    last: date
    by: date
    needs: tuple[Need, ...]
    reason: str
    closed: bool = False
    due: date | None = None
    """The day its recheck falls due, for one that is not for an exact need."""


def titrations(
    facts: Facts, wants: list[Want], batches: list[Batch], shelf: Shelf
) -> list[CheckToDo]:
    """Every titration to do; several on one day where that serves them all.

    The days of exact needs are settled first, as late as will do; a recheck joins one of
    them if it can, and else takes a day of its own kind.
    """
    strict = [
        *_fewest_each(_exact_of_bottles(facts, wants, shelf)),
        *_fewest_each(_exact_of_batches(facts, batches)),
    ]
    loose = [_in_time(facts, s) for s in _fewest_each(_rechecks(facts, wants, shelf))]
    days = fewest_days([(s.first, s.last) for s in strict if not s.closed])
    alone = [(s.first, s.last) for s in loose if not _latest_in(days, s)]
    days = sorted({*days, *fewest_days(alone)})
    return [_check(facts, stretch, days) for stretch in (*strict, *loose)]


def fewest_days(spans: Iterable[Span]) -> list[date]:
    """The fewest days that every stretch of days contains one of, each as late as it can be.

    First and last day both count, and only last days are chosen. In order of last days, a
    day is taken whenever none taken yet lies in the stretch: covering points on a line.
    """
    days: list[date] = []
    for first, last in sorted(spans, key=lambda span: (span[1], span[0])):
        if not days or days[-1] < first:
            days.append(last)
    return days


def _fewest_each(stretches: Iterable[Stretch]) -> list[Stretch]:
    """The stretches of each subject joined into as few titrations as serve them all."""
    by_subject: dict[str, list[Stretch]] = {}
    for stretch in stretches:
        by_subject.setdefault(stretch.subject, []).append(stretch)
    row: list[Stretch] = []
    for _, own in sorted(by_subject.items()):
        joined: list[Stretch] = []
        for stretch in sorted(own, key=lambda s: (s.last, s.first, s.needs[0].rank)):
            before = joined[-1] if joined else None
            if before and stretch.first <= before.last and before.closed == stretch.closed:
                joined[-1] = _joined(before, stretch)
            else:
                joined.append(stretch)
        row += joined
    return row


def _joined(one: Stretch, other: Stretch) -> Stretch:
    """One titration for both: late enough for the later, in time for the earlier."""
    return replace(
        one,
        counts_from=max(one.counts_from, other.counts_from),
        first=max(one.first, other.first),
        last=min(one.last, other.last),
        by=min(one.by, other.by),
        needs=(*one.needs, *other.needs),
    )


# -- the days that will do ------------------------------------------------------------


def _stretch(
    facts: Facts, subject: str, line: Line, oldest: date, on: date, need: Need, reason: str
) -> Stretch:
    """The days between `oldest` and the open day before it is wanted, or that day itself."""
    calendar = facts.calendar
    oldest = min(max(oldest, facts.as_at), on)
    first, by = calendar.on_or_after(oldest), calendar.on_or_before(on)
    # on the day itself a bad result leaves no time for anything else
    last = max(calendar.before(on, 1), first)
    closed = last > by
    if closed:
        # nobody is there on any day that would count: the last open day, and it is said
        by = calendar.on_or_before(max(on, facts.as_at))
        by = by if by >= facts.as_at else calendar.on_or_after(facts.as_at)
        first = last = by
        reason += f"; it counts from {oldest} to {on} only, and all of that is closed"
    return Stretch(subject, line, oldest, first, last, by, (need,), reason, closed)


def _exact_of_bottles(facts: Facts, wants: list[Want], shelf: Shelf) -> Iterable[Stretch]:
    for want in wants:
        if want.settled is not Settled.HELD or want.purpose is not Purpose.EXACT:
            continue
        for number in dict.fromkeys(promise.bottle for promise in want.promises):
            line, need = facts.lines[shelf.bottle[number].line], want.need
            found = shelf.verdict(number, facts.as_at).strengths.found_on
            oldest = found_valid_from(need.requirement, line, need.on)
            if found and found >= oldest:
                continue
            why = f"{f'found {found}' if found else 'never found'}; exact"
            # what has not stood its time would be titrated too soon
            oldest = max(oldest, shelf.ready_on(number) or oldest)
            yield _stretch(facts, number, line, oldest, need.on, need, why)


def _exact_of_batches(facts: Facts, batches: list[Batch]) -> Iterable[Stretch]:
    for batch in batches:
        ready = ready_at(batch.start, batch.method, facts.calendar)[0]
        # a make titrated when finished has its first strength from then, without being asked
        found = ready if batch.method.titrated else None
        since = f"found {found} when finished" if found else "not titrated when made"
        stood = _stood(facts, batch)
        for want in batch.wants:
            need = want.need
            if want.under is not None or need.requirement.closeness is not Closeness.EXACT:
                continue
            oldest = found_valid_from(need.requirement, batch.line, need.on)
            if not found or found < oldest:
                first = max(oldest, stood)
                why = f"{since}; exact"
                yield _stretch(facts, batch.id, batch.line, first, need.on, need, why)


def _stood(facts: Facts, batch: Batch) -> date:
    """The first day somebody can titrate a batch begun in the morning of its day."""
    calendar = facts.calendar
    morning = batch.start[0], calendar.open_from
    ready, minute = ready_at(morning, batch.method, calendar)
    # what has stood by the evening only is titrated the next day
    return ready if minute < calendar.open_to else ready + timedelta(days=1)


def _rechecks(facts: Facts, wants: list[Want], shelf: Shelf) -> Iterable[Stretch]:
    exact = {p.bottle for w in wants if w.purpose is Purpose.EXACT for p in w.promises}
    needs = {want.ref: want.need for want in wants}
    for number, promises in sorted(shelf.promises.items()):
        # its titration is asked for already, and more strictly
        if number in exact or not promises:
            continue
        due = shelf.verdict_planned(number, facts.as_at).recheck_by
        due = due or max(_due(shelf, number, promise.on) for promise in promises)
        late = [p for p in promises if p.on > due and p.for_ref in needs]
        for promise in sorted(late, key=lambda p: (p.on, needs[p.for_ref].rank)):
            yield _recheck(facts, shelf, promise, needs[promise.for_ref], due)


def _recheck(facts: Facts, shelf: Shelf, promise: Promise, need: Need, due: date) -> Stretch:
    line = facts.lines[shelf.bottle[promise.bottle].line]
    why = f"its recheck {'falls' if due >= facts.as_at else 'fell'} due {due}"
    oldest = _known_from(line, promise.on)
    found = _stretch(facts, promise.bottle, line, oldest, promise.on, need, why)
    return replace(found, due=due)


def _in_time(facts: Facts, stretch: Stretch) -> Stretch:
    """By the day it falls due, if that still serves all it is for: then it is never to watch."""
    due = stretch.due
    by = facts.calendar.on_or_before(due) if due and due >= facts.as_at else None
    if due is None or by is None or not stretch.first <= by < stretch.last:
        return stretch
    closed = ", a closed day" if by != due else ""
    return replace(stretch, last=by, by=by, reason=stretch.reason + closed)


def _known_from(line: Line, on: date) -> date:
    """The earliest day of a recheck that still counts on `on`: by the longest of the rules."""
    lasts = [r.lasts for r in line.rules if r.kind is RuleKind.RECHECK and r.lasts]
    # the longest: with rules by place or strength one asked for too early is no nagging
    return min((on - (add(on, each) - on) for each in lasts), default=on)


def _due(shelf: Shelf, number: str, on: date) -> date:
    return shelf.verdict_planned(number, on).recheck_by or date.max


# -- the checks -------------------------------------------------------------------------


def _latest_in(days: Iterable[date], stretch: Stretch) -> date | None:
    return max((day for day in days if stretch.first <= day <= stretch.last), default=None)


def _check(facts: Facts, stretch: Stretch, days: list[date]) -> CheckToDo:
    method = facts.methods.get(stretch.line.key)
    return CheckToDo(
        subject=stretch.subject,
        item=stretch.line.key,
        what="titrate",
        not_before=stretch.counts_from,
        by=stretch.by,
        best=_latest_in(days, stretch) or stretch.last,
        bookings=tuple(dict.fromkeys(need.booking.number for need in stretch.needs)),
        reason=stretch.reason,
        opens=stretch.first,
        minutes=method.finish_minutes if method else 0,
    )
