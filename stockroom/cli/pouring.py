"""From one bottle into another: decant, mix."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show_done
from stockroom.cli.shared import of
from stockroom.cli.stock import AmountText, Bottle, Happened, when
from stockroom.service.typed import amount_of, day_or_none

Place = Annotated[
    str | None, typer.Option(metavar="PLACE", help="Where it is put; else where the first stands.")
]
Into = Annotated[
    str | None, typer.Option(metavar="SIZE", help="What the bottle poured into holds when full.")
]


def decant(
    ctx: typer.Context,
    bottle: Bottle,
    amount: AmountText,
    place: Place = None,
    into: Into = None,
    good_until: Annotated[
        str | None,
        typer.Option(metavar="DATE", help="The date on its own label: no later than the source's."),
    ] = None,
    on: Happened = None,
) -> None:
    """Some was poured into another bottle: it gets a number, and keeps lot, strength and dates.

    Example: stockroom decant B14 250cm3 --place A1 --by T1
    """
    from stockroom.service import pouring

    shared = of(ctx)
    done = pouring.decant(
        shared.path,
        bottle,
        amount_of(amount),
        place=place,
        size=amount_of(into) if into else None,
        good_until=day_or_none(good_until, "--good-until"),
        **when(shared, on),
    )
    show_done(shared, done)


def mix(
    ctx: typer.Context,
    first: Annotated[str, typer.Argument(metavar="FIRST", help="The bottle poured out whole.")],
    second: Annotated[str, typer.Argument(metavar="SECOND", help="The bottle added to it.")],
    amount: Annotated[
        str | None, typer.Argument(metavar="AMOUNT", help="How much of the second; else all.")
    ] = None,
    place: Place = None,
    into: Into = None,
    on: Happened = None,
) -> None:
    """Two bottles of one thing were poured together, or one topped up: a new number for it.

    Example: stockroom mix S02 S31 200cm3 --by T1
    """
    from stockroom.service import pouring

    shared = of(ctx)
    done = pouring.mix(
        shared.path,
        first,
        second,
        amount_of(amount) if amount else None,
        place=place,
        size=amount_of(into) if into else None,
        **when(shared, on),
    )
    show_done(shared, done)
