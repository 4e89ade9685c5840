"""Draws judged by eye or by weighing the bottle: "about" stays until it is counted."""

from __future__ import annotations

from datetime import date
from fractions import Fraction
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadAmount, MissingFigure, NotAllowed, NotEnough, StockroomError
from stockroom.measure.amounts import Amount
from stockroom.measure.by_eye import ByEye
from stockroom.planning.facts import Bottle
from stockroom.service import stock
from stockroom.service.plan import term_plan
from stockroom.service.stock import Weighed
from stockroom.store.diary import diary
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}
A_THIRD = ByEye("a third left", left=Fraction(1, 3))


def seen(path: Path, number: str, day: date = TODAY) -> Bottle:
    return next(bottle for bottle in facts(path, day).bottles if bottle.number == number)


def weighed(gross: float, tare: float | None = None) -> Weighed:
    return Weighed(Amount.grams(gross), None if tare is None else Amount.grams(tare))


def test_what_is_left_by_eye_is_of_the_size_and_says_about(own: Path) -> None:
    # S05 holds 2 600 of 5 000 cm³: a third left is 1 667
    done = stock.draw(own, "S05", A_THIRD, **WHO)
    assert done.text.startswith("Drew about 933 cm³ from S05")
    assert "about 1 667 cm³ left" in done.text
    assert done.details[0] == '"a third left" of 5 000 cm³: about 1 667 cm³'
    assert diary(own, "S05")[-1].said == "a third left"


def test_an_estimate_stays_about_until_it_is_counted(own: Path) -> None:
    stock.draw(own, "S05", A_THIRD, **WHO)
    assert seen(own, "S05").about
    assert "about" in stock.draw(own, "S05", Amount.cm3(10), **WHO).text
    done = stock.count(own, "S05", Amount.cm3(1600), **WHO)
    assert not seen(own, "S05").about
    assert "about" not in stock.draw(own, "S05", Amount.cm3(10), **WHO).text, done


def test_an_earlier_count_or_one_evened_out_does_not_make_it_known(own: Path) -> None:
    stock.count(own, "S05", Amount.cm3(2500), **WHO)
    stock.draw(own, "S05", A_THIRD, **WHO)
    # Friday's draw evens out Monday's count, and nobody has looked again
    stock.draw(own, "S05", Amount.cm3(5), on=date(2027, 1, 8), today=TODAY, by="T1")
    assert seen(own, "S05").about


def test_an_estimate_put_right_leaves_nothing_about(own: Path) -> None:
    done = stock.draw(own, "S05", A_THIRD, **WHO)
    stock.put_right(own, done.entry or 0, "another bottle", **WHO)
    assert not seen(own, "S05").about
    assert seen(own, "S05").left == Amount.cm3(2600).micro


def test_about_an_amount_is_an_estimate_too(own: Path) -> None:
    about = ByEye("about 100 cm3", drawn=Amount.cm3(100))
    assert stock.draw(own, "S05", about, **WHO).text.startswith("Drew about 100 cm³")
    assert seen(own, "S05").about


def test_the_plan_tells_a_guess_where_it_draws_on_one(own: Path) -> None:
    # S01 gives every thiosulfate of the first weeks
    stock.draw(own, "S01", ByEye("half left", left=Fraction(1, 2)), **WHO)
    plan = term_plan(own, as_at=TODAY)
    told = [one.subject for one in plan.guesses if "judged by eye" in one.text]
    assert told == ["S01"]
    assert stock.draw(own, "S01", Amount.cm3(1), **WHO).text.count("about") == 1


def test_a_mass_of_a_liquid_goes_through_its_density(own: Path) -> None:
    # sulfuric acid 98 %: 1.84 g/cm³, so 18.4 g are 10 cm³
    before = seen(own, "B13").left
    done = stock.draw(own, "B13", Amount.grams(18.4), **WHO)
    assert before - seen(own, "B13").left == Amount.cm3(10).micro
    assert done.details[0] == "18.4 g is 10 cm³ at 1.84 g/cm³"
    assert not seen(own, "B13").about


def test_weighing_a_solid_says_what_was_drawn_and_keeps_the_tare(own: Path) -> None:
    # B06 holds 640 g of thiosulfate
    done = stock.draw(own, "B06", weighed(772, 172), **WHO)
    assert done.text.startswith("Drew 40 g from B06")
    assert seen(own, "B06").left == Amount.grams(600).micro
    # the tare is known now
    assert stock.draw(own, "B06", weighed(762), **WHO).text.startswith("Drew 10 g from B06")
    assert not seen(own, "B06").about


