"""A logger's table as its program wrote it: text in, dated temperatures out.

Loggers differ in separator, decimal sign, headings, order and date. What can have one
meaning only is read; what could have two is asked about, and the whole file is left.
"""

from __future__ import annotations

import csv
import re
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import datetime
from itertools import pairwise

from stockroom.errors import BadAmount, BadDate, BadInput, NotAllowed
from stockroom.keeping.logger_dates import Stamps
from stockroom.keeping.logger_headings import Columns, columns_of
from stockroom.measure.reading import quote, tidy

COLDEST_C, WARMEST_C = -90.0, 120.0
"""What a store's logger can read at all: colder and warmer than any freezer and any oven."""

SPIKE_C = 10.0
"""A reading this far from both its neighbours, on the same side, is told of. Ours, no source."""

_NUMBER = re.compile(r"(?P<number>[+-]?[0-9]+(?:[.,][0-9]+)?)\s*(?P<unit>[^0-9\s].*)?")
_NOTHING = {"", "-", "--", "---", "n/a", "na", "nan", "null", "none", "err", "error", "ol", "open"}
# enough rows to see how a file is made, and enough oddities to look at it oneself
_LOOKED_AT, _MOST_TOLD = 40, 5
# the days on which clocks go back: the last Sunday of October, or the first of November
_CLOCKS_GO_BACK = (
    "Most likely the clocks going back in October: set the logger to winter time all year,"
    " or leave the hour that comes twice out."
)


@dataclass(frozen=True, slots=True)
class LoggerFile:
    """The readings of a file in order of time, each with its row number there.

    `told` is what was done to it and what is odd in it, in words.
    """

    readings: tuple[tuple[datetime, float], ...]
    rows: tuple[int, ...]
    stated: str
    told: tuple[str, ...] = ()


def read_logger(
    text: str,
    *,
    day_first: bool | None = None,
    scale: str = "",
    column: str = "",
) -> LoggerFile:
    """The readings of a logger's table, °C.

    `day_first` settles dates such as 04/05/27. `scale` "F" turns °F into °C, "C" says
    that a file which does not say is in °C. `column` names the heading to read
    where several could be meant.
    Raises: BadInput, BadDate, BadAmount naming the row; NotAllowed for °F and for
    temperatures no place has.
    """
    table = _table(text)
    columns = columns_of([cells for _, cells in table], column)
    body = table[columns.first_row :]
    stated = _scale(columns, body, scale)
    dated = list(_dated(body, columns, stated, day_first))
    if not dated:
        raise BadInput(
            f"There is no temperature in the file, in none of its {len(body)} rows.",
            "Bring in the table of readings; where its heading is unusual, name it with --column.",
        )
    told = [f"{len(body) - len(dated)} rows without a reading left out"] * (len(body) > len(dated))
    dated, turned = _in_order(dated)
    told += ["newest first in the file: turned round"] * turned
    kept = list(_once(dated))
    told += [f"{len(dated) - len(kept)} repeated readings left out"] * (len(dated) > len(kept))
    readings = tuple((when, _celsius(row, degrees, stated)) for row, when, degrees in kept)
    told += ["turned from °F into °C"] * (stated == "F")
    spikes = list(_spikes(readings, kept))
    told += spikes[:_MOST_TOLD]
    told += [f"{len(spikes) - _MOST_TOLD} more such rows"] * (len(spikes) > _MOST_TOLD)
    return LoggerFile(readings, tuple(row for row, _, _ in kept), stated, tuple(told))


Dated = tuple[int, datetime, float]
"""A row number, its time to the second, and the number read there."""


def _table(text: str) -> list[tuple[int, list[str]]]:
    """Row number and cells of each line that is not blank."""
    if "\0" in text:
        raise BadInput(
            f"The file is no table of text: it begins {text[:8]!r}.",
            "Save it as CSV, and not as a workbook.",
        )
    lines = text.splitlines()
    # from the end: what a logger's program writes about itself stands on top
    mark = _separator([line for line in lines if line.strip()][-_LOOKED_AT:])
    try:
        rows = [(n, cells) for n, cells in _rows(lines, mark) if any(map(str.strip, cells))]
    except csv.Error as error:
        raise BadInput(f"The file is no table of text: {error}.", "Save it as CSV.") from None
    return rows


def _rows(lines: list[str], mark: str) -> Iterator[tuple[int, list[str]]]:
    reader = csv.reader(lines, delimiter=mark)
    for cells in reader:
        yield reader.line_num, [cell.strip() for cell in cells]


def _separator(lines: list[str]) -> str:
    if not lines:
        raise BadInput(
            "The file is empty: 0 lines.",
            "Bring in the table the logger's program writes.",
        )
    # a semicolon first: where it stands, the commas are decimal signs
    for mark in ";\t,":
        if sum(mark in line for line in lines) > len(lines) / 2:
            return mark
    raise BadInput(
        f"I see no separator in {quote(lines[-1])}.",
        "Save the table with semicolons or commas between time and temperature.",
    )


