"""At the door of a shared house: by which passphrase, how often, and out again."""

from __future__ import annotations

import re
from dataclasses import replace
from typing import TYPE_CHECKING

import pytest
from doors import WORDS, later, token_for, token_in

from stockroom.web.door.door_file import door_of, read_door, write_door
from stockroom.web.door.pace import AT_ONCE, Pace
from stockroom.web.door.passphrases import kept
from stockroom.web.door.roles import Role
from stockroom.web.door.session import cookie_name, read

if TYPE_CHECKING:
    from doors import Room
    from windows import Window

pytestmark = pytest.mark.file


def test_a_stranger_is_sent_to_the_door_and_then_where_they_wanted(room: Room) -> None:
    away = room.client.get("/day/K15?a=1&said=x")
    assert (away.status_code, away.headers["location"]) == (
        303,
        "/come-in?back=%2Fday%2FK15%3Fa%3D1",
    )
    door = room.client.get(away.headers["location"])
    assert 'name="back" value="/day/K15?a=1"' in door.text
    came = room.come_in(WORDS[Role.READ], back="/day/K15?a=1")
    assert (came.status_code, came.headers["location"]) == (303, "/day/K15?a=1")
    assert room.client.get("/day/K15?a=1").status_code == 200


def test_the_door_says_nothing_of_the_house(room: Room) -> None:
    assert "Quillmere" not in room.client.get("/come-in").text


@pytest.mark.parametrize("role", list(WORDS))
def test_each_passphrase_gives_its_role(room: Room, role: Role) -> None:
    room.come_in(WORDS[role])
    session = read(room.house, room.client.cookies[cookie_name(room.house)])
    assert session
    assert (session.role, session.initials) == (role, "T1")


def test_whoever_comes_in_gets_a_number_nobody_had_before(room: Room) -> None:
    room.client.get("/come-in")
    before = read(room.house, room.client.cookies[cookie_name(room.house)])
    room.come_in(WORDS[Role.RECORD])
    after = read(room.house, room.client.cookies[cookie_name(room.house)])
    assert before
    assert after
    assert before.number != after.number


def test_a_wrong_passphrase_is_told_beside_its_field_and_not_shown_again(room: Room) -> None:
    for typed in ("herring", "seven dull grey heron"):
        refused = room.come_in(typed, initials="AB")
        assert refused.status_code == 403, typed
        assert 'id="door-passphrase-wrong"' in refused.text
        [field] = re.findall(r'<input[^>]*name="passphrase"[^>]*>', refused.text)
        # the field stands empty; and what was typed is nowhere else on the page either
        assert 'value=""' in field
        assert not typed or typed not in refused.text
        assert room.client.get("/week").status_code == 303


def test_a_passphrase_without_end_is_not_read_and_not_shown(room: Room) -> None:
    refused = room.come_in("x" * 70_000)
    assert (refused.status_code, "xxxx" in refused.text) == (413, False)
    assert room.client.get("/week").status_code == 303


def test_the_initials_typed_are_kept_when_the_passphrase_is_wrong(room: Room) -> None:
    assert 'value="AB"' in room.come_in("wrong", initials="AB").text


@pytest.mark.parametrize("initials", ["", "   "])
def test_who_only_reads_needs_no_initials(room: Room, initials: str) -> None:
    assert room.come_in(WORDS[Role.READ], initials=initials).status_code == 303
    page = room.client.get("/week").text
    assert "whose initials?" not in page


@pytest.mark.parametrize("initials", ["", "   ", "far too long", "a\x07b"])
def test_what_are_no_initials_is_told_beside_their_field(room: Room, initials: str) -> None:
    refused = room.come_in(WORDS[Role.RECORD], initials=initials)
    assert refused.status_code == 422
    assert 'id="door-initials-wrong"' in refused.text


@pytest.mark.parametrize(
    "back",
    ["https://elsewhere.example/", "//elsewhere.example", "/\\elsewhere.example", "", "\t/x"],
)
def test_nobody_is_led_to_another_site(room: Room, back: str) -> None:
    assert room.come_in(WORDS[Role.READ], back=back).headers["location"] == "/"


def test_whoever_leaves_is_out_and_so_is_a_copy_of_the_cookie(room: Room) -> None:
    room.come_in(WORDS[Role.RECORD])
    copied = room.client.cookies[cookie_name(room.house)]
    page = room.client.get("/come-in").text
    assert "You are in" in page
    left = room.client.post("/leave", data={"form_token": token_in(page)})
    assert (left.status_code, left.headers["location"]) == (303, "/come-in")
    assert room.client.get("/week").status_code == 303
    session = read(room.house, copied)
    assert session
    assert room.visitor(session).get("/week").status_code == 303


def test_who_has_left_is_known_to_every_worker_and_forgotten_in_time(
    room: Room, monkeypatch: pytest.MonkeyPatch
) -> None:
    from stockroom.web.door.keeper import Keeper

    session = room.session(Role.READ)
    one, other = Keeper(room.house), Keeper(room.house)
    assert other.lets_stay(session)
    one.leave(session)
    assert not other.lets_stay(session)
    later(monkeypatch, 40 * 3600)
    one.leave(room.session(Role.READ))
    assert room.house.door
    folder = room.house.door.with_name(f"{room.house.door.name}.left")
    assert len(list(folder.iterdir())) == 1


