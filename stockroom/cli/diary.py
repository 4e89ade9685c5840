"""The story of one bottle, told with the numbers that put-right asks for."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show, width
from stockroom.cli.shared import of
from stockroom.cli.stock import Bottle
from stockroom.service.typed import day_or_none


def diary(
    ctx: typer.Context,
    bottle: Bottle,
    known_on: Annotated[
        str | None,
        typer.Option(metavar="DATE", help="Only what had been entered by the end of that day."),
    ] = None,
) -> None:
    """Every entry of a bottle with its number, as put-right asks for it.

    Example: stockroom diary B06
    """
    from stockroom.reports.diary_text import diary_json, diary_rows, diary_text
    from stockroom.service.diary import story

    shared = of(ctx)
    told = story(shared.path, bottle, day_or_none(known_on, "--known-on"))
    number, item = told.diary.bottle, told.diary.line
    rows = list(diary_rows(told.diary.entries))
    show(
        shared,
        lambda: diary_text(number, item, rows, width(), practice=told.practice),
        lambda: diary_json(number, item, rows, practice=told.practice),
    )
