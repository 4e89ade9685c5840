"""What stands on every answer, whatever it answers."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import pytest
from starlette.testclient import TestClient

from stockroom.web.app import house_app
from stockroom.web.door.headers import policy_for
from stockroom.web.door.roles import Role

if TYPE_CHECKING:
    from doors import Room
    from windows import Window

ANSWERS = ["/week", "/come-in", "/nowhere", "/static/stockroom.css", "/static/none", "/api/nothing"]


@pytest.mark.parametrize("path", ANSWERS)
def test_every_answer_says_what_a_browser_may_do_with_it(onlooker: Window, path: str) -> None:
    headers = onlooker.client.get(path).headers
    policy = headers["content-security-policy"]
    assert "default-src 'none'" in policy
    assert "frame-ancestors 'none'" in policy
    assert not {"unsafe", "data:", "*"} & set(policy.replace("'", " ").replace("-", " ").split())
    assert headers["x-content-type-options"] == "nosniff"
    assert headers["referrer-policy"] == "same-origin"
    assert headers["cross-origin-opener-policy"] == "same-origin"
    assert headers["cross-origin-resource-policy"] == "same-origin"
    allowed = headers["permissions-policy"].split(", ")
    assert {"camera=()", "geolocation=()"} <= set(allowed)
    assert all(each.endswith("=()") for each in allowed)


def test_what_is_refused_at_the_door_carries_them_too(onlooker: Window) -> None:
    for headers in ({"host": "elsewhere.example"}, {"content-length": "99999999"}):
        refused = onlooker.client.post("/do/draw", headers=headers)
        assert "content-security-policy" in refused.headers


@pytest.mark.parametrize("path", ["/week", "/come-in", "/nowhere", "/api/nothing"])
def test_nobody_keeps_a_page_of_the_house(onlooker: Window, path: str) -> None:
    assert onlooker.client.get(path).headers["cache-control"] == "no-store"


def test_the_style_may_be_kept_and_is_asked_for_again(onlooker: Window) -> None:
    assert onlooker.client.get("/static/stockroom.css").headers["cache-control"] == "no-cache"


def test_a_page_has_a_type_and_says_how_its_signs_are_written(onlooker: Window) -> None:
    assert onlooker.client.get("/week").headers["content-type"] == "text/html; charset=utf-8"


def test_tls_is_asked_for_from_then_on_only_where_it_is_spoken(room: Room) -> None:
    assert "strict-transport-security" not in room.client.get("/come-in").headers
    secure = TestClient(house_app(replace(room.house, secure=True)), "https://127.0.0.1")
    assert secure.get("/come-in").headers["strict-transport-security"] == "max-age=15724800"


def test_no_other_site_is_let_in_by_a_header(room: Room) -> None:
    visitor = room.visitor(room.session(Role.READ))
    came = visitor.get("/week", headers={"origin": "https://elsewhere.example"})
    assert not [name for name in came.headers if name.startswith("access-control")]
    assert visitor.options("/week").status_code == 405


def test_a_picture_opened_alone_may_carry_its_style_and_no_script() -> None:
    assert "script" not in policy_for("image/svg+xml")
    assert policy_for("image/svg+xml").startswith("default-src 'none'; style-src 'unsafe-inline'")
    assert "frame-ancestors 'none'" in policy_for("application/pdf")


def test_no_page_holds_a_script_or_a_style_of_its_own(onlooker: Window) -> None:
    import re

    for path in ("/week", "/enter", "/do/draw", "/come-in", "/visit", "/nowhere"):
        page = onlooker.get(path).html
        assert not re.search(
            r"<script(?![^>]*\bsrc=)|<style|\sstyle=|\son[a-z]+=|javascript:", page
        )
