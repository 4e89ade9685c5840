"""Values to paper: a template and its data, typeset by Typst to PDF, SVG or PNG.

Nothing is fetched, and no font of the machine takes part: the same data give the same sheet
everywhere. Data reach the template as JSON, so no text of theirs is ever read as markup.
"""

from __future__ import annotations

import json
from collections.abc import Mapping
from functools import cache
from typing import TYPE_CHECKING, Any

from stockroom.reports.shipped import TEMPLATES, font_folder

if TYPE_CHECKING:
    from datetime import date

    from typst import Compiler

FORMATS = ("pdf", "svg", "png")
"""What a sheet can be written as; the two pictures come one to a page."""

PAPERS = {"A4": "a4", "Letter": "us-letter", "A5": "a5"}
"""The papers sheets are made for, by the name people type."""

PREVIEW_PPI = 144.0
"""Dots to the inch of a PNG: fine enough to read on a screen."""


def typeset(
    template: str,
    data: Mapping[str, Any],
    *,
    form: str = "pdf",
    paper: str = "A4",
    on: date | None = None,
    ppi: float = PREVIEW_PPI,
) -> list[bytes]:
    """A template of `templates/` filled with data: a PDF whole, pictures one to a page.

    `paper` is a name of `PAPERS`. `on` dates the PDF; without it, a sheet carries no date.
    """
    inputs = {"data": json.dumps(data, ensure_ascii=False), "paper": PAPERS[paper]}
    inputs |= {} if on is None else {"dated": on.isoformat()}
    # never left out: the moment of printing would take its place
    moment = 0 if on is None else _noon(on)
    made = _compiler(template).compile(
        format=form,  # type: ignore[arg-type]
        ppi=ppi,
        sys_inputs=inputs,
        timestamp=moment,
    )
    assert made is not None
    return made if isinstance(made, list) else [made]


def carried(template: str, mark: str) -> list[Any]:
    """The values the sheet of that template typeset last carries under a mark, in their order.

    What only the typesetting finds out: how large a thing could be drawn. [] for none.
    """
    found: list[Any] = json.loads(_compiler(template).query(f"<{mark}>", field="value"))
    return found


@cache
def _compiler(template: str) -> Compiler:
    # made once: to read the fonts takes longer than to set a page
    import typst

    fonts = typst.Fonts(
        include_system_fonts=False, include_embedded_fonts=True, font_paths=_folders()
    )
    path = TEMPLATES / f"{template}.typ"
    return typst.Compiler(str(path), root=str(TEMPLATES), font_paths=fonts)


def _folders() -> list[str]:
    return [folder for folder in (font_folder(),) if folder]


def _noon(on: date) -> int:
    """A moment of that day for the file's own date: seconds since 1970, at noon UTC."""
    return (on.toordinal() - 719_163) * 86_400 + 43_200
