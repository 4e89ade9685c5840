"""The wall strip of the term."""

from __future__ import annotations

import typer

from stockroom.cli.paper import Paper, Print, put_out
from stockroom.cli.shared import of


def strip(ctx: typer.Context, to: Print = None, paper: Paper = "A4") -> None:
    """The term at a glance, one row a week, for the wall.

    Example: stockroom strip --print strip.pdf
    """
    from stockroom.reports.paper.strip import STRIP, strip_of
    from stockroom.service.sheets import known_and_planned

    shared = of(ctx)
    known, plan = known_and_planned(shared.path, as_at=shared.today)
    put_out(shared, STRIP, strip_of(known, plan), known.start.isoformat(), to=to, paper=paper)
