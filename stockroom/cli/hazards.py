"""What something does to skin, eyes, fire and water at its strength; a supplier's text kept."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show, show_done, width
from stockroom.cli.shared import Shared, of
from stockroom.errors import BadInput


def hazards(
    ctx: typer.Context,
    what: Annotated[
        str, typer.Argument(metavar="NAME|BOTTLE|LINE", help="A bottle, a line or a substance.")
    ],
    strength: Annotated[
        str | None, typer.Argument(metavar="STRENGTH", help='Of a substance: "0.5 mol/dm3".')
    ] = None,
    text: Annotated[
        str, typer.Option(help='What the supplier\'s sheet says: "H314 ...". Kept from now on.')
    ] = "",
    sheet: Annotated[str, typer.Option(help='Whose sheet: "supplier, date".')] = "",
    signal: Annotated[str, typer.Option(metavar="danger|warning|none", help="Its word.")] = "",
    why: Annotated[str, typer.Option(help="Why it is entered.")] = "",
) -> None:
    """Hazard and precautionary statements at a strength, with the limit that decides.

    A starting point: the supplier's sheet comes first, and its text is kept with --text.

    Example: stockroom hazards "sodium hydroxide" "0.5 mol/dm3"
    """
    shared = of(ctx)
    if text:
        _keep(shared, what, strength, text=text, sheet=sheet, signal=signal, why=why)
        return
    if sheet or signal or why:
        raise BadInput(f"{what}: what does the sheet say?", 'Add --text "H314 ...".')
    from stockroom.reports.hazards_text import hazards_json, hazards_text
    from stockroom.service.hazards import hazards_of

    answer = hazards_of(shared.path, what, strength, as_at=shared.given_day)
    show(shared, lambda: hazards_text(answer, width()), lambda: hazards_json(answer))


def _keep(
    shared: Shared, what: str, strength: str | None, *, text: str, sheet: str, signal: str, why: str
) -> None:
    from stockroom.service.hazards import enter_text

    line = f"{what} {strength}" if strength else what
    done = enter_text(
        shared.path,
        line,
        text=text,
        signal=signal,
        sheet=sheet,
        why=why,
        today=shared.today,
        by=shared.initials,
    )
    show_done(shared, done)
