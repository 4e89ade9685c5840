"""What would change something is taken from a page of this house and this visit only."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from doors import address, every_route, token_for
from windows import KEY

from stockroom.web.app import house_app
from stockroom.web.door.roles import Role
from stockroom.web.house import House

if TYPE_CHECKING:
    from doors import Room

SAFE = ("GET", "HEAD", "OPTIONS")
UNSAFE = [
    (method, path)
    for method, path in every_route(house_app(House(Path("none.sqlite"), KEY)))
    if method not in SAFE
]
FORMS = [(method, path) for method, path in UNSAFE if not path.startswith("/api/")]
FOREIGN = (
    {"sec-fetch-site": "cross-site"},
    {"sec-fetch-site": "same-site"},
    {"origin": "https://elsewhere.example"},
    {"origin": "http://127.0.0.1:9999"},
    {"origin": "https://127.0.0.1"},
    {"origin": "null"},
)

pytestmark = pytest.mark.file


def test_the_forms_of_the_house_are_looked_at() -> None:
    assert ("POST", "/do/{name}") in FORMS
    assert ("POST", "/come-in") in FORMS


def test_a_form_without_the_token_of_its_own_visit_is_turned_away(room: Room) -> None:
    mine, other = room.session(Role.KEEP_HOUSE), room.session(Role.KEEP_HOUSE)
    visitor, before = room.visitor(mine), room.store()
    for method, path in FORMS:
        for token in ({}, {"form_token": ""}, {"form_token": token_for(room.house, other)}):
            sent = {"bottle": "S13", "amount": "1 g", "by": "T1", "once": "x"} | token
            came = visitor.request(method, address(path), data=sent)
            told = (came.status_code, "not from this visit" in came.text)
            assert told == (403, True), (method, path, token)
    assert room.store() == before


def test_what_a_page_of_another_site_sends_is_turned_away(room: Room) -> None:
    session = room.session(Role.KEEP_HOUSE)
    visitor, token = room.visitor(session), token_for(room.house, session)
    for method, path in UNSAFE:
        for headers in FOREIGN:
            sent = {"form_token": token}
            came = visitor.request(method, address(path), data=sent, headers=headers)
            told = (came.status_code, "another site" in came.text)
            assert told == (403, True), (method, path, headers)


def test_a_form_sent_by_a_page_of_this_house_is_taken(room: Room) -> None:
    session = room.session(Role.RECORD)
    sent = {"bottle": "S13", "amount": "100 cm3", "by": "T1", "once": "x", "back": "/enter"}
    came = room.visitor(session).post(
        "/do/draw",
        data=sent | {"form_token": token_for(room.house, session)},
        headers={"origin": "http://127.0.0.1", "sec-fetch-site": "same-origin"},
    )
    assert came.status_code == 303


@pytest.mark.parametrize("kind", ["text/plain", "application/x-www-form-urlencoded", "", "json"])
def test_the_api_reads_json_only_since_a_form_of_another_site_cannot_send_it(
    room: Room, kind: str
) -> None:
    visitor = room.visitor(room.session(Role.KEEP_HOUSE))
    came = visitor.post("/api/do/draw", content=b"{}", headers={"content-type": kind})
    assert came.status_code == 415
    assert came.headers["content-type"] == "application/problem+json"


def test_a_link_from_another_site_takes_one_step_inside_before_it_is_answered(room: Room) -> None:
    arriving = {"sec-fetch-site": "cross-site", "sec-fetch-mode": "navigate"}
    came = room.client.get('/day/K15?a="><b>', headers=arriving)
    assert came.status_code == 200
    assert "set-cookie" not in came.headers
    assert 'content="0; url=/day/K15?a=%22%3E%3Cb%3E"' in came.text
    onward = arriving | {"referer": "http://127.0.0.1/day/K15"}
    assert room.client.get("/day/K15", headers=onward).status_code == 303


@pytest.mark.parametrize("path", ["//evil.example/x", "/%09/evil.example", "///evil.example?a=b"])
def test_an_address_that_reads_as_another_site_leads_home(room: Room, path: str) -> None:
    arriving = {"sec-fetch-site": "cross-site", "sec-fetch-mode": "navigate"}
    came = room.client.get(f"http://127.0.0.1{path}", headers=arriving)
    assert ('content="0; url=/"' in came.text, "evil" in came.text) == (True, False)
    # and no page that is shown there leads on to it
    inside = room.visitor(room.session(Role.READ)).get(f"http://127.0.0.1{path}")
    assert (inside.status_code, 'value="//' in inside.text) == (404, False)
