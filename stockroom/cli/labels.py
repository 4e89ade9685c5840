"""Labels for bottles, one to a page or on sheets of them."""

from __future__ import annotations

import contextlib
import io
import sys
from collections.abc import Callable, Iterator
from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.paper import Paper, Print, paper_of, put_out
from stockroom.cli.shared import of
from stockroom.cli.values import day_or_none
from stockroom.errors import BadInput

if TYPE_CHECKING:
    from stockroom.reports.paper.label import Sort

_WORTH_A_BAR = 20
"""Labels from which on a bar is shown. Our choice: fewer are there before it is read."""


def label(
    ctx: typer.Context,
    what: Annotated[
        list[str] | None,
        typer.Argument(metavar="WHAT...", help="Bottles, makes (M14), names of things, or all."),
    ] = None,
    place: Annotated[str, typer.Option(metavar="PLACE", help="All that stand there.")] = "",
    opened: Annotated[
        bool, typer.Option("--opened", help="Strips: received, opened, use by.")
    ] = False,
    short: Annotated[bool, typer.Option("--short", help="For 125 cm³ or less.")] = False,
    confirm: Annotated[
        bool, typer.Option("--confirm", help="With --short: you have read the list of classes.")
    ] = False,
    made_on: Annotated[
        str | None, typer.Option("--made-on", metavar="DATE", help="Of a make: its real day.")
    ] = None,
    size: Annotated[
        str | None, typer.Option("--size", metavar="WxH", help="Of one label in mm: 70x37.")
    ] = None,
    sheet: Annotated[
        str | None, typer.Option("--sheet", metavar="NxM", help="Labels across and down: 3x8.")
    ] = None,
    margin: Annotated[
        str | None, typer.Option("--margin", metavar="LEFT,TOP", help="Of the sheet, in mm.")
    ] = None,
    gap: Annotated[
        str | None, typer.Option("--gap", metavar="ACROSS,DOWN", help="Between labels, in mm.")
    ] = None,
    start: Annotated[
        int, typer.Option("--start", metavar="N", help="The first free place of a used sheet.")
    ] = 1,
    to: Print = None,
    paper: Paper = "A4",
) -> None:
    """Labels: name in words, strength as known, dates, hazard text by strength, number, code.

    Example: stockroom label S02 S04 --sheet 3x8 --print labels.pdf
    """
    from stockroom.reports.paper.label import LABEL
    from stockroom.reports.paper.label_grid import check_fits, grid_of, size_of
    from stockroom.reports.paper.label_set import Wish, labels_of
    from stockroom.service.labels import labelled

    shared = of(ctx)
    sort = _sort(opened, short, confirm)
    each = size_of(size, _usual(sort))
    grid = grid_of(sheet, margin, gap, start, each)
    if grid:
        check_fits(grid, each, paper_of(paper))
    wish = Wish(sort, each, grid, day_or_none(made_on, "--made-on"), confirm)
    words = what or []
    _check_made_on(made_on, words)
    with _bar() as step:
        found = labelled(shared.path, words, place, as_at=shared.today, step=step)
        house = (found.house, found.practice)
        labels = labels_of(house, shared.today, found.bottles, found.batches, found.places, wish)
        about = f"{sort}: {' '.join([*words, place])}".strip()
        put_out(shared, LABEL, labels, about, to=to, paper=paper)


def _sort(opened: bool, short: bool, confirm: bool) -> Sort:
    from stockroom.reports.paper.label import Sort

    if opened and short:
        raise BadInput("--opened and --short: one or the other?", "Leave one out.")
    if confirm and not short:
        raise BadInput("--confirm: of what?", "It goes with --short.")
    return Sort.OPENED if opened else Sort.SHORT if short else Sort.FULL


def _usual(sort: Sort) -> tuple[float, float]:
    from stockroom.reports.paper.label_grid import FULL, SHORT, STRIP

    return {"opened": STRIP, "short": SHORT}.get(sort.value, FULL)


def _check_made_on(made_on: str | None, words: list[str]) -> None:
    if made_on and not any(word[:1] in "Mm" and word[1:].isdigit() for word in words):
        raise BadInput(f"--made-on {made_on}: of which make?", "Name one: M14.")


@contextlib.contextmanager
def _bar() -> Iterator[Callable[[int, int], None] | None]:
    """A bar on standard error while labels are made; none where nobody looks, or for a few.

    What is said meanwhile on standard output is kept until the bar is gone.
    """
    if sys.stderr is None or not sys.stderr.isatty():
        yield None
        return
    from rich.console import Console
    from rich.progress import BarColumn, Progress, TextColumn, TimeElapsedColumn

    said = io.StringIO()
    columns = (TextColumn("{task.description}"), BarColumn(), TimeElapsedColumn())
    with (
        Progress(
            *columns, console=Console(stderr=True), transient=True, redirect_stdout=False
        ) as bar,
        contextlib.redirect_stdout(said),
    ):
        reading = bar.add_task("reading", total=None, visible=False)

        def step(done: int, total: int) -> None:
            bar.update(reading, completed=done, total=total, visible=total >= _WORTH_A_BAR)
            if done == total >= _WORTH_A_BAR:
                # drawing has no steps that could be counted: its bar moves to and fro
                bar.update(reading, visible=False)
                bar.add_task(f"drawing {total} labels", total=None)

        yield step
    print(said.getvalue(), end="")
