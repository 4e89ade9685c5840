"""What happens to a bottle's contents: arrive, open, make, draw, count, spill, discard..."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, TypedDict

import typer

from stockroom.cli.printing import show_done
from stockroom.cli.shared import Shared, of
from stockroom.cli.values import amount_of, day_or_none, whole

if TYPE_CHECKING:
    from datetime import date

Bottle = Annotated[str, typer.Argument(metavar="BOTTLE", help="The number on its label: S05.")]
AmountText = Annotated[
    str, typer.Argument(metavar="AMOUNT", help='With its unit: 200cm3, "640 g", "3 items".')
]
Happened = Annotated[
    str | None, typer.Option("--on", metavar="DATE", help="The day it happened; else today.")
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
    size: AmountText,
    place: Annotated[str, typer.Option(metavar="PLACE", help="Where it is put away.")],
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
    note: Annotated[str, typer.Option(help="Anything written on it.")] = "",
    order: Annotated[str, typer.Option(metavar="NUMBER", help="The order it came of: P01.")] = "",
    on: Happened = None,
) -> None:
    """A bottle arrived: give it a number and put it away.

    Example: stockroom arrive "lithium chloride" "100 g" --printed 2029-01 --place A2 --by T1
    """
    from stockroom.service import stock

    shared = of(ctx)
    done = stock.arrive(
        shared.path,
        line,
        amount_of(size),
        printed=printed,
        place=place,
        count=whole(count, "--count"),
        opened=None if opened == "no" else day_or_none(opened, "--opened"),
        cap=cap,
        note=note,
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
        **when(shared, on),
    )
    show_done(shared, done)


def draw(
    ctx: typer.Context,
    bottle: Bottle,
    amount: AmountText,
    booking: Annotated[
        str | None, typer.Option("--for", metavar="BOOKING", help="The booking it is for.")
    ] = None,
    on: Happened = None,
) -> None:
    """Some was taken out of a bottle.

    Example: stockroom draw S13 100cm3 --for K16 --by T1
    """
    from stockroom.service import stock

    shared = of(ctx)
    done = stock.draw(shared.path, bottle, amount_of(amount), booking=booking, **when(shared, on))
    show_done(shared, done)


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
    on: Happened = None,
) -> None:
    """Some was lent: taken off what is left, never counted as used.

    Example: stockroom lend B32 "10 g" --to "the physics store" --by T1
    """
    from stockroom.service import stock

    shared = of(ctx)
    show_done(shared, stock.lend(shared.path, bottle, amount_of(amount), to=to, **when(shared, on)))


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
    from stockroom.service import stock

    shared = of(ctx)
    number = whole(entry, "ENTRY")
    show_done(shared, stock.put_right(shared.path, number, reason, **when(shared, on)))
