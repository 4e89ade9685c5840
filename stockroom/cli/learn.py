"""What the strengths found and the draws entered so far teach: learn."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show, show_done, width
from stockroom.cli.shared import Shared, of
from stockroom.errors import BadInput
from stockroom.service.typed import day_or_none, number_or_none, whole_or_none


def learn(
    ctx: typer.Context,
    name: Annotated[
        str | None,
        typer.Argument(metavar="LINE|BOTTLE|RECIPE", help="A stock line, S02, or R04."),
    ] = None,
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
    spare: Annotated[
        bool,
        typer.Option("--spare", help="The spare its classes would have needed; of all, unnamed."),
    ] = False,
) -> None:
    """How fast it fades by its own checks, how long it keeps; of a recipe, what its classes drew.

    Example: stockroom learn "hydrogen peroxide 100 vol" --to 95
    """
    from stockroom.reports.learn_text import learn_json, learn_text
    from stockroom.service import learn as service
    from stockroom.service.database import is_practice

    shared = of(ctx)
    if spare or _is_recipe(shared, name):
        _refuse_beside(order=order, to=to, since=since, use=use, why=reason)
        _spare(shared, name or "")
        return
    if name is None:
        raise BadInput("Learn of what? Nothing was named.", "stockroom learn S02, or learn --spare")
    today, by, practice = shared.today, shared.given_initials, is_practice(shared.path)
    found = service.learn(
        shared.path,
        name,
        order=whole_or_none(order, "--order"),
        to=number_or_none(to, "--to"),
        since=day_or_none(since, "--since"),
        as_at=today,
    )
    if use:
        done = service.use(shared.path, found, why=reason, today=today, by=shared.initials)
        show_done(shared, done)
        return
    show(
        shared,
        lambda: learn_text(found, width(), by=by, practice=practice),
        lambda: learn_json(found, by=by, practice=practice),
    )


def _is_recipe(shared: Shared, name: str | None) -> bool:
    from stockroom.service.spare import is_recipe

    return bool(name) and is_recipe(shared.path, name or "")


def _refuse_beside(**options: object) -> None:
    """Pass unless an option about fading was given with a question about spare."""
    for option, value in options.items():
        if value:
            raise BadInput(
                f"--{option} is about strengths that fade, and this is about spare.",
                "Leave it out, or name a line or a bottle.",
            )


def _spare(shared: Shared, name: str) -> None:
    from stockroom.reports.spare_text import spare_json, spare_text
    from stockroom.service.database import is_practice
    from stockroom.service.spare import learn_spare

    today, practice = shared.today, is_practice(shared.path)
    found = learn_spare(shared.path, name, as_at=today)
    show(
        shared,
        lambda: spare_text(found, width(), as_at=today, practice=practice),
        lambda: spare_json(found, as_at=today, practice=practice),
    )
