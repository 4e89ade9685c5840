"""Pictures: how a bottle fades, how full the days are, how a stock runs down."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any

import typer

from stockroom.cli.paper import Paper, Print, form_of, paper_of, put_out, written_whole
from stockroom.cli.printing import show
from stockroom.cli.shared import Shared, of
from stockroom.errors import BadInput

if TYPE_CHECKING:
    from stockroom.reports.paper.kinds import Kind

What = Annotated[str, typer.Argument(metavar="fade|load|level", help="Which picture.")]
Name = Annotated[
    str, typer.Argument(metavar="[NAME]", help="Of which bottle; of which stock line.")
]
Below = Annotated[
    list[str] | None,
    typer.Option(metavar="STRENGTH", help="With fade: a strength to mark, as often as you like."),
]


def picture(
    ctx: typer.Context,
    what: What,
    name: Name = "",
    below: Below = None,
    to: Print = None,
    paper: Paper = "A4",
) -> None:
    """How a bottle fades, how full the days are, how a stock runs down; in words, or drawn.

    As .svg or .png it is the picture alone; as .pdf a page with head, foot and copy number.

    Example: stockroom picture fade B01 --below "80 vol" --print fade.svg
    """
    shared = of(ctx)
    makers = {"fade": _fade, "load": _load, "level": _level}
    wanted = what.strip().lower()
    if wanted not in makers:
        raise BadInput(f'"{what}" is no picture: fade, load or level.', "stockroom picture load")
    if wanted != "load" and not name.strip():
        missing = {"fade": "which bottle? B01", "level": 'which stock line? "potassium iodide"'}
        question, _, example = missing[wanted].partition("? ")
        raise BadInput(f"picture {wanted}: {question}?", f"stockroom picture {wanted} {example}")
    if wanted == "load" and name.strip():
        raise BadInput(f'picture load is of the whole term, and "{name}" was named.', "Leave it.")
    if below and wanted != "fade":
        raise BadInput(f"--below {below[0]!r} is of a bottle that fades.", "picture fade BOTTLE")
    makers[wanted](shared, name, tuple(below or ()), to, paper)


def _fade(shared: Shared, name: str, below: tuple[str, ...], to: str | None, paper: str) -> None:
    from stockroom.reports.pictures.fade import fade_of
    from stockroom.reports.pictures.fade_words import FADE, fade_picture
    from stockroom.service.pictures import bottle_fading

    fade = fade_of(*bottle_fading(shared.path, name, as_at=shared.today, below=below))
    _put(shared, FADE, fade, f"fade {fade.bottle}", to, paper, fade_picture)


def _load(shared: Shared, _name: str, _below: tuple[str, ...], to: str | None, paper: str) -> None:
    from stockroom.reports.pictures.load import LOAD, load_of, load_picture
    from stockroom.service.sheets import known_and_planned

    load = load_of(*known_and_planned(shared.path, as_at=shared.today))
    _put(shared, LOAD, load, "load", to, paper, load_picture)


def _level(shared: Shared, name: str, _below: tuple[str, ...], to: str | None, paper: str) -> None:
    from stockroom.reports.pictures.level import LEVEL, level_of, level_picture
    from stockroom.service.pictures import line_running

    level = level_of(*line_running(shared.path, name, as_at=shared.today))
    _put(shared, LEVEL, level, f"level {level.line}", to, paper, level_picture)


def _put(
    shared: Shared,
    kind: Kind[Any],
    sheet: Any,
    about: str,
    to: str | None,
    paper: str,
    picture_of: Callable[..., bytes],
) -> None:
    """Show it or print it; a bare picture is no sheet, so it takes no copy number."""
    form = "" if to is None else form_of(to)
    if to is None or form == "pdf":
        put_out(shared, kind, sheet, about, to=to, paper=paper)
        return
    from stockroom.reports.paper.data import as_data

    paper_of(paper)
    with written_whole(Path(to)) as write:
        names = write([picture_of(sheet, form=form, bare=True)])
    show(
        shared,
        lambda: f"{', '.join(names)}: {sheet.head.title}",
        lambda: as_data(sheet) | {"files": names},
    )
