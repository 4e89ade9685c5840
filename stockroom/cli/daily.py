"""The page for the day, the class slip and the text for a phone."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.paper import Paper, Print, put_out
from stockroom.cli.printing import show
from stockroom.cli.shared import of

Ref = Annotated[
    str | None,
    typer.Argument(metavar="[DATE|BOOKING]", help="2027-03-23, or K11; else the next day booked."),
]
Named = Annotated[str, typer.Argument(metavar="DATE|BOOKING", help="2027-03-23, or K11.")]


def day(ctx: typer.Context, ref: Ref = None, to: Print = None, paper: Paper = "A4") -> None:
    """The page for the day: ready or not, what to do when, the true strengths.

    Example: stockroom day 2027-03-23 --print day.pdf
    """
    from stockroom.reports.paper.day import day_of
    from stockroom.reports.paper.day_text import DAY
    from stockroom.service.day import day_asked

    shared = of(ctx)
    asked = day_asked(shared.path, ref, as_at=shared.today)
    sheet = day_of(asked.known, asked.plan, asked.on, asked.booking, asked.closed)
    put_out(shared, DAY, sheet, asked.about, to=to, paper=paper)


def slip(ctx: typer.Context, ref: Named, to: Print = None, paper: Paper = "A4") -> None:
    """The true strengths for the board, so that a class reckons with the right figures.

    Example: stockroom slip K11 --print slip.pdf
    """
    from stockroom.reports.paper.slip import SLIP, slip_of
    from stockroom.service.day import day_asked

    shared = of(ctx)
    asked = day_asked(shared.path, ref, as_at=shared.today)
    sheet = slip_of(asked.known, asked.plan, asked.on, asked.booking)
    put_out(shared, SLIP, sheet, asked.about, to=to, paper=paper)


def phone(ctx: typer.Context, ref: Named) -> None:
    """Ten lines for a phone: is it ready, and what is out of the ordinary.

    Example: stockroom phone K01
    """
    from stockroom.reports.files.phone import phone_of, phone_text
    from stockroom.reports.paper.data import as_data
    from stockroom.service.day import day_asked

    shared = of(ctx)
    asked = day_asked(shared.path, ref, as_at=shared.today)
    text = phone_of(asked.known, asked.plan, asked.on, asked.booking)
    show(shared, lambda: phone_text(text), lambda: as_data(text))
