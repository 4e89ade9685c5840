"""A repeat arrival takes one short line; what is read off each bottle is never guessed."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadAmount, BadInput
from stockroom.measure.amounts import Amount
from stockroom.planning.facts import Bottle
from stockroom.service import stock
from stockroom.service.stock import Label
from stockroom.service.unknown import log_unknown, name_unknown
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}
THIO = "sodium thiosulfate pentahydrate"


def arrive(path: Path, line: str = THIO, size: Amount | None = None, **more: Any) -> Any:
    return stock.arrive(path, line, size, **({"printed": "none"} | WHO | more))


def seen(path: Path, number: str) -> Bottle:
    return next(bottle for bottle in facts(path, TODAY).bottles if bottle.number == number)


def test_place_and_size_are_as_last_time_and_said(own: Path) -> None:
    # B06 came as 1 000 g to A2
    done = arrive(own)
    assert done.details[0] == "As last time: A2, 1 000 g."
    assert (seen(own, done.bottle).size, seen(own, done.bottle).place) == (1_000_000_000, "A2")


def test_the_last_arrival_decides_and_not_where_it_was_moved(own: Path) -> None:
    first = arrive(own, size=Amount.grams(500), place="A1")
    stock.move(own, first.bottle, "A3", **WHO)
    assert arrive(own).details[0] == "As last time: A1, 500 g."


def test_an_arrival_put_right_is_no_last_time(own: Path) -> None:
    slip = arrive(own, size=Amount.grams(500), place="A1")
    stock.put_right(own, slip.entry, "never came", **WHO)
    assert arrive(own).details[0] == "As last time: A2, 1 000 g."


def test_a_jar_named_from_evidence_is_no_last_time(own: Path) -> None:
    jar = log_unknown(own, "white powder", Amount.grams(70), place="X1", **WHO)
    name_unknown(own, jar.bottle, THIO, evidence="label found", **WHO)
    assert arrive(own).details[0] == "As last time: A2, 1 000 g."


def test_what_is_given_is_not_said_to_be_as_last_time(own: Path) -> None:
    assert arrive(own, size=Amount.grams(250)).details[0] == "As last time: A2."
    assert arrive(own, place="A1").details[0] == "As last time: 250 g."
    given = arrive(own, size=Amount.grams(500), place="A2")
    assert not [detail for detail in given.details if "last time" in detail]


def test_the_printed_date_is_never_as_last_time(own: Path) -> None:
    arrive(own, printed="03/2029")
    with pytest.raises(BadInput, match="none printed"):
        arrive(own, printed=None)


def test_the_cap_lot_and_assay_are_read_off_each_bottle(own: Path) -> None:
    arrive(own, cap="tight", label=Label("2231", 0.995, Amount.grams(170)))
    bottle = seen(own, arrive(own).bottle)
    assert (bottle.cap, bottle.lot, bottle.assay) == ("", "", None)


@pytest.mark.parametrize(
    ("more", "said"),
    [
        ({"place": "A2"}, "How much potassium sulfate is in one bottle"),
        ({"size": Amount.grams(5)}, "Where is potassium sulfate put away"),
    ],
)
def test_a_first_arrival_says_size_and_place(own: Path, more: dict[str, Any], said: str) -> None:
    from stockroom.service.database import add_row

    add_row(own, "lines", {"item": "potassium sulfate", "form": "solid"}, by="T1")
    with pytest.raises(BadInput, match=said):
        arrive(own, "potassium sulfate", **more)


def test_a_lot_is_kept_and_said_and_may_be_blank(own: Path) -> None:
    done = arrive(own, label=Label(lot=" 2231 "))
    assert "1 000 g, lot 2231, at A2" in done.text
    assert seen(own, done.bottle).lot == "2231"
    assert "lot" not in arrive(own).text


def test_an_assay_of_its_own_is_kept_and_said_beside_what_is_weighed_by(own: Path) -> None:
    done = arrive(own, label=Label(assay=0.995))
    assert any("Assay 99.5 %, and 100 % is written" in detail for detail in done.details)
    assert seen(own, done.bottle).assay == 0.995
    assert not any("Assay" in one for one in arrive(own, label=Label(assay=1.0)).details)


def test_a_tare_is_kept_and_weighing_goes_by_it(own: Path) -> None:
    number = arrive(own, label=Label(tare=Amount.grams(172))).bottle
    done = stock.draw(own, number, stock.Weighed(Amount.grams(1072)), **WHO)
    assert done.text.startswith(f"Drew 100 g from {number}")


def test_a_tare_in_cm3_is_refused(own: Path) -> None:
    with pytest.raises(BadAmount, match="5 cm³ is no tare"):
        arrive(own, label=Label(tare=Amount.cm3(5)))
