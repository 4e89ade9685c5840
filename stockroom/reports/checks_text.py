"""Titrations and looks in words: those of one morning together, each with its reason."""

from __future__ import annotations

from itertools import groupby

from stockroom.planning.decisions import CheckToDo
from stockroom.reports.sheet import columns
from stockroom.reports.words import TIED, counted, day, listed


def check_lines(checks: tuple[CheckToDo, ...], width: int) -> list[str]:
    """Checks to do, best day first, with the days they may be done between.

    Several on one day are counted first, with their minutes: setting up is done once.
    """
    # by the day to do them and not the last day allowed: it is a list of work
    ordered = sorted(checks, key=lambda check: (check.best, check.subject))
    rows: list[tuple[str, str]] = []
    for when, group in groupby(ordered, key=lambda check: check.best):
        together = list(group)
        said = [_check(check) for check in together]
        if len(together) > 1:
            said = [_together(together), *said]
        rows += [(day(when), said[0]), *(("", each) for each in said[1:])]
    return columns(rows, width)


def _together(checks: list[CheckToDo]) -> str:
    minutes = sum(check.minutes for check in checks if not check.optional)
    work = f", {minutes}{TIED}min hands-on" if minutes else ""
    return f"{counted(len(checks), 'check')} together{work}:"


def _check(check: CheckToDo) -> str:
    # the interval may open on a closed day; whoever plans the work wants one they are in
    first = max(check.not_before, check.opens or check.not_before)
    days = f"between {day(first)} and {day(check.by)}" if first < check.by else f"on {day(first)}"
    hangs = f", for {listed(check.bookings)}" if check.bookings else ""
    reason = f": {check.reason}" if check.reason else ""
    return f"{check.what} {check.subject} {check.item}, {days}{hangs}{reason}"
