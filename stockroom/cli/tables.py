"""Answers written as a CSV table beside what is shown."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from stockroom.cli.paper import written_whole
from stockroom.cli.printing import show
from stockroom.cli.shared import Shared
from stockroom.errors import BadInput

Csv = Annotated[
    str | None, typer.Option("--csv", metavar="FILE", help="As a table for a spreadsheet: .csv.")
]
"""The option of an answer that can be a table."""

Bom = Annotated[
    bool, typer.Option("--bom", help="With --csv: begin with the mark some spreadsheets need.")
]
"""The option that goes with it."""


def write_table(shared: Shared, to: str, name: str, table: bytes, *, beside: bool = False) -> None:
    """Write an answer as a table; `name` is what it is a table of.

    `beside` a sheet that is printed too, whose data is then the answer for programs.

    Raises: BadInput for a file that cannot be; NotAllowed where nothing can be written.
    """
    target = Path(to)
    if target.suffix.lower() != ".csv":
        raise BadInput(f"--csv {to}: a table is written as .csv.", f"Name it {name}.csv.")
    with written_whole(target) as write:
        names = write([table])
    if not (beside and shared.json):
        show(shared, lambda: f"{names[0]}: {name} as a table", lambda: {"files": names})


def check_files(csv: str | None, *, bom: bool) -> None:
    """Raises: BadInput for --bom without a table it could stand in."""
    # what is left out without a word is taken to have been done
    if bom and csv is None:
        raise BadInput("--bom goes with --csv only, and there is none.", "Add --csv FILE.")
