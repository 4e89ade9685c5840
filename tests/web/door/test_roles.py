"""What each role may ask for and send: every address the application answers, one by one."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from doors import NEEDS, OPEN, WORDS, address, every_route, needed, token_for
from windows import KEY

from stockroom.web.app import house_app
from stockroom.web.door.roles import Role
from stockroom.web.forms.table import FORMS
from stockroom.web.house import House

if TYPE_CHECKING:
    from doors import Room
    from windows import Window

ROUTES = every_route(house_app(House(Path("none.sqlite"), KEY)))
CLOSED = [each for each in ROUTES if each not in OPEN]

pytestmark = pytest.mark.file


def asked(room: Room, method: str, path: str, role: Role) -> tuple[int, str, str]:
    """What a visitor with the role is answered: the status, where it leads, the page."""
    session = room.session(role)
    sent = {"form_token": token_for(room.house, session)} if method != "GET" else None
    json: dict[str, str] | None = {} if sent and path.startswith("/api/") else None
    came = room.visitor(session).request(
        method, address(path), data=None if json is not None else sent, json=json
    )
    return came.status_code, came.headers.get("location", ""), came.text


def is_turned_away(answer: tuple[int, str, str]) -> bool:
    status, where, page = answer
    return status == 401 or where.startswith("/come-in?") or (status == 403 and "role" in page)


def test_the_tables_name_only_what_there_is() -> None:
    assert set(OPEN) | set(NEEDS) <= set(ROUTES)


def test_a_stranger_is_turned_away_from_every_address_but_the_door(room: Room) -> None:
    """Also from one a page was added at and nobody thought of this table."""
    for method, path in CLOSED:
        answer = asked(room, method, path, Role.NOBODY)
        wanted = 401 if path.startswith("/api/") else 303
        assert (answer[0], is_turned_away(answer)) == (wanted, True), (method, path, answer)


def test_a_role_too_low_is_turned_away_everywhere_and_nothing_is_saved(room: Room) -> None:
    before = room.store()
    for method, path in CLOSED:
        for role in (each for each in WORDS if each < needed(method, path)):
            answer = asked(room, method, path, role)
            assert (answer[0], is_turned_away(answer)) == (403, True), (method, path, answer)
    assert room.store() == before


def test_the_role_itself_is_enough_and_looking_changes_nothing(room: Room) -> None:
    before = room.store()
    for method, path in (each for each in CLOSED if each[0] == "GET"):
        answer = asked(room, method, path, needed(method, path))
        assert not is_turned_away(answer), (method, path, answer)
        assert answer[0] < 500
        assert room.store() == before, path


def test_the_role_itself_is_enough_to_send_something_in(room: Room) -> None:
    for method, path in (each for each in CLOSED if each[0] != "GET"):
        answer = asked(room, method, path, needed(method, path))
        assert not is_turned_away(answer), (method, path, answer)
        assert answer[0] < 500


def test_whoever_may_only_look_saves_nothing_by_the_line_at_the_top(room: Room) -> None:
    before, session = room.store(), room.session(Role.READ)
    sent = {"line": "S13 100 cm3", "by": "T1", "once": "x", "back": "/week"}
    token = {"form_token": token_for(room.house, session)}
    came = room.visitor(session).post("/line", data=sent | token)
    assert came.status_code == 403
    assert room.store() == before


def test_whoever_comes_by_sees_the_door_and_no_more(room: Room) -> None:
    for method, path in sorted(OPEN):
        status, where, page = asked(room, method, path, Role.NOBODY)
        assert status in (200, 303, 404, 422)
        assert where in ("", "/week", "/come-in")
        assert "Quillmere" not in page


def test_a_form_is_shown_and_taken_for_its_role_and_those_above(room: Room) -> None:
    for form in FORMS:
        for role in WORDS:
            session = room.session(role)
            visitor, token = room.visitor(session), token_for(room.house, session)
            shown = visitor.get(f"/do/{form.name}").status_code
            taken = visitor.post(f"/do/{form.name}", data={"form_token": token}).status_code
            assert (shown == 403, taken == 403) == (role < form.role, role < form.role), form.name


def test_only_whoever_keeps_the_house_changes_it() -> None:
    keepers = {form.name for form in FORMS if form.role is Role.KEEP_HOUSE}
    assert keepers == {"rule", "change", "add"}


def test_on_this_machine_the_keeper_may_do_everything(window: Window) -> None:
    assert window.get("/do/draw").status == 200
    assert window.enter("draw", bottle="S13", amount="100 cm3").status == 200
