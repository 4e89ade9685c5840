"""How each sheet is made from what was asked: one call for its facts, one for its words."""

from __future__ import annotations

import re
from datetime import date, timedelta

from stockroom.errors import NotAllowed
from stockroom.web.forms.field import Field
from stockroom.web.forms.typed import Typed
from stockroom.web.paper.labels import label
from stockroom.web.paper.sheet import USUAL, Ready, Sheet, numbers_before

_REF = Field(
    "ref",
    "Day or booking",
    "booking",
    hint="K15, or 2027-03-23; the next day booked, if left empty",
)


def _week(typed: Typed) -> Ready:
    from stockroom.reports.paper.week import WEEK, monday_of, week_of
    from stockroom.service.closures import why_closed
    from stockroom.service.sheets import known_and_planned

    monday = monday_of(typed.day("of"), typed.today)
    sunday = monday + timedelta(days=6)
    known, plan = known_and_planned(typed.path, as_at=typed.today, through=sunday)
    sheet = week_of(known, plan, monday, why_closed(typed.path, monday, sunday))
    return Ready(WEEK, sheet, monday.isoformat())


def _day(typed: Typed) -> Ready:
    from stockroom.reports.paper.day import day_of
    from stockroom.reports.paper.day_text import DAY
    from stockroom.service.day import day_asked

    asked = day_asked(typed.path, typed.or_none("ref"), as_at=typed.today)
    sheet = day_of(asked.known, asked.plan, asked.on, asked.booking, asked.closed)
    return Ready(DAY, sheet, asked.about)


def _slip(typed: Typed) -> Ready:
    from stockroom.reports.paper.slip import SLIP, slip_of
    from stockroom.service.day import day_asked

    asked = day_asked(typed.path, typed.or_none("ref"), as_at=typed.today)
    return Ready(SLIP, slip_of(asked.known, asked.plan, asked.on, asked.booking), asked.about)


def _card(typed: Typed) -> Ready:
    from stockroom.reports.paper.card import cards_of
    from stockroom.reports.paper.card_text import CARD
    from stockroom.service.cards import hazards_for, makes_between, makes_named

    names = [each for each in re.split(r"[\s,;]+", typed.text("what")) if each]
    first, last = _days_of(typed)
    if names:
        found, asked = makes_named(typed.path, names, as_at=typed.today), ", ".join(names)
    else:
        found = makes_between(typed.path, first, last, as_at=typed.today)
        span = f"{first.isoformat()} to {last.isoformat()}"
        asked = first.isoformat() if first == last else span
    hazards = hazards_for(typed.path, found.plan, found.makes)
    told = f"for {asked}: nothing to make up"
    sheet = cards_of(found.known, found.plan, found.makes, hazards, told)
    about = sheet.about if names else asked
    things = {card.number: card.name for card in sheet.cards if card.number in _upper(names)}
    return Ready(CARD, sheet, about or asked, numbers_before(typed.path, things))


def _days_of(typed: Typed) -> tuple[date, date]:
    """The one day asked for, else the week of the day asked for, else this week."""
    on = typed.day("on")
    if on is not None:
        return on, on
    of = typed.day("of") or typed.today
    monday = of - timedelta(days=of.weekday())
    return monday, monday + timedelta(days=6)


def _upper(names: list[str]) -> set[str]:
    return {name.upper() for name in names}


def _strip(typed: Typed) -> Ready:
    from stockroom.reports.paper.strip import STRIP, strip_of
    from stockroom.service.sheets import known_and_planned

    known, plan = known_and_planned(typed.path, as_at=typed.today)
    return Ready(STRIP, strip_of(known, plan), known.start.isoformat())


def _buying(typed: Typed) -> Ready:
    from stockroom.reports.paper.buying_sheet import BUYING, buying_sheet_of
    from stockroom.service.plan import term_plan

    plan = term_plan(typed.path, as_at=typed.today)
    return Ready(BUYING, buying_sheet_of(plan), plan.start.isoformat())


def _report(typed: Typed) -> Ready:
    from stockroom.reports.paper.term_report import REPORT, term_report_of
    from stockroom.service.term_report import term_entered, term_told

    known, plan, left = term_told(typed.path, as_at=typed.today, term=typed.text("term"))
    sheet = term_report_of(known, plan, left, entered=term_entered(typed.path))
    return Ready(REPORT, sheet, known.start.isoformat())


def _walk(typed: Typed) -> Ready:
    from stockroom.reports.paper.walk_sheet import WALK, walk_sheet_of
    from stockroom.service.walk import open_sheet, sheet_along, standing_wrong

    name = typed.text("name")
    places = [each.strip() for each in re.split(r"[,;]", typed.text("places")) if each.strip()]
    if name:
        found = open_sheet(typed.path, name, on=typed.today)
    else:
        found = sheet_along(typed.path, places, on=typed.today)
    if not found.to_count:
        told = f'There is nothing to count on the walk "{found.walk.name}".'
        raise NotAllowed(told, "Name another walk, or other places.")
    wrong = standing_wrong(typed.path, found, on=typed.today)
    return Ready(WALK, walk_sheet_of(found, typed.today, wrong), found.walk.name)


SHEETS = (
    Sheet(
        "week",
        "The week",
        "Day by day what to check, start, make, set out and destroy, a box to tick on each.",
        _week,
        (Field("of", "Any day of the week", "date", hint="2027-01-25; this week, if left empty"),),
    ),
    Sheet(
        "day",
        "The page for the day",
        "Yes or no first, then what to do at what time and how strong everything is.",
        _day,
        (_REF,),
    ),
    Sheet(
        "slip",
        "The strengths for the board",
        "The true strengths, so that a class reckons with the right figures.",
        _slip,
        (_REF,),
    ),
    Sheet(
        "card",
        "Make cards",
        "What to take in large figures, the steps in order, blanks for what was weighed.",
        _card,
        (
            Field("what", "Makes or bookings", hint="M14; or K08: all that is made for it"),
            Field("on", "Or all worked on that day", "date", hint="2027-01-26"),
            Field("of", "Or all of the week of", "date", hint="this week, if all is left empty"),
        ),
    ),
    label,
    Sheet(
        "strip",
        "The term at a glance",
        "One row a week, for the wall.",
        _strip,
    ),
    Sheet(
        "buying",
        "The term's buying",
        "What to order, by when, why, and whose money it is.",
        _buying,
    ),
    Sheet(
        "walk",
        "The sheet to count by",
        "Shelf by shelf what should stand there, a blank for what does.",
        _walk,
        (
            Field("places", "Along these shelves", "place", hint="A1, A2; all, if left empty"),
            Field("name", "Or of a walk under way", hint="its name, as Jan-A2"),
        ),
        (*USUAL, "A5"),
    ),
    Sheet(
        "report",
        "The term's report",
        "Use, waste, money, near misses: five sentences, then the tables.",
        _report,
        (Field("term", "Which term", hint="the one begun last, if left empty"),),
    ),
)
"""All of them, in the order they are listed."""

BY_NAME = {each.name: each for each in SHEETS}
"""Each by the name in its address."""