def test_weighing_makes_an_estimate_known(own: Path) -> None:
    stock.draw(own, "B06", ByEye("half left", left=Fraction(1, 2)), **WHO)
    stock.draw(own, "B06", weighed(600, 172), **WHO)
    assert not seen(own, "B06").about


def test_a_liquid_is_weighed_through_its_density(own: Path) -> None:
    left = seen(own, "B13").left / 1000
    done = stock.draw(own, "B13", weighed(500 + 1.84 * (left - 50), 500), **WHO)
    assert done.text.startswith("Drew 50 cm³ from B13")


@pytest.mark.file
def test_another_tare_is_put_on_record(own: Path) -> None:
    import sqlite3

    stock.draw(own, "B06", weighed(772, 172), **WHO)
    stock.draw(own, "B06", weighed(760, 171), **WHO)
    with sqlite3.connect(own) as connection:
        rows = connection.execute("SELECT row_key, column_name, before, after, by FROM row_change")
        assert rows.fetchall() == [
            ("B06", "tare", "", "172 g", "T1"),
            ("B06", "tare", "172 g", "171 g", "T1"),
        ]
    connection.close()


@pytest.mark.parametrize(
    ("bottle", "said", "kind", "words"),
    [
        ("S05", ByEye("9/10 left", left=Fraction(9, 10)), NotAllowed, "4 500 cm³ left, and 2 600"),
        ("B06", weighed(772), MissingFigure, "its tare is not known, so 772 g gross"),
        ("B06", weighed(100, 172), BadAmount, "less than empty"),
        ("B06", weighed(812, 172), NotAllowed, "is 640 g left, and 640 g is entered"),
        ("B06", weighed(5000, 172), BadAmount, "4 828 g in a bottle of 1 000 g"),
        ("B06", Weighed(Amount.grams(700), Amount.cm3(3)), BadAmount, "3 cm³ is no tare of B06"),
        ("S13", weighed(300, 172), MissingFigure, "density of silver nitrate 0.100"),
        ("S13", Amount.grams(5), BadAmount, "measured by volume, and 5 g is not"),
        ("B06", Amount.cm3(5), BadAmount, "measured by mass, and 5 cm³ is not"),
        ("B28", A_THIRD, NotAllowed, "So it is found. Where"),
    ],
)
def test_an_estimate_that_cannot_be_is_refused_and_nothing_is_kept(
    own: Path, bottle: str, said: Any, kind: type[StockroomError], words: str
) -> None:
    before = diary(own, bottle)
    with pytest.raises(kind, match=words):
        stock.draw(own, bottle, said, **WHO)
    assert diary(own, bottle) == before


def test_more_than_there_is_says_both_and_to_count(own: Path) -> None:
    with pytest.raises(NotEnough, match="S13 holds 130 cm³; 200 cm³ asked") as caught:
        stock.draw(own, "S13", Amount.cm3(200), **WHO)
    assert "Count it: stockroom count S13" in caught.value.hint


def test_a_draw_for_a_booking_that_does_not_ask_for_it_is_told(own: Path) -> None:
    # K16 is R11, and asks for silver nitrate; never for iodide
    assert stock.draw(own, "S13", Amount.cm3(1), booking="K16", **WHO).details == ()
    done = stock.draw(own, "B06", Amount.grams(1), booking="K16", **WHO)
    assert "does not ask for sodium thiosulfate pentahydrate" in " ".join(done.details)
    assert diary(own, "B06")[-1].booking == "K16"


def test_a_draw_of_what_goes_into_what_is_asked_for_is_not_told(own: Path) -> None:
    # B18 is the solid that K16's solution is made from
    done = stock.draw(own, "B18", Amount.grams(1), booking="K16", **WHO)
    assert not any("does not ask" in detail for detail in done.details)


def test_a_bottle_that_cannot_be_found_shows_its_last_use(own: Path) -> None:
    from stockroom.service import checks

    stock.draw(own, "S13", Amount.cm3(10), booking="K16", **WHO)
    done = checks.lost(own, "S13", on=None, today=TODAY, by="T2")
    assert done.details[0] == "Last used 11 January 2027: T1 drew 10 cm³ for K16."


def test_a_weighing_put_right_says_that_its_tare_stays(own: Path) -> None:
    slip = stock.draw(own, "B06", weighed(772, 172), **WHO)
    done = stock.put_right(own, slip.entry or 0, "another bottle", **WHO)
    assert "The tare of B06 stays 172 g; a right one: --tare at its next weighing." in done.details
    # as it says: the right one is given, and what was found before goes by it no longer
    assert stock.draw(own, "B06", weighed(772, 162), **WHO).text.startswith("Drew 30 g")
