"""What is to do before a day, in the words of the sheet, with the ways to do it."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from urllib.parse import urlencode

import pytest

from stockroom.planning.decisions import Plan
from stockroom.reports.pages.day import day_page, to_do_of
from stockroom.reports.paper.day import day_of
from stockroom.service.day import day_asked


def ways(plan: Plan, text: str) -> dict[str, str]:
    found = to_do_of(plan, text).ways
    return {way.words: f"{way.to}?{urlencode(way.given)}".rstrip("?") for way in found}


def test_a_make_is_entered_as_it_is_planned(term: Plan) -> None:
    make = term.makes[0]
    found = ways(term, f"make {make.id} on {make.on}: {make.item} {make.strength}")
    assert found["enter it as made"].startswith(f"/do/make?{urlencode({'line': make.line})}&")
    assert found[f"why {make.id}"] == f"/why?ref={make.id}"


@pytest.mark.parametrize(
    ("text", "href"),
    [
        (
            "order O01: lithium chloride, 1 × 100 g, by 2027-01-05",
            "/do/order-planned?order=O01&meant=lithium+chloride%2C+1+%C3%97+100+g",
        ),
        ("wait for P01: indicator, expected 2027-01-05", "/do/arrive?order=P01"),
        ("titrate B01 (hydrogen peroxide 100 vol) between a and b: c", "/do/found?bottle=B01"),
        ("look S03 (potassium iodide 1.00 mol/dm³) between a and b: c", "/do/look?bottle=S03"),
        ("short: 6 cm³ of something for K29: none", "/buying"),
        ("make M999 on 2027-01-05: nothing", "/why?ref=M999"),
    ],
)
def test_each_kind_leads_to_where_it_is_done(term: Plan, text: str, href: str) -> None:
    assert next(iter(ways(term, text).values())) == href


def test_words_nobody_foresaw_lead_nowhere(term: Plan) -> None:
    assert ways(term, "K15 is done: not planned") == {}


def test_every_thing_to_do_of_the_term_leads_somewhere(practice: Path) -> None:
    asked = day_asked(practice, "2027-03-23", as_at=date(2027, 3, 15))
    sheet = day_of(asked.known, asked.plan, asked.on)
    page = day_page(asked.known, asked.plan, sheet)
    todo = [each for stretch in page.stretches for each in stretch.to_do]
    assert [each.text for each in todo] == list(sheet.parts[0].to_do)
    assert [each.text for each in todo if not each.ways] == []


def test_the_days_around_it_have_bookings(practice: Path) -> None:
    asked = day_asked(practice, "2027-01-24", as_at=date(2027, 1, 4))
    page = day_page(asked.known, asked.plan, day_of(asked.known, asked.plan, asked.on))
    booked = {booking.on for booking in asked.known.bookings}
    assert page.earlier in booked
    assert page.later == date(2027, 1, 25)
