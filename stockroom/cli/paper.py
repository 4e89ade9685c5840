"""Sheets put out: read on the screen, as data, or printed to a file under a copy's number."""

from __future__ import annotations

import contextlib
import os
import re
import stat
import tempfile
from collections.abc import Callable, Iterator, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any, TypeVar

import typer

from stockroom.cli.printing import show, suggest, width
from stockroom.cli.shared import Shared
from stockroom.cli.whose import check_ours
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

USUAL = ("A4", "Letter")
"""The papers a sheet can be printed on, where it does not say otherwise."""

A = TypeVar("A", bound=Any)


def put_out(
    shared: Shared,
    kind: Kind[A],
    sheet: A,
    about: str,
    *,
    to: str | None,
    paper: str = "A4",
    papers: Sequence[str] = USUAL,
) -> None:
    """Show a sheet, or print it to the file named `to` under the next copy's number.

    `about` tells one sheet of its kind from another: a Monday, a booking, a make. Either way
    what it says otherwise than the copy printed last of the same is marked.
    Raises: BadInput for a file or paper that cannot be; NotAllowed where nothing can be written.
    """
    from stockroom.reports.paper.data import as_data

    form, size = form_of(to) if to is not None else "", paper_of(paper, papers)
    sheet = held_against(shared, kind, sheet, about)
    if to is None:
        show(shared, lambda: kind.text(sheet, width()), lambda: as_data(sheet))
        return
    with written_whole(Path(to)) as write:
        printed = numbered(shared, kind, sheet, about)
        names = _set_and_written(write, kind, printed, form, size)
    older = older_pages(Path(to), len(names))
    show(
        shared,
        lambda: _said_printed(names, f"{sheet.head.title}, copy {printed.head.copy}", older),
        lambda: as_data(printed) | {"files": names, "older": older},
    )


def held_against(shared: Shared, kind: Kind[A], sheet: A, about: str) -> A:
    """The sheet with what it says otherwise than the copy printed last of the same."""
    from stockroom.service.printing import held_against as held

    return held(shared.path, kind, sheet, about)


def numbered(shared: Shared, kind: Kind[A], sheet: A, about: str) -> A:
    """The sheet under the next copy's number, its lines kept.

    Raises: NotAllowed where none can be taken.
    """
    from stockroom.service.printing import numbered as with_number

    otherwise = "To read it on the screen, leave --print off."
    return with_number(
        shared.path, kind, sheet, about, by=shared.given_initials, otherwise=otherwise
    )


def _set_and_written(
    write: Callable[[Sequence[bytes]], list[str]], kind: Kind[A], printed: A, form: str, size: str
) -> list[str]:
    """Typeset it and write it. Raises: NotAllowed, naming the number that was taken for it."""
    from stockroom.reports.typesetting import typeset

    head = printed.head
    pages = typeset(kind.name, kind.data(printed), form=form, paper=size, on=head.as_at)
    try:
        return write(pages)
    except (BadInput, NotAllowed) as trouble:
        # the name of a further page, which is known only now
        raise NotAllowed(
            f"Copy {head.copy} was numbered and not written. {trouble.message}", trouble.hint
        ) from trouble
    except OSError as trouble:
        raise NotAllowed(
            f"Copy {head.copy} was numbered and not written: {trouble.strerror or trouble}.",
            "Make room or name another place, and print it anew: it gets the next number.",
        ) from trouble


def _said_printed(names: Sequence[str], what: str, older: Sequence[str]) -> str:
    said = f"{', '.join(names)}: {what}"
    if older:
        said += f"\nleft as they were, of an earlier print: {', '.join(older)}"
    return said


def form_of(to: str) -> str:
    """The form a file's name asks for. Raises: BadInput for one no sheet can be written as."""
    from stockroom.reports.typesetting import FORMATS

    form = Path(to).suffix.lstrip(".").lower()
    if form not in FORMATS:
        raise BadInput(
            f"--print {to}: a sheet is written as .pdf, .svg or .png.",
            f"Name it so: --print {Path(to).stem.strip('.') or 'sheet'}.pdf",
        )
    return form


