"""The sheet of what to order, the listing of what is to come, and the year before beside it."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from typing import Any

from sample_plan import PLAN

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Budget, Coming, Delivery, Instead, Use
from stockroom.reports.buying_text import buying_text, on_order_text
from stockroom.reports.json_plan import buying_json, on_order_json, usage_json
from stockroom.reports.usage_text import usage_text

BORROW = Instead("borrow", date(2027, 1, 11), "borrow 1.17 g by 2027-01-11 for K01", "K01")
COMING = Coming(
    "P01", "lithium chloride", "lithium chloride", "100 g", 2, 100_000_000, 200_000_000,
    Kind.MASS, date(2027, 1, 4), date(2027, 1, 18), date(2027, 1, 26), 5, "Northern", "P1",
    ("K29",), (BORROW,),
)  # fmt: skip


def test_an_order_says_its_days_its_split_and_its_ways_round() -> None:
    split = Delivery("100 g", 1, 100_000_000, 1450, date(2027, 1, 5), date(2027, 1, 20))
    order = replace(
        PLAN.orders[0], falls_below=PLAN.as_at, runs_out=date(2027, 2, 1), deliveries=(split,),
        instead=(BORROW,),
    )  # fmt: skip
    text = buying_text(replace(PLAN, orders=(order,)), 100)
    assert "falls below its level now, runs out Mon 2027-02-01" in text
    assert "delivery 1: 1 × 100 g, £14.50, order by Tue 2027-01-05" in text
    assert "or borrow 1.17 g by 2027-01-11 for K01" in text


def test_what_is_on_its_way_stands_apart_with_its_days() -> None:
    said = " ".join(on_order_text(replace(PLAN, on_order=(COMING,)), 100).split())
    assert "1 order to come, 1 overdue" in said
    assert "100 g of 200 g to come; ordered Mon 2027-01-04 by P1, Northern" in said
    assert "expected Mon 2027-01-18, 5 open days overdue; counted from Tue 2027-01-26" in said
    assert "for K29 or borrow 1.17 g" in said


def test_every_line_keeps_to_the_width() -> None:
    for text in (
        buying_text(replace(PLAN, on_order=(COMING,)), 60),
        on_order_text(replace(PLAN, on_order=(COMING,)), 60),
    ):
        assert max(len(line) for line in text.splitlines()) <= 60


def test_the_money_of_each_department_spent_promised_and_left() -> None:
    budgets = (Budget("CH", "chemistry", 2900, 1000, 3500), Budget("OU", "", 0, 100))
    text = buying_text(replace(PLAN, budgets=budgets), 100)
    assert "CH   £29.00 ordered, £10.00 to be ordered, of £35.00: £4.00 over" in text
    assert "OU   £1.00 to be ordered" in text
    assert "all  £11.00 to be ordered, £29.00 ordered already" in text


def test_the_same_as_data() -> None:
    data: Any = buying_json(replace(PLAN, on_order=(COMING,), budgets=(Budget("OU", "", 0, 1),)))
    (one,) = data["on_order"]
    assert (one["id"], one["amount"], one["ordered"], one["unit"]) == ("P01", 100, 200, "g")
    assert (one["counted_from"], one["overdue_open_days"]) == ("2027-01-26", 5)
    assert one["instead"] == [
        {"what": "borrow", "on": "2027-01-11", "booking": "K01", "text": BORROW.text}
    ]
    assert data["budgets"][0]["left"] is None
    assert on_order_json(replace(PLAN, on_order=(COMING,)))["on_order"] == data["on_order"]


def test_the_contract_of_an_order_stands_and_more_is_added() -> None:
    order = buying_json(PLAN)["orders"][0]
    contract = "item pack packs need_by order_by late_by_open_days cost shares reasons".split()
    added = "instead deliveries mixture falls_below runs_out queried keeps_until ask_first".split()
    assert set(contract + added) <= order.keys()


USE = Use("salt", "salt", "", "bought", 100_000_000, Kind.MASS, (("K1", 100_000_000),), groups=2)


def test_the_year_before_is_a_column_where_anything_is_known() -> None:
    beside = replace(USE, before=80_000_000, groups_before=4, basis="table")
    plan = replace(PLAN, usage=(beside,), differences=("salt: 100 g, 80 g the year before",))
    text = usage_text(plan, 100)
    assert "IN BOUGHT FORM (this term, the same term a year before)" in text
    assert "100 g  80 g  salt, 50 g a group beside 20 g: K1 100 g" in text
    assert "1 DIFFERENCE FROM THE YEAR BEFORE, THE BIGGEST FIRST (as written down)" in text
    told = usage_json(plan)["usage"][0]["year_before"]
    assert told == {"amount": 80, "unit": "g", "groups": 4, "by": "table"}


def test_no_year_before_leaves_the_column_out() -> None:
    text = usage_text(replace(PLAN, usage=(USE,)), 100)
    assert "year before" not in text.lower()
    assert "100 g  salt: K1 100 g" in text
    assert "year_before" not in usage_json(replace(PLAN, usage=(USE,)))["usage"][0]
