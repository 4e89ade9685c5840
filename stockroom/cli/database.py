"""The store itself: demo, new, add, change."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from stockroom.cli.printing import show, show_done, suggest, tell, width
from stockroom.cli.shared import Shared, of
from stockroom.errors import BadInput


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
    named = "" if Shared().path == path else f"--store {path} "
    suggest(f"stockroom {named}why K15")


def new(
    ctx: typer.Context,
    tables: Annotated[
        Path | None, typer.Option("--from", metavar="FOLDER", help="CSV tables to fill it with.")
    ] = None,
) -> None:
    """Make an empty store, or one filled from a folder of CSV tables.

    Example: stockroom new --from my_tables
    """
    from stockroom.service.database import new_store
    from stockroom.settings import own_store

    shared = of(ctx)
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
    row = dict(_column_and_value(word) for word in values or [])
    show_done(shared, database.add_row(shared.path, table, row, by=shared.initials))


def _column_and_value(word: str) -> tuple[str, str]:
    column, equals, value = word.partition("=")
    if not equals or not column:
        raise BadInput(f"{word!r} is not COLUMN=VALUE.", "Write it as place=A5.")
    return column.strip(), value.strip()


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
    row = dict(_column_and_value(word) for word in values)
    done = database.change_row(
        shared.path, table, key, row, why=reason, today=shared.today, by=shared.initials
    )
    show_done(shared, done)
