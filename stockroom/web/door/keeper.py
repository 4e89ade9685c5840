"""The keeper of the door: who is known, who has left, and which passphrase was said."""

from __future__ import annotations

import contextlib
import logging
import os
import threading
from pathlib import Path

from stockroom.errors import StoreTrouble
from stockroom.web.door.door_file import DoorFile, read_door
from stockroom.web.door.pace import Pace
from stockroom.web.door.passphrases import role_by
from stockroom.web.door.roles import Role
from stockroom.web.door.session import LASTS, Session, moment
from stockroom.web.house import House

log = logging.getLogger("stockroom.door")


class Keeper:
    """One in each worker. What several workers must agree on lies in files beside the door's."""

    def __init__(self, house: House, pace: Pace | None = None) -> None:
        self.house = house
        self.pace = pace or Pace(house.workers)
        self._seen: tuple[object, DoorFile | None] | None = None
        # an argon2 check takes much memory: one after the other
        self._one_at_a_time = threading.Lock()

    def lets_stay(self, session: Session) -> bool:
        """Whether a session that is signed and in time still stands.

        It does not where it has left, or where its passphrase was set anew or taken away.
        """
        if self.house.door is None or session.role is Role.NOBODY:
            return True
        try:
            door = self._door()
        except StoreTrouble as trouble:
            log.error("%s", trouble)
            return False
        passphrase = door.passphrases.get(session.role) if door else None
        came_by_it = passphrase is not None and passphrase.generation == session.generation
        return came_by_it and not self._has_left(session)

    def role_by(self, typed: str) -> tuple[Role, str] | None:
        """The role of the passphrase somebody typed, and its generation; None for a wrong one.

        Raises: StoreTrouble, which names no file: whoever asks is a stranger.
        """
        try:
            door = self._door()
        except StoreTrouble as trouble:
            log.error("%s", trouble)
            raise StoreTrouble(
                "The file of passphrases cannot be read, so nobody can come in.",
                "The machine that serves these pages says why.",
            ) from trouble
        if door is None:
            return None
        with self._one_at_a_time:
            role = role_by(door, typed)
        return (role, door.passphrases[role].generation) if role else None

    def leave(self, session: Session) -> None:
        """Note that a session has left, so that its cookie, copied, is worth nothing any more.

        Raises: OSError where it cannot be noted.
        """
        if self.house.door is None or session.role is Role.NOBODY:
            return
        folder = _left_folder(self.house.door)
        folder.mkdir(mode=0o700, exist_ok=True)
        slot = _slot()
        # one short line at the end of a file: two workers never write over each other
        handle = os.open(folder / str(slot), os.O_WRONLY | os.O_APPEND | os.O_CREAT, 0o600)
        with open(handle, "w", encoding="utf-8") as file:
            file.write(session.number + "\n")
        _prune(folder, slot)

    def _door(self) -> DoorFile | None:
        """The file as it is now, read again only where it was written since."""
        assert self.house.door is not None
        try:
            is_now = self.house.door.stat()
            mark: object = (is_now.st_mtime_ns, is_now.st_ino, is_now.st_size)
        except OSError:
            mark = None
        if self._seen is None or self._seen[0] != mark or mark is None:
            self._seen = (mark, read_door(self.house.door))
        return self._seen[1]

    def _has_left(self, session: Session) -> bool:
        assert self.house.door is not None
        folder, slot = _left_folder(self.house.door), _slot()
        return any(session.number in _numbers(folder / str(each)) for each in (slot - 1, slot))


def _left_folder(door: Path) -> Path:
    return door.with_name(f"{door.name}.left")


def _slot() -> int:
    # a session that left in one half day is over before the end of the next
    return moment() // LASTS


def _numbers(file: Path) -> frozenset[str]:
    try:
        return frozenset(file.read_text(encoding="utf-8").split())
    except FileNotFoundError:
        return frozenset()


def _prune(folder: Path, slot: int) -> None:
    for each in folder.iterdir():
        if each.name.isdecimal() and int(each.name) < slot - 1:
            # another worker may have been quicker
            with contextlib.suppress(FileNotFoundError):
                each.unlink()
