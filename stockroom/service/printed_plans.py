"""Plans that are kept under a number, and what has changed since one was.

Only `keep` writes; the rest opens the store for reading, so nothing heavy is loaded.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import date

from stockroom.errors import NotAllowed, StoreTrouble
from stockroom.measure.days import spell_day
from stockroom.planning.changing.causes import compared
from stockroom.planning.changing.changes import Comparison
from stockroom.planning.changing.differences import differences
from stockroom.planning.changing.kept import KeptPlan, kept_of, usual_days
from stockroom.planning.changing.kept_form import UNREADABLE, days_written, digest, read, written
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts, Happened
from stockroom.service.answers import Done
from stockroom.service.backup_age import with_backup
from stockroom.service.known import known_from
from stockroom.service.replayed import replayed_plan
from stockroom.settings import StoreAt
from stockroom.store.printed_plans import (
    Printed,
    kept_under,
    last_kept,
    marks,
    marks_written,
    next_number,
)
from stockroom.store.reading import Reader, reading
from stockroom.store.since import happened_since


@dataclass(frozen=True, slots=True)
class Changed:
    """The plan now against one that was kept: `against` is its number, `by` who kept it."""

    against: str
    by: str
    comparison: Comparison
    house: str
    practice: bool


def keep(
    path: StoreAt,
    *,
    as_at: date,
    start: date | None = None,
    end: date | None = None,
    cautious: bool = False,
    by: str,
) -> Plan:
    """The plan as `term_plan` gives it, and the whole term's kept under the next number.

    Raises: BadInput without initials; BadDate; BrokenPlan; StoreTrouble.
    """
    from stockroom import clock
    from stockroom.service.work import initials
    from stockroom.store.engine import reader_in, writing
    from stockroom.store.tables import PrintedPlan

    whose = initials(by)
    with writing(path) as session:
        # made inside the transaction: what is kept is the plan of what is saved by then
        reader = reader_in(session)
        known = known_from(reader, as_at, cautious=cautious)
        shown = replayed_plan(known)
        kept = kept_of(known, shown)
        if start is not None or end is not None:
            shown = replayed_plan(known_from(reader, as_at, start, end, cautious=cautious))
        row = PrintedPlan(
            number=next_number(reader),
            as_at=as_at,
            kept_at=clock.now().isoformat(sep=" "),
            by=whose,
            cautious=cautious,
            digest=digest(kept),
            usual=days_written(usual_days(kept)),
            marks=marks_written(marks(reader)),
            decisions=written(kept),
        )
        session.add(row)
        return with_backup(path, replace(shown, kept_as=row.number))


def keep_told(path: StoreAt, *, as_at: date, by: str) -> Done:
    """Keep the term's plan as `keep` does, and say under which number. Raises: as `keep`."""
    plan = keep(path, as_at=as_at, by=by)
    text = f"Plan {plan.kept_as} is kept: what changes from now on is told against it."
    return Done(text, next="stockroom changed", practice=plan.house.practice)


def changed(path: StoreAt, number: str | None = None, *, as_at: date) -> Changed:
    """The plan as at a day against the one kept last, or against that of a number.

    Made in the way the kept one was: on the safe side where that was.
    Raises: UnknownName with the nearest number; NotAllowed when none was kept by that day.
    """
    with reading(path) as reader:
        printed = _printed(reader, number, as_at)
        known = known_from(reader, as_at, cautious=printed.cautious)
        after = kept_of(known, replayed_plan(known))
        before, happened = _read(path, printed), _since(reader, printed, as_at)
    return Changed(
        against=printed.number,
        by=printed.by,
        comparison=compared(before, after, happened),
        house=known.house.name,
        practice=known.house.practice,
    )


def beside_the_kept(path: StoreAt, known: Facts, plan: Plan, *, whole: bool) -> Plan:
    """The plan with the number of the one kept last and how many changes there are since.

    As it was where no plan was kept, or nothing changed; with the number alone where the kept
    one cannot be read, since that is no reason to show none. `whole` says that it is the
    term's, as kept plans are; a part is held against nothing before the rest is made.
    """
    with reading(path) as reader:
        printed = last_kept(reader, known.as_at)
        cautious = known.lower_limits is not None
        # two ways of counting strengths differ everywhere, and nothing happened
        if printed is None:
            return plan
        if printed.unread:
            return replace(plan, kept_unread=printed.number)
        if printed.cautious != cautious:
            return plan
        if not whole:
            known = known_from(reader, known.as_at, cautious=cautious)
        after = kept_of(known, plan if whole else replayed_plan(known))
        if digest(after) == printed.digest:
            return plan
        try:
            before = read(printed.decisions)
        except UNREADABLE:
            return replace(plan, kept_unread=printed.number)
        found = differences(before, after, _since(reader, printed, after.as_at))
    count = sum(not change.done for change in found)
    return replace(plan, changed_since=(printed.number, count)) if count else plan


def _since(reader: Reader, printed: Printed, as_at: date) -> tuple[Happened, ...]:
    return happened_since(reader, printed.marks, printed.as_at, as_at)


def _printed(reader: Reader, number: str | None, as_at: date) -> Printed:
    found = last_kept(reader, as_at) if number is None else kept_under(reader, number)
    if found is None:
        raise NotAllowed(
            f"No plan was kept by {spell_day(as_at)}: there is nothing to hold this one against.",
            "Keep one: stockroom plan --keep --by T1",
        )
    if found.as_at > as_at:
        raise NotAllowed(
            f"Plan {found.number} is as at {spell_day(found.as_at)}, after {spell_day(as_at)}.",
            f"Ask with --as-at {found.as_at} or later.",
        )
    return found


def _read(path: StoreAt, printed: Printed) -> KeptPlan:
    damaged = printed.unread
    if not damaged:
        try:
            return read(printed.decisions)
        except UNREADABLE as error:
            damaged = str(error)
    raise StoreTrouble(
        f"Plan {printed.number} of {path} cannot be read: {damaged}.",
        "Keep the plan anew: stockroom plan --keep",
    )
