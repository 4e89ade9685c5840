"""Which column is what: by its heading, by its content, as said; never dropped silently."""

from __future__ import annotations

from pathlib import Path

import pytest
from old_spreadsheet import Read, reader_of

from stockroom.bringing.columns_said import columns_said
from stockroom.bringing.headings import field_of, letters
from stockroom.bringing.outcome import Status
from stockroom.errors import BadInput
from stockroom.measure.amounts import Amount


@pytest.fixture
def read(practice: Path) -> Read:
    return reader_of(practice)


@pytest.mark.parametrize(
    ("heading", "field", "unit"),
    [
        ("Chemical", "name", ""),
        ("NAME:", "name", ""),
        ("Qty", "amount", ""),
        ("Amount left (g)", "amount", "g"),
        ("mass/g", "amount", "g"),
        ("volume_ml", "amount", "ml"),
        ("Volume [cm³]", "amount", "cm3"),
        ("Pack size", "size", ""),
        ("Date opened", "opened", ""),
        ("when was it opened?", "opened", ""),
        ("Date received", "received", ""),
        ("Expiry date", "printed", ""),
        ("Use by", "printed", ""),
        ("Conc. (M)", "strength", "M"),
        ("Location", "place", ""),
        ("Which cupboard", "place", ""),
        ("CAS No.", "cas", ""),
        ("No. of bottles", "count", ""),
        ("Supplier", "", ""),
        ("Price", "", ""),
        ("date", "", ""),
    ],
)
def test_a_heading_is_known_in_many_spellings(heading: str, field: str, unit: str) -> None:
    assert field_of(heading) == (field, unit)


def test_a_unit_in_the_heading_is_lent_to_bare_numbers(read: Read) -> None:
    found = read("name,amount (g),pack size / g\nKI,5,25\nNaCl,0.2 kg,500\n")
    left = [each.incoming and each.incoming.left for each in found.rows]
    assert left == [Amount.grams(5), Amount.grams(200)]
    assert [each.incoming and each.incoming.size for each in found.rows] == [
        Amount.grams(25),
        Amount.grams(500),
    ]


def test_what_is_in_a_column_tells_what_it_is(read: Read) -> None:
    found = read("stuff here,amount,bench,x\nKI,5 g,A2,7681-11-0\nNaCl,6 g,A2,7647-14-5\n")
    known = {column.heading: (column.field, column.how) for column in found.table.columns}
    assert known["stuff here"] == ("name", "content")
    assert known["bench"] == ("place", "content")
    assert known["x"] == ("cas", "content")


def test_a_column_of_days_is_asked_about(read: Read) -> None:
    """Opened, bought or printed: they count differently, and nothing in the cells says which."""
    found = read("name,amount,date\nKI,5 g,13/01/2026\nNaCl,6 g,14/01/2026\n")
    [column] = [each for each in found.table.columns if each.asked]
    assert (column.heading, column.samples) == ("date", ("13/01/2026", "14/01/2026"))


def test_a_column_not_understood_is_shown_with_three_samples(read: Read) -> None:
    text = "name,amount,supplier\n" + "".join(
        f"KI,{at} g,{who}\n" for at, who in enumerate("ann bob ann cid dot".split(), start=1)
    )
    [column] = [each for each in read(text).table.columns if each.asked]
    assert (column.heading, column.samples) == ("supplier", ("ann", "bob", "cid"))


def test_somebody_may_say_what_a_column_is(read: Read) -> None:
    text = "name,amount,supplier,date\nKI,5 g,Hobbs,13/01/2026\n"
    found = read(text, columns=["supplier=note", "Date=received"])
    said = found.rows[0].incoming
    assert said is not None
    assert (said.note, said.received and said.received.isoformat()) == (
        "supplier: Hobbs",
        "2026-01-13",
    )
    assert not any(each.asked for each in found.table.columns)
    left_out = read(text, columns=["supplier=leave out", "D=received"])
    assert not any(each.asked for each in left_out.table.columns)


def test_the_second_of_two_columns_of_one_kind_is_asked_about(read: Read) -> None:
    found = read("name,amount,quantity\nKI,5 g,3\n")
    assert [each.field for each in found.table.columns] == ["name", "amount", ""]
    swapped = read("name,amount,quantity\nKI,5,3 g\n", columns=["quantity=amount"])
    assert [each.field for each in swapped.table.columns] == ["name", "", "amount"]


def test_a_column_without_a_heading_goes_by_its_letter(read: Read) -> None:
    found = read("name,amount,\nKI,5 g,left of the sink\n", columns=["C=note"])
    said = found.rows[0].incoming
    assert said is not None
    assert said.note == "column C: left of the sink"
    assert [letters(at) for at in (0, 25, 26, 701)] == ["A", "Z", "AA", "ZZ"]


@pytest.mark.parametrize(
    ("columns", "said"),
    [
        (["nonsense"], "which column is what"),
        (["where=plaice"], 'nothing called "plaice"'),
        (["colour=note"], 'no heading "colour"'),
        (["amount=name", "name=name"], "two columns are said to be name"),
        (["name=note"], "No column of names"),
    ],
)
def test_what_is_said_wrongly_of_columns_is_told(read: Read, columns: list[str], said: str) -> None:
    with pytest.raises(BadInput, match=said):
        read("name,amount,where\nzzz,5 g,A2\n", columns=columns)


def test_a_heading_may_hold_the_sign_itself() -> None:
    assert columns_said(["m = V/2=amount"]) == {"m = v/2": "amount"}


def test_several_bottles_in_one_row_are_several(read: Read) -> None:
    text = "name,bottles,pack size\nKI,3,250 g\nNaCl,1,500 g\n"
    found = read(text)
    assert [each.incoming and (each.incoming.count, each.incoming.left) for each in found.rows] == [
        (3, Amount.grams(250)),
        (1, Amount.grams(500)),
    ]
    assert all(each.status is Status.ACCEPTED for each in found.rows)
