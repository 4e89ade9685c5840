"""From a file to a server: move-house."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show_done
from stockroom.cli.shared import of
from stockroom.settings import store_at


def move_house(
    ctx: typer.Context,
    address: Annotated[
        str, typer.Argument(metavar="ADDRESS", help="postgresql+psycopg://user@host:port/name")
    ],
) -> None:
    """Copy the store into an empty PostgreSQL database, and compare before saying so.

    The file stays as it was; docs/growing.md says when and how.

    Example: stockroom move-house postgresql+psycopg://prep@server/stockroom
    """
    from stockroom.service.moving_house import move_house as move

    shared = of(ctx)
    done = move(shared.path, address, as_at=shared.today)
    show_done(shared, done, at=store_at(address))