@pytest.mark.parametrize("gone", [True, False])
def test_a_passphrase_set_anew_or_forgotten_puts_out_whoever_came_in_by_it(
    room: Room, gone: bool
) -> None:
    room.come_in(WORDS[Role.RECORD])
    reader = room.visitor(room.session(Role.READ))
    assert room.client.get("/enter").status_code == 200
    door = read_door(door_of(room.house.path))
    assert door
    others = {role: said for role, said in door.passphrases.items() if role is not Role.RECORD}
    anew = {} if gone else {Role.RECORD: kept(WORDS[Role.RECORD])}
    write_door(door_of(room.house.path), replace(door, passphrases=others | anew))
    assert room.client.get("/enter").status_code == 303
    assert reader.get("/enter").status_code == 200


@pytest.mark.parametrize("text", ["{", None])
def test_without_a_door_file_that_can_be_read_nobody_is_in(room: Room, text: str | None) -> None:
    reader = room.visitor(room.session(Role.READ))
    assert reader.get("/enter").status_code == 200
    assert room.house.door
    room.house.door.unlink()
    if text is not None:
        room.house.door.write_text(text, encoding="utf-8")
    assert reader.get("/enter").status_code == 303
    refused = room.come_in(WORDS[Role.READ])
    assert refused.status_code == (403 if text is None else 503)
    assert str(room.house.door) not in refused.text


def test_too_many_tries_have_to_wait_and_are_told_how_long(room: Room) -> None:
    statuses = [room.come_in("wrong").status_code for _ in range(AT_ONCE)]
    refused = room.come_in(WORDS[Role.READ])
    assert statuses == [403] * AT_ONCE
    assert refused.status_code == 429
    assert 0 < int(refused.headers["retry-after"]) <= 60
    assert "Wait" in refused.text


def test_after_waiting_one_may_try_again(room: Room) -> None:
    now = [0.0]
    room.app.state.keeper.pace = Pace(clock=lambda: now[0])
    for _ in range(AT_ONCE + 3):
        room.come_in("wrong")
    now[0] = 61.0
    assert room.come_in(WORDS[Role.READ]).status_code == 303


def test_a_header_gives_nobody_another_address(room: Room) -> None:
    for each in range(AT_ONCE):
        room.client.headers["x-forwarded-for"] = f"10.0.0.{each}"
        room.come_in("wrong")
    assert room.come_in("wrong").status_code == 429


def test_a_form_of_the_door_that_is_not_this_visits_is_turned_away(room: Room) -> None:
    forged = token_for(room.house, room.session(Role.READ))
    sent = {"passphrase": WORDS[Role.READ], "initials": "T1", "form_token": forged}
    assert room.client.post("/come-in", data=sent).status_code == 403


def test_on_this_machine_nobody_is_asked_for_a_passphrase(window: Window) -> None:
    told = window.get("/come-in")
    assert "nobody is asked for a passphrase" in told.text
    assert 'name="passphrase"' not in told.html


def test_initials_are_said_once_and_stand_in_every_form(window: Window) -> None:
    told = window.post("/initials", initials="QQ", back="/enter")
    assert "entered by QQ" in told.text
    assert window.get("/do/draw").field("by") == "QQ"


@pytest.mark.parametrize("initials", ["", "far too long", "a\x07"])
def test_what_are_no_initials_is_told_with_what_was_typed(window: Window, initials: str) -> None:
    refused = window.post("/initials", initials=initials)
    assert refused.status == 422
    assert 'id="page-initials-told"' in refused.html


def test_in_practice_another_day_is_played(window: Window) -> None:
    told = window.post("/as-at", as_at="25 Jan 2027", back="/enter")
    assert "Mon 25 Jan 2027" in told.text
    assert "nothing can be entered" not in told.text


def test_nothing_typed_comes_back_to_today(window: Window) -> None:
    window.post("/as-at", as_at="2027-01-25")
    assert "Mon 4 Jan 2027" in window.post("/as-at", as_at="", back="/enter").text


@pytest.mark.parametrize("day", ["soon", "04/05/27", "2027-02-30", "9999-12-31", "1066-10-14"])
def test_a_day_nobody_can_look_from_is_told_beside_it(window: Window, day: str) -> None:
    refused = window.post("/as-at", as_at=day)
    assert refused.status == 422
    assert 'id="page-as_at-told"' in refused.html
    assert f'id="page-as_at" name="as_at" value="{day}"' in refused.html


def test_no_passphrase_at_all_is_told_and_is_no_try(room: Room) -> None:
    for _ in range(30):
        refused = room.come_in("")
        assert (refused.status_code, refused.text.count('id="door-passphrase-wrong"')) == (422, 1)
    assert room.come_in(WORDS[Role.RECORD]).status_code == 303
