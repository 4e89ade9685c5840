"""The server: checked, announced, and run until somebody stops it."""

from __future__ import annotations

import json
import multiprocessing
import os
import secrets
import signal
import socket
import threading
from collections.abc import Callable
from dataclasses import dataclass, replace
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING, Any

from stockroom.service.front import front
from stockroom.settings import Server, StoreAt, store_at
from stockroom.web.door.door_file import door_of, read_door
from stockroom.web.door.setting import opened_door
from stockroom.web.house import House
from stockroom.web.listening import addresses, bound, checked_certificate, names_of

if TYPE_CHECKING:
    from fastapi import FastAPI

AT_ONCE = 200
"""Requests and connections one worker holds at a time; one more is told to wait. Our choice."""

HEAD = 32 * 1024
"""Bytes of an address with its headers."""

ENDS_WITHIN = 3
"""Seconds an answer on its way has left when the server is asked to end."""

BEGINS_WITHIN = 60
"""Seconds a worker may take to begin before it is given up and another is begun."""

TOLD = "STOCKROOM_SERVED"
"""The environment variable in which workers are told of the house: no other user sees it."""

RECORD: dict[str, Any] = {
    "version": 1,
    "disable_existing_loggers": False,
    "formatters": {"plain": {"format": "%(asctime)s %(message)s"}},
    "handlers": {"errors": {"class": "logging.StreamHandler", "formatter": "plain"}},
    "loggers": {
        name: {"handlers": ["errors"], "level": "WARNING", "propagate": False}
        for name in ("uvicorn", "stockroom")
    },
}
"""What goes wrong, and who came in, on standard error with its time."""


@dataclass(frozen=True, slots=True)
class Manner:
    """How a house is served: to whom, where, and by how many processes.

    `share` is for the room's network, at `host` or at every address of this machine; `names`
    are further names it answers to. `certificate` and `key` are files for TLS. `port` 0 is
    any free one.
    """

    port: int
    share: bool = False
    host: str = ""
    names: tuple[str, ...] = ()
    certificate: Path | None = None
    key: Path | None = None
    workers: int = 1


def serve_house(
    path: StoreAt, *, given: date | None, manner: Manner, say: Callable[[str], None]
) -> None:
    """Serve the store at `path` until it is stopped: by Ctrl-C, or with SIGTERM.

    Raises: StoreTrouble where there is none; NotAllowed without a passphrase, for a port that
    is taken and for files that are no certificate; KeyboardInterrupt once it has ended by Ctrl-C.
    """
    # asked once before anybody comes: a store that is not there is told here
    told = front(path, given)
    house = house_to_serve(path, given, manner, say)
    if manner.certificate:
        checked_certificate(manner.certificate, manner.key)
    with bound(manner.host or ("0.0.0.0" if manner.share else "127.0.0.1"), manner.port) as place:
        house = replace(house, port=place.getsockname()[1])
        # the pages are loaded before the address is told, so that the first one comes at once
        run = _one(house, manner, place) if manner.workers == 1 else _many(house, manner, place)
        for address in addresses(house, manner.host):
            say(f"{told.name or path}: {address} (Ctrl-C ends it)")
        run()


def house_to_serve(
    path: StoreAt, given: date | None, manner: Manner, say: Callable[[str], None]
) -> House:
    """The house as it will be served. Raises: NotAllowed where it may not be shared."""
    whole = path if isinstance(path, Server) else path.resolve()
    secure = manner.certificate is not None
    if not manner.share:
        own = House(whole, secrets.token_bytes(32), given, secure=secure, workers=manner.workers)
        return replace(own, names=(*own.names, *manner.names))
    key, warning = opened_door(path)
    if warning:
        say(warning)
    if not secure:
        say(
            "Without --certificate, passphrases and all else that is typed can be read by whoever"
            " listens on this network. docs/who-may-come-in.md tells what to do."
        )
    names = names_of(manner.names)
    return House(whole, key, given, door_of(path), secure, names, manner.workers)


def made() -> FastAPI:
    """The application as a worker makes it, from what its parent put into the environment."""
    from stockroom.web.app import house_app

    said = os.environ.pop(TOLD)
    threading.Thread(target=_end_with_parent, daemon=True).start()
    return house_app(house_from(said))


def house_as_text(house: House) -> str:
    """The house for a worker. A shared one reads its key from the door's file again."""
    store = house.path.url if isinstance(house.path, Server) else str(house.path)
    said = {
        "store": store,
        "key": "" if house.door else house.key.hex(),
        "given": house.given.isoformat() if house.given else None,
        "secure": house.secure,
        "names": house.names,
        "workers": house.workers,
        "port": house.port,
        "shared": house.door is not None,
    }
    return json.dumps(said)


def house_from(text: str) -> House:
    """The house a parent told of. Raises: StoreTrouble for a damaged door."""
    said = json.loads(text)
    path = store_at(said["store"])
    door = door_of(path) if said["shared"] else None
    kept = read_door(door) if door else None
    return House(
        path,
        # the file was there when the parent began; without it nobody comes in
        kept.key if kept else bytes.fromhex(said["key"]) or secrets.token_bytes(32),
        date.fromisoformat(said["given"]) if said["given"] else None,
        door,
        said["secure"],
        tuple(said["names"]),
        said["workers"],
        said["port"],
    )


def _config(app: Any, manner: Manner) -> Any:
    import uvicorn

    config = uvicorn.Config(
        app,
        factory=isinstance(app, str),
        workers=manner.workers,
        # named, so that its bounds hold whatever else is installed
        http="h11",
        ws="none",
        # what was worked out is kept from its beginning to its end: see `_serving` in app.py
        lifespan="on",
        log_config=RECORD,
        log_level="warning",
        access_log=False,
        # an address is that of the connection: a header may say anything
        proxy_headers=False,
        server_header=False,
        limit_concurrency=AT_ONCE,
        backlog=AT_ONCE,
        timeout_keep_alive=15,
        timeout_graceful_shutdown=ENDS_WITHIN,
        h11_max_incomplete_event_size=HEAD,
        ssl_certfile=manner.certificate,
        ssl_keyfile=manner.key,
    )
    # a busy machine may take long to begin a worker, which is no reason to begin another; set
    # here, since older releases do not take it as an argument
    config.timeout_worker_healthcheck = BEGINS_WITHIN
    return config


def _one(house: House, manner: Manner, place: socket.socket) -> Callable[[], None]:
    import uvicorn

    from stockroom.web.app import house_app

    server = uvicorn.Server(_config(house_app(house), manner))

    def run() -> None:
        signal.signal(signal.SIGTERM, _ended)
        server.run(sockets=[place])

    return run


def _many(house: House, manner: Manner, place: socket.socket) -> Callable[[], None]:
    from uvicorn.supervisors import Multiprocess

    stopped: list[int] = []

    class Workers(Multiprocess):
        def handle_int(self) -> None:
            stopped.append(signal.SIGINT)
            super().handle_int()

    def run() -> None:
        os.environ[TOLD] = house_as_text(house)
        Workers(_config("stockroom.web.serving:made", manner), sockets=[place]).run()
        if stopped:
            raise KeyboardInterrupt

    return run


def _ended(number: int, frame: object) -> None:
    # asked to end, it has ended: nothing went wrong
    raise SystemExit(0)


def _end_with_parent() -> None:
    """A worker whose parent was killed would go on for ever, and hold the port."""
    parent = multiprocessing.parent_process()
    if parent is not None:
        parent.join()
        os.kill(os.getpid(), signal.SIGTERM)
