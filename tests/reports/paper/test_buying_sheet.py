"""The buying list on paper: grouped, marked, and whole with hideous texts."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from typing import TYPE_CHECKING, Any

import paper_reading
import pytest

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Budget, Coming, Instead
from stockroom.reports.paper.buying_sheet import (
    BUYING,
    NO_SUPPLIER,
    NOTHING,
    buying_sheet_lines,
    buying_sheet_of,
    buying_sheet_text,
    by_supplier,
)
from stockroom.reports.typesetting import typeset

if TYPE_CHECKING:
    from stockroom.planning.decisions import Plan

LONG = "tris(2,4-pentanedionato)iron(III)-hexahydrate of a supplier who writes everything " * 2


def _pdf(plan: Plan, paper: str = "A4") -> bytes:
    return typeset("buying", BUYING.data(buying_sheet_of(plan)), paper=paper)[0]


@pytest.fixture(scope="module")
def hideous(term: Plan) -> Plan:
    suppliers = ("", "Smith & Daughters, Laboratory Goods and Glass of Lower Wallop " * 3, "Z", "A")
    more: dict[str, Any] = {
        "item": LONG, "ask_first": "the head of everything and her deputy", "ask_days": 5,
        "instead": (Instead("borrow", date(2027, 1, 11), "borrow it " * 30),),
        "reasons": ("X" * 120, LONG, LONG), "late": 12,
        "for_bookings": tuple(f"K{n:02}" for n in range(40)),
    }  # fmt: skip
    orders = [
        replace(order, id=f"O{n:02}", supplier=suppliers[n % 4], **(more if n % 3 == 0 else {}))
        for n, order in enumerate(term.orders * 2)
    ]
    coming = Coming(
        "P01", "x", LONG, "1 g", 1, 10**6, 10**6, Kind.MASS, term.start, term.start, term.start, 3
    )
    budgets = (*term.budgets, Budget("WWWWWWWW", LONG, 10**9, 10**9, None))
    return replace(term, orders=tuple(orders), on_order=(coming,), budgets=budgets)


def test_the_practice_list_is_one_page_of_paper_with_every_order_on_it(term: Plan) -> None:
    pdf = _pdf(term)
    said = paper_reading.words(pdf)
    assert paper_reading.sizes_mm(pdf) == [(297.0, 210.0)]
    for order in term.orders:
        assert order.order_by.isoformat() in said
        assert order.item in said
    assert "late by 6 open days" in said
    assert "£1.80 over" in said
    assert "PRACTICE" in said
    assert paper_reading.greys_only(pdf)


@pytest.mark.parametrize("paper", ["A4", "Letter"])
def test_long_names_and_reasons_neither_clip_nor_overlap(hideous: Plan, paper: str) -> None:
    pdf = _pdf(hideous, paper)
    assert paper_reading.outside(pdf, margin=8) == []
    assert paper_reading.overlapping(pdf) == []
    assert "no limit kept" in paper_reading.words(pdf)


def test_suppliers_stand_by_their_most_pressing_order_and_those_without_last(hideous: Plan) -> None:
    groups = by_supplier(hideous)
    assert groups[-1][0] == ""
    pressing = [orders[0].order_by for name, orders in groups if name]
    assert pressing == sorted(pressing)
    assert all(
        [o.order_by for o in orders] == sorted(o.order_by for o in orders) for _, orders in groups
    )
    assert buying_sheet_of(hideous).groups[-1].supplier == NO_SUPPLIER
    assert sum(len(orders) for _, orders in groups) == len(hideous.orders)


def test_no_line_of_the_text_is_wider_than_asked(hideous: Plan, term: Plan) -> None:
    for plan in (term, hideous):
        text = buying_sheet_text(buying_sheet_of(plan), 90)
        assert [line for line in text.splitlines() if len(line) > 90 and "X" * 50 not in line] == []


def test_a_line_is_known_again_when_its_order_gets_another_number(term: Plan) -> None:
    before = buying_sheet_lines(buying_sheet_of(term))
    later = replace(
        term, orders=tuple(replace(o, id=f"O{n + 9}") for n, o in enumerate(term.orders))
    )
    assert buying_sheet_lines(buying_sheet_of(later)) == before
    dearer = replace(term, orders=(replace(term.orders[0], pence=9999), *term.orders[1:]))
    changed = buying_sheet_lines(buying_sheet_of(dearer))
    assert {key for key in before if before[key] != changed[key]} == {f"{term.orders[0].line} #1"}


def test_nothing_to_order_is_said(term: Plan) -> None:
    bare = replace(term, orders=(), budgets=())
    assert NOTHING in buying_sheet_text(buying_sheet_of(bare), 80)
    assert NOTHING in paper_reading.words(_pdf(bare))
