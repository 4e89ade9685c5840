"""The old spreadsheet: read, tried on the house's own names, and written once it is agreed.

`look_at` writes nothing; `bring_in` writes every row that is settled, in one transaction.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from datetime import date
from pathlib import Path

from stockroom.bringing.answers import NONE_GIVEN, Answers, answers_of, lines_of_answers
from stockroom.bringing.columns_said import columns_said
from stockroom.bringing.opening import read_file
from stockroom.bringing.outcome import ListRead, Status
from stockroom.bringing.whole_file import Watch, read_list
from stockroom.errors import BadInput, NotAllowed
from stockroom.service.bring_in_house import here_in, house_in
from stockroom.service.database import is_practice
from stockroom.settings import StoreAt
from stockroom.store.reading import reading

COLUMN = "column "
Progress = Callable[[str, int, int], None]
"""Told what is being done, and how much of how much is."""


@dataclass(frozen=True, slots=True)
class Meant:
    """What somebody says of a file: which sheet, which encoding, which columns, which answers."""

    sheet: str = ""
    encoding: str = ""
    columns: Mapping[str, str] = field(default_factory=dict)
    answers: Answers = NONE_GIVEN


AS_IT_STANDS = Meant()


@dataclass(frozen=True, slots=True)
class BroughtIn:
    """A list as it was read, and the numbers of the bottles that were written, by row.

    `agreed` is False for a trial, which writes nothing.
    """

    read: ListRead
    agreed: bool = False
    written: Mapping[int, tuple[str, ...]] = field(default_factory=dict)
    practice: bool = False

    @property
    def waiting(self) -> int:
        """How many rows are not written, and would be bottles."""
        open_rows = (Status.ACCEPTED, Status.ASKED, Status.REFUSED)
        return sum(
            row.status in open_rows and row.row not in self.written for row in self.read.rows
        )


def meant(
    *,
    sheet: str = "",
    encoding: str = "",
    columns: Sequence[str] = (),
    answers: Sequence[str] = (),
    answers_in: Path | None = None,
) -> Meant:
    """What was typed of a file: HEADING=FIELD, KEY=VALUE, and a file with more of both.

    A line of that file which begins with "column " says what a column is.

    Raises: BadInput quoting what cannot be read.
    """
    in_file = lines_of_answers(_bytes_of(answers_in).decode("utf-8", "replace"))
    of_columns = [line.removeprefix(COLUMN) for line in in_file if line.startswith(COLUMN)]
    given = [line for line in in_file if not line.startswith(COLUMN)]
    said = columns_said([*of_columns, *columns])
    return Meant(sheet, encoding, said, answers_of([*given, *answers]))


def look_at(
    path: StoreAt,
    file: Path,
    *,
    as_meant: Meant = AS_IT_STANDS,
    today: date,
    called: str = "",
    progress: Progress | None = None,
) -> BroughtIn:
    """A list tried on the house: what each row would become. Nothing is written.

    `called` is the list's name where the file has another.
    Raises: BadInput for what is no spreadsheet, a heading or an answer that is not there.
    """
    name = called or file.name
    sheet = read_file(_bytes_of(file), name, sheet=as_meant.sheet, encoding=as_meant.encoding)
    with reading(path) as reader:
        house, here = house_in(reader), here_in(reader)
    read = read_list(
        sheet,
        house,
        file=name,
        today=today,
        answers=as_meant.answers,
        columns=as_meant.columns,
        here=here,
        watch=_watch("reading rows", progress),
    )
    return BroughtIn(read, practice=is_practice(path))


def bring_in(
    path: StoreAt,
    file: Path,
    *,
    as_meant: Meant = AS_IT_STANDS,
    today: date,
    by: str,
    called: str = "",
    progress: Progress | None = None,
) -> BroughtIn:
    """Write every row of a list that nothing is open in, all of them or, on any fault, none.

    Rows brought in before are passed over, whatever the file is called and in whatever
    order they stand now. Raises: as `look_at`; BadInput without initials; NotAllowed while
    a column with something in it is not understood.
    """
    from stockroom.service.work import initials, working

    whose = initials(by)
    tried = look_at(path, file, as_meant=as_meant, today=today, called=called, progress=progress)
    _check_columns(tried.read)
    going = tried.read.going_in
    if not going:
        return replace(tried, agreed=True)
    if progress:
        progress("writing", 0, len(going))
    # what was read may be minutes old: what others brought in since is passed over as well
    with working(path, on=None, today=today, by=whose) as work:
        from stockroom.service.bring_in_writing import write_rows

        since = here_in(work.reader)
        mine = {number for row in tried.read.rows for number in row.bottles}
        new = [
            row
            for row in going
            if row.mark not in since.marks and not since.read_so(row.reading, mine)
        ]
        written = write_rows(work, tried.read.file, new)
    if progress:
        progress("writing", len(going), len(going))
    return replace(tried, agreed=True, written=written)


def _check_columns(read: ListRead) -> None:
    asked = [column for column in read.table.columns if column.asked]
    if asked:
        first = asked[0]
        shown = ", ".join(f'"{sample}"' for sample in first.samples)
        more = f" So are {len(asked) - 1} more." if len(asked) > 1 else ""
        named = read.table.called(first)
        raise NotAllowed(
            f'Column "{first.heading}" is not understood ({shown}).{more} Nothing was written.',
            f'Say what it is: --column "{named}=note", =leave-out, or another field.',
        )


def _watch(what: str, progress: Progress | None) -> Watch | None:
    if progress is None:
        return None
    return lambda done, whole: progress(what, done, whole)


def _bytes_of(file: Path | None) -> bytes:
    if file is None:
        return b""
    if file.is_dir():
        raise BadInput(f"{file} is a folder.", "Give one file in it, a .csv or .xlsx.")
    if file.exists() and not file.is_file():
        raise BadInput(f"{file} is a device or a pipe, and no file.", "Save the list as a file.")
    if not file.is_file():
        raise BadInput(f"There is no file {file}.", "Look its name up again.")
    return file.read_bytes()
