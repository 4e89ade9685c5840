"""The house that is served: where its store is, the day it is thought to be, and its door."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from pathlib import Path

from stockroom.settings import StoreAt


@dataclass(frozen=True, slots=True)
class House:
    """What the server was started with; it never changes while it runs.

    `given` is the day of --as-at. `key` signs cookies and forms, the same in every worker.
    `door` is the file with the passphrases, None where only this machine may come in: then
    whoever comes in keeps the house. `secure` where what is sent is encrypted (TLS).
    `names` are the hosts it answers to, and a shared house to any address in figures too;
    a request for another is refused. `port` tells its cookies from those of another house on
    the same machine, for browsers do not.
    """

    path: StoreAt
    key: bytes
    given: date | None = None
    door: Path | None = None
    secure: bool = False
    names: tuple[str, ...] = ("127.0.0.1", "localhost", "[::1]")
    workers: int = 1
    port: int = 0
