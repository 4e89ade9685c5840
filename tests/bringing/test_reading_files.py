"""Whatever program saved the list, it says the same; what is no list is told, and why."""

from __future__ import annotations

import codecs
from pathlib import Path

import pytest
from old_spreadsheet import OLD, Read, outcome, reader_of, row, rows_of, table

from stockroom.bringing.outcome import Status
from stockroom.bringing.plain_text import decoded, read_text, separator
from stockroom.errors import BadInput

SIGNS = "name,amount,note\nKI,5 g,20 °C – “dry”, £4, café\n"


@pytest.fixture
def read(practice: Path) -> Read:
    return reader_of(practice)


# -- encodings and separators ---------------------------------------------------------


@pytest.mark.parametrize(
    ("encoding", "called"),
    [
        ("utf-8", "UTF-8"),
        ("utf-8-sig", "UTF-8"),
        ("utf-16", "UTF-16"),
        ("utf-16-le", "UTF-16"),
        ("utf-16-be", "UTF-16"),
        ("cp1252", "Windows (cp1252)"),
        ("mac_roman", "Mac Roman"),
    ],
)
def test_every_encoding_gives_the_same_text(encoding: str, called: str) -> None:
    assert decoded(SIGNS.encode(encoding), "old.csv") == (SIGNS, called)


def test_a_dos_list_is_read_as_one() -> None:
    text = "name,amount\nKI,20 cm³ at 5 °C, né\n"
    assert decoded(text.encode("cp850"), "old.csv") == (text, "DOS (cp850)")


def test_the_encoding_may_be_said() -> None:
    assert decoded("naïve".encode("cp1250", "replace"), "old.csv", "cp1250")[1] == "cp1250"


@pytest.mark.parametrize(
    ("encoding", "said"), [("klingon", "I know no such encoding"), ("ascii", "is not in ascii")]
)
def test_a_wrong_encoding_is_told(encoding: str, said: str) -> None:
    with pytest.raises(BadInput, match=said):
        decoded("20 °C".encode(), "old.csv", encoding)


@pytest.mark.parametrize("mark", [";", ",", "\t", "|"])
@pytest.mark.parametrize("end", ["\n", "\r\n"])
def test_every_separator_gives_the_same_rows(read: Read, mark: str, end: str) -> None:
    assert outcome(read(table(rows_of(), mark, end))) == outcome(read(OLD))


def test_semicolons_part_cells_with_decimal_commas(read: Read) -> None:
    found = read("name;amount;unit\nKI;7,8;g\nNaCl;12,5;g\n")
    assert [each.incoming and each.incoming.left for each in found.rows] == [
        each.incoming and each.incoming.left
        for each in read("name,amount,unit\nKI,7.8,g\nNaCl,12.5,g\n").rows
    ]


def test_a_line_that_names_the_separator_is_taken_at_its_word(read: Read) -> None:
    found = read("sep=;\nname;amount\nKI;5 g\n")
    assert (found.rows[0].status, found.rows[0].line) == (Status.ACCEPTED, 3)


def test_one_column_has_no_separator() -> None:
    assert separator("name\nKI\nNaCl\n") == ","


def test_a_quoted_cell_may_hold_lines_and_separators(read: Read) -> None:
    found = read('name,amount,note\n"sodium carbonate, anhydrous",5 g,"two\nlines"\n')
    assert found.rows[0].incoming is not None
    assert found.rows[0].incoming.note == "two\nlines"


# -- where the headings stand, and what is no bottle ----------------------------------


def test_titles_above_and_totals_below_are_no_bottles(read: Read) -> None:
    text = "Prep room,,\n,,\nas at 4 January,,\nChemical,Qty,Unit\nKI,5,g\n,,\nTotal,5,g\n"
    found = read(text)
    assert found.table.line == 4
    assert [(each.row, each.line, each.status) for each in found.rows] == [
        (1, 5, Status.ACCEPTED),
        (3, 7, Status.LEFT_OUT),
    ]
    assert row(found, 3).why == "a total, and no bottle"


def test_a_heading_between_rows_and_headings_printed_again_are_told(read: Read) -> None:
    found = read("name,amount\nSOLIDS,\nKI,5 g\nname,amount\nNaCl,6 g\n")
    why = {each.row: each.why for each in found.rows if each.status is Status.LEFT_OUT}
    assert why == {1: "nothing but a heading", 3: "the headings once more"}


def test_a_known_name_alone_is_no_heading(read: Read) -> None:
    found = read("name,amount\nKI,\n")
    assert found.rows[0].status is Status.REFUSED
    assert "blank: how much is left?" in [doubt.text for doubt in found.rows[0].doubts]


def test_a_list_without_headings_is_known_by_its_content(read: Read) -> None:
    found = read("KI,5,g,A2\nNaCl,500,g,A2\nAgNO3,25,g,D1\n")
    known = [(column.field, column.how) for column in found.table.columns]
    assert known == [(each, "content") for each in ("name", "amount", "unit", "place")]
    assert [(each.row, each.line, each.status) for each in found.rows] == [
        (number, number, Status.ACCEPTED) for number in (1, 2, 3)
    ]


# -- what is no list ------------------------------------------------------------------

PACKED = b"PK\x03\x04" + bytes(40)


@pytest.mark.parametrize(
    ("data", "said"),
    [
        (b"", "is empty: 0 bytes"),
        (b" \n\n ", "is empty"),
        (codecs.BOM_UTF8 + b"\n\n", "no row with anything in it"),
        (b"\xd0\xcf\x11\xe0" + bytes(30), r"\.xls"),
        (b"%PDF-1.7", "a PDF"),
        (b"\x89PNG\r\n", "a picture"),
        (b"SQLite format 3\x00", "a database"),
        (PACKED, "cannot be read"),
        (bytes(range(1, 30)) * 9, "no table of text"),
        (b'name,amount\n"KI,5 g\nNaCl,6 g\n', "opened and never closed"),
        (b"name" + b",x" * 250, "251 columns, and 200 is most"),
        (b"name,amount\n" + b"KI,5 g\n" * 100_001, "100002 rows, and 100000 is most"),
        (b"a,b\n1,2\n", "No column of names"),
    ],
    ids=lambda each: each[:12] if isinstance(each, str) else "",
)
def test_what_is_no_list_is_told(read: Read, data: bytes, said: str) -> None:
    with pytest.raises(BadInput, match=said) as trouble:
        read(data)
    assert trouble.value.hint


def test_a_file_that_is_too_big_is_never_read() -> None:
    from stockroom.bringing import opening

    with pytest.raises(BadInput, match="51 MB; 50 MB is most"):
        opening.read_file(b"x" * 51_000_000, "old.csv")


def test_a_text_has_one_sheet_only(read: Read) -> None:
    with pytest.raises(BadInput, match="has one sheet only"):
        read(OLD, sheet="acids")


def test_how_it_was_read_is_told() -> None:
    assert read_text(b"a;b\n1;2\n", "old.csv").told == "UTF-8, separated by semicolons"
