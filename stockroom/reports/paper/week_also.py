"""The week sheet's foot: orders, what stands wrong, an old backup, guesses; and its checks."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import date

from stockroom.planning.decisions import CheckToDo, Plan
from stockroom.planning.facts import Facts
from stockroom.planning.leaned_on import leaned_on
from stockroom.planning.standing import where_things_stand
from stockroom.reports.paper.week_parts import Also, Job, made, tied, without_figure
from stockroom.reports.sheet import OLD_BACKUP, backup_age
from stockroom.reports.words import counted, listed, money, named, raised, weekday_and_day
from stockroom.safety.neighbours import told_once

_ONE_LINE = 500


def also_of(known: Facts, plan: Plan, monday: date, sunday: date) -> tuple[Also, ...]:
    """What belongs to the week and to no hour of it."""
    return (
        *_orders(plan, monday, sunday),
        *_coming(plan, monday, sunday),
        *_loads(plan, monday, sunday),
        *_standing(known),
        *_backup(plan),
    )


def _orders(plan: Plan, monday: date, sunday: date) -> Iterator[Also]:
    for order in plan.orders:
        if order.order_by <= sunday:
            late = f", late by {counted(order.late, 'open day')}" if order.late else ""
            served = f", for {listed(order.for_bookings)}" if order.for_bookings else ""
            leave = f"; ask {order.ask_first} first" if order.ask_first else ""
            text = (
                f"{named(order.item, '')}, {order.packs} × {order.pack}, {money(order.pence)}: "
                f"order by {weekday_and_day(order.order_by)}{late}{served}{leave}"
            )
            # what is late is for now; seen from a later week it is earlier work
            earlier = order.order_by < monday and plan.as_at < monday
            about = "order, before this week" if earlier else "order"
            yield Also(f"order {raised(order.line)}", about, text)


def _coming(plan: Plan, monday: date, sunday: date) -> Iterator[Also]:
    for each in plan.on_order:
        comes = f"expected {weekday_and_day(each.expected)}"
        what = f"order {each.number}, {named(each.item, '')}, {comes}"
        if each.overdue:
            late = counted(each.overdue, "open day")
            supplier = f": ask {each.supplier}" if each.supplier else ": ask the supplier"
            yield Also(f"coming {each.number}", "overdue", f"{what}, overdue by {late}{supplier}")
        elif monday <= each.expected <= sunday:
            yield Also(f"coming {each.number}", "comes", what)


def _loads(plan: Plan, monday: date, sunday: date) -> Iterator[Also]:
    by_id = {make.id: make for make in plan.makes}
    for load in plan.loads:
        if load.over and monday <= load.day <= sunday:
            moves = [f"{made(by_id[one])} on {weekday_and_day(to)}" for one, to in load.movable]
            earlier = f"could go earlier: {', '.join(moves)}" if moves else "nothing fits earlier"
            work = tied(f"{load.minutes} min")
            day = weekday_and_day(load.day)
            text = f"{day} has {work} of hands-on work, {load.over} over: {earlier}"
            yield Also(f"{load.day} load", "too much", text)


def _standing(known: Facts) -> Iterator[Also]:
    for each in told_once(where_things_stand(known.bottles, known.lines, known.places)):
        yield Also(f"standing {each.subject} {each.text}", each.subject, raised(each.text))


def _backup(plan: Plan) -> Iterator[Also]:
    if plan.backup is None:
        return
    on = plan.backup.on
    if on is None or (plan.as_at - on).days > OLD_BACKUP:
        # not by its age, which is another every day
        yield Also("backup", "backup", backup_age(plan, _ONE_LINE))


# -- guesses ----------------------------------------------------------------------------------


def guesses_of(known: Facts, plan: Plan, monday: date, sunday: date) -> tuple[Also, ...]:
    """The guesses that bookings of the week lean on."""
    needs = tuple(need for need in plan.needs if monday <= need.booking.on <= sunday)
    return tuple(
        Also(
            f"guess {raised(each.subject)} {without_figure(raised(each.text))}",
            raised(each.subject),
            raised(each.text),
        )
        for each in leaned_on(known, plan, needs)
    )


# -- checks -------------------------------------------------------------------------------------


def checks_on(plan: Plan, on: date) -> list[Job]:
    """The titrations and looks whose best day it is; those nothing waits for come last."""
    row = [check for check in plan.checks if check.best == on]
    return [_check(plan, check) for check in sorted(row, key=lambda check: check.optional)]


def _check(plan: Plan, check: CheckToDo) -> Job:
    by_id = {make.id: make for make in plan.makes}
    make = by_id.get(check.subject)
    # the number of a make changes from plan to plan
    subject = f"{made(make)} made {weekday_and_day(make.on)}" if make else ""
    subject = subject or f"{check.subject} {raised(check.item)}"
    verb = "look at" if check.what == "look" else check.what
    by = f"by {weekday_and_day(check.by)}" if check.by > check.best else ""
    why = _worth(plan, check) if check.optional else raised(check.reason)
    work = tied(f"{check.minutes} min") if check.minutes else ""
    served = f"for {listed(check.bookings)}" if check.bookings else ""
    told = tuple(each for each in (why, by, work, served) if each)
    ref = check.subject if make else ""
    return Job(f"{check.best} {check.what} {subject}", "", f"{verb} {subject}", told, ref=ref)


def _worth(plan: Plan, check: CheckToDo) -> str:
    by_id = {make.id: make for make in plan.makes}
    worth = check.worth
    if worth is None:
        return "saves work if good"
    saved = [f"making {made(by_id[one])}" for one in worth.makes if one in by_id]
    pence = sum(less for _, less in worth.orders)
    saved += [f"{money(pence)} of orders"] if pence else []
    saved += [tied(f"{worth.minutes} min")] if worth.minutes > 0 else []
    saved += [f"the lack for {listed(worth.serves)}"] if worth.serves else []
    return f"a good look saves {', '.join(saved)}" if saved else "saves work if good"
