"""The old spreadsheet of the scenario, section 10, and reading lists by the college's names.

reader_of(practice)     reads a list typed in a test, as at 2027-01-04, and writes nothing
OLD, SETTLED            the spreadsheet, and answers that settle every row of it
"""

from __future__ import annotations

import csv
import io
from collections.abc import Mapping, Sequence
from datetime import date
from functools import lru_cache
from pathlib import Path
from typing import Protocol

from stockroom.bringing.answers import answers_of
from stockroom.bringing.columns_said import columns_said
from stockroom.bringing.here import Here
from stockroom.bringing.known import House
from stockroom.bringing.opening import read_file
from stockroom.bringing.outcome import ListRead, RowRead
from stockroom.bringing.whole_file import read_list
from stockroom.service.bring_in_house import house_in
from stockroom.store.reading import reading

TODAY = date(2027, 1, 4)

OLD = """\
name,amount,unit,opened,exp,strength,where
Sod thiosulphate 5H2O,640,g,08/09/2025,,,"A2"
hypo anhyd,0.5,kg,,,,A2
Peroxide,420,ml,29/09/2026,03/2027,100,A3
Peroxide 20V,180,mL,03.11.25,Oct-26,20 vol,A3
KMnO4 soln,0.95,L,,,M/50,dark
DCPIP,620,mg,2/2/26,04/05/27,,dark shelf
bleach,3/4,bottle,June,,12%,acids
Silver nit.,"7,8",g,9-Jun-25,none,,D1
,250,g,,,,A2
Benedicts,550,,20/4/26,,,D1
NH3 .880,210,ml,46301,,,A4
iron sulph,310,g,07/10/24,31/02/2028,,A2
Peroxide,420,ml,29/09/2026,03/2027,100,A3
LiCl,38,g,16/09/24,,,lost??
"""

# every row settled as somebody who knows the shelf would
SETTLED = (
    "dates=day-first",
    "decimal=comma",
    "names=yes",
    "3.strength=100 vol",
    "7.amount=560 cm3",
    "7.opened=2026-06-25",
    "7.strength=12 % w/v",
    "9=leave-out",
    "10.unit=cm3",
    "12.name=iron(II) sulfate heptahydrate",
    "12.printed=2028-02",
    "13=second",
    "14.place=not found",
)


class Read(Protocol):
    """`read("name,amount\\nKI,5 g", "dates=day-first", columns=["where=place"])`."""

    def __call__(
        self,
        text: str | bytes,
        *answers: str,
        columns: Sequence[str] = (),
        sheet: str = "",
        encoding: str = "",
        marks: Mapping[str, tuple[str, ...]] | None = None,
    ) -> ListRead: ...


@lru_cache(maxsize=4)
def house_of(store: Path) -> House:
    """The lines and places of a store, read once."""
    with reading(store) as reader:
        return house_in(reader)


def reader_of(store: Path) -> Read:
    """A reader of lists by the names of a store."""

    def read(
        text: str | bytes,
        *answers: str,
        columns: Sequence[str] = (),
        sheet: str = "",
        encoding: str = "",
        marks: Mapping[str, tuple[str, ...]] | None = None,
    ) -> ListRead:
        data = text.encode() if isinstance(text, str) else text
        return read_list(
            read_file(data, "old.csv", sheet=sheet, encoding=encoding),
            house_of(store),
            file="old.csv",
            today=TODAY,
            answers=answers_of(answers),
            columns=columns_said(columns),
            here=Here(marks or {}),
        )

    return read


def rows_of(text: str = OLD) -> list[list[str]]:
    """The cells of a list separated by commas."""
    return list(csv.reader(io.StringIO(text)))


def table(rows: Sequence[Sequence[str]], mark: str = ",", end: str = "\n") -> str:
    """Cells as a list separated by a mark."""
    out = io.StringIO()
    csv.writer(out, delimiter=mark, lineterminator=end).writerows(rows)
    return out.getvalue()


def row(read: ListRead, number: int) -> RowRead:
    """The row of a number."""
    return next(each for each in read.rows if each.row == number)


def open_in(read: ListRead, number: int) -> set[str]:
    """What is asked or refused of a row, by the keys of the answers."""
    return {doubt.key for doubt in row(read, number).doubts if doubt.key}


def outcome(read: ListRead) -> list[object]:
    """All that a list came to, however it was written down: rows, doubts, marks."""
    return [
        (each.row, each.status, each.incoming, each.doubts, each.mark, each.why)
        for each in read.rows
    ]