def paper_of(paper: str, papers: Sequence[str] = USUAL) -> str:
    """The paper named, in its usual spelling. Raises: BadInput for another."""
    for name in papers:
        if name.lower() == paper.strip().lower():
            return name
    raise BadInput(
        f"--paper {paper}: this is not printed on that.", f"Write {' or '.join(papers)}."
    )


def page_names(target: Path, count: int) -> list[Path]:
    """The file of each page: the one named, or NAME-1, NAME-2... where there are several."""
    if count == 1:
        return [target]
    return [target.with_name(f"{target.stem}-{n}{target.suffix}") for n in range(1, count + 1)]


def older_pages(target: Path, count: int) -> list[str]:
    """Files beside it that look like pages of an earlier print and are none of this one.

    Only pictures come in several; nothing is removed, since a name tells not what is in it.
    """
    if target.suffix.lower() == ".pdf":
        return []
    page = re.compile(rf"{re.escape(target.stem)}-(\d+){re.escape(target.suffix)}")
    mine = {each.name for each in page_names(target, count)}
    found = {
        int(named[1]): each
        for each in target.parent.iterdir()
        if (named := page.fullmatch(each.name)) and each.name not in mine
    }
    alone = [target] if target.name not in mine and target.is_file() else []
    return [str(each) for each in (*alone, *(found[number] for number in sorted(found)))]


def check_writable(target: Path) -> None:
    """Pass where `written_whole` would begin: for what must not be done for a file in vain.

    Raises: BadInput for a folder that is not there; NotAllowed where nothing can be written.
    """
    with written_whole(target):
        pass


@contextlib.contextmanager
def written_whole(target: Path) -> Iterator[Callable[[Sequence[bytes]], list[str]]]:
    """A writer of the file `target`, or of one for each page beside it; whole or not at all.

    The folder and the name are tried before the block begins, so that what the block does,
    taking a number, is not done for a file that could never be written.
    Raises: BadInput for a folder that is not there; NotAllowed where nothing can be written,
    and for a file that is there and not of our making.
    """
    try:
        _check_target(target)
        check_ours(target)
        with tempfile.TemporaryDirectory(dir=target.parent, prefix=".printing-") as beside:
            _try_name(Path(beside), target)

            def write(pages: Sequence[bytes]) -> list[str]:
                names = page_names(target, len(pages))
                for name, page in zip(names, pages, strict=True):
                    _check_target(name)
                    check_ours(name, page)
                for name, page in zip(names, pages, strict=True):
                    fresh = Path(beside) / name.name
                    fresh.write_bytes(page)
                for name in names:
                    # where a name leads elsewhere, the file it leads to is the one to write
                    os.replace(Path(beside) / name.name, _led_to(name))
                return [str(name) for name in names]

            yield write
    except OSError as trouble:
        raise NotAllowed(
            f"{target} cannot be written: {trouble.strerror or trouble}.",
            "Nothing was written; name a file where you may write.",
        ) from trouble


def _check_target(target: Path) -> None:
    """Pass for a file that may be made or written over. Raises: BadInput, NotAllowed."""
    folder = target.parent
    if not folder.is_dir():
        raise BadInput(f"{target}: there is no folder {folder}.", "Make it first, or name another.")
    if target.is_dir():
        raise BadInput(f"{target} is a folder.", "Name a file in it.")
    if target.exists() and not target.is_file():
        raise BadInput(f"{target} is no file to write a sheet in.", "Name a file.")
    if target.exists() and not target.stat().st_mode & stat.S_IWUSR:
        # a rename would pass over what its owner meant
        raise NotAllowed(
            f"{target} may only be read.", "Nothing was written; name another, or make it writable."
        )


def _try_name(beside: Path, target: Path) -> None:
    # with a page number behind it, the longest it can become
    tried = beside / f"{target.stem}-999{target.suffix}"
    try:
        tried.touch()
    except ValueError as strange:
        # a null in it
        raise OSError(str(strange)) from strange
    tried.unlink()


def _led_to(name: Path) -> Path:
    return name.resolve() if name.is_symlink() else name


def next_step(shared: Shared, command: str) -> None:
    """What usually follows, told only to a person reading text."""
    if not shared.json:
        suggest(shared, command)
