"""The old spreadsheet: what its rows would become, and, once agreed, the bottles."""

from __future__ import annotations

import sys
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any

import typer

from stockroom.cli.printing import show, suggest, width
from stockroom.cli.shared import Shared, of

if TYPE_CHECKING:
    from stockroom.service.bring_in import BroughtIn, Meant, Progress


_File = Annotated[Path, typer.Argument(metavar="FILE", help="The list: .csv or .xlsx.")]
_Sheet = Annotated[str, typer.Option(metavar="NAME", help="The workbook's sheet.")]
_Column = Annotated[
    list[str] | None,
    typer.Option(metavar="HEADING=FIELD", help="What a column is; may be repeated."),
]
_Answer = Annotated[
    list[str] | None,
    typer.Option(metavar="KEY=VALUE", help="Settles a question; may be repeated."),
]
_Answers = Annotated[
    Path | None, typer.Option(metavar="FILE", help="A file of answers, one KEY=VALUE a line.")
]
_Encoding = Annotated[
    str, typer.Option(metavar="NAME", help="How its text is written; else found out.")
]
_Agree = Annotated[bool, typer.Option("--agree", help="Write the rows that nothing is open in.")]


def bring_in(
    ctx: typer.Context,
    file: _File,
    sheet: _Sheet = "",
    column: _Column = None,
    answer: _Answer = None,
    answers: _Answers = None,
    encoding: _Encoding = "",
    agree: _Agree = False,
) -> None:
    """Bring in the old spreadsheet: every row is shown first, and nothing written until agreed.

    Example: stockroom bring-in old.csv --answer dates=day-first
    """
    from stockroom.reports.bring_in_json import bring_in_json
    from stockroom.reports.bring_in_text import bring_in_text, next_command
    from stockroom.service.bring_in import meant

    shared = of(ctx)
    said = meant(
        sheet=sheet,
        encoding=encoding,
        columns=column or (),
        answers=answer or (),
        answers_in=answers,
    )
    done = _done(shared, file, said, agree=agree)
    outcome = {"agreed": done.agreed, "practice": done.practice}
    show(
        shared,
        lambda: bring_in_text(done.read, done.written, width(), **outcome),
        lambda: bring_in_json(done.read, done.written, **outcome),
    )
    more = bool(sheet or column or answer or answers or encoding)
    suggest(shared, next_command(done.read, str(file), agreed=done.agreed, more=more))
    if agree and done.waiting and not done.written:
        raise typer.Exit(1)


def _done(shared: Shared, file: Path, said: Meant, *, agree: bool) -> BroughtIn:
    from stockroom.service.bring_in import bring_in as written
    from stockroom.service.bring_in import look_at

    day = shared.today
    with _progress() as progress:
        if not agree:
            return look_at(shared.path, file, as_meant=said, today=day, progress=progress)
        return written(
            shared.path, file, as_meant=said, today=day, by=shared.initials, progress=progress
        )


@contextmanager
def _progress() -> Iterator[Progress | None]:
    """A bar on standard error while a long list is read; none where nobody watches."""
    if sys.stderr is None or not sys.stderr.isatty():
        yield None
        return
    from rich.console import Console
    from rich.progress import Progress as Bar

    # gone when it is done: what follows is the answer
    with Bar(console=Console(stderr=True), transient=True) as bar:
        tasks: dict[str, Any] = {}

        def told(what: str, done: int, whole: int) -> None:
            if what not in tasks:
                tasks[what] = bar.add_task(what, total=whole)
            bar.update(tasks[what], completed=done)

        yield told
