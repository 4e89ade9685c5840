"""Questions about the plan: each answered by the very functions the command of its name calls."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Path, Query
from starlette.responses import Response

from stockroom.reports import json_plan as report
from stockroom.reports.changes_text import changed_json, what_if_json
from stockroom.reports.hazards_text import fresh_with_hazards
from stockroom.service import plan as service
from stockroom.service.hazards import hazards_of_makes
from stockroom.service.printed_plans import changed as changed_since
from stockroom.service.what_if import Asked
from stockroom.service.what_if import what_if as difference
from stockroom.service.what_if_words import booked, resized, shifted
from stockroom.web.api import contract_plan as keys
from stockroom.web.api.answering import Asking, Cautious, Data, Day, Word, day, period, told
from stockroom.web.api.contract_changes import ChangedAnswer, WhatIfAnswer

router = APIRouter(prefix="/api", tags=["The plan"])

From = Annotated[
    str, Query(alias="from", max_length=40, description="First day; else the term's first.")
]
To = Annotated[str, Query(alias="to", max_length=40, description="Last day; else the term's last.")]
Several = Annotated[list[Word], Query(default_factory=list, max_length=20)]


@router.get("/plan", responses=told(keys.PlanAnswer, "The plan of the term."))
def plan(question: Asking, start: From = "", end: To = "", cautious: Cautious = False) -> Response:
    """The plan of the term: have, make, check, order, and what cannot be done."""
    asked = period(start, end)

    def make() -> Data:
        answer = service.term_plan(question.path, as_at=question.today, **asked, cautious=cautious)
        return report.plan_json(answer)

    return question.answer("plan", (*asked.values(), cautious), make)


@router.get("/fresh", responses=told(keys.FreshAnswer, "What to make up, with its hazards."))
def fresh(question: Asking, start: From = "", end: To = "", cautious: Cautious = False) -> Response:
    """What to make up, by day, with its steps and cautions."""
    asked = period(start, end)

    def make() -> Data:
        answer = service.to_make(question.path, as_at=question.today, **asked, cautious=cautious)
        return fresh_with_hazards(answer, hazards_of_makes(question.path, answer))

    return question.answer("fresh", (*asked.values(), cautious), make)


@router.get("/past", responses=told(keys.PastAnswer, "What is no longer good on that day."))
def past(question: Asking, on: Day = "", cautious: Cautious = False) -> Response:
    """What is past, weak, undated or unchecked on a day, and for which booking it matters."""
    then = day(on, "on") or question.today

    def make() -> Data:
        answer = service.past_on(question.path, as_at=question.today, on=then, cautious=cautious)
        return report.past_json(answer, then)

    return question.answer("past", (then, cautious), make)


@router.get("/usage", responses=told(keys.UsageAnswer, "What the term uses."))
def usage(question: Asking, start: From = "", end: To = "", cautious: Cautious = False) -> Response:
    """What the term uses, by solution and in bought form."""
    asked = period(start, end)

    def make() -> Data:
        answer = service.term_plan(question.path, as_at=question.today, **asked, cautious=cautious)
        return report.usage_json(answer)

    return question.answer("usage", (*asked.values(), cautious), make)


@router.get("/buying", responses=told(keys.BuyingAnswer, "What to order."))
def buying(question: Asking, cautious: Cautious = False) -> Response:
    """What to order, by when, why, and whose money it is."""

    def make() -> Data:
        return report.buying_json(
            service.term_plan(question.path, as_at=question.today, cautious=cautious)
        )

    return question.answer("buying", (cautious,), make)


@router.get("/on-order", responses=told(keys.OnOrderAnswer, "What is on its way."))
def on_order(question: Asking) -> Response:
    """What was ordered and has not all come: expected when, and what is overdue."""

    def make() -> Data:
        return report.on_order_json(service.term_plan(question.path, as_at=question.today))

    return question.answer("on-order", (), make)


@router.get("/ready/{ref}", responses=told(keys.ReadyAnswer, "Ready or not, and what to do."))
def ready(
    question: Asking,
    ref: Annotated[str, Path(max_length=200, description="A booking, as K11, or a day.")],
    cautious: Cautious = False,
) -> Response:
    """Is everything good for a booking, or on a day?"""

    def make() -> Data:
        answer = service.ready(question.path, ref, as_at=question.today, cautious=cautious)
        return report.ready_json(
            answer, as_at=question.today, practice=question.practice, cautious=cautious
        )

    return question.answer("ready", (ref, cautious), make)


@router.get("/why", responses=told(keys.WhyAnswer, "The reasons, five lines or fewer."))
def why(
    question: Asking,
    ref: Annotated[
        str, Query(max_length=200, description="What is meant: K15, K15.1, M14, O02, S10, a name.")
    ],
    instead: Annotated[
        str | None, Query(max_length=200, description="Why not this: S10, a day, a pack.")
    ] = None,
    cautious: Cautious = False,
) -> Response:
    """The reasons behind one line, in five lines or fewer; or why not another in its place."""

    def make() -> Data:
        today = question.today
        reasons = service.why(question.path, ref, as_at=today, instead=instead, cautious=cautious)
        practice = question.practice
        return report.why_json(ref, reasons, as_at=today, practice=practice, cautious=cautious)

    return question.answer("why", (ref, instead, cautious), make)


@router.get("/changed", responses=told(ChangedAnswer, "Each change, with its cause."))
def changed(
    question: Asking,
    number: Annotated[
        str | None, Query(max_length=40, description="A kept plan, as 0003; else the last.")
    ] = None,
) -> Response:
    """What changed since a plan was kept, each change with its cause."""

    def make() -> Data:
        found = changed_since(question.path, number, as_at=question.today)
        against, by, practice = found.against, found.by, found.practice
        return changed_json(found.comparison, against=against, by=by, practice=practice)

    return question.answer("changed", (number,), make)


@router.get("/what-if", responses=told(WhatIfAnswer, "What would change, with its cause."))
def what_if(
    question: Asking,
    groups: Several,
    shift: Several,
    without: Several,
    cancel: Several,
    book: Several,
    cautious: Cautious = False,
    keep_closed: bool = False,
) -> Response:
    """What would change if; each may be given again, as `groups=K08=11`. Nothing is written."""
    asked = Asked(
        groups=tuple(resized(each, "groups") for each in groups),
        shifts=tuple(shifted(each, "shift") for each in shift),
        without=tuple(without),
        cancels=tuple(cancel),
        extras=tuple(booked(each, "book") for each in book),
        cautious=cautious,
        keep_closed=keep_closed,
    )

    def make() -> Data:
        found = difference(question.path, asked, as_at=question.today)
        return what_if_json(found.comparison, asked=found.asked, practice=found.practice)

    return question.answer("what-if", (asked,), make)
