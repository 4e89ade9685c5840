"""Lists that are being brought in: held between two requests, in a folder of the server's own.

A list is found again only by the visit that gave it and a token drawn by lot, in whichever
worker the next request lands. Its name is never a path, and what is old is swept away.
"""

from __future__ import annotations

import contextlib
import hashlib
import hmac
import io
import json
import os
import re
import secrets
import stat
import tempfile
import zipfile
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from stockroom import clock
from stockroom.errors import BadInput, StoreTrouble, UnknownName
from stockroom.web.door.session import Session
from stockroom.web.house import House

KEPT = 2 * 3600
"""Seconds a list is held after it was last looked at. Our choice."""

MOST_HELD = 8
"""Lists of one visit held at once; its one longest untouched makes room. Our choice."""

MOST_OF_ALL = 60
"""Lists of everybody held at once: half a gigabyte at the most. Our choice."""

MOST_UNPACKED = 100_000_000
"""Bytes a workbook may unpack to here: twelve times the largest that is taken. Our choice."""

MOST_PARTS = 2_000
"""Files inside a workbook. Our choice."""

LONGEST_NAME = 100


@dataclass(frozen=True, slots=True)
class Said:
    """What was said of a list: its name to show, its sheet and encoding, the answers by line.

    `done` are the rows it brought in so far, in words, with the numbers of their bottles.
    """

    name: str
    sheet: str = ""
    encoding: str = ""
    lines: tuple[str, ...] = ()
    done: tuple[tuple[str, tuple[str, ...]], ...] = ()


@dataclass(frozen=True, slots=True)
class Held:
    """A list that is held: where, and what was said of it."""

    path: Path
    said: Said


def hold(house: House, session: Session, data: bytes, said: Said) -> str:
    """Hold a list, and give the token it is found by.

    Raises: BadInput for a workbook that would unpack to more than a list can be; StoreTrouble
    where nothing can be held.
    """
    _check_packed(data, said.name)
    folder = _folder()
    _sweep(folder, room_for=_whose(house, session))
    token = secrets.token_urlsafe(24)
    path = _path(folder, house, session, token)
    _write(path, data)
    keep(Held(path, said), said)
    return token


def held(house: House, session: Session, token: str) -> Held:
    """The list of a token, which is this visit's own. Raises: UnknownName where there is none."""
    path = _path(_folder(), house, session, token)
    try:
        data = json.loads(_beside(path).read_text(encoding="utf-8"))
        # looked at now, so it stays a while longer
        os.utime(path)
    except (OSError, ValueError):
        raise UnknownName(
            "That list is not held any more.", "Give the file again: nothing of it is lost."
        ) from None
    return Held(path, _said(data))


def keep(list_held: Held, said: Said) -> None:
    """Note what is said of a list by now, in the place of what was said before.

    Raises: StoreTrouble where it cannot be noted; what was said before stands then.
    """
    data = {
        "name": said.name,
        "sheet": said.sheet,
        "encoding": said.encoding,
        "lines": list(said.lines),
        "done": said.done,
    }
    _write(_beside(list_held.path), json.dumps(data).encode())


def put_away(list_held: Held) -> None:
    """Hold a list no longer."""
    for path in (list_held.path, _beside(list_held.path)):
        path.unlink(missing_ok=True)


def sweep_lists() -> None:
    """Take away what nobody looks at any more; nothing where none was ever held. Never fails."""
    with contextlib.suppress(OSError, StoreTrouble):
        if _place().is_dir():
            _sweep(_folder())


def shown_name(given: str) -> str:
    """A file's own name as it may be shown: no folders, no odd signs, not too long."""
    last = re.split(r"[\\/]", given)[-1]
    plain = "".join(sign for sign in last if sign.isprintable()).strip(" .")
    return plain[:LONGEST_NAME] or "list"


