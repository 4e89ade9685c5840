"""A place's logged temperatures: bring a logger's file in, or look at what is held."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.printing import show, suggest, width
from stockroom.cli.shared import Shared, of
from stockroom.errors import BadInput
from stockroom.service.typed import day_or_none, number_or_none

if TYPE_CHECKING:
    from stockroom.service.logger import Meant, Warmth

Place = Annotated[str, typer.Argument(metavar="PLACE", help="Where the logger stood: F1.")]
File = Annotated[
    Path | None, typer.Argument(metavar="FILE", help="Its table; none: show what is held.")
]
AcceptGaps = Annotated[
    bool, typer.Option("--accept-gaps", help="Take a file with stretches missing.")
]
Fahrenheit = Annotated[bool, typer.Option("--fahrenheit", help="The file is in °F: turn it.")]
Celsius = Annotated[bool, typer.Option("--celsius", help="A file that says no unit is in °C.")]
DayFirst = Annotated[
    bool | None,
    typer.Option("--day-first/--month-first", help="How 04/05 is meant.", show_default=False),
]
Heading = Annotated[
    str, typer.Option(metavar="HEADING", help="Which temperature, where there are several.")
]
From = Annotated[str | None, typer.Option("--from", metavar="DATE", help="From this day on.")]
To = Annotated[str | None, typer.Option("--to", metavar="DATE", help="Up to this day, included.")]
Energy = Annotated[
    str | None, typer.Option(metavar="KJ_MOL", help="For the mean kinetic one; else 83.144.")
]
TakeBack = Annotated[
    bool,
    typer.Option(
        "--take-back", help="These days' readings are another place's: out of use, kept on record."
    ),
]
Why = Annotated[str, typer.Option("--why", help="With --take-back: what was wrong.")]


def logger(
    ctx: typer.Context,
    place: Place,
    file: File = None,
    accept_gaps: AcceptGaps = False,
    fahrenheit: Fahrenheit = False,
    celsius: Celsius = False,
    day_first: DayFirst = None,
    column: Heading = "",
    first: From = None,
    last: To = None,
    ea: Energy = None,
    take_back: TakeBack = False,
    why: Why = "",
) -> None:
    """How warm a place really was: bring a logger's table in, or look at what is held.

    Bottles there then age by what was logged, and by the place's own temperature elsewhere.

    Example: stockroom logger F1 fridge.csv
    """
    from stockroom.service.logger import Meant

    shared, energy = of(ctx), number_or_none(ea, "--ea")
    if take_back:
        if file is not None:
            raise BadInput(
                f"--take-back goes by days, and not by {file}.",
                "Leave the file out, and say --from and --to.",
            )
        _take_back(shared, place, first, last, why)
        return
    if why:
        raise BadInput(f"--why {why!r} goes with --take-back.", "Leave --why out.")
    if file is None:
        _look(shared, place, first, last, energy)
        return
    if first or last:
        raise BadInput(f"--from and --to look, and {file} is brought in whole.", "Leave one out.")
    if fahrenheit and celsius:
        raise BadInput("--fahrenheit and --celsius: a file is in one unit.", "Give one of them.")
    scale = "F" if fahrenheit else "C" if celsius else ""
    _bring_in(shared, place, file, Meant(day_first, scale, column, accept_gaps), energy)


def _look(
    shared: Shared, place: str, first: str | None, last: str | None, energy: float | None
) -> None:
    from stockroom.service.logger import held

    start, end = day_or_none(first, "--from"), day_or_none(last, "--to")
    _show(shared, held(shared.path, place, start=start, end=end, energy=energy))


def _take_back(shared: Shared, place: str, first: str | None, last: str | None, why: str) -> None:
    from stockroom.service.logger import taken_back

    start, end = day_or_none(first, "--from"), day_or_none(last, "--to")
    if start is None or end is None:
        raise BadInput(
            f"From which day to which are the readings of {place} taken back?",
            f"Add --from and --to. What is held, and who brought it: stockroom logger {place}",
        )
    today, by = shared.today, shared.initials
    _show(shared, taken_back(shared.path, place, start, end, why=why, today=today, by=by))
    suggest(shared, f"stockroom logger {place}")


def _bring_in(shared: Shared, place: str, file: Path, meant: Meant, energy: float | None) -> None:
    from stockroom.service.logger import bring_in

    done = bring_in(
        shared.path,
        place,
        file,
        meant=meant,
        energy=energy,
        today=shared.today,
        by=shared.initials,
    )
    _show(shared, done)
    suggest(shared, f"stockroom logger {place}")


def _show(shared: Shared, warmth: Warmth) -> None:
    from stockroom.reports.logger_text import logger_json, logger_text

    show(shared, lambda: logger_text(warmth, width()), lambda: logger_json(warmth))
