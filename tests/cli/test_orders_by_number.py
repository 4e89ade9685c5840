"""Orders by the numbers of a printed sheet, of two suppliers, and entered late."""

from __future__ import annotations

import sqlite3
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest

if TYPE_CHECKING:
    from conftest import Result, Stockroom

Enter = Callable[..., "Result"]

LITHIUM = ("order", "lithium chloride", "2", "100 g")
CAME = ("arrive", "lithium chloride", "100 g", "--printed", "none", "--place", "A2")


@pytest.fixture
def enter(stockroom: Stockroom, own: Path) -> Enter:
    """One command on a day, by P1; `day` 2027-01-04 unless said."""

    def entering(*words: str, day: str = "2027-01-04") -> Result:
        return stockroom(*words, "--as-at", day, "--by", "P1", store=own)

    return entering


def on_order(enter: Enter, day: str = "2027-01-04") -> Any:
    return enter("on-order", "--json", day=day).json["on_order"]


def plan(enter: Enter, day: str = "2027-01-04") -> Any:
    return enter("plan", "--json", day=day).json


# -- numbers of the plan, and a sheet that is worked through ---------------------------------


def lines(enter: Enter, day: str = "2027-01-04") -> dict[str, str]:
    return {order["id"]: order["item"] for order in plan(enter, day)["orders"]}


def test_a_sheet_is_worked_through_by_the_numbers_printed_on_it(enter: Enter) -> None:
    printed = lines(enter)
    assert enter("plan", "--keep").code == 0
    for number, item in list(printed.items())[:3]:
        done = enter("order", number)
        assert done.code == 0, done.err
        assert f"{number} of plan 0001 is {item}" in done.said
    assert [one["item"] for one in on_order(enter)] == list(printed.values())[:3]


def test_a_number_that_now_stands_for_something_else_says_so(enter: Enter) -> None:
    printed = lines(enter)
    enter("plan", "--keep")
    enter("order", "O01")
    done = enter("order", "O02")
    assert lines(enter)["O01"] != printed["O02"]
    assert f"Not {printed['O03']}, which has O02 in the plan now." in done.said


@pytest.mark.file
def test_an_order_of_the_sheet_is_not_placed_twice(enter: Enter, own: Path) -> None:
    printed = lines(enter)
    enter("plan", "--keep")
    enter("order", "O01")
    before = own.read_bytes()
    again = enter("order", "O01")
    assert again.code == 1
    assert f"O01 of plan 0001 is {printed['O01']}, and P01 of 4 January 2027" in again.err
    assert own.read_bytes() == before
    enter("order", "--cancel", "P01", "--why", "sold out")
    assert enter("order", "O01").code == 0


@pytest.mark.file
def test_what_is_no_longer_to_be_ordered_names_both_lines(enter: Enter, own: Path) -> None:
    enter("plan", "--keep")
    printed = lines(enter)
    number = next(number for number, item in printed.items() if item == "lithium chloride")
    enter(*CAME, "--count", "9")
    now = lines(enter)
    assert "lithium chloride" not in now.values()
    before = own.read_bytes()
    gone = enter("order", number)
    assert gone.code == 1
    assert f"{number} of plan 0001 is lithium chloride, which is no longer to be ord" in gone.err
    assert f"{number} of the plan now is {now[number]}" in " ".join(gone.err.split())
    assert own.read_bytes() == before


def test_without_a_kept_plan_the_number_is_of_the_plan_now_and_says_so(enter: Enter) -> None:
    done = enter("order", "O01")
    assert "O01 of the plan now." in done.said
    assert "The rest of the plan has other numbers now" in done.said


@pytest.mark.file
def test_a_note_is_kept_with_an_order_of_the_plan(enter: Enter, own: Path) -> None:
    assert enter("order", "O05", "--note", "rang twice").code == 0
    raw = sqlite3.connect(own)
    try:
        assert raw.execute("SELECT note FROM placed").fetchall() == [("rang twice",)]
    finally:
        raw.close()


def test_a_broken_plan_places_nothing_by_number_and_blocks_nothing_by_name(
    enter: Enter, monkeypatch: pytest.MonkeyPatch
) -> None:
    from stockroom.planning.replaying.rules import Broken, Fault
    from stockroom.service import replayed

    fault = Fault(Broken.ORDERED, "K01", "not ordered")
    replayed.forget_plans()
    monkeypatch.setattr(replayed, "replay", lambda *_: (fault,))
    refused = enter("order", "O01")
    assert refused.code == 1
    assert "breaks a rule at K01" in refused.err
    assert "Ordered P01" in enter(*LITHIUM, "--expected", "2027-01-18").said
    assert "set aside" in enter("spoil", "S20", "--why", "cloudy").said.lower()
    assert "Made S" in enter("make", "sodium thiosulfate 0.200 mol/dm3", "1 dm3").said


