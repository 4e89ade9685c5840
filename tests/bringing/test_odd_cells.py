"""One odd cell costs its row a question, and never the whole list."""

from __future__ import annotations

from pathlib import Path

import pytest
from old_spreadsheet import Read, open_in, reader_of, row, table

from stockroom.bringing.outcome import Status
from stockroom.errors import BadInput
from stockroom.measure.amounts import Amount, Kind


@pytest.fixture
def read(practice: Path) -> Read:
    return reader_of(practice)


HEAD = ["name", "amount", "unit", "size", "strength", "count", "opened", "where"]


def one(read: Read, *cells: str, said: tuple[str, ...] = ()) -> tuple[Status, set[str], str]:
    found = read(table([HEAD, list(cells)]), *said)
    told = "; ".join(doubt.text for doubt in row(found, 1).doubts)
    return row(found, 1).status, open_in(found, 1), told


@pytest.mark.parametrize(
    "cells",
    [
        ("sulfuric acid sp. gr. 1.84.", "500", "ml"),
        ("sulfuric acid sp. gr. 1.8.4", "500", "ml"),
        ("KMnO4", "500", "ml", "", "1.2.3"),
        ("hydrogen peroxide", "500", "ml", "", "9.9.9 %"),
        ("sodium chloride", "500", "g", "", "95.5.5"),
        ("sodium chloride", "500", "g", "", "", "\u1369"),
        ("sodium chloride", "9" * 5000, "g"),
        ("sodium chloride", "9" * 5000 + "/2", "", "500 g"),
    ],
    ids=["gravity", "no-gravity", "strength", "per-cent", "assay", "count", "amount", "part"],
)
def test_an_odd_number_is_asked_about(read: Read, cells: tuple[str, ...]) -> None:
    assert one(read, *cells)[0] in Status


def test_a_cell_too_long_for_a_list_is_told_of(read: Read) -> None:
    with pytest.raises(BadInput, match="line 2: a cell of more than 131072 signs"):
        read(f"name,amount,note\nKI,5 g,{'x' * 200_000}\n")


def test_more_than_a_whole_bottle_is_refused(read: Read) -> None:
    status, keys, told = one(read, "KI", "3/2", "", "500 g")
    assert (status, keys) == (Status.REFUSED, {"1.amount"})
    assert "more than a whole bottle" in told
    assert "a date" in one(read, "KI", "30/09/2026", "", "500 g")[2]
    assert one(read, "KI", "2/2", "", "500 g")[0] is Status.ACCEPTED


@pytest.mark.parametrize(
    ("cells", "left_out"),
    [
        (("Total", "5600", "g"), True),
        (("Grand total:", "5600"), True),
        (("Total of all bottles", "14"), True),
        (("Total hardness indicator", "20", "g"), False),
        (("Total hardness indicator", "20 g"), False),
        (("Total hardness indicator", "20", "", "", "", "", "", "A2"), False),
    ],
)
def test_only_a_bare_total_is_left_out(read: Read, cells: tuple[str, ...], left_out: bool) -> None:
    assert (one(read, *cells)[0] is Status.LEFT_OUT) is left_out


# -- units, sizes and several bottles -------------------------------------------------


def test_a_size_in_grams_makes_it_a_solid(read: Read) -> None:
    found = row(read(table([HEAD, ["Iron(II) sulphate", "450", "", "500g"]]), "names=yes"), 1)
    assert found.incoming is not None
    assert found.incoming.line is not None
    assert (found.incoming.line.key, found.incoming.left) == (
        "iron(II) sulfate heptahydrate",
        Amount.grams(450),
    )


@pytest.mark.parametrize(
    ("amount", "size", "left"),
    [("1.5", "2.5 L", Amount.cm3(1500)), ("500", "2.5 L", Amount.cm3(500))],
)
def test_a_bare_number_is_lent_the_unit_that_fits_the_bottle(
    read: Read, amount: str, size: str, left: Amount
) -> None:
    found = row(read(table([HEAD, ["ethanol", amount, "", size]])), 1)
    assert found.incoming is not None
    assert found.incoming.left == left


def test_more_than_fits_is_asked_and_offers_no_solution(read: Read) -> None:
    found = read(table([HEAD, ["Iron(II) sulphate", "560", "", "500g"]]))
    assert open_in(found, 1) == {"1.unit", "1.name"}
    options = {option for each in found.questions for option in each.options}
    assert not any("mol/dm3" in option for option in options)


def test_half_a_bottle_was_opened(read: Read) -> None:
    half = row(read(table([HEAD, ["KI", "250", "g", "500 g"]])), 1).incoming
    sealed = row(read(table([HEAD, ["KI", "500", "g", "500 g"]])), 1).incoming
    assert half is not None
    assert sealed is not None
    assert (half.opened_sometime, sealed.opened_sometime) == (True, False)


def test_an_amount_beside_a_count_is_asked_each_or_in_all(read: Read) -> None:
    cells = ("NaCl", "2", "kg", "", "", "3")
    assert one(read, *cells)[:2] == (Status.ASKED, {"several"})
    for answer, left, about in (("each", 2000, False), ("in-all", 2000 / 3, True)):
        found = row(read(table([HEAD, list(cells)]), f"several={answer}"), 1).incoming
        assert found is not None
        assert found.left is not None
        assert (found.count, found.left.kind, found.about) == (3, Kind.MASS, about)
        assert found.left.number == pytest.approx(left)


# -- columns --------------------------------------------------------------------------


def test_of_two_columns_headed_alike_each_goes_by_its_letter(read: Read) -> None:
    text = "name,amount,date,date\nKI,5 g,2026-01-02,2026-05-06\n"
    with pytest.raises(BadInput, match='columns C and D are both headed "date"') as refused:
        read(text, columns=["date=opened"])
    assert "--column C=opened" in refused.value.hint
    found = row(read(text, columns=["C=received", "D=opened"]), 1).incoming
    assert found is not None
    assert (str(found.received), str(found.opened)) == ("2026-01-02", "2026-05-06")
    with pytest.raises(BadInput, match="said to be received and opened"):
        read(text, columns=["C=received", "C=opened"])


def test_a_blank_note_wipes_no_note_beside_it(read: Read) -> None:
    columns = ["Hazard=note", "Supplier=note", "Shelf life=note"]
    text = "name,amount,Hazard,Supplier,Shelf life\nKI,5 g,Oxidising,Hobbs,\nKI,6 g,,Hobbs,\n"
    notes = [each.incoming and each.incoming.note for each in read(text, columns=columns).rows]
    assert notes == ["Hazard: Oxidising; Supplier: Hobbs", "Supplier: Hobbs"]


def test_a_column_that_numbers_the_rows_counts_no_bottles(read: Read) -> None:
    numbered = read("No.,name,Qty left\n1,KI,5 g\n2,NaCl,6 g\n")
    assert [each.field for each in numbered.table.columns] == ["", "name", "amount"]
    counted = read("No.,name,Qty left\n3,KI,5 g\n2,NaCl,6 g\n")
    assert counted.table.columns[0].field == "count"
