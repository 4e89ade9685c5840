"""Living with change: what changed since a plan was kept, and what would change if."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.bookings import KeepClosed
from stockroom.cli.printing import show, width
from stockroom.cli.shared import of

Several = list[str] | None


def changed(
    ctx: typer.Context,
    number: Annotated[
        str | None, typer.Argument(metavar="NUMBER", help="A kept plan: 0003; else the last.")
    ] = None,
) -> None:
    """What changed since a plan was kept (plan --keep), each change with its cause.

    Example: stockroom changed --as-at 2027-01-18
    """
    from stockroom.reports.changes_text import changed_json, changed_text
    from stockroom.service.printed_plans import changed as changed_since

    shared = of(ctx)
    told = changed_since(shared.path, number, as_at=shared.today)
    show(
        shared,
        lambda: changed_text(
            told.comparison,
            width(),
            against=told.against,
            by=told.by,
            house=told.house,
            practice=told.practice,
        ),
        lambda: changed_json(
            told.comparison, against=told.against, by=told.by, practice=told.practice
        ),
    )


def what_if(
    ctx: typer.Context,
    groups: Annotated[
        Several, typer.Option(metavar="BOOKING=NUMBER", help="A class resized: K08=11.")
    ] = None,
    shift: Annotated[
        Several,
        typer.Option(metavar="BOOKING=DATE", help="One moved: K08=2027-01-27, or =DATE,TIME."),
    ] = None,
    without: Annotated[
        Several, typer.Option(metavar="BOTTLE", help="A bottle that is not there: S03.")
    ] = None,
    cancel: Annotated[Several, typer.Option(metavar="BOOKING", help="A class dropped.")] = None,
    book: Annotated[
        Several,
        typer.Option(
            metavar="RECIPE,DATE,GROUPS",
            help="One class more: R01,2027-02-11,12; a time and a department may follow.",
        ),
    ] = None,
    cautious: Annotated[
        bool, typer.Option("--cautious", help="Every strength at its lower 95 % limit.")
    ] = False,
    keep_closed: KeepClosed = False,
) -> None:
    """What would change if; each may be given again. Nothing is written.

    Example: stockroom what-if --groups K08=11 --without S03
    """
    from stockroom.reports.changes_text import what_if_json, what_if_text
    from stockroom.service.what_if import Asked
    from stockroom.service.what_if import what_if as difference
    from stockroom.service.what_if_words import booked, resized, shifted

    shared = of(ctx)
    asked = Asked(
        groups=tuple(resized(each, "--groups") for each in groups or ()),
        shifts=tuple(shifted(each, "--shift") for each in shift or ()),
        without=tuple(without or ()),
        cancels=tuple(cancel or ()),
        extras=tuple(booked(each, "--book") for each in book or ()),
        cautious=cautious,
        keep_closed=keep_closed,
    )
    told = difference(shared.path, asked, as_at=shared.today)
    words, practice = told.asked, told.practice
    show(
        shared,
        lambda: what_if_text(
            told.comparison, width(), asked=words, house=told.house, practice=practice
        ),
        lambda: what_if_json(told.comparison, asked=words, practice=practice),
    )
