"""Which columns of a logger's table hold the time and the temperature, and in what scale."""

from __future__ import annotations

import re
from dataclasses import dataclass

from stockroom.errors import BadInput
from stockroom.measure.reading import quote

# a logger's program may put its own name, a serial number and a summary above the table
_PREAMBLE = 60
_BOTH = re.compile(r"date[\s/_,-]*(?:and\s+)?time|time[\s_-]*stamp|datum[\s/_,-]*uhrzeit")
_DATE = re.compile(r"\b(?:date|datum|day)\b")
_TIME = re.compile(r"\b(?:time|uhrzeit|zeit|hour|logged|recorded|when)\b")
_TEMPERATURE = re.compile(
    r"temp|celsius|fahrenheit|°\s*[cf]\b|^t$|^[cf]$|\bdeg(?:rees?)?\.?\s*[cf]\b|[(\[]\s*[cf]\s*[)\]]"
)
_NOT_ITSELF = re.compile(r"alarm|limit|\b(?:high|low|min|max|set|dew|wet)\b|dew|minimum|maximum")
_FAHRENHEIT = re.compile(r"fahrenheit|°\s*f\b|\bdeg(?:rees?)?\.?\s*f\b|[(\[/_,]\s*f\b|^f$|\sf$")
_CELSIUS = re.compile(r"celsius|°\s*c\b|\bdeg(?:rees?)?\.?\s*c\b|[(\[/_,]\s*c\b|^c$|\sc$")
_DATED = re.compile(r"[0-9]{1,4}[-/. ][0-9A-Za-z]{1,9}[-/. ,]+[0-9]{1,4}\b.*")
_CLOCK = re.compile(r".*[0-9]{1,2}:[0-9]{2}.*")


@dataclass(frozen=True, slots=True)
class Columns:
    """Where to look in each row: the time in one or two cells, and the temperature.

    `first_row` is the first that is no heading, `width` how many cells a row has,
    `scale` "C", "F" or "" as the heading says.
    """

    moment: tuple[int, ...]
    temperature: int
    first_row: int
    width: int
    heading: str = ""
    scale: str = ""

    def when(self, cells: list[str]) -> str:
        """The time of a row as written, date and clock joined where they stand apart."""
        return " ".join(cells[at] for at in self.moment if at < len(cells))


def columns_of(table: list[list[str]], column: str = "") -> Columns:
    """The columns of a table by its headings, or by its first row where it has none.

    `column` is the heading of the temperature to read, or a part of it.
    Raises: BadInput when there is none, or more than one could be meant.
    """
    for row, cells in enumerate(table[:_PREAMBLE]):
        names = [_name(cell) for cell in cells]
        # a row with a time in it is no heading, whatever words stand beside it
        if any(map(_dated, cells)) and _headless(cells) is not None:
            break
        moment = _moment_in(names)
        asked = bool(column) and any(column.casefold().strip() in name for name in names)
        if moment and (asked or any(_TEMPERATURE.search(name) for name in names)):
            at = _temperature_in(cells, names, column)
            return Columns(moment, at, row + 1, len(cells), cells[at], scale_of(cells[at]))
    return _without_headings(table, column)


def scale_of(heading: str) -> str:
    """ "C" or "F" as a heading says, "" where it does not."""
    name = _name(heading)
    if _FAHRENHEIT.search(name):
        return "F"
    return "C" if _CELSIUS.search(name) else ""


def _name(cell: str) -> str:
    # the ordinal sign and the single signs of both scales are typed for the degree sign
    return cell.casefold().replace("º", "°").replace("℃", "°c").replace("℉", "°f").strip(' "#')


def _moment_in(names: list[str]) -> tuple[int, ...]:
    both = [at for at, name in enumerate(names) if _BOTH.search(name)]
    if both:
        return (both[0],)
    dates = [at for at, name in enumerate(names) if _DATE.search(name)]
    times = [at for at, name in enumerate(names) if _TIME.search(name) and at not in dates]
    return (*dates[:1], *times[:1])


def _temperature_in(cells: list[str], names: list[str], column: str) -> int:
    able = [at for at, name in enumerate(names) if _TEMPERATURE.search(name)]
    fit = [at for at in able if not _NOT_ITSELF.search(names[at])] or able
    if column:
        asked = column.casefold().strip()
        exact = [at for at, name in enumerate(names) if name == _name(column)]
        fit = exact or [at for at, name in enumerate(names) if asked in name]
    if len(fit) == 1:
        return fit[0]
    listed = ", ".join(quote(cells[at]) for at in (fit or range(len(cells))))
    if fit:
        raise BadInput(f"Which temperature: {listed}?", "Name its heading with --column.")
    raise BadInput(f"No heading holds {quote(column)}.", f"There are: {listed}.")


def _without_headings(table: list[list[str]], column: str) -> Columns:
    first = table[0]
    moment = _headless(first)
    if moment is None or column:
        # what a program writes about itself has fewer cells than the headings
        widest = max(table[:_PREAMBLE], key=len)
        raise BadInput(
            f"I find no headings for time and temperature; the nearest is"
            f" {quote(' | '.join(widest))}.",
            "Name the temperature's heading with --column, or write"
            ' "time" and "temperature °C" over the two columns.',
        )
    return Columns(moment, moment[-1] + 1, 0, len(first))


def _headless(cells: list[str]) -> tuple[int, ...] | None:
    """The cells of the time in a row of data, where only one other follows: the temperature."""
    dates = [at for at, cell in enumerate(cells) if _dated(cell)]
    if not dates:
        return None
    at = dates[0]
    apart = not _CLOCK.fullmatch(cells[at])
    moment = (at, at + 1) if apart else (at,)
    # a number of the row may stand before the time, and nothing after the temperature
    return moment if at <= 1 and len(cells) == moment[-1] + 2 else None


def _dated(cell: str) -> bool:
    return _DATED.fullmatch(cell) is not None
