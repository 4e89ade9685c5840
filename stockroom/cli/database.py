"""The store itself: demo, new, add, change."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from stockroom.cli.printing import show, show_done, suggest, tell, width
from stockroom.cli.shared import Shared, of
from stockroom.errors import BadInput
from stockroom.service.typed import column_and_value


def demo(ctx: typer.Context) -> None:
    """Make the practice store of an invented college and print its term plan.

    Example: stockroom demo
    """
    from stockroom.reports.json_plan import plan_json
    from stockroom.reports.plan_text import plan_text
    from stockroom.service.database import day_for, make_practice
    from stockroom.service.plan import term_plan
    from stockroom.settings import practice_store

    shared = of(ctx)
    path = practice_store(shared.store)
    kept = make_practice(path)
    answer = term_plan(path, as_at=day_for(path, shared.given_day))
    show(shared, lambda: plan_text(answer, width()), lambda: plan_json(answer))
    if kept is not None:
        tell(f"The earlier practice store is kept as {kept}.")
    # a house of one's own is opened before the practice one, so then the place must be said
    suggest(shared, "stockroom why K15", at=None if Shared().path == path else path)


def new(
    ctx: typer.Context,
    tables: Annotated[
        Path | None,
        typer.Option("--from", metavar="FOLDER", help="CSV tables, or what was handed out."),
    ] = None,
    starter: Annotated[
        bool, typer.Option("--starter", help="Fill it with common substances and stock lines.")
    ] = False,
) -> None:
    """Make an empty store, the starter house, or one filled from a folder of CSV tables.

    The starter house has no bottles: common substances, stock lines, methods and lives,
    each a starter value until the house says otherwise.

    Example: stockroom new --starter
    """
    from stockroom.service.database import new_store, starter_folder
    from stockroom.settings import own_store

    shared = of(ctx)
    if starter and tables is not None:
        raise BadInput(f"--starter or --from {tables}, not both.", "Add the other's rows later.")
    tables = starter_folder() if starter else tables
    show_done(shared, new_store(own_store(shared.store), tables=tables))


def add(
    ctx: typer.Context,
    table: Annotated[str, typer.Argument(metavar="TABLE", help="substances, lines, places...")],
    values: Annotated[
        list[str] | None, typer.Argument(metavar="COLUMN=VALUE", help="One for each column known.")
    ] = None,
    columns: Annotated[
        bool, typer.Option("--columns", help="Only list the columns of the table.")
    ] = False,
) -> None:
    """Add one row to a table of the house; --columns lists what it holds.

    Example: stockroom add places place=A5 name="acids, lower" temperature_c=19 --by T1
    """
    from stockroom.service import database

    shared = of(ctx)
    if columns:
        _show_columns(shared, table)
        return
    row = dict(column_and_value(word) for word in values or [])
    show_done(shared, database.add_row(shared.path, table, row, by=shared.initials))


def _show_columns(shared: Shared, table: str) -> None:
    from stockroom.service.database import column_words, table_columns

    names, words = table_columns(table), column_words(table)
    size = max(len(name) for name in names)
    lines = [
        f"{name:{size}}  {', '.join(words[name])}" if name in words else name for name in names
    ]
    show(
        shared,
        lambda: "\n".join(lines),
        lambda: {"table": table, "columns": names, "words": words},
    )


def change(
    ctx: typer.Context,
    table: Annotated[str, typer.Argument(metavar="TABLE", help="places, departments, lines...")],
    key: Annotated[str, typer.Argument(metavar="KEY", help="Which row: its name or its code.")],
    values: Annotated[list[str], typer.Argument(metavar="COLUMN=VALUE", help="What it is now.")],
    reason: Annotated[str, typer.Option("--why", help="Why it is changed.")] = "",
) -> None:
    """Correct a row of a table; what stood there before stays on record.

    Levels, money left, temperatures, prices, lead times, names and notes: what no earlier
    entry leans on.

    Example: stockroom change departments CH left_gbp=50 --why "order of May" --by T1
    """
    from stockroom.service import database

    shared = of(ctx)
    row = dict(column_and_value(word) for word in values)
    done = database.change_row(
        shared.path, table, key, row, why=reason, today=shared.today, by=shared.initials
    )
    show_done(shared, done)
