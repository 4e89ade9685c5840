"""Putting an entry right: both stay to be seen."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show_done
from stockroom.cli.shared import of
from stockroom.cli.stock import Happened, when


def put_right(
    ctx: typer.Context,
    entry: Annotated[
        str,
        typer.Argument(
            metavar="ENTRY", help="The number of the entry; `stockroom diary BOTTLE` shows it."
        ),
    ],
    reason: Annotated[str, typer.Option("--why", help="What was meant.")] = "",
    on: Happened = None,
) -> None:
    """An entry was wrong: undo it. Both stay to be seen, with who and why.

    Example: stockroom put-right 123 --why "meant 50 g" --by T2
    """
    from stockroom.service import righting

    shared = of(ctx)
    number = righting.entry_number(entry)
    show_done(shared, righting.put_right(shared.path, number, reason, **when(shared, on)))
