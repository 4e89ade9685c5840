"""What stands where, and where a thing is."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show, width
from stockroom.cli.shared import of
from stockroom.service.typed import day_or_none


def shelf(
    ctx: typer.Context,
    what: Annotated[
        str,
        typer.Argument(metavar="WHAT", help="A place, a bottle, or any name of a thing; else all."),
    ] = "",
    on: Annotated[
        str | None, typer.Option("--on", metavar="DATE", help="As it was that day; else today.")
    ] = None,
    known_on: Annotated[
        str | None,
        typer.Option("--known-on", metavar="DATE", help="Only by what was entered by that day."),
    ] = None,
) -> None:
    """What is in the acid cupboard; where is hypo: bottles, how much is left, how good they are.

    Example: stockroom shelf hypo
    """
    from stockroom.reports.shelf_text import shelf_json, shelf_text
    from stockroom.service import shelf as service

    shared = of(ctx)
    day = day_or_none(on, "--on") or shared.today
    known = day_or_none(known_on, "--known-on")
    found = service.shelf(shared.path, what, on=day, known_on=known, today=shared.today)
    show(shared, lambda: shelf_text(found, width()), lambda: shelf_json(found))