def _said(data: Mapping[str, Any]) -> Said:
    done = tuple((what, tuple(numbers)) for what, numbers in data["done"])
    return Said(data["name"], data["sheet"], data["encoding"], tuple(data["lines"]), done)


def _path(folder: Path, house: House, session: Session, token: str) -> Path:
    # made of what nobody else has: another visit's token, or a path for one, leads nowhere
    name = _signed(house, f"held {session.number} {token}")
    return folder / f"{_whose(house, session)}{name}.list"


def _whose(house: House, session: Session) -> str:
    """How the names of a visit's lists begin."""
    return f"{_signed(house, f'lists of {session.number}')[:24]}-"


def _signed(house: House, said: str) -> str:
    return hmac.new(house.key, said.encode(errors="replace"), hashlib.sha256).hexdigest()


def _beside(path: Path) -> Path:
    return path.with_suffix(".said")


def _folder() -> Path:
    """The folder, ours alone. Raises: StoreTrouble where somebody else has made it."""
    mine, folder = _me(), _place()
    with contextlib.suppress(FileExistsError):
        folder.mkdir(mode=0o700)
    found = folder.lstat()
    ours = stat.S_ISDIR(found.st_mode) and found.st_uid == mine
    # Windows keeps each user's temporary files apart, and has no such bits
    if os.name == "posix" and not (ours and not found.st_mode & 0o077):
        raise StoreTrouble(
            "The folder for lists is open to others, so none is held there.",
            f"On the machine that serves these pages, take {folder.name} away.",
        )
    return folder


def _place() -> Path:
    return Path(tempfile.gettempdir()) / f"stockroom-lists-{_me()}"


def _me() -> int:
    return int(getattr(os, "getuid", lambda: 0)())


def _write(path: Path, data: bytes) -> None:
    """Write a file whole or not at all: another worker may be reading it. Raises: StoreTrouble."""
    name = ""
    try:
        handle, name = tempfile.mkstemp(dir=path.parent, suffix=".new")
        with open(handle, "wb") as file:
            file.write(data)
        Path(name).replace(path)
    except OSError as error:
        if name:
            Path(name).unlink(missing_ok=True)
        raise StoreTrouble(
            f"The list cannot be held: {error.strerror}.", "See whether the disc is full."
        ) from error


def _sweep(folder: Path, *, room_for: str = "") -> None:
    """Take away what is old, and the lists longest untouched where there are too many.

    `room_for` is how the names of the lists begin that get one more.
    """
    ages, now = [], clock.now().timestamp()
    for path in folder.iterdir():
        with contextlib.suppress(OSError):
            ages.append((path.stat().st_mtime, path))
    lists = sorted((age, path) for age, path in ages if path.suffix == ".list")
    crowded: list[Path] = []
    if room_for:
        own = [path for _, path in lists if path.name.startswith(room_for)]
        crowded = own[: max(0, len(own) - MOST_HELD + 1)]
        others = [path for _, path in lists if path not in crowded]
        crowded += others[: max(0, len(others) - MOST_OF_ALL + 1)]
    young = {path for age, path in lists if now - age < KEPT} - set(crowded)
    for age, path in ages:
        kept = path.with_suffix(".list") in young or path.suffix == ".new"
        if not kept or (path.suffix == ".new" and now - age > KEPT):
            with contextlib.suppress(OSError):
                path.unlink()


def _check_packed(data: bytes, name: str) -> None:
    """Refuse a workbook that says it unpacks to very much; one that lies is cut short later."""
    if not data.startswith(b"PK"):
        return
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as packed:
            inside = packed.infolist()
    except (zipfile.BadZipFile, OSError, ValueError, NotImplementedError):
        # told by whoever reads it, in the words for a damaged workbook
        return
    if len(inside) > MOST_PARTS or sum(each.file_size for each in inside) > MOST_UNPACKED:
        raise BadInput(
            f"{name} unpacks to more than a list of bottles can be.",
            "Save the sheet with the bottles alone, as .xlsx or .csv.",
        )