# -- two suppliers ------------------------------------------------------------------------------


@pytest.fixture
def two(enter: Enter) -> Enter:
    """The same, where lithium chloride comes in 100 g from two suppliers of two lead times."""
    for price, lead, supplier in (("13.50", "15", "Northern"), ("16.00", "3", "Southern")):
        row = ("price_gbp=" + price, "lead_open_days=" + lead, "supplier_ref=" + supplier)
        assert enter("add", "packs", "line=lithium chloride", "size_g=100", *row).code == 0
    return enter


def test_of_two_suppliers_the_order_of_the_plan_is_of_the_one_chosen(two: Enter) -> None:
    (order,) = [one for one in plan(two)["orders"] if one["item"] == "lithium chloride"]
    done = two("order", order["id"])
    told = {"Northern": "15 open days", "Southern": "3 open days", None: "10 open days"}
    assert f"£{order['cost']:.2f}" in done.said
    assert told[order["supplier"]] in done.said
    assert on_order(two)[0]["supplier"] == order["supplier"]


@pytest.mark.parametrize(
    ("supplier", "cost", "days"), [("southern", "£32.00", 3), ("Northern", "£27.00", 15)]
)
def test_a_supplier_named_gives_their_own_price_and_lead(
    two: Enter, supplier: str, cost: str, days: int
) -> None:
    done = two(*LITHIUM, "--supplier", supplier)
    assert f"{cost} from {supplier.title()}" in done.said
    assert f"{days} open days assumed" in done.said


def test_a_price_said_tells_which_supplier_it_is(two: Enter) -> None:
    done = two(*LITHIUM, "--price", "16.00")
    assert "from Southern" in done.said
    assert "3 open days" in done.said
    # a price that is nobody's takes nobody's lead time
    other = two(*LITHIUM, "--price", "15.99")
    assert " from " not in other.said
    assert "10 open days" in other.said


def test_a_supplier_who_does_not_sell_that_size_is_refused_or_priced(two: Enter) -> None:
    two("add", "packs", "line=silver nitrate", "size_g=10", "price_gbp=30", "supplier_ref=Northern")
    words = ("order", "silver nitrate", "1", "10 g", "--supplier")
    wrong = two(*words, "Nothern")
    assert wrong.code == 2
    assert "No 10 g of silver nitrate from 'Nothern' is entered" in wrong.err
    assert "Nearest: Northern" in wrong.err
    done = two(*words, "Eastern", "--price", "31")
    assert "£31.00 from Eastern" in done.said


def test_expected_more_than_a_year_ahead_is_asked_about(enter: Enter) -> None:
    done = enter(*LITHIUM, "--expected", "2028-02-01")
    assert "1 February 2028 is more than a year ahead: is the year right?" in done.said


# -- entered late -------------------------------------------------------------------------------


def test_what_has_come_by_now_is_not_cancelled_or_put_off_for_an_earlier_day(enter: Enter) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18")
    enter(*CAME, "--order", "P01", "--count", "2", day="2027-01-18")
    for words in (("--cancel", "P01"), ("--put-off", "P01", "--expected", "2027-02-01")):
        late = enter("order", *words, "--why", "x", "--on", "2027-01-11", day="2027-01-20")
        assert late.code == 1
        assert "P01 has all come" in late.err


def test_a_part_that_came_before_a_late_entry_stays(enter: Enter) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18")
    enter(*CAME, "--order", "P01", day="2027-01-18")
    late = ("order", "--cancel", "P01", "--why", "x", "--on", "2027-01-11")
    assert "100 g of lithium chloride will not come" in enter(*late, day="2027-01-20").said


@pytest.mark.file
def test_no_row_of_an_order_or_a_kept_plan_is_written_over_by_any_key(
    enter: Enter, own: Path
) -> None:
    """INSERT OR REPLACE with a new id, and all that must be unique as it was."""
    enter("plan", "--keep")
    enter(*LITHIUM, "--expected", "2027-01-18")
    enter(*CAME, "--order", "P01", day="2027-01-18")
    raw = sqlite3.connect(own)
    tried = 0
    try:
        for table in ("placed", "placed_share", "placed_came", "placed_change", "printed_plan"):
            names = [row[1] for row in raw.execute(f"PRAGMA table_info({table})")]
            keys = [row for row in raw.execute(f"PRAGMA index_list({table})") if row[2]]
            values = ", ".join("id + 100" if name == "id" else name for name in names)
            for _ in keys:
                tried += 1
                with pytest.raises(sqlite3.IntegrityError, match=r"^KEPT .* written over"):
                    raw.execute(f"INSERT OR REPLACE INTO {table} SELECT {values} FROM {table}")
    finally:
        raw.close()
    assert tried == 4
