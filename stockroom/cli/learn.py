"""What the strengths found so far teach: learn."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show, show_done, width
from stockroom.cli.shared import of
from stockroom.cli.values import day_or_none, number_or_none, whole_or_none


def learn(
    ctx: typer.Context,
    name: Annotated[str, typer.Argument(metavar="LINE|BOTTLE", help="A stock line, or S02.")],
    order: Annotated[
        str | None,
        typer.Option(metavar="0|1|2", help="The order of the law; else that of its rule, else 1."),
    ] = None,
    to: Annotated[
        str | None,
        typer.Option(metavar="PERCENT", help="How much of the label must be left; else 90."),
    ] = None,
    since: Annotated[
        str | None,
        typer.Option(metavar="DATE", help="Leave out what was found of the bottle before."),
    ] = None,
    use: Annotated[
        bool, typer.Option("--use", help="Make the rate found the house's rule of fading.")
    ] = False,
    reason: Annotated[str, typer.Option("--why", help="With --use: why it is to be so.")] = "",
) -> None:
    """How fast it fades by its own checks, how sure that is, and how long it keeps.

    Example: stockroom learn "hydrogen peroxide 100 vol" --to 95
    """
    from stockroom.reports.learn_text import learn_json, learn_text
    from stockroom.service import learn as service
    from stockroom.service.database import is_practice

    shared = of(ctx)
    today, by, practice = shared.today, shared.initials, is_practice(shared.path)
    found = service.learn(
        shared.path,
        name,
        order=whole_or_none(order, "--order"),
        to=number_or_none(to, "--to"),
        since=day_or_none(since, "--since"),
        as_at=today,
    )
    if use:
        done = service.use(shared.path, found, why=reason, today=today, by=by)
        show_done(shared, done)
        return
    show(
        shared,
        lambda: learn_text(found, width(), by=by, practice=practice),
        lambda: learn_json(found, by=by, practice=practice),
    )
