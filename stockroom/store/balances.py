"""The whole shelf with what every bottle holds, read from the kept balances in one question."""

from __future__ import annotations

from stockroom.store.reading import Reader, Row


def balances(reader: Reader) -> list[Row]:
    """Every bottle that was ever there: its number, its line's key and kind, and `held`.

    `held` is in micro-units and as of now; empty ones and those that are gone hold 0. In the
    order the bottles were entered. What stood on an earlier day is a sum over the entries up
    to it, and is asked of the snapshot.
    """
    # rows and no values of ours: this is for the long lists, where making them is half the time
    return reader.ask(
        "SELECT number, line.key, line.kind, held FROM kept_balance"
        " JOIN bottle ON bottle.id = bottle_id JOIN line ON line.id = line_id ORDER BY bottle_id"
    )
