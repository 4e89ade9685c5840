"""Trying as a value: rows of fields with what is wrong beside them, and where to do it."""

from __future__ import annotations

from stockroom.reports.pages.what_if import (
    MOST_ROWS,
    SUPPOSED,
    USUAL_ROWS,
    blocks_of,
    in_words,
    rows_shown,
    ways_of,
)
from stockroom.web.forms.table import BY_NAME


def test_every_field_is_there_once() -> None:
    names = [ask.name for kind in SUPPOSED for ask in kind.asks]
    assert len(names) == len(set(names))


def test_rows_are_never_fewer_than_what_was_typed_nor_more_than_allowed() -> None:
    assert rows_shown({}, 0) == USUAL_ROWS
    assert rows_shown({"groups": ["", "", "", "", "K08"]}, 0) == 5
    assert rows_shown({"groups": [""] * 9}, 0) == USUAL_ROWS
    assert rows_shown({}, 10**9) == MOST_ROWS


def test_what_is_wrong_stands_at_its_own_row() -> None:
    typed = {"groups": ["K08", "K09"], "number": ["12", "many"]}
    block = blocks_of(typed, 3, {("number", 1): ("Not a number.", "Write one.")})[0]
    assert [cell.message for row in block.rows for cell in row] == [
        "", "", "", "Not a number.", "", "",
    ]  # fmt: skip
    assert block.rows[1][1].value == "many"
    assert block.used


def test_a_booking_changed_in_size_and_in_day_has_one_form() -> None:
    typed = {"groups": ["k08"], "number": ["11"], "shift": ["K08"], "day": ["2027-02-11"]}
    (way,) = ways_of(typed)
    assert way.form == "shift"
    assert way.values == {"booking": "K08", "groups": "11", "on": "2027-02-11"}


def test_every_form_led_to_is_there_with_its_fields() -> None:
    typed = {"groups": ["K08"], "number": ["11"], "shift": ["K09"], "time": ["14:00"]}
    typed |= {"book": ["R01"], "on": ["2027-02-11"], "for": ["12"], "at": ["09:15"]}
    typed |= {"dept": ["CH"], "cancel": ["K10"], "without": ["S03"]}
    ways = list(ways_of(typed, keep=True))
    assert len(ways) == 5
    for way in ways:
        form = BY_NAME[way.form]
        assert [name for name in way.values if not form.field(name)] == []


def test_a_number_that_is_only_supposed_leads_nowhere() -> None:
    told = in_words("K30 booked, K08 moved to 2027-02-11, from M04", {"K08"})
    assert [each.text for each in told if each.href] == ["K08", "2027-02-11"]
