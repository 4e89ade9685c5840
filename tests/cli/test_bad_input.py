"""What is typed wrongly, command by command: the exit code, and the value quoted back."""

from __future__ import annotations

import shlex
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

BY = " --by T1"
LITHIUM = 'arrive "lithium chloride" "100 g" --by T1'
BOOKED = "book R04 --by T1"
AT_NINE = " --on 2027-01-21 --at 09:15 --groups 12 --dept CH"

# (line, exit code, what the message must quote)
TABLE = [
    # amounts and units
    ("draw S05 200" + BY, 2, "200"),
    ('draw S05 "5 N"' + BY, 2, "5 N"),
    ('draw S05 "2 m"' + BY, 2, "2 m"),
    ('draw S05 "25 degC"' + BY, 2, "25 degC"),
    ('draw S05 "-5 cm3"' + BY, 2, "-5 cm3"),
    ('draw S05 "1,000 cm3"' + BY, 2, "1,000 cm3"),
    ('draw S05 "5 g"' + BY, 2, "5 g"),
    ('draw B06 "5 cm3"' + BY, 2, "5 cm³"),
    ('draw S05 "lots"' + BY, 2, "lots"),
    ("draw S05 99999cm3" + BY, 1, "99 999 cm³"),
    ('count B06 "-1 g"' + BY, 2, "-1 g"),
    ('spill B18 "200 g"' + BY, 1, "200 g"),
    ('make "sodium thiosulfate 0.200 mol/dm3" "5 g"' + BY, 2, "5 g"),
    ('make "sodium thiosulfate 0.200 mol/dm3" "9 gallonz"' + BY, 2, "9 gallonz"),
    # dates
    ("draw S05 5cm3 --on 31/02/27" + BY, 2, "31/02/27"),
    ("draw S05 5cm3 --on 04/05/27" + BY, 2, "04/05/27"),
    ("draw S05 5cm3 --on 2027-13-01" + BY, 2, "2027-13-01"),
    ("draw S05 5cm3 --on 2027-01-05" + BY, 2, "5 January 2027"),
    ("draw S05 5cm3 --on 2026-01-05" + BY, 2, "5 January 2026"),
    ("draw S05 5cm3 --as-at soon" + BY, 2, "soon"),
    (LITHIUM + " --place A2 --printed old", 2, "old"),
    (LITHIUM + " --place A2 --printed 31/02/2028", 2, "31/02/2028"),
    (LITHIUM + " --place A2 --printed none --cap corked", 2, "corked"),
    (BOOKED + " --on 04/05/27 --at 09:15 --groups 12 --dept CH", 2, "04/05/27"),
    (BOOKED + " --on 2027-01-21 --at 25:00 --groups 12 --dept CH", 2, "25:00"),
    ("shift K06 --on 2027-02-31" + BY, 2, "2027-02-31"),
    ("plan --from 2027-02-31", 2, "2027-02-31"),
    ("plan --from 2027-02-10 --to 2027-01-10", 2, "2027-01-10"),
    ("plan --as-at 03/2027", 2, "03/2027"),
    ("fresh --to yesterday", 2, "yesterday"),
    ("usage --from 2027-04-31", 2, "2027-04-31"),
    ("past --on 13/13/27", 2, "13/13/27"),
    ("buying --as-at 0", 2, '"0"'),
    # names
    ("draw S99 5cm3" + BY, 2, "S99"),
    ("draw S13 5cm3 --for K99" + BY, 2, "K99"),
    ("open B99" + BY, 2, "B99"),
    ("lost B99" + BY, 2, "B99"),
    ("turned-up B99" + BY, 2, "B99"),
    ("look S99 --good" + BY, 2, "S99"),
    ('found S99 "0.1 mol/dm3"' + BY, 2, "S99"),
    ("spoil S99 --why rust" + BY, 2, "S99"),
    ("discard S99 --how sink --why past" + BY, 2, "S99"),
    ("move S01 Z9" + BY, 2, "Z9"),
    ('arrive unobtainium "100 g" --printed none --place A2' + BY, 2, "unobtainium"),
    (LITHIUM + " --printed none --place Z9", 2, "Z9"),
    ('make "unobtainium 0.1 mol/dm3" 100cm3' + BY, 2, "unobtainium"),
    ("book R99" + AT_NINE + BY, 2, "R99"),
    (BOOKED + " --on 2027-01-21 --at 09:15 --groups 12 --dept XX", 2, "XX"),
    ("shift K99 --groups 3" + BY, 2, "K99"),
    ("cancel K99" + BY, 2, "K99"),
    ("ready K99", 2, "K99"),
    ("why Z99", 2, "Z99"),
    ("put-right 99999 --why typo" + BY, 2, "99999"),
    ("put-right first --why typo" + BY, 2, "first"),
    ("add nowhere place=A5" + BY, 2, "nowhere"),
    ("add places colour=red" + BY, 2, "colour"),
    ("add places A5" + BY, 2, "A5"),
    # numbers
    (LITHIUM + " --printed none --place A2 --count x", 2, "x"),
    (LITHIUM + " --printed none --place A2 --count 0", 2, "0"),
    (BOOKED + " --on 2027-01-21 --at 09:15 --groups 12.5 --dept CH", 2, "12.5"),
    (BOOKED + " --on 2027-01-21 --at 09:15 --groups 0 --dept CH", 2, "0"),
    (BOOKED + " --on 2027-01-21 --at 09:15 --groups 400 --dept CH", 2, "400"),
    (BOOKED + AT_NINE + " --spare 150", 2, "150"),
    (BOOKED + AT_NINE + " --spare lots", 2, "lots"),
    ("shift K06 --groups 0" + BY, 2, "0"),
    # something left out
    ("draw S05 5cm3", 2, "--by"),
    ("look S03" + BY, 2, "S03"),
    (LITHIUM + " --place A2", 2, "none printed"),
    ("spoil S05" + BY, 2, "S05"),
    ("discard S14 --how sink" + BY, 2, "S14"),
    ("shift K06" + BY, 2, "K06"),
    ("put-right 1" + BY, 2, "1"),
    ("draw S05" + BY, 2, "AMOUNT"),
    # understood, and refused
    ("draw B28 1g" + BY, 1, "B28"),
    ("open B01" + BY, 1, "B01"),
    ('make "ammoniacal silver" 100cm3' + BY, 1, "never kept"),
    ('found S02 "0.2 mol/dm3"' + BY, 1, "0.2 mol/dm"),
    (BOOKED + " --on 2027-02-16 --at 09:15 --groups 12 --dept CH", 1, "2027"),
    # strengths
    ('found S02 "0.1 %"' + BY, 2, "0.1 %"),
    ('found S02 "0.1 N"' + BY, 2, "0.1 N"),
    ('strength "5 %" --of starch --to g/dm3', 2, "5 %"),
    ('strength "100 %" --of "hydrogen peroxide" --to mol/dm3', 2, "100 %"),
    ('strength "20 vol" --of NaCl --to mol/dm3', 2, "20 vol"),
    ('strength "1 M" --of NaCl --to furlongs', 2, "furlongs"),
    ('strength "1 M" --of EtOH --to g/dm3', 2, "EtOH"),
    ('weigh "5 g" "1 M" --of NaCl', 2, "5 g"),
    ('weigh "1 L" "1 M" --of NaCl --assay 120', 2, "120"),
    ('weigh "1 L" "1 M" --of NaCl --step nil', 2, "nil"),
    ('weigh "1 L" "0 M" --of NaCl', 2, "0 M"),
    ('dilute "1 L" "1 M"', 2, "1 M"),
    ('dilute "1 L" "2 M" --from "1 M"', 1, "2 M"),
    ('dilute "1 L" "0.1 M" --from B99', 2, "B99"),
]


