"""The term's report, and the folder for whoever comes after."""

from __future__ import annotations

import contextlib
import os
import tempfile
from collections.abc import Iterator
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any, TypeVar

import typer

from stockroom.cli.paper import Paper, Print, held_against, numbered, paper_of, put_out
from stockroom.cli.printing import show
from stockroom.cli.shared import Shared, of
from stockroom.errors import BadInput, NotAllowed

if TYPE_CHECKING:
    from stockroom.reports.paper.kinds import Kind

A = TypeVar("A", bound=Any)

FILES = (
    ("start-here.pdf", "this"),
    ("start-here.txt", "the same as plain text, to copy the commands from"),
    ("week.pdf", "the week sheet of your first week"),
    ("strip.pdf", "the term at a glance, for the wall"),
    ("buying.pdf", "what to order, by when, and why"),
    ("buying.csv", "the same as a table for a spreadsheet"),
    ("report.pdf", "the term's report: use, waste, money, near misses"),
)
TEXT_WIDTH = 80


def report(
    ctx: typer.Context,
    term: Annotated[
        str | None,
        typer.Option("--term", metavar="NAME", help="Which term; else the one begun last."),
    ] = None,
    to: Print = None,
    paper: Paper = "A4",
) -> None:
    """The term's report: use, waste, money, near misses; five sentences, then the tables.

    Example: stockroom report --print report.pdf
    """
    from stockroom.reports.paper.term_report import REPORT, term_report_of
    from stockroom.service.term_report import term_entered, term_told

    shared = of(ctx)
    known, plan, left = term_told(shared.path, as_at=shared.today, term=term or "")
    sheet = term_report_of(known, plan, left, entered=term_entered(shared.path))
    put_out(shared, REPORT, sheet, known.start.isoformat(), to=to, paper=paper)


def handover(
    ctx: typer.Context,
    folder: Annotated[
        str | None, typer.Argument(metavar="[DIR]", help="A new folder; without, it is only shown.")
    ] = None,
    paper: Paper = "A4",
) -> None:
    """For whoever comes after: the first week's steps, the house and its reasons, in one folder.

    Example: stockroom handover for-my-successor
    """
    from stockroom.reports.files.handover import HANDOVER, handover_of
    from stockroom.reports.paper.week import monday_of
    from stockroom.service.handover import kept_of
    from stockroom.service.sheets import known_and_planned

    shared, size = of(ctx), paper_of(paper)
    monday = monday_of(None, shared.today)
    known, plan = known_and_planned(shared.path, as_at=shared.today)
    beside = kept_of(shared.path, shared.today)
    sheet = handover_of(known, plan, beside, monday, FILES)
    if folder is None:
        return put_out(shared, HANDOVER, sheet, "", to=None)
    printed: list[str] = []
    with _telling_numbers(printed), _folder_whole(Path(folder)) as into:
        pdf, copy = _printed(shared, HANDOVER, sheet, "", size, printed)
        (into / "start-here.pdf").write_bytes(pdf)
        text = HANDOVER.text(copy, TEXT_WIDTH)
        (into / "start-here.txt").write_text(f"{text}\n", encoding="utf-8")
        for name, content in _others(shared, size, known, plan, printed):
            (into / name).write_bytes(content)
    listing = [f"  {name}: {what}" for name, what in FILES]
    number = copy.head.copy
    show(
        shared,
        lambda: "\n".join([f"{folder}: the handover, start-here is copy {number}", *listing]),
        lambda: {"folder": folder, "copy": number, "files": [name for name, _ in FILES]},
    )


def _others(
    shared: Shared, size: str, known: Any, plan: Any, taken: list[str]
) -> Iterator[tuple[str, bytes]]:
    """The other sheets of the folder, each printed under a number of its own: `taken` has them."""
    from datetime import timedelta

    from stockroom.reports.files.csv_out import buying_csv
    from stockroom.reports.paper.buying_sheet import BUYING, buying_sheet_of
    from stockroom.reports.paper.strip import STRIP, strip_of
    from stockroom.reports.paper.term_report import REPORT, term_report_of
    from stockroom.reports.paper.week import WEEK, monday_of, week_of
    from stockroom.service.closures import why_closed
    from stockroom.service.sheets import known_and_planned
    from stockroom.service.term_report import term_entered, term_told

    about = known.start.isoformat()
    yield "strip.pdf", _printed(shared, STRIP, strip_of(known, plan), about, size, taken)[0]
    yield "buying.pdf", _printed(shared, BUYING, buying_sheet_of(plan), about, size, taken)[0]
    yield "buying.csv", buying_csv(plan)
    monday = monday_of(None, shared.today)
    sunday = monday + timedelta(days=6)
    seen = known_and_planned(shared.path, as_at=shared.today, through=sunday)
    week = week_of(*seen, monday, why_closed(shared.path, monday, sunday))
    yield "week.pdf", _printed(shared, WEEK, week, monday.isoformat(), size, taken)[0]
    # of the term begun last, which may be over
    of_term, its_plan, left = term_told(shared.path, as_at=shared.today)
    told = term_report_of(of_term, its_plan, left, entered=term_entered(shared.path))
    begun = of_term.start.isoformat()
    yield "report.pdf", _printed(shared, REPORT, told, begun, size, taken)[0]


def _printed(
    shared: Shared, kind: Kind[A], sheet: A, about: str, size: str, taken: list[str]
) -> tuple[bytes, A]:
    """A sheet as PDF under the next copy's number, which `taken` is told of."""
    from stockroom.reports.typesetting import typeset

    copy = numbered(shared, kind, held_against(shared, kind, sheet, about), about)
    taken.append(copy.head.copy)
    return typeset(kind.name, kind.data(copy), paper=size, on=copy.head.as_at)[0], copy


@contextlib.contextmanager
def _telling_numbers(taken: list[str]) -> Iterator[None]:
    """Says of a folder that could not be written which numbers its sheets had been given."""
    try:
        yield
    except NotAllowed as trouble:
        if not taken:
            raise
        were = f"Copies {taken[0]} to {taken[-1]} were" if taken[1:] else f"Copy {taken[0]} was"
        raise NotAllowed(
            f"{were} numbered and not written. {trouble.message}", trouble.hint
        ) from trouble


@contextlib.contextmanager
def _folder_whole(target: Path) -> Iterator[Path]:
    """A folder to write in that becomes `target` when all is written; else nothing is left.

    Raises: BadInput for one that is there and not empty, or has no folder around it;
    NotAllowed where nothing can be written.
    """
    if target.exists() and (not target.is_dir() or any(target.iterdir())):
        raise BadInput(f"{target} is there already, and not empty.", "Name a new folder.")
    around = target.absolute().parent
    if not around.is_dir():
        raise BadInput(f"{target}: there is no folder {around}.", "Make it first.")
    try:
        with tempfile.TemporaryDirectory(dir=around, prefix=".handing-over-") as beside:
            fresh = Path(beside) / "folder"
            fresh.mkdir()
            yield fresh
            if target.is_dir():
                target.rmdir()
            os.replace(fresh, target)
    except OSError as trouble:
        raise NotAllowed(
            f"{target} cannot be written: {trouble.strerror or trouble}.",
            "Nothing was left there; name a folder where you may write.",
        ) from trouble
