"""What was spilled, lent and came back: each its own total, none of it used."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadAmount, BadInput, NotAllowed, StockroomError
from stockroom.measure.amounts import Amount
from stockroom.service import checks, stock
from stockroom.service.plan import term_plan
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}


def left(path: Path, number: str) -> int:
    return next(b.left for b in facts(path, TODAY).bottles if b.number == number)


def totals(path: Path) -> dict[tuple[str, str], int]:
    return {(u.form, u.line): u.amount for u in term_plan(path, as_at=TODAY).written_off}


def test_spilled_and_lent_are_totals_of_their_own(own: Path) -> None:
    used = term_plan(own, as_at=TODAY).drawn
    stock.spill(own, "B18", Amount.grams(1), note="fell", **WHO)
    stock.spill(own, "B18", Amount.grams(0.5), note="fell", **WHO)
    stock.lend(own, "B18", Amount.grams(2), to="BI", **WHO)
    assert totals(own) == {
        ("spilled", "silver nitrate"): 1_500_000,
        ("lent", "silver nitrate"): 2_000_000,
    }
    assert term_plan(own, as_at=TODAY).drawn == used


def test_what_came_back_is_no_longer_lent_and_in_the_bottle_again(own: Path) -> None:
    before = left(own, "B18")
    stock.lend(own, "B18", Amount.grams(2), to="the physics store", **WHO)
    done = stock.lend_back(own, "B18", Amount.grams(1.5), whom="", **WHO)
    assert done.text.startswith("Back from the physics store: 1.5 g of B18 silver nitrate;")
    assert totals(own) == {("lent", "silver nitrate"): 500_000}
    stock.lend_back(own, "B18", Amount.grams(0.5), whom="The Physics Store", **WHO)
    assert (totals(own), left(own, "B18")) == ({}, before)


def test_a_liquid_that_comes_back_is_not_poured_back_unsaid(own: Path) -> None:
    stock.lend(own, "B13", Amount.cm3(20), to="BI", **WHO)
    done = stock.lend_back(own, "B13", Amount.cm3(20), whom="", **WHO)
    assert done.details[0].startswith("Nothing is poured back into a stock bottle")


@pytest.mark.parametrize(
    ("amount", "whom", "kind", "said"),
    [
        (Amount.grams(3), "BI", NotAllowed, "BI has 2 g of B18; 3 g came back"),
        (Amount.grams(1), "PH", BadInput, '"PH" has none.* BI has 2 g; CH has 1 g'),
        (Amount.grams(1), "", BadInput, "from whom.* BI has 2 g; CH has 1 g"),
        (Amount.cm3(1), "BI", BadAmount, "1 cm³ is not"),
        (Amount.grams(0), "BI", BadAmount, "0 g"),
    ],
)
def test_more_than_was_lent_never_comes_back(
    own: Path, amount: Amount, whom: str, kind: type[StockroomError], said: str
) -> None:
    stock.lend(own, "B18", Amount.grams(2), to="BI", **WHO)
    stock.lend(own, "B18", Amount.grams(1), to="CH", **WHO)
    with pytest.raises(kind, match=said):
        stock.lend_back(own, "B18", amount, whom=whom, **WHO)


def test_nothing_lent_is_nothing_to_come_back(own: Path) -> None:
    with pytest.raises(NotAllowed, match="Nothing of B18 is lent out"):
        stock.lend_back(own, "B18", Amount.grams(1), whom="", **WHO)


def test_a_loan_put_right_is_not_lent(own: Path) -> None:
    done = stock.lend(own, "B18", Amount.grams(2), to="BI", **WHO)
    stock.put_right(own, done.entry or 0, "another bottle", **WHO)
    assert totals(own) == {}
    with pytest.raises(NotAllowed, match="Nothing of B18"):
        stock.lend_back(own, "B18", Amount.grams(1), whom="BI", **WHO)


def test_how_a_spill_came_about_is_asked_where_nobody_says(own: Path) -> None:
    assert "How did it come about" in stock.spill(own, "B18", Amount.grams(1), **WHO).details[0]
    assert stock.spill(own, "B18", Amount.grams(2), note="fell", **WHO).details == ()


def on(day: int) -> dict[str, Any]:
    return WHO | {"on": date(2027, 1, day)}


def test_a_loan_never_comes_back_before_it_was_lent(own: Path) -> None:
    stock.lend(own, "B18", Amount.grams(2), to="BI", **on(10))
    with pytest.raises(NotAllowed, match="Nothing of B18 was lent out on 9 January 2027"):
        stock.lend_back(own, "B18", Amount.grams(2), whom="BI", **on(9))
    stock.lend_back(own, "B18", Amount.grams(2), whom="BI", **on(10))


def test_what_came_back_later_does_not_come_back_twice(own: Path) -> None:
    stock.lend(own, "B18", Amount.grams(2), to="BI", **on(6))
    stock.lend_back(own, "B18", Amount.grams(1.5), whom="BI", **on(9))
    stock.lend(own, "B18", Amount.grams(3), to="BI", **on(10))
    # of the 2 g that were out on the 7th only 0.5 g were not home again by the 9th
    with pytest.raises(NotAllowed, match=r"BI has 0\.5 g of B18"):
        stock.lend_back(own, "B18", Amount.grams(1), whom="BI", **on(7))
    stock.lend_back(own, "B18", Amount.grams(0.5), whom="BI", **on(7))
    assert totals(own) == {("lent", "silver nitrate"): 3_000_000}


def test_no_more_comes_back_than_the_bottle_holds_when_full(own: Path) -> None:
    stock.lend(own, "B40", Amount.grams(100), to="BI", **WHO)
    stock.count(own, "B40", Amount.grams(500), **WHO)
    with pytest.raises(NotAllowed, match=r"holds 500 g when full; with 100 g back .* 600 g"):
        stock.lend_back(own, "B40", Amount.grams(100), whom="BI", **WHO)
    assert left(own, "B40") == 500_000_000


def test_what_is_set_aside_is_not_lent(own: Path) -> None:
    checks.spoil(own, "B41", "wet", **WHO)
    with pytest.raises(NotAllowed, match="B41 is set aside: wet"):
        stock.lend(own, "B41", Amount.grams(100), to="BI", **WHO)


def opened(path: Path, number: str) -> date | None:
    return next(b for b in facts(path, TODAY).bottles if b.number == number).record.opened


def test_lending_part_of_a_sealed_bottle_opens_it_and_the_whole_does_not(own: Path) -> None:
    part = stock.lend(own, "B40", Amount.grams(100), to="BI", **WHO)
    assert "B40 was sealed: opened 11 January 2027." in part.details
    stock.lend(own, "B41", Amount.grams(500), to="BI", **WHO)
    assert (opened(own, "B40"), opened(own, "B41")) == (TODAY, None)
    # what opened it goes with it, unless something else had to open it too
    stock.put_right(own, part.entry or 0, "another bottle", **WHO)
    assert opened(own, "B40") is None


def test_a_loan_that_stands_keeps_a_bottle_open(own: Path) -> None:
    drawn = stock.draw(own, "B40", Amount.grams(10), **on(8))
    stock.lend(own, "B40", Amount.grams(100), to="BI", **on(9))
    stock.put_right(own, drawn.entry or 0, "another bottle", **WHO)
    assert opened(own, "B40") == date(2027, 1, 9)
