"""Where the store is: `--store`, else `STOCKROOM_STORE`, else the user's data folder."""

from __future__ import annotations

import os
import re
from dataclasses import dataclass
from pathlib import Path

from stockroom.errors import BadInput

STORE_NAME = "stockroom.sqlite"
PRACTICE_NAME = "practice.sqlite"


@dataclass(frozen=True, slots=True)
class Server:
    """A store kept by a database server, by its address: postgresql+psycopg://host/name."""

    url: str

    def __str__(self) -> str:
        """The address as it may be shown: a password in it is left out."""
        return _PASSWORD_TOO.sub(r"\1***", _PASSWORD.sub(r"\1:***@", self.url))

    def exists(self) -> bool:
        """True: whether the server answers is found out when it is asked."""
        return True


StoreAt = Path | Server
"""Where a store is: a file of SQLite, or a server."""

_SERVER = re.compile(r"postgresql(\+psycopg)?://")
# up to the last @, since somebody may have left one in a password as it is
_PASSWORD = re.compile(r"(//[^/@:?]*):[^?]*@")
_PASSWORD_TOO = re.compile(r"([?&]password=)[^&]*")


def store_at(text: str) -> StoreAt:
    """The store an address names: a server where it begins as one, else a file."""
    return Server(text) if _SERVER.match(text) else Path(text).expanduser()


def data_folder() -> Path:
    """The user's data folder for this program (XDG, or the platform's own)."""
    # platformdirs costs a few milliseconds, and an explicit --store never needs it
    from platformdirs import user_data_path

    return user_data_path("stockroom", appauthor=False)


def own_store(given: str | None) -> StoreAt:
    """The place a house of one's own is kept at: the one given, else the usual one."""
    named = given or os.environ.get("STOCKROOM_STORE")
    return store_at(named) if named else data_folder() / STORE_NAME


def practice_store(given: str | None) -> Path:
    """The path the practice college is made at: the one given, else beside the usual one.

    Raises: BadInput for the address of a server.
    """
    named = given or os.environ.get("STOCKROOM_STORE")
    found = store_at(named) if named else data_folder() / PRACTICE_NAME
    if isinstance(found, Server):
        raise BadInput(
            f"The practice store is a file, and {found} is a server.",
            "stockroom --store practice.sqlite demo",
        )
    return found


def store_to_open(given: str | None) -> StoreAt:
    """The store a command opens: one's own; failing that, the practice college."""
    own = own_store(given)
    if own.exists():
        return own
    practice = practice_store(given)
    return practice if practice.exists() else own
