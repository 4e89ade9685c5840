"""What a server knows of a store kept there: its columns, its triggers, what points nowhere."""

from __future__ import annotations

from collections.abc import Iterator

from stockroom.store.columns import COLUMNS
from stockroom.store.reading import Reader


def columns(reader: Reader) -> dict[str, set[str]]:
    """The columns of every table there."""
    rows = reader.ask(
        "SELECT table_name, column_name FROM information_schema.columns"
        " WHERE table_schema = current_schema()"
    )
    found: dict[str, set[str]] = {}
    for table, column in rows:
        found.setdefault(str(table), set()).add(str(column))
    return found


def triggers(reader: Reader) -> Iterator[tuple[str, str, str]]:
    """Every trigger that is switched on: its name, its table, and what its function does."""
    for row in reader.ask(_TRIGGERS):
        yield str(row[0]), str(row[1]), f"{row[2]} {row[3]}"


# the kind of trigger is a sum of bits: 2 before, 4 insert, 8 delete, 16 update
_TRIGGERS = (
    "SELECT tgname, relname, tgtype, prosrc FROM pg_trigger"
    " JOIN pg_class ON pg_class.oid = tgrelid"
    " JOIN pg_namespace ON pg_namespace.oid = relnamespace"
    " JOIN pg_proc ON pg_proc.oid = tgfoid"
    " WHERE NOT tgisinternal AND tgenabled IN ('O', 'A') AND nspname = current_schema()"
)


def adrift(reader: Reader) -> Iterator[tuple[str, int, str]]:
    """Rows that point nowhere: table, row number, and the table they point to.

    A server refuses them, unless somebody told it not to look.
    """
    for table, column, parent, key in reader.ask(_LINKS):
        # names out of the server's own book, and not typed by a person
        # its row number, which stands first; a table without one is told by its key
        first = COLUMNS.get(str(table), (column,))[0]
        rows = reader.ask(
            f'SELECT child."{first}" FROM "{table}" child LEFT JOIN "{parent}" held'
            f' ON held."{key}" = child."{column}"'
            f' WHERE child."{column}" IS NOT NULL AND held."{key}" IS NULL'
        )
        for row in rows:
            yield str(table), int(row[0]), str(parent)


_LINKS = (
    "SELECT child.relname, own.attname, held.relname, theirs.attname"
    " FROM pg_constraint c"
    " JOIN pg_class child ON child.oid = c.conrelid"
    " JOIN pg_class held ON held.oid = c.confrelid"
    " JOIN pg_namespace s ON s.oid = c.connamespace"
    " JOIN pg_attribute own ON own.attrelid = c.conrelid AND own.attnum = c.conkey[1]"
    " JOIN pg_attribute theirs"
    " ON theirs.attrelid = c.confrelid AND theirs.attnum = c.confkey[1]"
    " WHERE c.contype = 'f' AND s.nspname = current_schema() ORDER BY 1, 2"
)
