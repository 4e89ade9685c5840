"""How a line keeps: rule."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show, show_done, width
from stockroom.cli.shared import of
from stockroom.service.typed import column_and_value


def rule(
    ctx: typer.Context,
    line: Annotated[str, typer.Argument(metavar="LINE", help='"sodium thiosulfate 0.100 mol/dm3"')],
    kind: Annotated[
        str, typer.Argument(metavar="RULE", help="life, recheck, look, fades...; none: show all.")
    ] = "",
    values: Annotated[
        list[str] | None, typer.Argument(metavar="COLUMN=VALUE", help='lasts="14 d", purpose=...')
    ] = None,
    withdraw: Annotated[
        bool, typer.Option("--withdraw", help="Take it out of use, with nothing in its place.")
    ] = False,
    reason: Annotated[str, typer.Option("--why", help="Why the house keeps it so.")] = "",
) -> None:
    """How a line keeps; with a rule and its cells, the house's own in the place of it.

    Example: stockroom rule "starch 0.5 % w/v" look lasts="5 d" --why "warm room" --by T1
    """
    from stockroom.reports.house_rules_text import rules_json, rules_text
    from stockroom.service import house_rules

    shared = of(ctx)
    if not kind:
        found = house_rules.keeping_of(shared.path, line)
        show(shared, lambda: rules_text(found, width()), lambda: rules_json(found))
        return
    cells = dict(column_and_value(word) for word in values or [])
    done = house_rules.set_rule(
        shared.path,
        line,
        kind,
        cells,
        withdraw=withdraw,
        why=reason,
        today=shared.today,
        by=shared.initials,
    )
    show_done(shared, done)
