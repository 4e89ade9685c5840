"""The house kept safe: everything out again, backups, and a backup put back."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.printing import show_done
from stockroom.cli.shared import of

if TYPE_CHECKING:
    from stockroom.service.hand_out import Everything


def hand_out(
    ctx: typer.Context,
    folder: Annotated[Path, typer.Argument(metavar="FOLDER", help="A folder not there yet.")],
) -> None:
    """Write everything out: each table as CSV, and a copy to be read without this program.

    stockroom new --from FOLDER builds the same store from it again.

    Example: stockroom hand-out everything-2027-01-04
    """
    from stockroom.service.hand_out import hand_out as hand_out_to

    shared = of(ctx)
    show_done(shared, hand_out_to(shared.path, folder, as_at=shared.today, words=_words))


def backup(
    ctx: typer.Context,
    folder: Annotated[
        Path | None, typer.Argument(metavar="[FOLDER]", help="Where; else backups, beside it.")
    ] = None,
) -> None:
    """Copy the store under a dated name, and prove the copy: opened, counted, compared.

    Earlier copies are never written over. A folder on another disc is a better place.

    Example: stockroom backup /media/stick
    """
    from stockroom.service.backup import backup as back_up

    shared = of(ctx)
    show_done(shared, back_up(shared.path, folder, today=shared.today, by=shared.initials))


def restore(
    ctx: typer.Context,
    file: Annotated[Path, typer.Argument(metavar="FILE", help="The backup to put back.")],
) -> None:
    """Put a backup in the place of the store; what stood there is kept under a dated name.

    The backup is checked first. What the store had and the backup has not is told.

    Example: stockroom restore backups/stockroom-2027-01-04.sqlite
    """
    from stockroom.service.restore import restore as put_back
    from stockroom.settings import own_store

    shared = of(ctx)
    done = put_back(
        own_store(shared.store), file, named=shared.store is not None, today=shared.given_day
    )
    show_done(shared, done)


def _words(told: Everything) -> Iterator[str]:
    from stockroom.reports.diary_text import diary_rows
    from stockroom.reports.house_text import house_text

    stories = ((each.bottle, each.line, diary_rows(each.entries)) for each in told.diaries)
    return house_text(told.known, told.bottles, stories, terms=told.terms, lists=told.lists)