def _scale(columns: Columns, body: list[tuple[int, list[str]]], asked: str) -> str:
    """ "C" or "F": what the heading or the cells say, else what was asked; "" for neither."""
    cells = [cells[columns.temperature] for _, cells in body if len(cells) > columns.temperature]
    stated = columns.scale or next(filter(None, map(_unit_in, cells)), "")
    if stated == "F" != asked:
        raise NotAllowed(
            f"The readings are in °F: {quote(columns.heading or cells[0])}.",
            "Set the logger's program to °C and export again, or add --fahrenheit to turn them.",
        )
    if stated == "C" and asked == "F":
        raise NotAllowed(
            f"--fahrenheit, and the file says °C: {quote(columns.heading or cells[0])}.",
            "Leave --fahrenheit out.",
        )
    return stated or asked


def _unit_in(cell: str) -> str:
    match = _NUMBER.fullmatch(tidy(cell))
    unit = (match["unit"] or "").upper().strip(" °O") if match else ""
    return unit if unit in ("C", "F") else ""


def _dated(
    body: list[tuple[int, list[str]]], columns: Columns, stated: str, day_first: bool | None
) -> Iterator[Dated]:
    stamps = Stamps([columns.when(cells) for _, cells in body], day_first)
    for row, cells in body:
        if len(cells) != columns.width and any(cells[columns.width :]):
            raise BadInput(
                f"Row {row} has {len(cells)} cells where {columns.width} are expected:"
                f" {quote(' | '.join(cells))}.",
                "A comma as separator and as decimal sign? Export with semicolons.",
            )
        written = cells[columns.temperature] if len(cells) > columns.temperature else ""
        if tidy(written).casefold().strip("*") not in _NOTHING:
            yield row, stamps.read(columns.when(cells), row), _number(written, row, stated)


def _number(written: str, row: int, stated: str) -> float:
    match = _NUMBER.fullmatch(tidy(written))
    # thousands of degrees are not read, so a comma can only be a decimal sign
    if match is None or (match["unit"] and _unit_in(written) != stated):
        raise BadAmount(f"Row {row}: {quote(written)} is no temperature.", "Write it as 21.5.")
    return float(match["number"].replace(",", "."))


def _in_order(dated: list[Dated]) -> tuple[list[Dated], bool]:
    """The rows in order of time, turned round where the newest stands first.

    Raises: BadDate naming the first row that goes back.
    """
    forward = [one[1] <= two[1] for one, two in pairwise(dated)]
    if (
        len(dated) > 1
        and dated[-1][1] < dated[0][1]
        and not any(one[1] < two[1] for one, two in pairwise(dated))
    ):
        return dated[::-1], True
    if not all(forward):
        at = forward.index(False)
        raise _goes_back(dated[at], dated[at + 1])
    return dated, False


def _goes_back(one: Dated, two: Dated) -> BadDate:
    cause = "Two files put together, or the logger's clock set anew?"
    hours = (one[1] - two[1]).total_seconds() / 3600
    return BadDate(
        f"Time runs backwards: row {one[0]} is {_at(one[1])} and row {two[0]} is {_at(two[1])}.",
        _CLOCKS_GO_BACK if hours <= 1 and _clocks_change(one[1]) else cause,
    )


def _clocks_change(moment: datetime) -> bool:
    return (moment.month == 10 and moment.day > 24) or (moment.month == 11 and moment.day < 8)


def _once(dated: list[Dated]) -> Iterator[Dated]:
    """The first reading of each minute. Raises: BadDate where one time has two temperatures."""
    before: Dated | None = None
    for each in dated:
        if before is not None and _at(each[1]) == _at(before[1]):
            if each[1] == before[1] and each[2] != before[2]:
                raise BadDate(
                    f"Rows {before[0]} and {each[0]} are both {_at(each[1])},"
                    f" at {before[2]:g} and at {each[2]:g}.",
                    _CLOCKS_GO_BACK
                    if _clocks_change(each[1])
                    else "Two loggers in one file? Bring each in by itself.",
                )
            continue
        before = each
        yield each


def _celsius(row: int, degrees: float, stated: str) -> float:
    celsius = round((degrees - 32) / 1.8, 2) if stated == "F" else degrees
    if not COLDEST_C <= celsius <= WARMEST_C:
        raise BadAmount(
            f"Row {row}: {degrees:g} °{stated or 'C'} is not between {COLDEST_C:g} and"
            f" {WARMEST_C:g} °C.",
            "A broken sensor, or another unit? Take the row out, or export in °C.",
        )
    return celsius


def _spikes(readings: tuple[tuple[datetime, float], ...], kept: list[Dated]) -> Iterator[str]:
    for at in range(1, len(readings) - 1):
        before, here, after = (degrees for _, degrees in readings[at - 1 : at + 2])
        off = min(here - before, here - after, key=abs)
        if (here - before) * (here - after) > 0 and abs(off) > SPIKE_C:
            side = "above" if off > 0 else "below"
            yield (
                f"row {kept[at][0]}: {here:g} °C at {_at(readings[at][0])}, {abs(off):.1f}"
                f" {side} the readings beside it: a spike? kept as written"
            )


def _at(moment: datetime) -> str:
    return moment.isoformat(" ", "minutes")
