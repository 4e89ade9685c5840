"""What goes wrong between us and a server, said in words a technician can act on.

Light: reading commands import this. A password is never in what is said.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from contextlib import contextmanager
from typing import TYPE_CHECKING, Any

from stockroom.errors import NotEnough, Refused, StoreTrouble
from stockroom.settings import Server

if TYPE_CHECKING:
    import psycopg

MODULE = "psycopg"


def no_driver(server: Server) -> StoreTrouble:
    """The error where the library that talks to a server is not installed."""
    return StoreTrouble(
        f"{server} is a server, and the driver for it is not installed.",
        "pip install 'stockroom[postgres]'",
    )


def no_address(server: Server) -> StoreTrouble:
    """The error for an address that cannot be taken apart."""
    return StoreTrouble(
        f"{server} cannot be read as the address of a server.",
        "Write postgresql+psycopg://user@host:port/name; %40 for an @ inside a password.",
    )


def nothing_there(server: Server) -> StoreTrouble:
    """The error for a database that is there and holds nothing yet."""
    return StoreTrouble(
        f"There is no store yet in {server}.",
        "Make one with `stockroom new`, or move one there with `stockroom move-house`.",
    )


def taken(server: Server, tables: set[str]) -> StoreTrouble:
    """The error for making a store where something stands."""
    listed = ", ".join(sorted(tables)[:3])
    return StoreTrouble(
        f"{server} is not empty: it holds {len(tables)} tables ({listed} …).",
        "Make an empty database for the store: createdb NAME.",
    )


def not_kept(server: Server) -> StoreTrouble:
    """The error for a connection lost while a saving was being confirmed."""
    return StoreTrouble(
        f"The connection to {server} was lost while it saved: whether it did is not known.",
        "Look before you enter it again: stockroom diary BOTTLE.",
    )


def in_words(error: psycopg.Error, server: Server) -> Refused:
    """The driver's error as one of ours, quoting the server it is about."""
    state, said = error.sqlstate, _first_line(error)
    # the two words our triggers begin with
    if said.startswith("NOTENOUGH"):
        return NotEnough("That is more than the bottle holds; nothing was saved.", "Count it.")
    if said.startswith("KEPT"):
        return StoreTrouble(said.removeprefix("KEPT "), "Add a new entry instead: put-right.")
    if state is None:
        return _unreached(said, server)
    for start, (words, hint) in _BY_STATE.items():
        if state.startswith(start):
            return StoreTrouble(words.format(server=server, said=said), hint)
    return StoreTrouble(f"The store {server} cannot be used: {said}.", "Nothing was saved.")


def _unreached(said: str, server: Server) -> StoreTrouble:
    # before there is a connection the driver has no state to tell, only the server's own text
    for mark, (words, hint) in _BY_TEXT.items():
        if re.search(mark, said):
            return StoreTrouble(words.format(server=server), hint)
    return StoreTrouble(
        f"{server} cannot be reached, or does not let us in: {said}.", "Nothing was saved."
    )


def _first_line(error: psycopg.Error) -> str:
    lines = [line.strip() for line in str(error).splitlines() if line.strip()]
    # where it failed says more than the advice the driver may put before it
    fatal = [line for line in lines if "FATAL" in line]
    return (fatal or lines or [type(error).__name__])[0].rstrip(".?")


_BUSY = (
    "Busy: somebody else is writing to {server}; nothing was saved.",
    "Try again in a moment.",
)
_GONE = (
    "The server of {server} went away; nothing was saved.",
    "Is it being started again? Try again in a moment.",
)

# by SQLSTATE, a class or a whole code (PostgreSQL manual, appendix A); the longer ones first
_BY_STATE = {
    "55P03": _BUSY,
    "40": _BUSY,
    "25006": (
        "{server} may be read but not written; nothing was saved.",
        "Ask whoever keeps the server: it is a copy for reading, or set to reading only.",
    ),
    "42501": (
        "This user may not do that in {server} ({said}); nothing was saved.",
        "Ask whoever keeps the server for the right to the store's tables.",
    ),
    "42P01": ("{server} is not a stockroom store.", "Give the right database with --store."),
    "53100": (
        "The disc of {server} is full; nothing was saved.",
        "Make room on the server, then enter it again.",
    ),
    "53300": (
        "{server} has no connection left; nothing was saved.",
        "Try again in a moment, or ask whoever keeps the server.",
    ),
    "57014": (
        "{server} took too long and was stopped; nothing was saved.",
        "Try again in a moment, or ask whoever keeps the server (statement_timeout).",
    ),
    "57P": _GONE,
    "25P03": _GONE,
    "08": _GONE,
    "58": (
        "The disc of {server} did not answer ({said}); nothing was saved.",
        "Ask whoever keeps the server to look at it.",
    ),
    "XX": (
        "{server} is damaged or faulty ({said}); nothing was saved.",
        "Ask whoever keeps the server to look at it; put the last good copy back if need be.",
    ),
}

_BY_TEXT = {
    r"database .* does not exist": (
        "There is no database for {server}.",
        "Make it with createdb NAME, or look at the name in --store.",
    ),
    r"password|authentication failed|no pg_hba": (
        "{server} does not let this user in: the name or the password is wrong, or missing.",
        "Give it in PGPASSWORD or ~/.pgpass, so that no list of commands shows it.",
    ),
    r"role .* does not exist": (
        "{server} knows no user of that name.",
        "Look at the name before the @ in --store.",
    ),
    r"too many (clients|connections)|remaining connection slots": (
        "{server} has no connection left; nothing was saved.",
        "Try again in a moment, or ask whoever keeps the server.",
    ),
    r"starting up|shutting down|recovery mode": _GONE,
    r"server closed the connection|connection is (lost|closed)|terminating connection": _GONE,
    r"refused|timeout|timed out|No such file|not translate|resolve|unreachable|No route": (
        "No server answers at {server}.",
        "Is it running, and are the host and the port right? Nothing was saved.",
    ),
}


@contextmanager
def translated(server: Server) -> Iterator[None]:
    """Turn the driver's errors inside the block into ours. Raises: Refused."""
    try:
        yield
    except Exception as error:
        # by name: the driver may not be there to ask
        theirs: Any = getattr(error, "orig", error)
        if type(theirs).__module__.partition(".")[0] != MODULE:
            raise
        raise in_words(theirs, server) from error
