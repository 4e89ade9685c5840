"""The lines of the week sheet with what can be entered beside each."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import replace
from datetime import date

from stockroom.planning.decisions import Answer, Outcome, Plan
from stockroom.planning.facts import Drawn, Facts
from stockroom.reports.pages.parts import Act, Pairs, Row, in_address
from stockroom.reports.pages.week_acts import (
    check_act,
    coming_acts,
    destroy_act,
    discard_act,
    draw_acts,
    drawn_and_left,
    entered_for,
    make_act,
    order_act,
)
from stockroom.reports.paper.week_also import checks_on
from stockroom.reports.paper.week_parts import (
    CHECK,
    DESTROY,
    MAKE,
    SET_OUT,
    START,
    TIDY,
    Also,
    Item,
    Job,
    Shelf,
)
from stockroom.reports.words import amount, counted, raised, weekday_and_day


class Lines:
    """Rows made of the jobs of the sheet; each job is found again in the plan by its key."""

    def __init__(self, known: Facts, plan: Plan) -> None:
        self.known, self.plan = known, plan
        self.bottles = {bottle.number: bottle for bottle in known.bottles}
        self.makes = {make.id: make for make in plan.makes}
        self.watch = {f"{each.on} destroy {each.booking}": each for each in plan.watch}
        self.entered = entered_for(known)
        self.checks: dict[date, dict[str, tuple[Act, ...]]] = {}
        self.needs: dict[str, list[Answer]] = {}
        for need in plan.needs:
            self.needs.setdefault(need.booking.number, []).append(need)

    def shelf(self, on: date, shelf: Shelf) -> tuple[Row, ...]:
        """The rows of one shelf of a day."""
        rows = {
            CHECK: self._check,
            START: self._make,
            MAKE: self._make,
            SET_OUT: self._set_out,
            DESTROY: self._destroy,
            TIDY: self._tidy,
        }[shelf.name]
        return tuple(rows(on, job) for job in shelf.jobs)

    # -- checks and makes ------------------------------------------------------------------

    def _check(self, on: date, job: Job) -> Row:
        if on not in self.checks:
            self.checks[on] = self._acts_of_checks(on)
        return replace(_row(job), acts=self.checks[on].get(job.key, ()))

    def _acts_of_checks(self, on: date) -> dict[str, tuple[Act, ...]]:
        """What can be entered of the checks whose best day it is, by the key of their job."""
        row = [check for check in self.plan.checks if check.best == on]
        # in the order of the jobs
        row.sort(key=lambda check: check.optional)
        jobs = checks_on(self.plan, on)
        return {
            job.key: check_act(check, self.bottles) for check, job in zip(row, jobs, strict=True)
        }

    def _make(self, on: date, job: Job) -> Row:
        make = self.makes.get(job.ref)
        # what is finished was entered when it was started
        if make is None or make.on != on:
            return _row(job)
        # numbers move when the plan does: a page left open must not print another make
        asked = f"what={make.id}&meant={in_address(make.wanted)}"
        links: Pairs = (
            ("card", f"/paper/card.pdf?{asked}"),
            ("label", f"/paper/label.pdf?{asked}"),
        )
        return replace(_row(job), links=links, acts=(make_act(self.known, make),))

    # -- what is set out -------------------------------------------------------------------

    def _set_out(self, on: date, job: Job) -> Row:
        needs = self.needs.get(job.key.removeprefix(f"{on} set out "), [])
        if not job.items or len(needs) != len(job.items):
            return _row(job)
        rows = (self._item(need, item) for need, item in zip(needs, job.items, strict=True))
        return replace(_row(job), rows=tuple(rows))

    def _item(self, need: Answer, item: Item) -> Row:
        drawn, left = drawn_and_left(need, self.entered.get((need.booking.number, need.line), []))
        why = (("why", f"/why?ref={need.ref}"),)
        if need.outcome in (Outcome.SHORT, Outcome.REFUSED):
            # its word stands in the mark already
            reason = item.whence.split(": ", 1)[-1]
            return Row(item.what, more=(reason,), mark="short", links=why, done=_told(need, drawn))
        # what is drawn already is told as done, and its bottle not named a second time
        more = (item.whence,) if left or need.make or not drawn else ()
        acts = tuple(draw_acts(self.known, need, left))
        return Row(item.what, more=more, done=_told(need, drawn), links=why, acts=acts)

    # -- after the class -------------------------------------------------------------------

    def _destroy(self, on: date, job: Job) -> Row:
        watch = self.watch.get(job.key)
        # before its day there is nothing to destroy
        if watch is None or on > self.plan.as_at:
            return _row(job)
        return replace(_row(job), acts=(destroy_act(watch.booking, watch.ticked_by),))

    def _tidy(self, on: date, job: Job) -> Row:
        number = job.key.removeprefix(f"{on} tidy ")
        if number not in self.bottles or on > self.plan.as_at:
            return _row(job)
        how = "collected" if ": collect " in job.what else "poured away"
        return replace(_row(job), acts=(discard_act(number, how, "; ".join(job.more)),))

    # -- the foot --------------------------------------------------------------------------

    def also(self, row: Iterable[Also], without: frozenset[str]) -> Iterator[Row]:
        """The lines at the foot, less those told already by their keys."""
        acts = also_acts(self.plan)
        for each in row:
            if each.key not in without:
                links = order_links(self.plan, each.key)
                yield Row(f"{each.about}: {each.text}", links=links, acts=acts.get(each.key, ()))


def also_acts(plan: Plan) -> dict[str, tuple[Act, ...]]:
    """What can be entered of orders planned and orders under way, by the key of their line."""
    planned = {f"order {raised(each.line)}": (order_act(each),) for each in plan.orders}
    return planned | {f"coming {each.number}": coming_acts(each) for each in plan.on_order}


def order_links(plan: Plan, key: str) -> Pairs:
    """The reasons of a planned order, by the key of its line."""
    ids = [each.id for each in plan.orders if f"order {raised(each.line)}" == key]
    return tuple((one, f"/why?ref={one}") for one in ids)


def _row(job: Job) -> Row:
    rows = tuple(Row(item.what, more=(item.whence,)) for item in job.items)
    return Row(job.what, job.time, job.more, job.cautions, job.ref, rows=rows)


def _told(need: Answer, drawn: list[Drawn]) -> str:
    """What is drawn already: "drawn: 264 cm³ from S11"; "" for nothing."""
    said = [
        f"{amount(each.amount, need.kind)} from {each.bottle}"
        + (f" on {weekday_and_day(each.on)}" if each.on != need.booking.on else "")
        for each in drawn[:_TOLD]
    ]
    more = [counted(len(drawn) - _TOLD, "more draw")] if len(drawn) > _TOLD else []
    return f"drawn: {', '.join([*said, *more])}" if drawn else ""


_TOLD = 3
"""Draws of one need that are named; more are counted. Our choice."""
