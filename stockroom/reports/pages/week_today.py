"""What today is about besides its own work: what is late, what stands wrong, what to order."""

from __future__ import annotations

from dataclasses import replace

from stockroom.findings import Finding
from stockroom.planning.decisions import Coming, Order, Plan
from stockroom.planning.facts import Bottle, Facts, Firmness
from stockroom.reports.files.morning_shelf import (
    danger_due,
    dangers,
    leaned_on_late,
    not_written,
)
from stockroom.reports.pages.parts import Part, Row
from stockroom.reports.pages.week_acts import (
    check_act,
    coming_acts,
    danger_acts,
    destroy_act,
    order_act,
    printed_acts,
)
from stockroom.reports.paper.week_also import checks_on
from stockroom.reports.words import counted, listed, money, named, raised, weekday_and_day


class Today:
    """The parts of today's list that no shelf of the week sheet holds."""

    def __init__(self, known: Facts, plan: Plan) -> None:
        self.known, self.plan = known, plan
        self.bottles: dict[str, Bottle] = {bottle.number: bottle for bottle in known.bottles}
        self.dangers = dangers(known, {each.bottle for each in plan.past})

    @property
    def told(self) -> frozenset[str]:
        """The keys of lines at the foot of the sheet that stand above already."""
        today = self.plan.as_at
        orders = [f"order {raised(o.line)}" for o in self.plan.orders if o.order_by <= today]
        coming = [f"coming {c.number}" for c in self.plan.on_order if c.expected <= today]
        wrong = [f"standing {each.subject} {each.text}" for each in self.dangers]
        return frozenset([*orders, *coming, *wrong])

    def late(self) -> tuple[Part, ...]:
        """What is due and its day over: it is never lost when its week is."""
        on = self.plan.as_at
        orders = [self._order(each) for each in self.plan.orders if each.order_by < on]
        coming = [self._coming(each) for each in self.plan.on_order if each.expected < on]
        rows = [*self._standing(), *self._checks(), *orders, *coming, *self._not_written()]
        parts = [Part("late", tuple(rows)), Part("wrong at the shelf", tuple(self._wrong()))]
        return tuple(part for part in parts if part.rows)

    def parts(self) -> tuple[Part, ...]:
        """What is due on this very day, and what is only worth settling."""
        on = self.plan.as_at
        orders = [self._order(each) for each in self.plan.orders if each.order_by == on]
        coming = [self._coming(each) for each in self.plan.on_order if each.expected == on]
        parts = [
            Part("order", tuple(orders)),
            Part("comes today", tuple(coming)),
            Part("settle", tuple(self._to_settle())),
        ]
        return tuple(part for part in parts if part.rows)

    def _standing(self) -> list[Row]:
        """What is never kept and was not ticked as destroyed by the end of its day."""
        rows = []
        for booking in self.known.bookings:
            over = self.known.start <= booking.on < self.plan.as_at
            if not over or booking.destroyed_by or booking.firmness is Firmness.DROPPED:
                continue
            recipe = self.known.recipes[booking.recipe, booking.version]
            lines = [self.known.lines[each.line] for each in recipe.requirements]
            how = recipe.never_kept or next((x.never_kept for x in lines if x.never_kept), "")
            if how:
                what = f"destroy what is left of {booking.number} {raised(recipe.title)}"
                since = f"not ticked since {weekday_and_day(booking.on)}"
                acts = (destroy_act(booking.number),)
                rows.append(Row(what, more=(since,), cautions=(raised(how),), acts=acts))
        return rows

    def _checks(self) -> list[Row]:
        late = leaned_on_late(self.plan)
        rows = []
        for check in self.plan.checks:
            if check.subject in late and not check.optional and check.best != self.plan.as_at:
                (job,) = checks_on(replace(self.plan, checks=(check,)), check.best)
                acts = check_act(check, self.bottles)
                rows.append(Row(job.what, more=job.more, acts=acts))
        return rows

    def _order(self, order: Order) -> Row:
        late = f"late by {counted(order.late, 'open day')}" if order.late else "by today"
        more = (
            late,
            f"ask {order.ask_first} first" if order.ask_first else "",
            money(order.pence),
            f"needed {weekday_and_day(order.need_by)}",
            f"for {listed(order.for_bookings)}" if order.for_bookings else "",
        )
        what = f"order {named(order.item, '')}, {order.packs} × {order.pack}"
        told = tuple(each for each in more if each)
        return Row(what, more=told, ref=order.id, acts=(order_act(order),))

    def _coming(self, coming: Coming) -> Row:
        overdue = coming.overdue
        late = f"overdue by {counted(overdue, 'open day')}" if overdue else ""
        expected = f"expected {weekday_and_day(coming.expected)}"
        ask = f"ask {coming.supplier or 'the supplier'}" if overdue else ""
        what = f"{named(coming.item, '')}, {coming.packs} × {coming.pack}, order {coming.number}"
        told = tuple(each for each in (late, expected, ask) if each)
        return Row(what, more=told, acts=coming_acts(coming))

    def _wrong(self) -> list[Row]:
        rows = []
        for each in self.dangers:
            due = danger_due(self.known, each)
            rows.append(Row(due.what, cautions=due.more, acts=danger_acts(self.known, each)))
        return rows

    def _not_written(self) -> list[Row]:
        return [Row(due.what, more=due.more) for due in not_written(self.known)]

    def _to_settle(self) -> list[Row]:
        rows = []
        for guess in self.plan.guesses:
            acts = printed_acts(self.bottles.get(guess.subject)) if _asks(guess) else ()
            if acts:
                rows.append(Row(f"{guess.subject}: {raised(guess.text)}", acts=acts))
        return rows


def _asks(guess: Finding) -> bool:
    return guess.text.startswith("printed ")
