"""Counting the shelves: the sheet to count by, the counts entered, and what came of them."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.paper import USUAL, Print, check_writable, form_of, paper_of, put_out
from stockroom.cli.printing import show, tell, width
from stockroom.cli.shared import Shared, of
from stockroom.cli.stock import Happened, when
from stockroom.errors import BadInput, NotAllowed

if TYPE_CHECKING:
    from datetime import date


WalkPaper = Annotated[
    str,
    typer.Option("--paper", metavar="A4|Letter|A5", help="The paper it is printed on."),
]
PAPERS = (*USUAL, "A5")
"""A walk is carried in a pocket, so its sheet may be small."""


def walk(
    ctx: typer.Context,
    name: Annotated[
        str, typer.Argument(metavar="NAME", help='The round: "Jan-A2". Without one: every walk.')
    ] = "",
    places: Annotated[
        str, typer.Option(metavar="A1,A2", help="Along these only; else along every shelf.")
    ] = "",
    enter: Annotated[
        bool, typer.Option("--enter", help="Enter counts, a line each: B06 640 g.")
    ] = False,
    file: Annotated[
        str, typer.Option(metavar="FILE", help="Enter the counts written in a file.")
    ] = "",
    again: Annotated[
        bool, typer.Option("--again", help="Bottles counted on this walk already too.")
    ] = False,
    end: Annotated[
        bool, typer.Option("--end", help="It is finished; tell what came of it.")
    ] = False,
    on: Happened = None,
    to: Print = None,
    paper: WalkPaper = "A4",
) -> None:
    """Count the shelves: start a round or take it up again, print its sheet, enter counts.

    Each line is saved as it is entered, so a round may stop anywhere and go on later.

    Example: stockroom walk Jan-A2 --places A2 --by T2
    """
    shared = of(ctx)
    counts = enter or bool(file)
    _check_asked(name, places, under_way=counts or end)
    _check_printed(name, to, paper, under_way=counts or end)
    if not name.strip():
        _list(shared)
        return
    if counts:
        _enter(shared, name, file, again=again, ending=end, on=on)
    elif end:
        _end(shared, name, on)
    else:
        _start(shared, name, places, on)
        if to is None:
            _print(shared, name, shared.today, again=again)
        else:
            _to_paper(shared, name, to, paper, again=again)


def _check_asked(name: str, places: str, *, under_way: bool) -> None:
    """Pass when what is asked of a walk goes together. Raises: BadInput."""
    if not name.strip() and (places or under_way):
        raise BadInput("Which walk?", "Give its name: stockroom walk Jan-A2.")
    if places and under_way:
        raise BadInput(
            f"--places {places} with a walk under way?",
            f'They are chosen when it is started: stockroom walk "{name}" --places {places}.',
        )


def _check_printed(name: str, to: str | None, paper: str, *, under_way: bool) -> None:
    """Pass when what is to be printed is the sheet of one walk. Raises: BadInput."""
    if to is not None and (under_way or not name.strip()):
        raise BadInput(
            f"--print {to}: only the sheet to count by is printed.",
            f'Name the walk, without --enter and --end: stockroom walk "{name.strip() or "Jan"}"'
            f" --print {to}",
        )
    if to is not None:
        # before the walk is started: a mistyped name must leave nothing behind
        form_of(to)
        paper_of(paper, PAPERS)
        check_writable(Path(to))


def _enter(
    shared: Shared, name: str, file: str, *, again: bool, ending: bool, on: str | None
) -> None:
    from stockroom.cli.walk_entering import enter_counts

    if not enter_counts(shared, name, file, again=again, ending=ending, on=on):
        if ending:
            tell(f'The walk "{name}" is not ended, since lines were skipped.')
            tell(f'  Enter those again, then end it: stockroom walk "{name}" --end')
        raise typer.Exit(1)
    # as data the sitting holds the whole walk already
    if ending and not shared.json:
        _print(shared, name, shared.today)


def _list(shared: Shared) -> None:
    from stockroom.reports.json_walk import walks_json
    from stockroom.reports.walk_text import walks_text
    from stockroom.service.walk import sheets

    found = sheets(shared.path, on=shared.today)
    show(shared, lambda: walks_text(found, width()), lambda: walks_json(found))


def _start(shared: Shared, name: str, places: str, on: str | None) -> None:
    from stockroom.service.walk import sheet

    # asked first: to look at a round takes no initials, and writes nothing
    if places or sheet(shared.path, name, on=shared.today) is None:
        from stockroom.service.walk_entering import start

        along = tuple(part.strip() for part in places.split(",") if part.strip())
        # what comes next stands at the foot of the sheet, where it is read on paper too
        start(shared.path, name, places=along, **when(shared, on))


def _to_paper(shared: Shared, name: str, to: str, paper: str, *, again: bool) -> None:
    from stockroom.reports.paper.walk_sheet import WALK, walk_sheet_of
    from stockroom.service.walk import sheet, standing_wrong

    found = sheet(shared.path, name, on=shared.today, again=again)
    assert found is not None
    if found.walk.ended or not (found.again or found.to_count):
        raise NotAllowed(
            f'There is nothing to count on the walk "{found.walk.name}".',
            f'Read what came of it: stockroom walk "{found.walk.name}"',
        )
    wrong = standing_wrong(shared.path, found, on=shared.today)
    paper_sheet = walk_sheet_of(found, shared.today, wrong)
    about = found.walk.name
    put_out(shared, WALK, paper_sheet, about, to=to, paper=paper, papers=PAPERS)


def _print(shared: Shared, name: str, today: date, *, again: bool = False) -> None:
    from stockroom.reports.json_walk import walk_json
    from stockroom.reports.walk_text import walk_text
    from stockroom.service.walk import sheet

    found = sheet(shared.path, name, on=today, again=again)
    assert found is not None
    show(shared, lambda: walk_text(found, width()), lambda: walk_json(found))


def _end(shared: Shared, name: str, on: str | None) -> None:
    from stockroom.service.walk_entering import end

    end(shared.path, name, **when(shared, on))
    _print(shared, name, shared.today)
