"""Files for other programs: tables, the workbook, the calendar, and texts to send."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import NoReturn

from stockroom.web.forms.field import Field, Form
from stockroom.web.forms.typed import Typed


@dataclass(frozen=True, slots=True)
class File:
    """One file. Its address is /paper/NAME.ENDING, and what it is saved as is NAME.ENDING too."""

    name: str
    ending: str
    title: str
    promise: str
    make: Callable[[Typed], bytes]
    fields: tuple[Field, ...] = ()

    @property
    def form(self) -> Form:
        """Its fields as a form."""
        return Form(self.name, self.title, self.promise, self.fields, _nothing, subject="Files")


TYPES = {
    "pdf": "application/pdf",
    "svg": "image/svg+xml",
    "png": "image/png",
    "csv": "text/csv; charset=utf-8",
    "xlsx": "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet",
    "ics": "text/calendar; charset=utf-8",
    "txt": "text/plain; charset=utf-8",
}
"""What each ending is, as IANA lists it."""


def _workbook(typed: Typed) -> bytes:
    from stockroom.reports.files.workbook import workbook_bytes
    from stockroom.reports.files.workbook_sheets import workbook_of
    from stockroom.service.sheets import known_and_planned

    paper = "Letter" if typed.text("paper").lower() == "letter" else "A4"
    return workbook_bytes(workbook_of(*known_and_planned(typed.path, as_at=typed.today)), paper)


def _calendar(typed: Typed) -> bytes:
    """The term against the file kept last, and not kept itself.

    Right for a program that fetches it anew and takes it for the whole truth. Where it is
    brought in by hand, /paper/calendar keeps it, so that the next withdraws what is gone.
    """
    return calendar_now(typed)[0]


def calendar_now(typed: Typed) -> tuple[bytes, Callable[[], str]]:
    """The calendar file, and what keeps it and gives its number. Raises (that): StoreTrouble."""
    from stockroom.reports.files.calendar import calendar_lines, calendar_of
    from stockroom.reports.files.calendar_ics import calendar_bytes
    from stockroom.service.calendar import keep_put_out, put_out_last
    from stockroom.service.sheets import known_and_planned

    known, plan = known_and_planned(typed.path, as_at=typed.today)
    number, before = put_out_last(typed.path, known.start)
    answer = calendar_of(known, plan, before, number)

    def keep() -> str:
        lines = calendar_lines(answer)
        return keep_put_out(typed.path, known.start, lines, as_at=typed.today, by=typed.by)

    return calendar_bytes(answer), keep


def _buying(typed: Typed) -> bytes:
    from stockroom.reports.files.csv_out import buying_csv
    from stockroom.service.plan import term_plan

    return buying_csv(term_plan(typed.path, as_at=typed.today), bom=typed.yes("bom"))


def _usage(typed: Typed) -> bytes:
    from stockroom.reports.files.csv_out import usage_csv
    from stockroom.service.plan import term_plan

    return usage_csv(term_plan(typed.path, as_at=typed.today), bom=typed.yes("bom"))


def _past(typed: Typed) -> bytes:
    from stockroom.reports.files.csv_out import past_csv
    from stockroom.service.plan import past_on

    on = typed.day("on") or typed.today
    return past_csv(past_on(typed.path, as_at=typed.today, on=on), bom=typed.yes("bom"))


def _morning(typed: Typed) -> bytes:
    from stockroom.reports.files.morning import morning_of, morning_text
    from stockroom.service.sheets import known_and_planned

    return _text(morning_text(morning_of(*known_and_planned(typed.path, as_at=typed.today))))


def _phone(typed: Typed) -> bytes:
    from stockroom.reports.files.phone import phone_of, phone_text
    from stockroom.service.day import day_asked

    asked = day_asked(typed.path, typed.or_none("ref"), as_at=typed.today)
    return _text(phone_text(phone_of(asked.known, asked.plan, asked.on, asked.booking)))


def _text(text: str) -> bytes:
    return f"{text}\n".encode()


def _nothing(typed: Typed) -> NoReturn:
    raise AssertionError(f"{typed.form.name} is a file, and nothing is entered by it")


_BOM = Field("bom", "Begin with the mark some spreadsheets need", "yes")

FILES = (
    File(
        "workbook", "xlsx", "The term as a workbook",
        "A sheet for each subject: days as text, amounts as numbers.", _workbook,
    ),
    File(
        "calendar", "ics", "The term as a calendar",
        "Classes, makes, checks and orders, for a calendar that fetches it again by itself.",
        _calendar,
    ),
    File(
        "buying", "csv", "The buying as a table",
        "One order a row, the reasons last.", _buying, (_BOM,),
    ),
    File(
        "usage", "csv", "The use as a table",
        "What the term uses, a line of stock a row, with the year before.", _usage, (_BOM,),
    ),
    File(
        "past", "csv", "What is not to be counted on, as a table",
        "The bottles that are past, weak, undated or unchecked on a day.", _past,
        (Field("on", "On which day", "date", hint="today, if left empty"), _BOM),
    ),
    File(
        "morning", "txt", "The note of the morning",
        "What is due today, as plain text to send.", _morning,
    ),
    File(
        "phone", "txt", "Ten lines for a phone",
        "Is it ready, and what is out of the ordinary.", _phone,
        (Field("ref", "Day or booking", "booking", hint="the next day booked, if left empty"),),
    ),
)  # fmt: skip
"""All of them, in the order they are listed."""

BY_FILE = {f"{each.name}.{each.ending}": each for each in FILES}
"""Each by the name it is saved as."""
