"""The term's buying as a value: the words of the sheet, with every reason and every way round."""

from __future__ import annotations

from dataclasses import replace
from datetime import date

from sample_plan import PLAN

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Budget, Coming, Instead, Level
from stockroom.reports.pages.buying import buying_page_of
from stockroom.reports.paper.buying_sheet import buying_sheet_of

WAYS = tuple(
    Instead("borrow", date(2027, 1, 11), f"borrow {n} cm3 by 2027-01-11 for K01", "K01")
    for n in range(1, 7)
)
ORDER = replace(PLAN.orders[0], late=0)
COMING = Coming(
    "P01", "lithium chloride", "lithium chloride", "100 g", 1, 100_000_000, 200_000_000,
    Kind.MASS, date(2027, 1, 4), date(2027, 1, 18), date(2027, 1, 26), 5, "Northern", "P1",
    ("K29",), WAYS[:1],
)  # fmt: skip


def test_an_order_is_told_as_on_paper() -> None:
    sheet = buying_sheet_of(PLAN)
    told = buying_page_of(PLAN)
    assert [one.sheet for one in told.sellers[0].wanted] == list(sheet.groups[0].rows)


def test_every_way_round_is_told_and_none_left_for_another_sheet() -> None:
    told = buying_page_of(replace(PLAN, orders=(replace(ORDER, late=3, instead=WAYS),)))
    ways = told.sellers[0].wanted[0].ways
    assert len(ways) == 6
    assert ways[0] == "or borrow 1 cm³ by 2027-01-11 for K01"


def test_what_a_number_stands_for_goes_with_it() -> None:
    told = buying_page_of(replace(PLAN, orders=(ORDER,))).sellers[0].wanted[0]
    assert told.meant == f"{ORDER.line}, {ORDER.packs} × {ORDER.pack}"


def test_the_first_sentence_counts_orders_money_and_what_is_late() -> None:
    late = replace(ORDER, late=2)
    assert buying_page_of(replace(PLAN, orders=(late,))).first.endswith("; 1 late already.")
    assert buying_page_of(replace(PLAN, orders=(ORDER,))).first.endswith("; none is late yet.")
    assert buying_page_of(replace(PLAN, orders=())).first == "Nothing to order in this period."


def test_late_comes_if_ordered_now_and_in_time_if_ordered_by_then() -> None:
    for late, when in ((2, "now"), (0, "by then")):
        told = buying_page_of(replace(PLAN, orders=(replace(ORDER, late=late),)))
        assert told.sellers[0].wanted[0].comes.endswith(f"if ordered {when}")


def test_what_is_on_its_way_says_since_when_how_much_and_from_when_it_counts() -> None:
    told = buying_page_of(replace(PLAN, on_order=(COMING,))).coming[0]
    assert told.placed == "ordered Mon 4 Jan 2027 by P1, 200\u00a0g then"
    assert told.counts == "counted from Tue 26 Jan 2027"
    assert (told.line, told.pack, told.sheet.overdue) == (
        "lithium chloride",
        "100 g",
        "5 open days overdue",
    )


def test_levels_stand_by_their_day_and_money_over_is_known_by_its_code() -> None:
    levels = tuple(
        Level("salt", "salt", date(2027, 2, day), 0, 1_000_000, Kind.MASS) for day in (9, 2)
    )
    budgets = (Budget("CH", "", 100, 900, 900), Budget("BI", "", 0, 10, 10), Budget("OU", "", 1, 1))
    told = buying_page_of(replace(PLAN, levels=levels, budgets=budgets))
    assert [one.on.day for one in told.falls] == [2, 9]
    assert told.over == {"CH"}
    assert (told.all_spent, told.all_planned) == ("£1.01", "£9.11")


def test_a_line_that_is_out_names_the_bottles_that_are_not_counted() -> None:
    why = ("B35 no date",)
    level = Level("salt", "salt", date(2027, 2, 2), 0, 1, Kind.MASS, not_counted=why)
    (one,) = buying_page_of(replace(PLAN, levels=(level,))).falls
    assert one.left.endswith("; not counted: B35 no date")
