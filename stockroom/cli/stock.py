"""What happens to a bottle's contents: arrive, open, make, draw, count, spill, discard..."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, TypedDict

import typer

from stockroom.cli.printing import show_done
from stockroom.cli.shared import Shared, of
from stockroom.errors import BadInput
from stockroom.service.typed import (
    amount_of,
    amount_or_none,
    day_or_none,
    drawn_of,
    fraction_or_none,
    whole,
)

if TYPE_CHECKING:
    from datetime import date

Bottle = Annotated[str, typer.Argument(metavar="BOTTLE", help="The number on its label: S05.")]
AmountText = Annotated[
    str, typer.Argument(metavar="AMOUNT", help='With its unit: 200cm3, "640 g", "3 items".')
]
Happened = Annotated[
    str | None, typer.Option("--on", metavar="DATE", help="The day it happened; else today.")
]
Tare = Annotated[
    str | None,
    typer.Option(metavar="MASS", help="The empty bottle with its cap; kept with its number."),
]


class When(TypedDict):
    """What every event carries: the day it happened, the day it is entered, and who."""

    on: date | None
    today: date
    by: str


def when(shared: Shared, on: str | None) -> When:
    """The three of them from the command line. Raises: BadDate."""
    return When(on=day_or_none(on, "--on"), today=shared.today, by=shared.initials)


def arrive(
    ctx: typer.Context,
    line: Annotated[str, typer.Argument(metavar="LINE", help="What it is, by any of its names.")],
    size: Annotated[
        str | None,
        typer.Argument(metavar="AMOUNT", help='What one holds: "500 g"; else as last time.'),
    ] = None,
    place: Annotated[
        str | None, typer.Option(metavar="PLACE", help="Where it is put away; else as last time.")
    ] = None,
    printed: Annotated[
        str | None,
        typer.Option(metavar="DATE|none", help='As printed on it: 2029-01, or "none".'),
    ] = None,
    count: Annotated[
        str, typer.Option(metavar="NUMBER", help="How many alike; each gets a number.")
    ] = "1",
    opened: Annotated[str, typer.Option(metavar="no|DATE", help="When it was opened.")] = "no",
    cap: Annotated[
        str, typer.Option(metavar="vented|tight", help="Its cap; not looked at if left out.")
    ] = "",
    lot: Annotated[
        str, typer.Option(metavar="TEXT", help="The maker's lot, if there is one.")
    ] = "",
    assay: Annotated[
        str | None, typer.Option(metavar="PERCENT", help="Of this very bottle: 99.5.")
    ] = None,
    tare: Tare = None,
    note: Annotated[str, typer.Option(help="Anything written on it.")] = "",
    order: Annotated[str, typer.Option(metavar="NUMBER", help="The order it came of: P01.")] = "",
    on: Happened = None,
) -> None:
    """A bottle arrived: give it a number and put it away, as last time if it came before.

    Example: stockroom arrive "lithium chloride" "100 g" --printed 2029-01 --place A2 --by T1
    """
    from stockroom.service import stock

    shared = of(ctx)
    done = stock.arrive(
        shared.path,
        line,
        None if size is None else amount_of(size),
        printed=printed,
        place=place,
        count=whole(count, "--count"),
        opened=None if opened == "no" else day_or_none(opened, "--opened"),
        cap=cap,
        note=note,
        label=stock.Label(lot, fraction_or_none(assay, "--assay"), amount_or_none(tare)),
        order=order,
        **when(shared, on),
    )
    show_done(shared, done)


def open_(ctx: typer.Context, bottle: Bottle, on: Happened = None) -> None:
    """A bottle was opened: its life once opened starts.

    Example: stockroom open B02 --on 2027-02-10 --by T1
    """
    from stockroom.service import stock

    shared = of(ctx)
    show_done(shared, stock.open_bottle(shared.path, bottle, **when(shared, on)))


def make(
    ctx: typer.Context,
    line: Annotated[str, typer.Argument(metavar="LINE", help="The solution, with its strength.")],
    volume: Annotated[str, typer.Argument(metavar="VOLUME", help='How much: "4620 cm3".')],
    source: Annotated[
        list[str] | None,
        typer.Option("--from", metavar="BOTTLE", help="A bottle to make it from; may be repeated."),
    ] = None,
    place: Annotated[str | None, typer.Option(metavar="PLACE", help="Where it is put.")] = None,
    sure: Annotated[
        bool, typer.Option("--sure", help="It was made a second time, or is as much as that.")
    ] = False,
    on: Happened = None,
) -> None:
    """A solution was made up: its sources are drawn and it gets a number.

    Example: stockroom make "potassium permanganate 0.0200 mol/dm3" 4620cm3 --from B10 --by T1
    """
    from stockroom.service import making

    shared = of(ctx)
    done = making.make_up(
        shared.path,
        line,
        amount_of(volume),
        sources=source or [],
        place=place,
        sure=sure,
        **when(shared, on),
    )
    show_done(shared, done)


def draw(
    ctx: typer.Context,
    bottle: Bottle,
    amount: Annotated[
        str | None,
        typer.Argument(
            metavar="AMOUNT", help='"100 cm3", "20 g", or what is left: "a third left".'
        ),
    ] = None,
    gross: Annotated[
        str | None,
        typer.Option(metavar="MASS", help="Instead: what the bottle weighs now, with its cap."),
    ] = None,
    tare: Tare = None,
    booking: Annotated[
        str | None, typer.Option("--for", metavar="BOOKING", help="The booking it is for.")
    ] = None,
    on: Happened = None,
) -> None:
    """Some was taken out of a bottle: how much, how much is left by eye, or what it weighs.

    Example: stockroom draw S13 100cm3 --for K16 --by T1
    """
    from stockroom.service import stock

    shared = of(ctx)
    said = drawn_of(bottle, amount, gross, tare)
    show_done(shared, stock.draw(shared.path, bottle, said, booking=booking, **when(shared, on)))


def count(
    ctx: typer.Context,
    bottle: Bottle,
    amount: AmountText,
    walk: Annotated[str, typer.Option(metavar="NAME", help="The round of counting.")] = "",
    sure: Annotated[
        bool, typer.Option("--sure", help="Keep it though it is more than the bottle's size.")
    ] = False,
    on: Happened = None,
) -> None:
    """A bottle was counted: what is left becomes what was found.

    Example: stockroom count B06 "640 g" --by T2
    """
    from stockroom.service import stock

    shared = of(ctx)
    # with its unit, since a bare 640 could be grams or cm³
    counted = amount_of(amount)
    done = stock.count(shared.path, bottle, counted, walk=walk, sure=sure, **when(shared, on))
    show_done(shared, done)


def spill(
    ctx: typer.Context,
    bottle: Bottle,
    amount: AmountText,
    note: Annotated[str, typer.Option("--note", "--why", help="How it came about.")] = "",
    on: Happened = None,
) -> None:
    """Some was spilled: taken off what is left, never counted as used.

    Example: stockroom spill B18 "2 g" --by T1
    """
    from stockroom.service import stock

    shared = of(ctx)
    done = stock.spill(shared.path, bottle, amount_of(amount), note=note, **when(shared, on))
    show_done(shared, done)


def lend(
    ctx: typer.Context,
    bottle: Bottle,
    amount: AmountText,
    to: Annotated[str, typer.Option(metavar="WHOM", help="Who has it now.")] = "",
    back: Annotated[bool, typer.Option("--back", help="It came back.")] = False,
    whom: Annotated[
        str, typer.Option("--from", metavar="WHOM", help="With --back: who had it.")
    ] = "",
    on: Happened = None,
) -> None:
    """Some was lent, or came back: taken off what is left, never counted as used.

    Example: stockroom lend B32 "10 g" --to "the physics store" --by T1
    """
    from stockroom.service import stock

    if (back and to) or (whom and not back):
        raise BadInput(f"{bottle}: lent, or back?", "Lent: --to WHOM. Back: --back --from WHOM.")
    shared = of(ctx)
    held, happened = amount_of(amount), when(shared, on)
    if back:
        done = stock.lend_back(shared.path, bottle, held, whom=whom, **happened)
    else:
        done = stock.lend(shared.path, bottle, held, to=to, **happened)
    show_done(shared, done)


def move(
    ctx: typer.Context,
    bottle: Bottle,
    place: Annotated[str, typer.Argument(metavar="PLACE", help="Where it stands now: F1.")],
    on: Happened = None,
) -> None:
    """A bottle was moved to another place.

    Example: stockroom move S01 F1 --by T1
    """
    from stockroom.service import stock

    shared = of(ctx)
    show_done(shared, stock.move(shared.path, bottle, place, **when(shared, on)))


def discard(
    ctx: typer.Context,
    bottle: Bottle,
    how: Annotated[str, typer.Option(help="How: the house way for this waste.")] = "",
    reason: Annotated[
        str, typer.Option("--why", help="Why: past, weak, contaminated, surplus...")
    ] = "",
    on: Happened = None,
) -> None:
    """A bottle was emptied and thrown away; its number is never used again.

    Example: stockroom discard S14 --how "iron waste bottle" --why past --by T1
    """
    from stockroom.service import stock

    shared = of(ctx)
    show_done(shared, stock.discard(shared.path, bottle, how=how, why=reason, **when(shared, on)))
