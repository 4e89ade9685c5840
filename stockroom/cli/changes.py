"""Living with change: what changed since a plan was kept, and what would change if."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.bookings import KeepClosed
from stockroom.cli.printing import show, width
from stockroom.cli.shared import of
from stockroom.errors import BadInput
from stockroom.service.typed import whole

if TYPE_CHECKING:
    from stockroom.service.what_if import Extra, Shift

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

    shared = of(ctx)
    asked = Asked(
        groups=tuple(_resized(each) for each in groups or ()),
        shifts=tuple(_shifted(each) for each in shift or ()),
        without=tuple(without or ()),
        cancels=tuple(cancel or ()),
        extras=tuple(_booked(each) for each in book or ()),
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


def _halves(word: str, where: str, pattern: str) -> tuple[str, str]:
    number, equals, rest = word.partition("=")
    if not equals or not number.strip() or not rest.strip():
        raise BadInput(f"{where} {word!r} is not {pattern}.", f"Write it as {where} {pattern}.")
    return number.strip(), rest.strip()


def _resized(word: str) -> tuple[str, int]:
    number, groups = _halves(word, "--groups", "K08=11")
    return number, whole(groups, "--groups")


def _shifted(word: str) -> Shift:
    from stockroom.measure.days import parse_day, parse_time
    from stockroom.service.what_if import Shift

    number, rest = _halves(word, "--shift", "K08=2027-01-27")
    parts = [part.strip() for part in rest.split(",")]
    times = [part for part in parts if ":" in part]
    days = [part for part in parts if ":" not in part]
    if len(times) > 1 or len(days) > 1:
        raise BadInput(
            f"--shift {word!r} has more than a day and a time.", "As K08=2027-01-27,14:00."
        )
    on = parse_day(days[0], where="--shift") if days else None
    return Shift(number, on, parse_time(times[0], where="--shift") if times else None)


def _booked(word: str) -> Extra:
    from stockroom.measure.days import parse_day, parse_time
    from stockroom.service.what_if import Extra

    # by spaces as well, as it is said aloud; a title with spaces wants the commas
    parts = [part.strip() for part in (word.split(",") if "," in word else word.split())]
    parts = [part for part in parts if part and part not in ("group", "groups")]
    if not 3 <= len(parts) <= 5:
        raise BadInput(
            f"--book {word!r} is not a recipe, a day and groups.",
            "Write it as --book R01,2027-02-11,12, or with 09:15,CH behind it.",
        )
    recipe, day, count, *rest = parts
    times = [part for part in rest if ":" in part]
    payers = [part for part in rest if ":" not in part]
    if len(times) > 1 or len(payers) > 1:
        raise BadInput(f"--book {word!r} ends with {rest}.", "One time and one department may.")
    number = whole(count.removesuffix("groups").strip(), "--book")
    minute = parse_time(times[0], where="--book") if times else None
    return Extra(recipe, parse_day(day, where="--book"), number, minute, "".join(payers))
