"""A whole list of bottles: every row read beside what only all the rows together show."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from datetime import date

from stockroom.bringing.answers import NONE_GIVEN, Answers, check_rows
from stockroom.bringing.dates import date_order
from stockroom.bringing.decimals import decimals_of
from stockroom.bringing.fields import DATES, NUMBERS
from stockroom.bringing.headings import Table, table_of
from stockroom.bringing.here import NOTHING_HERE, Here
from stockroom.bringing.known import House
from stockroom.bringing.names import Matcher
from stockroom.bringing.outcome import ListRead, RowRead
from stockroom.bringing.places import Places
from stockroom.bringing.questions import Question, questions_of
from stockroom.bringing.reader import Reader, cells_said, leaders_of
from stockroom.bringing.row import Beside
from stockroom.bringing.sheet import Sheet
from stockroom.errors import BadInput

Watch = Callable[[int, int], None]
"""Told how many rows of how many are read."""

# a bar moves smoothly enough so, and the telling costs nothing; our choice
_TOLD_EVERY = 200

Cells = Mapping[int, dict[str, str]]


def read_list(
    sheet: Sheet,
    house: House,
    *,
    file: str,
    today: date,
    answers: Answers = NONE_GIVEN,
    columns: Mapping[str, str] | None = None,
    here: Here = NOTHING_HERE,
    watch: Watch | None = None,
) -> ListRead:
    """Every row of a sheet, accepted, asked about, refused, here already or left out.

    `today` bounds what can have happened; `columns` is what somebody said of headings.
    Raises: BadInput where no column holds names, for a heading that is not there, and for
    an answer to a row that is not there, says something else or asks nothing.
    """
    matcher, places = Matcher(house), Places(house)
    table = table_of(sheet.rows, columns or {}, knows_name=matcher.knows, knows_place=places.knows)
    lines = enumerate(sheet.rows[table.line :], start=1)
    body = {row: values for row, values in lines if any(values)}
    cells = {row: table.cells(values) for row, values in body.items()}
    check_rows(answers, cells)
    beside = _beside(cells, table, answers, matcher, places, today, sheet.epoch)
    reader = Reader(table, beside, here, leaders_of(cells))
    # each pass must be over before the next begins: see the reader
    known = [reader.known(row, values, cells[row]) for row, values in body.items()]
    judged = [reader.judged(each) for each in _watched(known, watch)]
    rows = tuple(reader.compared(each) for each in judged)
    questions = questions_of((each.row, each.doubts) for each in rows)
    _check_asked(reader.unasked, questions)
    return ListRead(file, sheet.told, table, rows, questions)


def _beside(
    cells: Cells,
    table: Table,
    answers: Answers,
    matcher: Matcher,
    places: Places,
    today: date,
    epoch: int | None,
) -> Beside:
    said = {row: cells_said(row, each, answers, table, {}) for row, each in cells.items()}
    return Beside(
        matcher,
        places,
        date_order(_of(said, DATES), answers.day_first, answers.epoch or epoch),
        decimals_of(_of(said, NUMBERS), answers.whole.get("decimal", "")),
        today,
        answers,
    )


def _of(cells: Cells, fields: Iterable[str]) -> list[tuple[int, str]]:
    return [(row, each.get(what, "")) for what in fields for row, each in cells.items()]


def _watched(rows: list[RowRead], watch: Watch | None) -> Iterable[RowRead]:
    for number, each in enumerate(rows, start=1):
        yield each
        if watch and (number % _TOLD_EVERY == 0 or number == len(rows)):
            watch(number, len(rows))


def _check_asked(unasked: list[tuple[int, str, str]], questions: tuple[Question, ...]) -> None:
    for row, what, text in unasked:
        asking = [each.key for each in questions if each.field == what and "." in each.key]
        raise BadInput(
            f'{row}.{what} is answered, and row {row} asks nothing of it: it says "{text}".',
            f"{asking[0]} is asked: has the list changed since?"
            if asking
            else f'If that cell is wrong, quote it: {row}.{what}("{text}")=…',
        )
