"""A house that is shared with the room, for tests: its door, and visitors of every role."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import pytest
from argon2 import PasswordHasher
from fastapi import FastAPI
from fastapi.routing import APIRoute
from starlette.testclient import TestClient
from windows import FIRST_DAY, KEY

from stockroom.web.app import house_app
from stockroom.web.door import passphrases
from stockroom.web.door import session as sessions
from stockroom.web.door.door_file import DoorFile, door_of, write_door
from stockroom.web.door.roles import Role
from stockroom.web.door.session import Session, come_in, cookie_name, form_token, written
from stockroom.web.house import House

WORDS = {
    Role.READ: "seven dull grey herons",
    Role.RECORD: "kettles under the moon",
    Role.KEEP_HOUSE: "a ladder of wet paper",
}
"""The passphrase of each role."""

OPEN = {
    ("GET", "/"),
    ("GET", "/come-in"),
    ("POST", "/come-in"),
    ("POST", "/leave"),
    ("GET", "/face/{weight}.ttf"),
}
"""What whoever comes by may ask for: the door itself, and what is the same for everybody."""

NEEDS = {
    ("POST", "/initials"): Role.READ,
    ("POST", "/as-at"): Role.READ,
    # a line may only lead to a page; what it would save asks for more by itself
    ("POST", "/line"): Role.READ,
    ("GET", "/do/{name}"): Role.RECORD,
    ("GET", "/bring-in/{token}"): Role.RECORD,
    ("POST", "/bring-in/{token}/agree"): Role.KEEP_HOUSE,
}
"""What is not as usual: to look needs the role read, to send something in the role record."""

KEEPERS = re.compile(r"/rules/(add|change)/.*|/api/do/(add|change|rule)")
"""What changes the house itself."""

FILLED = {"name": "draw", "number": "S13", "bottle": "S13", "ref": "K15", "code": "R01"}
"""What stands in an address in the place of a name, where any would do."""


@dataclass
class Room:
    """A shared house, and clients that have come in with a role."""

    house: House
    app: FastAPI
    client: TestClient
    """A stranger."""

    def store(self) -> bytes:
        """The store's file as it lies there, to see whether anything was saved."""
        assert isinstance(self.house.path, Path)
        return self.house.path.read_bytes()

    def session(self, role: Role) -> Session:
        """The session of somebody who came in by the passphrase of a role."""
        from stockroom.web.door.door_file import read_door

        assert self.house.door is not None
        door = read_door(self.house.door)
        assert door is not None
        kept = door.passphrases.get(role)
        return come_in(role, kept.generation if kept else "", "T1")

    def visitor(self, session: Session) -> TestClient:
        """A client with the cookie of a session, which follows no redirect by itself."""
        cookies = {cookie_name(self.house): written(self.house, session)}
        return TestClient(self.app, "http://127.0.0.1", cookies=cookies, follow_redirects=False)

    def come_in(self, passphrase: str, initials: str = "T1", back: str = "/week") -> Any:
        """The answer to somebody who types a passphrase at the door."""
        page = self.client.get("/come-in").text
        sent = {"passphrase": passphrase, "initials": initials, "back": back}
        return self.client.post("/come-in", data=sent | {"form_token": token_in(page)})


def token_in(page: str) -> str:
    """The form token on a page."""
    found = re.search(r'name="form_token" value="(\w+)"', page)
    assert found, "no form of ours on the page"
    return found[1]


def token_for(house: House, session: Session) -> str:
    """The token a session's forms carry."""
    return form_token(house, session)


def hash_in_no_time(monkeypatch: pytest.MonkeyPatch) -> None:
    """Hashes are made and checked at once: what they cost on purpose is no matter of a test."""
    cheap = PasswordHasher(time_cost=1, memory_cost=8, parallelism=1)
    monkeypatch.setattr(passphrases, "_HASHER", cheap)
    passphrases._nobodys.cache_clear()


def shared_room(store: Path) -> Iterator[Room]:
    """A room on a store, with a passphrase for each role."""
    door = door_of(store)
    write_door(door, DoorFile(KEY, {role: passphrases.kept(said) for role, said in WORDS.items()}))
    house = House(store, KEY, FIRST_DAY, door)
    app = house_app(house)
    with TestClient(app, "http://127.0.0.1", follow_redirects=False) as client:
        yield Room(house, app, client)


def every_route(app: FastAPI) -> list[tuple[str, str]]:
    """Each (method, address) the application answers, whatever file it comes from."""
    found = [
        (method, route.path)
        for route in _routes(app.routes)
        for method in sorted((route.methods or set()) - {"HEAD"})
    ]
    return sorted(set(found))


def _routes(routes: list[Any]) -> Iterator[APIRoute]:
    for each in routes:
        inside = getattr(each, "original_router", None)
        if inside is not None:
            yield from _routes(inside.routes)
        elif isinstance(each, APIRoute):
            yield each


def address(path: str) -> str:
    """A route's address with something in the place of each name."""
    return re.sub(r"\{(\w+)(?::\w+)?\}", lambda found: FILLED.get(found[1], "1"), path)


def needed(method: str, path: str) -> Role:
    """The role a route is for."""
    if (method, path) in OPEN:
        return Role.NOBODY
    if KEEPERS.fullmatch(path):
        return Role.KEEP_HOUSE
    usual = Role.READ if method == "GET" else Role.RECORD
    return NEEDS.get((method, path), usual)


def later(monkeypatch: pytest.MonkeyPatch, seconds: int) -> None:
    """Let the clock of the cookies stand that much later than it does."""
    now = sessions.moment() + seconds
    monkeypatch.setattr(sessions, "moment", lambda: now)
