"""Sheets put out: read on the screen, as data, or printed to a file under a copy's number."""

from __future__ import annotations

import contextlib
import os
import tempfile
from collections.abc import Callable, Iterator, Sequence
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any, TypeVar

import typer

from stockroom.cli.printing import show, suggest, width
from stockroom.cli.shared import Shared
from stockroom.errors import BadInput, NotAllowed

if TYPE_CHECKING:
    from stockroom.reports.paper.kinds import Kind

Print = Annotated[
    str | None,
    typer.Option("--print", metavar="FILE", help="To paper: .pdf; or .svg, .png to look at."),
]
"""The option of every sheet that can be printed."""

Paper = Annotated[
    str, typer.Option("--paper", metavar="A4|Letter", help="The paper it is printed on.")
]
"""The option that goes with it."""

A = TypeVar("A", bound=Any)


def put_out(
    shared: Shared,
    kind: Kind[A],
    sheet: A,
    about: str,
    *,
    to: str | None,
    paper: str = "A4",
) -> None:
    """Show a sheet, or print it to the file named `to` under the next copy's number.

    `about` tells one sheet of its kind from another: a Monday, a booking, a make. Either way
    what it says otherwise than the copy printed last of the same is marked.
    Raises: BadInput for a file or paper that cannot be; NotAllowed where nothing can be written.
    """
    from stockroom.reports.paper.data import as_data
    from stockroom.reports.paper.head import since
    from stockroom.service.copies import copy_before, number_copy

    before, lines = copy_before(shared.path, kind.name, about), kind.lines(sheet)
    if before is not None and before.lines:
        told = since(before.number, before.lines, lines, sheet.head.as_at)
        sheet = replace(sheet, head=replace(sheet.head, since=told))
    if to is None:
        show(shared, lambda: kind.text(sheet, width()), lambda: as_data(sheet))
        return
    from stockroom.reports.typesetting import typeset

    target, form, size = Path(to), form_of(to), paper_of(paper)
    with written_whole(target) as write:
        number = number_copy(
            shared.path,
            kind.name,
            about,
            lines,
            as_at=sheet.head.as_at,
            by=shared.given_initials,
        )
        printed = replace(sheet, head=replace(sheet.head, copy=number))
        pages = typeset(kind.name, kind.data(printed), form=form, paper=size, on=sheet.head.as_at)
        names = write(pages)
    show(
        shared,
        lambda: f"{', '.join(names)}: {sheet.head.title}, copy {number}",
        lambda: as_data(printed) | {"files": names},
    )


def form_of(to: str) -> str:
    """The form a file's name asks for. Raises: BadInput for one no sheet can be written as."""
    from stockroom.reports.typesetting import FORMATS

    form = Path(to).suffix.lstrip(".").lower()
    if form not in FORMATS:
        raise BadInput(
            f"--print {to}: a sheet is written as .pdf, .svg or .png.",
            f"Name it so: --print {Path(to).stem or 'sheet'}.pdf",
        )
    return form


def paper_of(paper: str) -> str:
    """The paper named, in its usual spelling. Raises: BadInput for another."""
    from stockroom.reports.typesetting import PAPERS

    for name in PAPERS:
        if name.lower() == paper.strip().lower():
            return name
    raise BadInput(f"--paper {paper}: there is no such paper here.", "Write A4 or Letter.")


def page_names(target: Path, count: int) -> list[Path]:
    """The file of each page: the one named, or NAME-1, NAME-2... where there are several."""
    if count == 1:
        return [target]
    return [target.with_name(f"{target.stem}-{n}{target.suffix}") for n in range(1, count + 1)]


@contextlib.contextmanager
def written_whole(target: Path) -> Iterator[Callable[[Sequence[bytes]], list[str]]]:
    """A writer of the file `target`, or of one for each page beside it; whole or not at all.

    The folder is tried before the block begins, so that what the block does, taking a number,
    is not done for a file that could never be written.
    Raises: BadInput for a folder that is not there; NotAllowed where nothing can be written.
    """
    folder = target.parent
    if not folder.is_dir():
        raise BadInput(f"{target}: there is no folder {folder}.", "Make it first, or name another.")
    if target.is_dir():
        raise BadInput(f"{target} is a folder.", "Name a file in it.")
    try:
        with tempfile.TemporaryDirectory(dir=folder, prefix=".printing-") as beside:

            def write(pages: Sequence[bytes]) -> list[str]:
                names = page_names(target, len(pages))
                for name, page in zip(names, pages, strict=True):
                    fresh = Path(beside) / name.name
                    fresh.write_bytes(page)
                for name in names:
                    os.replace(Path(beside) / name.name, name)
                return [str(name) for name in names]

            yield write
    except OSError as trouble:
        raise NotAllowed(
            f"{target} cannot be written: {trouble.strerror or trouble}.",
            "Nothing was printed; name a file where you may write.",
        ) from trouble


def next_step(shared: Shared, command: str) -> None:
    """What usually follows, told only to a person reading text."""
    if not shared.json:
        suggest(shared, command)
