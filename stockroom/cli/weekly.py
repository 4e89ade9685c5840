"""The week sheet of the bench."""

from __future__ import annotations

from datetime import timedelta
from typing import Annotated

import typer

from stockroom.cli.paper import Paper, Print, put_out
from stockroom.cli.shared import of
from stockroom.service.typed import day_or_none


def week(
    ctx: typer.Context,
    on: Annotated[
        str | None,
        typer.Argument(metavar="[DATE]", help="Any day of the week; else this week."),
    ] = None,
    to: Print = None,
    paper: Paper = "A4",
) -> None:
    """The week by day: check, start, make, set out, destroy; a box to tick on each.

    Example: stockroom week 2027-01-25 --print week.pdf
    """
    from stockroom.reports.paper.week import WEEK, monday_of, week_of
    from stockroom.service.closures import why_closed
    from stockroom.service.sheets import known_and_planned

    shared = of(ctx)
    monday = monday_of(day_or_none(on, "DATE"), shared.today)
    sunday = monday + timedelta(days=6)
    known, plan = known_and_planned(shared.path, as_at=shared.today, through=sunday)
    sheet = week_of(known, plan, monday, why_closed(shared.path, monday, sunday))
    put_out(shared, WEEK, sheet, monday.isoformat(), to=to, paper=paper)
