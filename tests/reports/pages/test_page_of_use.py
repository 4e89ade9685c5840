"""Use over the term as a value: planned, drawn, a year before, and bars to scale."""

from __future__ import annotations

from dataclasses import replace
from types import SimpleNamespace
from typing import Any, cast

from sample_plan import PLAN

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Use
from stockroom.planning.facts import Department, Facts
from stockroom.reports.pages.use import NOTHING, Filter, UsePage, use_page_of

SALT = Use(
    "salt", "salt", "", "bought", 80_000_000, Kind.MASS, (("K01", 60_000_000), ("K02", 20_000_000)),
    spare=8_000_000, groups=16, before=100_000_000, groups_before=10, basis="table",
)  # fmt: skip
ACID = Use("acid", "acid", "", "bought", 5_000_000, Kind.VOLUME, (("K02", 5_000_000),))
DRAWN = replace(SALT, form="drawn", amount=40_000_000, spare=0, before=None)

KNOWN = cast(
    "Facts",
    SimpleNamespace(
        bookings=[
            SimpleNamespace(number="K01", department="CH"),
            SimpleNamespace(number="K02", department="BI"),
        ],
        departments=(Department("CH", "chemistry"), Department("BI", "biology")),
    ),
)


def page(asked: Filter | None = None, **changed: Any) -> UsePage:
    plan = replace(PLAN, **({"usage": (SALT, ACID), "drawn": (DRAWN,)} | changed))
    return use_page_of(KNOWN, plan, (), asked or Filter())


def test_what_was_drawn_stands_beside_what_is_planned_and_a_year_before() -> None:
    row = page().tables[0].rows[0]
    assert (row.planned, row.spare, row.drawn, row.before) == (
        "80\u00a0g",
        "8\u00a0g",
        "40\u00a0g",
        "100\u00a0g",
    )
    assert row.by_group == "5\u00a0g a group, 10\u00a0g the year before"


def test_bars_are_to_scale_of_the_longest_measured_alike() -> None:
    salt, acid = page().tables[0].rows
    assert (salt.bar.planned, salt.bar.spare, salt.bar.drawn, salt.bar.before) == (80, 8, 40, 100)
    assert (acid.bar.planned, acid.bar.drawn, acid.bar.before) == (100, None, None)


def test_what_was_drawn_of_nothing_planned_is_told_apart() -> None:
    told = page(usage=(ACID,))
    assert told.other == (("salt", "40\u00a0g"),)
    assert page().other == ()


def test_one_department_has_its_own_bookings_and_nothing_that_is_everybodys() -> None:
    told = page(Filter(department="CH"))
    (row,) = told.tables[0].rows
    assert (row.planned, row.spare, row.drawn, row.before) == ("60\u00a0g", "", "", "")
    assert row.parts == (("K01", "60\u00a0g"),)
    assert told.for_one
    assert not told.waste


def test_a_name_leaves_the_other_lines_out_of_drawn_too() -> None:
    told = page(Filter(lines={"acid"}))
    assert [row.what for row in told.tables[0].rows] == ["acid"]
    assert told.other == ()


def test_nothing_used_is_said() -> None:
    assert page(usage=(), drawn=()).about.endswith(NOTHING)
    assert not page().about.endswith(NOTHING)


def test_a_use_put_right_to_less_than_nothing_has_no_bar() -> None:
    bar = page(drawn=(replace(DRAWN, amount=-5),)).tables[0].rows[0].bar
    assert bar.drawn == 0
