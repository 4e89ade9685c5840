"""The term for other programs: a calendar file, a workbook, and the note of the morning."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.paper import Paper, paper_of, written_whole
from stockroom.cli.printing import show, suggest, width
from stockroom.cli.shared import Shared, of
from stockroom.errors import BadInput, NotAllowed, StoreTrouble

if TYPE_CHECKING:
    from datetime import date

    from stockroom.reports.files.calendar import Calendar


def calendar(
    ctx: typer.Context,
    file: Annotated[
        str | None, typer.Argument(metavar="[FILE.ics]", help="Write it; else show the entries.")
    ] = None,
) -> None:
    """The term as a calendar file: bring it in again, and it updates and adds nothing twice.

    Example: stockroom calendar term.ics
    """
    from stockroom.reports.files.calendar import calendar_of, calendar_text
    from stockroom.reports.paper.data import as_data
    from stockroom.service.calendar import put_out_last
    from stockroom.service.sheets import known_and_planned

    shared = of(ctx)
    target = _named(file, ".ics", "term.ics") if file is not None else None
    known, plan = known_and_planned(shared.path, as_at=shared.today)
    number, before = put_out_last(shared.path, known.start)
    answer = calendar_of(known, plan, before, number)
    if target is not None:
        return _write_calendar(shared, target, known.start, answer)
    show(shared, lambda: calendar_text(answer, width()), lambda: as_data(answer))
    if not shared.json:
        suggest(shared, "stockroom calendar term.ics")


def _write_calendar(shared: Shared, target: Path, term: date, answer: Calendar) -> None:
    from stockroom.reports.files.calendar import calendar_lines, counts
    from stockroom.reports.files.calendar_ics import calendar_bytes
    from stockroom.reports.paper.data import as_data
    from stockroom.service.calendar import keep_put_out

    written = calendar_bytes(answer)
    with written_whole(target) as write:
        try:
            number = keep_put_out(
                shared.path, term, calendar_lines(answer),
                as_at=answer.head.as_at, by=shared.given_initials,
            )  # fmt: skip
        except StoreTrouble as trouble:
            raise NotAllowed(
                f"The entries cannot be kept, so no calendar was written. {trouble.message}",
                f"To read it on the screen, name no file. {trouble.hint}".strip(),
            ) from trouble
        names = write([written])
    said = f"{names[0]}: {counts(answer)}; copy {number}"
    practice = "PRACTICE\n" if answer.head.practice else ""
    show(shared, lambda: practice + said, lambda: as_data(answer) | {"files": names})


def workbook(
    ctx: typer.Context,
    file: Annotated[str, typer.Argument(metavar="FILE.xlsx", help="The file to write.")],
    paper: Paper = "A4",
) -> None:
    """The term as a workbook, a sheet for each subject: days as text, amounts as numbers.

    Example: stockroom workbook term.xlsx
    """
    from stockroom.reports.files.workbook import workbook_bytes
    from stockroom.reports.files.workbook_sheets import workbook_of
    from stockroom.reports.words import counted
    from stockroom.service.sheets import known_and_planned

    shared = of(ctx)
    target, size = _named(file, ".xlsx", "term.xlsx"), paper_of(paper)
    book = workbook_of(*known_and_planned(shared.path, as_at=shared.today))
    written = workbook_bytes(book, size)
    with written_whole(target) as write:
        names = write([written])
    rows = {sheet.name: len(sheet.rows) for sheet in book.sheets}
    practice = "PRACTICE\n" if book.practice else ""
    told = f"{practice}{names[0]}: {counted(len(rows), 'sheet')}, {sum(rows.values())} rows"
    data = {"practice": book.practice, "as_at": book.as_at.isoformat()}
    show(shared, lambda: told, lambda: data | {"files": names, "rows": rows})


def morning(
    ctx: typer.Context,
    quiet: Annotated[
        bool, typer.Option("--quiet-if-nothing", help="Print nothing when nothing is due.")
    ] = False,
) -> None:
    """What is due today, as plain text for a mailer; exit 1 when something is.

    Every morning at seven, by cron: 0 7 * * * stockroom morning --quiet-if-nothing

    Example: stockroom morning --quiet-if-nothing
    """
    from stockroom.reports.files.morning import morning_of, morning_text
    from stockroom.reports.paper.data import as_data
    from stockroom.service.sheets import known_and_planned

    shared = of(ctx)
    note = morning_of(*known_and_planned(shared.path, as_at=shared.today))
    if note.count or not quiet:
        show(shared, lambda: morning_text(note), lambda: as_data(note))
    raise typer.Exit(1 if note.count else 0)


def _named(file: str, ending: str, usual: str) -> Path:
    """The file to write. Raises: BadInput for a name with another ending."""
    target = Path(file)
    if target.suffix.lower() != ending:
        raise BadInput(f"{file}: this is written as {ending}.", f"Name it so: {usual}")
    return target
