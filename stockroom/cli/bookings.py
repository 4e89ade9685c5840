"""Bookings: book, shift, cancel."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show_done
from stockroom.cli.shared import of
from stockroom.errors import BadInput
from stockroom.service.typed import (
    day_or_none,
    percent,
    time_or_none,
    whole,
    whole_or_none,
)

Booking = Annotated[str, typer.Argument(metavar="BOOKING", help="Its number: K06.")]
Firm = Annotated[str | None, typer.Option(metavar="WORD", help="pencilled, firm or done.")]
KeepClosed = Annotated[
    bool, typer.Option("--keep-closed", help="Keep it though the house is closed that day.")
]


def book(
    ctx: typer.Context,
    recipe: Annotated[str, typer.Argument(metavar="RECIPE", help="Its code: R04.")],
    on: Annotated[str, typer.Option("--on", metavar="DATE", help="The day.")],
    at: Annotated[str, typer.Option("--at", metavar="TIME", help="When it starts: 09:15.")],
    groups: Annotated[str, typer.Option(metavar="NUMBER", help="Groups, or performances.")],
    department: Annotated[str, typer.Option("--dept", metavar="CODE", help="Whose money: CH.")],
    spare: Annotated[str, typer.Option(metavar="PERCENT", help="How much over.")] = "10",
    firmness: Firm = None,
    room: Annotated[str, typer.Option(metavar="ROOM", help="Where: LAB1.")] = "",
    number: Annotated[
        str | None, typer.Option(metavar="BOOKING", help="Its number; else the next.")
    ] = None,
    keep_closed: KeepClosed = False,
) -> None:
    """Book a recipe on a day.

    Example: stockroom book R04 --on 2027-01-21 --at 09:15 --groups 12 --dept CH --by T1
    """
    from stockroom.measure.days import parse_day, parse_time
    from stockroom.service import bookings

    shared = of(ctx)
    done = bookings.book(
        shared.path,
        number,
        recipe,
        parse_day(on, where="--on"),
        parse_time(at, where="--at"),
        whole(groups, "--groups"),
        department,
        spare=percent(spare, "--spare"),
        firmness=firmness or "firm",
        room=room,
        keep=keep_closed,
        today=shared.today,
        by=shared.initials,
    )
    show_done(shared, done)


def shift(
    ctx: typer.Context,
    booking: Booking,
    on: Annotated[str | None, typer.Option("--on", metavar="DATE", help="Its new day.")] = None,
    at: Annotated[str | None, typer.Option("--at", metavar="TIME", help="Its new time.")] = None,
    groups: Annotated[str | None, typer.Option(metavar="NUMBER", help="Its new groups.")] = None,
    firmness: Firm = None,
    keep_closed: KeepClosed = False,
) -> None:
    """Change a booking's day, time, groups or firmness; what it was stays on record.

    Example: stockroom shift K06 --groups 13 --by T1
    """
    from stockroom.service import bookings

    if on is None and at is None and groups is None and firmness is None:
        raise BadInput(f"{booking}: shifted how?", "Add --on, --at, --groups or --firmness.")
    shared = of(ctx)
    done = bookings.shift(
        shared.path,
        booking,
        on=day_or_none(on, "--on"),
        time=time_or_none(at, "--at"),
        groups=whole_or_none(groups, "--groups"),
        firmness=firmness,
        keep=keep_closed,
        today=shared.today,
        by=shared.initials,
    )
    show_done(shared, done)


def cancel(
    ctx: typer.Context,
    booking: Booking,
    reason: Annotated[str, typer.Option("--why", help="Why it falls out, or comes back.")] = "",
    undo: Annotated[
        bool, typer.Option("--undo", help="Take the cancelling back: it is booked as before.")
    ] = False,
) -> None:
    """Drop a booking: makes not done are withdrawn, what was made for it stays as stock.

    Example: stockroom cancel K06 --why "class on a trip" --by T1
    """
    from stockroom.service import bookings

    shared = of(ctx)
    change = bookings.take_back if undo else bookings.cancel
    done = change(shared.path, booking, why=reason, today=shared.today, by=shared.initials)
    show_done(shared, done)


def destroyed(
    ctx: typer.Context,
    booking: Booking,
    undo: Annotated[bool, typer.Option("--undo", help="Take the tick back: it stands.")] = False,
    reason: Annotated[str, typer.Option("--why", help="With --undo: why.")] = "",
) -> None:
    """Tick that a booking's mixture that is never kept was destroyed, every vessel rinsed.

    Example: stockroom destroyed K16 --by T1
    """
    from stockroom.service import destroying

    shared = of(ctx)
    if reason and not undo:
        raise BadInput(f"--why {reason!r} is for a tick taken back.", "Add --undo, or leave it.")
    if undo:
        done = destroying.not_destroyed(
            shared.path, booking, why=reason, today=shared.today, by=shared.initials
        )
    else:
        done = destroying.destroyed(shared.path, booking, today=shared.today, by=shared.initials)
    show_done(shared, done)
