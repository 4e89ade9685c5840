"""Ordering at the command line: placed, part delivered, put off, cancelled, and the listing."""

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


def test_an_order_gets_a_number_and_serves_from_its_day(enter: Enter) -> None:
    done = enter(*LITHIUM, "--expected", "2027-01-18")
    assert done.code == 0
    assert "Ordered P01: 2 × 100 g of lithium chloride, £29.00" in done.said
    (one,) = on_order(enter)
    assert (one["id"], one["amount"], one["counted_from"]) == ("P01", 200, "2027-01-18")
    made = plan(enter)
    assert "lithium chloride" not in {order["item"] for order in made["orders"]}
    (last,) = [n for n in made["needs"] if n["ref"] == "K29.1"]
    assert (last["outcome"], last["order"]) == ("buy", "P01")
    assert any("on its way: P01" in reason for reason in last["reasons"])


def test_the_listing_says_whom_it_serves_and_what_else_to_do(enter: Enter) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18", "--supplier", "Northern")
    said = enter("on-order").said
    assert "1 order to come" in said
    assert "200 g to come; ordered Mon 2027-01-04 by P1, Northern" in said
    assert "borrow 1.166 g of lithium chloride by 2027-01-11 for K01" in said


def test_nothing_on_order_is_said(enter: Enter) -> None:
    listed = enter("on-order")
    assert listed.code == 0
    assert "0 orders to come" in listed.said


def test_a_part_delivery_leaves_the_rest_and_more_is_noted(enter: Enter) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18")
    first = enter(*CAME, "--order", "P01", day="2027-01-18")
    assert "100 g of lithium chloride still to come of P01" in first.said
    assert on_order(enter, "2027-01-18")[0]["amount"] == 100
    more = enter(*CAME, "--order", "P01", "--count", "2", day="2027-01-19")
    assert "100 g of lithium chloride more than P01 ordered: noted" in more.said
    assert on_order(enter, "2027-01-19") == []


def test_an_arrival_put_right_is_outstanding_again(enter: Enter) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18")
    came = enter(*CAME, "--order", "P01", "--json", day="2027-01-18").json
    enter("put-right", str(came["entry"]), "--why", "another van", day="2027-01-18")
    assert on_order(enter, "2027-01-18")[0]["amount"] == 200


def test_the_picture_of_an_earlier_day_stays(enter: Enter) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18", day="2027-01-06")
    enter(*CAME, "--order", "P01", day="2027-01-18")
    assert on_order(enter, "2027-01-05") == []
    assert on_order(enter, "2027-01-12")[0]["amount"] == 200


def test_an_arrival_that_names_no_order_is_asked_about(enter: Enter) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18")
    came = enter(*CAME, day="2027-01-18")
    assert came.code == 0
    assert "P01 is still to come: if this was it" in came.said


def test_overdue_is_listed_every_day_until_it_comes(enter: Enter) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18")
    for day, days in (("2027-01-19", 1), ("2027-01-22", 4)):
        assert "1 overdue" in enter("on-order", day=day).said
        assert on_order(enter, day)[0]["overdue_open_days"] == days
        assert "overdue" in enter("buying", day=day).said
        notes = [n["text"] for n in plan(enter, day)["notes"] if n.get("item") == "P01"]
        assert [f"{days} open day" in text for text in notes] == [True]
    enter(*CAME, "--order", "P01", "--count", "2", day="2027-01-22")
    assert "overdue" not in enter("on-order", day="2027-01-22").said


def test_put_off_it_counts_from_the_new_day(enter: Enter) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18")
    moved = enter("order", "--put-off", "P01", "--expected", "2027-02-01", "--why", "rang")
    assert "expected 18 January 2027 → 1 February 2027" in moved.said
    assert on_order(enter)[0]["expected"] == "2027-02-01"


def test_cancelled_its_money_is_free_and_it_is_ordered_anew(enter: Enter) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18")
    assert enter("order", "--cancel", "P01", "--why", "sold out").code == 0
    made = plan(enter)
    assert "lithium chloride" in {order["item"] for order in made["orders"]}
    assert sum(one["spent"] for one in made["budgets"]) == 0
    again = enter("order", "--cancel", "P01", "--why", "twice")
    assert again.code == 1
    assert "cancelled 4 January 2027" in again.err
    assert "Ordered P02" in enter(*LITHIUM, "--expected", "2027-01-18").said


def test_an_order_of_the_plan_is_sent_as_it_stands(enter: Enter) -> None:
    before = {order["id"]: order for order in plan(enter)["orders"]}
    done = enter("order", "O05")
    assert "1 × 250 g of potassium iodide, £24.90" in done.said
    spent = {one["dept"]: one["spent"] for one in plan(enter)["budgets"] if one["spent"]}
    assert spent == before["O05"]["shares"]


def test_shares_add_to_the_penny_and_a_department_may_be_named(enter: Enter) -> None:
    enter(*LITHIUM, "--price", "14.51", "--expected", "2027-01-18")
    enter("order", "sodium chloride", "1", "500 g", "--price", "£4.20", "--dept", "BI")
    spent = {one["dept"]: one["spent"] for one in plan(enter)["budgets"]}
    assert sum(spent.values()) == pytest.approx(33.22)
    assert spent["BI"] == 4.20


def test_money_spent_stands_in_buying(enter: Enter) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18")
    assert "£27.42 ordered, £31.89 to be ordered, of £120.00: £60.69 left" in enter("buying").said


def test_a_mass_of_a_liquid_is_turned_to_its_volume(enter: Enter) -> None:
    done = enter("order", "sulfuric acid 98 % w/w", "1", "4.6 kg", "--price", "20")
    assert "4 600 g is 2 500 cm³ at 1.84 g/cm³" in done.said


