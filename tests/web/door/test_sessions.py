"""The cookie: signed, in time, for this host alone, and of no use to anybody else."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from doors import later
from windows import KEY

from stockroom.web.door.entering import cookie_for
from stockroom.web.door.roles import Role
from stockroom.web.door.session import (
    IDLE,
    LASTS,
    cookie_name,
    form_token,
    fresh,
    is_our_form,
    read,
    written,
)
from stockroom.web.door.session import come_in as coming_in
from stockroom.web.house import House

if TYPE_CHECKING:
    from doors import Room

ALONE = House(Path("house.sqlite"), KEY)
SHARED = replace(ALONE, door=Path("house.sqlite.door"))
SESSION = replace(coming_in(Role.RECORD, "gen", "ÄB"), as_at=date(2027, 1, 25))


def test_a_cookie_carries_the_whole_session() -> None:
    assert read(SHARED, written(SHARED, SESSION)) == SESSION


@pytest.mark.parametrize(
    "cookie", [None, "", "x", "a.b.c", "eyJuIjoieCJ9.aaaa.bbbb", "ü", "." * 9000]
)
def test_what_nobody_signed_is_no_session(cookie: str | None) -> None:
    assert read(SHARED, cookie) is None


def test_one_sign_changed_anywhere_makes_it_worthless() -> None:
    cookie = written(SHARED, SESSION)
    for place in range(0, len(cookie), 7):
        other = "A" if cookie[place] != "A" else "B"
        assert read(SHARED, cookie[:place] + other + cookie[place + 1 :]) is None


def test_another_key_signs_for_another_house() -> None:
    assert read(replace(SHARED, key=b"n" * 32), written(SHARED, SESSION)) is None


def test_it_is_over_after_its_time_however_busy(monkeypatch: pytest.MonkeyPatch) -> None:
    session = coming_in(Role.RECORD, "gen", "T1")
    later(monkeypatch, LASTS + 1)
    assert read(SHARED, written(SHARED, session)) is None


def test_at_a_shared_door_it_is_over_when_nothing_is_asked(monkeypatch: pytest.MonkeyPatch) -> None:
    session = coming_in(Role.RECORD, "gen", "T1")
    cookie = written(SHARED, session)
    later(monkeypatch, IDLE - 5)
    assert read(SHARED, cookie) == session
    later(monkeypatch, 10)
    assert read(SHARED, cookie) is None


def test_on_this_machine_it_lasts_the_day(monkeypatch: pytest.MonkeyPatch) -> None:
    session = coming_in(Role.KEEP_HOUSE, "", "T1")
    cookie = written(ALONE, session)
    later(monkeypatch, LASTS - 5)
    assert read(ALONE, cookie) == session
    later(monkeypatch, 10)
    assert read(ALONE, cookie) is None


def test_whoever_goes_on_asking_stays_in(room: Room, monkeypatch: pytest.MonkeyPatch) -> None:
    visitor = room.visitor(room.session(Role.READ))
    for _ in range(3):
        later(monkeypatch, IDLE - 60)
        assert visitor.get("/enter").status_code == 200


def test_it_is_sent_to_this_host_only_and_out_of_reach_of_scripts() -> None:
    said = cookie_for(SHARED, SESSION)
    assert said.startswith("stockroom=")
    assert {"HttpOnly", "Path=/", "SameSite=Strict"} <= set(said.split("; "))
    assert "Domain" not in said


def test_under_tls_it_is_never_sent_in_the_clear() -> None:
    said = cookie_for(replace(SHARED, secure=True), SESSION)
    assert said.startswith("__Host-stockroom=")
    assert "Secure" in said.split("; ")


def test_two_houses_on_one_machine_keep_their_cookies_apart() -> None:
    names = {cookie_name(replace(ALONE, port=port)) for port in (8765, 8766)}
    assert names == {"stockroom-8765", "stockroom-8766"}


def test_a_stranger_is_nobody_at_a_shared_door_and_the_keeper_on_this_machine() -> None:
    assert fresh(SHARED).role is Role.NOBODY
    assert fresh(ALONE).role is Role.KEEP_HOUSE


@pytest.mark.parametrize("token", ["", "x", "\ud800", "ü" * 64])
def test_a_token_that_is_not_ours_is_not_taken(token: str) -> None:
    assert not is_our_form(SHARED, SESSION, token)


def test_a_token_is_of_its_session_and_its_house_alone() -> None:
    token = form_token(SHARED, SESSION)
    assert is_our_form(SHARED, SESSION, token)
    assert not is_our_form(SHARED, coming_in(Role.RECORD, "gen", "ÄB"), token)
    assert not is_our_form(replace(SHARED, key=b"n" * 32), SESSION, token)


def test_what_is_the_same_for_everybody_sets_no_cookie(room: Room) -> None:
    assert "set-cookie" not in room.client.get("/static/stockroom.css").headers
    assert "set-cookie" in room.client.get("/come-in").headers


def test_the_number_of_a_session_is_drawn_from_very_many() -> None:
    numbers = {fresh(SHARED).number for _ in range(200)}
    # 24 bytes in signs of six bits
    assert {len(number) for number in numbers} == {32}
    assert len(numbers) == 200
