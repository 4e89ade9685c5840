"""What changed since the plan was kept last, as a page."""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.planning.changing.changes import Comparison
from stockroom.reports.changes_text import (
    PAST,
    headed,
    rows_done,
    rows_past,
    since_kept,
    totals,
)
from stockroom.reports.pages.what_if import Section, in_words
from stockroom.reports.words import day_heading


@dataclass(frozen=True, slots=True)
class ChangedPage:
    """`first` counts the changes; `sections` are those still open, then what is done or past."""

    first: str
    about: str
    sections: tuple[Section, ...]
    totals: tuple[tuple[str, str], ...]


def changed_page_of(comparison: Comparison, *, against: str, by: str) -> ChangedPage:
    """The changes since the plan numbered `against`, which `by` kept."""
    kept, now = comparison.before, comparison.after
    booked = {booking.number for booking in now.bookings}
    over = (("Done", rows_done(comparison)), (PAST, rows_past(comparison)))
    found = [(heading.capitalize(), rows) for heading, rows in (*headed(comparison), *over)]
    return ChangedPage(
        first=since_kept(comparison, against),
        about=f"kept as at {day_heading(kept.as_at)} by {by}, "
        f"held against {day_heading(now.as_at)}",
        sections=tuple(
            Section(
                heading,
                # numbers of the kept plan: the page of one may be about something else by now
                tuple((in_words(number, booked), in_words(told, booked)) for number, told in rows),
            )
            for heading, rows in found
            if rows
        ),
        totals=tuple(totals(comparison)) if comparison.open else (),
    )