@pytest.mark.file
@pytest.mark.parametrize(
    ("words", "code", "said"),
    [
        (("order",), 2, "nothing given"),
        (("order", "lithium chloride"), 2, "How much of lithium chloride"),
        (("order", "lithium chloride", "0", "100 g"), 2, "0 packs of lithium chloride"),
        (("order", "lithium chloride", "2.5", "100 g"), 2, "'2.5' is not a whole number"),
        (("order", "lithium chloride", "1", "100 cm3"), 2, "100 cm³ is not"),
        (("order", "lithum clorid", "1", "100 g"), 2, "lithium chloride"),
        ((*LITHIUM, "--price", "-3"), 2, "less than nothing"),
        ((*LITHIUM, "--price", "9.999"), 2, "parts of a penny"),
        ((*LITHIUM, "--expected", "2026-01-18"), 2, "18 January 2026 is before"),
        ((*LITHIUM, "--dept", "XX"), 2, "XX"),
        (("order", "lithium chloride", "1", "70 g"), 2, "What does 70 g of lithium chloride cost?"),
        (("order", "benzoic acid", "1", "70 g"), 2, "benzoic acid"),
        (("order", "sodium citrate", "1", "70 g", "--price", "3"), 2, "whose money"),
        (("order", "O99"), 2, "O99"),
        (("order", "--cancel", "P09", "--why", "x"), 2, "P09"),
        (("order", "--cancel", "P01"), 2, "Why is P01 cancelled?"),
        (("order", "--put-off", "P01"), 2, "expected when?"),
        (("order", "--cancel", "P01", "--put-off", "P02"), 2, "One thing at a time"),
        (("order", "O02", "--dept", "BI"), 2, "O02 takes no --dept"),
        (("order", "O02", "--price", "3", "--supplier", "X"), 2, "no --price and no --supplier"),
        (("order", "O02", "--why", "x"), 2, "O02 takes no --why"),
        (("order", "--cancel", "P01", "--why", "x", "--price", "3"), 2, "takes no --price"),
        (("order", "--cancel", "P01", "--why", "x", "--note", "n"), 2, "takes no --note"),
        (("order", "--put-off", "P01", "--expected", "2027-02-01", "--dept", "BI"), 2, "--dept"),
        ((*LITHIUM, "--why", "x"), 2, "order takes no --why"),
        ((*LITHIUM, "--price", "10000.01"), 2, "£10000.01 for one pack of lithium chloride"),
        ((*LITHIUM, "--price", "9" * 40), 2, "a slip?"),
        ((*LITHIUM, "--expected", "2029-02-01"), 2, "more than two years after"),
        ((*CAME, "--order", "P07"), 2, "P07"),
    ],
)
def test_bad_input_is_refused_with_its_words_and_nothing_saved(
    enter: Enter, own: Path, words: tuple[str, ...], code: int, said: str
) -> None:
    before = own.read_bytes()
    done = enter(*words)
    assert (done.code, said in done.err) == (code, True), done.err
    assert own.read_bytes() == before


def test_what_came_of_another_order_is_refused(enter: Enter) -> None:
    enter("order", "silver nitrate", "1", "25 g", "--expected", "2027-01-18")
    wrong = enter(*CAME, "--order", "P01", day="2027-01-18")
    assert wrong.code == 1
    assert "P01 is an order of silver nitrate, and lithium chloride came" in wrong.err


def test_an_order_without_initials_is_refused(stockroom: Stockroom, own: Path) -> None:
    done = stockroom(*LITHIUM, store=own)
    assert done.code == 2
    assert "Whose initials?" in done.err


def test_leave_to_be_asked_first_is_kept_with_the_line(enter: Enter) -> None:
    words = ("change", "lines", "silver nitrate", "ask_first=head", "ask_days=5", "--why", "rule")
    assert enter(*words).code == 0
    (silver,) = [o for o in plan(enter)["orders"] if o["item"] == "silver nitrate"]
    assert (silver["order_by"], silver["ask_first"]) == ("2027-02-25", "head")
    wrong = enter("change", "lines", "silver nitrate", "ask_days=-2", "--why", "slip")
    assert wrong.code == 2


def test_a_term_gone_by_is_written_down_once(enter: Enter) -> None:
    row = ("add", "former_use", "line=iodine", "from=2026-01-05", "to=2026-03-27", "amount_g=3")
    assert enter(*row).code == 0
    used = enter("usage", "--json").json["usage"]
    (iodide,) = [u for u in used if (u["form"], u["item"]) == ("bought", "potassium iodide")]
    assert iodide["year_before"]["amount"] == 61
    assert "year_before" not in next(u for u in used if u["item"] == "lithium chloride")
    again = enter(*row)
    assert again.code == 2
    assert "written down already" in again.err
    assert enter(*row[:-1]).code == 2


@pytest.mark.file
@pytest.mark.parametrize("table", ["placed", "placed_share", "placed_came", "placed_change"])
def test_what_was_ordered_is_never_altered_or_removed(enter: Enter, own: Path, table: str) -> None:
    enter(*LITHIUM, "--expected", "2027-01-18")
    enter(*CAME, "--order", "P01", day="2027-01-18")
    enter("order", "--cancel", "P01", "--why", "rest", day="2027-01-18")
    raw = sqlite3.connect(own)
    try:
        for statement in (
            f"UPDATE {table} SET id = id + 100",
            f"DELETE FROM {table}",
            f"INSERT OR REPLACE INTO {table} SELECT * FROM {table}",
        ):
            with pytest.raises(sqlite3.IntegrityError, match=r"^KEPT "):
                raw.execute(statement)
    finally:
        raw.close()
