"""Labels for bottles, one to a page or on sheets of them."""

from __future__ import annotations

import contextlib
import io
import sys
from collections.abc import Callable, Iterator
from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.make_numbers import numbers_before
from stockroom.cli.paper import Paper, Print, paper_of, put_out
from stockroom.cli.printing import tell
from stockroom.cli.shared import Shared, of
from stockroom.errors import BadInput
from stockroom.service.typed import day_or_none

if TYPE_CHECKING:
    from stockroom.reports.paper.label import Sort
    from stockroom.reports.paper.label_set import Wish

_WORTH_A_BAR = 20
"""Labels from which on a bar is shown. Our choice: fewer are there before it is read."""


What = Annotated[
    list[str] | None,
    typer.Argument(metavar="WHAT...", help="Bottles, makes (M14), names of things, or all."),
]
Place = Annotated[str, typer.Option(metavar="PLACE", help="All that stand there.")]
Opened = Annotated[bool, typer.Option("--opened", help="Strips: received, opened, use by.")]
Short = Annotated[bool, typer.Option("--short", help="For 125 cm³ or less.")]
Confirm = Annotated[
    bool, typer.Option("--confirm", help="With --short: you have read the list of classes.")
]
MadeOn = Annotated[
    str | None, typer.Option("--made-on", metavar="DATE", help="Of a make: its real day.")
]
Size = Annotated[
    str | None, typer.Option("--size", metavar="WxH", help="Of one label in mm: 70x37.")
]
Sheet = Annotated[
    str | None, typer.Option("--sheet", metavar="NxM", help="Labels across and down: 3x8.")
]
Margin = Annotated[
    str | None, typer.Option("--margin", metavar="LEFT,TOP", help="Of the sheet, in mm.")
]
Gap = Annotated[
    str | None, typer.Option("--gap", metavar="ACROSS,DOWN", help="Between labels, in mm.")
]
Start = Annotated[
    int, typer.Option("--start", metavar="N", help="The first free place of a used sheet.")
]


def label(
    ctx: typer.Context,
    what: What = None,
    place: Place = "",
    opened: Opened = False,
    short: Short = False,
    confirm: Confirm = False,
    made_on: MadeOn = None,
    size: Size = None,
    sheet: Sheet = None,
    margin: Margin = None,
    gap: Gap = None,
    start: Start = 1,
    to: Print = None,
    paper: Paper = "A4",
) -> None:
    """Labels: name in words, strength as known, dates, hazard text by strength, number, code.

    Example: stockroom label S02 S04 --sheet 3x8 --print labels.pdf
    """
    from stockroom.reports.paper.label_grid import check_fits, grid_of, size_of
    from stockroom.reports.paper.label_set import Wish

    sort = _sort(opened, short, confirm)
    each = size_of(size, _usual(sort))
    grid = grid_of(sheet, margin, gap, start)
    if grid:
        check_fits(grid, each, paper_of(paper))
    wish = Wish(sort, each, grid, day_or_none(made_on, "--made-on"), confirm)
    _check_made_on(made_on, what or [])
    _put_out(of(ctx), what or [], place, wish, to, paper)


def _put_out(
    shared: Shared, words: list[str], place: str, wish: Wish, to: str | None, paper: str
) -> None:
    from stockroom.reports.paper.label import LABEL, things_of
    from stockroom.reports.paper.label_set import labels_of
    from stockroom.service.labels import labelled

    with _bar() as step:
        found = labelled(shared.path, words, place, as_at=shared.today, step=step)
        house = (found.house, found.practice)
        labels = labels_of(house, shared.today, found.bottles, found.batches, found.places, wish)
        about = f"{wish.sort}: {' '.join([*words, place])}".strip()
        told = numbers_before(shared, things_of(labels))
        put_out(shared, LABEL, labels, about, to=to, paper=paper)
    for line in (*told, *(_of_the_print(wish, paper) if to is not None else ())):
        tell(line)


def _of_the_print(wish: Wish, paper: str) -> Iterator[str]:
    """What is worth knowing of labels that were just printed."""
    from stockroom.reports.paper.label_grid import EDGE, from_edge
    from stockroom.reports.paper.label_text import SMALL, small_words
    from stockroom.reports.typesetting import carried

    small = small_words([str(each) for each in carried("label", SMALL)], wish.sort, wish.size)
    if small:
        yield small
    if wish.grid and from_edge(wish.grid, wish.size, paper_of(paper)) < EDGE:
        yield (
            f"the outer labels lie within {EDGE:g} mm of the paper's edge, which many printers"
            " leave blank: print one sheet on plain paper first"
        )


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
