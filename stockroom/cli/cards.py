"""The make cards."""

from __future__ import annotations

from datetime import timedelta
from typing import Annotated

import typer

from stockroom.cli.make_numbers import numbers_before
from stockroom.cli.paper import Paper, Print, put_out
from stockroom.cli.printing import tell
from stockroom.cli.shared import of
from stockroom.errors import BadInput
from stockroom.service.typed import day_or_none


def card(
    ctx: typer.Context,
    makes: Annotated[
        list[str] | None,
        typer.Argument(metavar="[MAKE|BOOKING]...", help="M14; or K08: all that is made for it."),
    ] = None,
    on: Annotated[
        str | None, typer.Option("--on", metavar="DATE", help="All makes worked on that day.")
    ] = None,
    week: Annotated[
        str | None, typer.Option("--week", metavar="DATE", help="All of the week of that day.")
    ] = None,
    to: Print = None,
    paper: Paper = "A4",
) -> None:
    """The make card: what to take large, the steps in order, blanks for what was weighed.

    Example: stockroom card M14 --print card.pdf
    """
    from stockroom.reports.paper.card import cards_of
    from stockroom.reports.paper.card_text import CARD
    from stockroom.service.cards import hazards_for, makes_between, makes_named

    shared = of(ctx)
    if sum(map(bool, (makes, on, week))) != 1:
        raise BadInput(
            "Which card? Name makes, or one day with --on, or one week with --week.",
            "stockroom card M01, or stockroom card --on 2027-01-26",
        )
    first = last = day_or_none(on, "--on") or day_or_none(week, "--week") or shared.today
    if week:
        first -= timedelta(days=first.weekday())
        last = first + timedelta(days=6)
    if makes:
        found, asked = makes_named(shared.path, makes, as_at=shared.today), ", ".join(makes)
    else:
        found = makes_between(shared.path, first, last, as_at=shared.today)
        asked = f"{first.isoformat()} to {last.isoformat()}" if week else first.isoformat()
    hazards = hazards_for(shared.path, found.plan, found.makes)
    sheet = cards_of(
        found.known, found.plan, found.makes, hazards, f"for {asked}: nothing to make up"
    )
    about = sheet.about if makes else asked
    typed = {each.strip().upper() for each in makes or []}
    named = {each.number: each.name for each in sheet.cards if each.number in typed}
    told = numbers_before(shared, named)
    put_out(shared, CARD, sheet, about or asked, to=to, paper=paper)
    for line in told:
        tell(line)