@pytest.mark.parametrize(("line", "code", "quoted"), TABLE, ids=[row[0] for row in TABLE])
def test_what_is_typed_wrongly_is_quoted_back(
    stockroom: Stockroom, own: Path, line: str, code: int, quoted: str
) -> None:
    result = stockroom(*shlex.split(line), store=own)
    assert result.code == code, result
    assert quoted in result.err
    assert result.out == ""


NEEDS_A_STORE = [
    "plan",
    "fresh",
    "past",
    "usage",
    "buying",
    "ready K01",
    "why K01",
    "draw S05 5cm3" + BY,
    "open B02" + BY,
    "count B06 640g" + BY,
    "lost B28" + BY,
    "cancel K06" + BY,
    BOOKED + AT_NINE,
    "add places place=A5" + BY,
]


@pytest.mark.parametrize("line", NEEDS_A_STORE)
def test_a_missing_store_is_named_with_what_to_do(
    stockroom: Stockroom, tmp_path: Path, line: str
) -> None:
    nowhere = tmp_path / "nowhere.sqlite"
    result = stockroom(*shlex.split(line), store=nowhere)
    assert result.code == 1
    assert str(nowhere) in result.err
    assert "stockroom new" in result.err
    assert not nowhere.exists()


def test_a_file_that_is_no_store_is_named(stockroom: Stockroom, tmp_path: Path) -> None:
    letter = tmp_path / "letter.txt"
    letter.write_text("Dear all,\n" * 500, encoding="utf-8")
    result = stockroom("plan", store=letter)
    assert (result.code, str(letter) in result.err) == (1, True)


@pytest.mark.file
def test_an_existing_store_is_never_written_over(stockroom: Stockroom, own: Path) -> None:
    before = own.read_bytes()
    assert stockroom("new", store=own).code == 1
    assert own.read_bytes() == before


def test_tables_that_are_not_there_are_named(stockroom: Stockroom, tmp_path: Path) -> None:
    result = stockroom("new", "--from", str(tmp_path / "tables"), store=tmp_path / "new.sqlite")
    assert result.code in (1, 2)
    assert "tables" in result.err
    assert not (tmp_path / "new.sqlite").exists()
