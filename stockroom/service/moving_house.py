"""Move a store from its file to a server: copied, compared, and only then said to be done."""

from __future__ import annotations

from datetime import date
from pathlib import Path

from stockroom.errors import BadInput, StockroomError, StoreTrouble
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.service.answers import Done
from stockroom.service.database import is_practice
from stockroom.service.known import known_from
from stockroom.service.replayed import replayed_plan
from stockroom.settings import Server, StoreAt, store_at
from stockroom.store.reading import Reader


def move_house(path: StoreAt, address: str, *, as_at: date) -> Done:
    """Copy the store in a file into an empty database on a server, and prove the copy.

    Compared are every table row by row, what each bottle holds, and the plan as at a day.
    The file stays as it was.

    Raises: BadInput when the address is no server's; StoreTrouble when the database is not
    empty, cannot be written, or would differ: then nothing is on the server.
    """
    server = store_at(address)
    if not isinstance(server, Server):
        raise BadInput(
            f"{address} is not the address of a server.",
            "Write it as postgresql+psycopg://user@host:port/name.",
        )
    if not isinstance(path, Path):
        raise BadInput(
            f"{path} stands on a server already.",
            "From there: stockroom hand-out FOLDER, then stockroom new --from FOLDER.",
        )
    from stockroom.store.server_moving import move

    moved = move(path, server, lambda file, copy: _same_plan(file, copy, as_at))
    filled = sum(1 for rows in moved.rows.values() if rows)
    return Done(
        f"Moved {path} to {server}: {sum(moved.rows.values())} rows in {filled} tables,"
        f" {moved.rows['entry']} entries up to number {moved.last_entry}.",
        next="stockroom plan",
        practice=is_practice(server),
        details=(
            "Compared, and the same: every table row by row, what each bottle holds, the plan"
            f" as at {as_at.isoformat()}.",
            f"{path} is as it was. From now on name the server, with --store or STOCKROOM_STORE,"
            " and put the file where nobody enters in it by habit.",
        ),
    )


def _same_plan(file: Reader, copy: Reader, as_at: date) -> None:
    known, there = known_from(file, as_at), known_from(copy, as_at)
    if known != there or _plan(known) != _plan(there):
        raise StoreTrouble(
            f"The plan as at {as_at} would be another on the server; nothing was moved.",
            "Report it with a copy of the store: the fault is in the program.",
        )


def _plan(known: Facts) -> Plan | str:
    try:
        return replayed_plan(known)
    except StockroomError as refusal:
        # a house that cannot be planned yet can be moved all the same
        return refusal.message
