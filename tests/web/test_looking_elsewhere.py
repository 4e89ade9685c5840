"""Looking from another day in a house that is no practice: everything is shown, nothing entered."""

from __future__ import annotations

import re
import tempfile
from datetime import date
from pathlib import Path

import pytest
from windows import FIRST_DAY, KEY, Answer, Window, window_on

from stockroom.service.database import new_store, starter_folder
from stockroom.web.house import House

TOLD = "You are looking from Mon 25 Jan 2027, which is not today."

ADDED = {"table": "places", "cells": "place=A5", "why": "new"}

LIST = "what,size\npropanone,500 cm3\n"

pytestmark = pytest.mark.file


@pytest.fixture
def elsewhere(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Window:
    """The starter house, from its own day on; lists are held in a folder of the test."""
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path))
    store = tmp_path / "own.sqlite"
    new_store(store, tables=starter_folder())
    window = window_on(House(store, KEY, FIRST_DAY))
    window.post("/initials", initials="T1", back="/enter")
    return window


def look_from(window: Window, day: date | None) -> None:
    window.post("/as-at", as_at=day.isoformat() if day else "", back="/enter")


def given(window: Window) -> str:
    """The address of a list that was given to be brought in."""
    sent = {"form_token": window.get("/bring-in").field("form_token")}
    came = window.client.post("/bring-in", data=sent, files={"file": ("old.csv", LIST.encode())})
    return str(came.url).removeprefix("http://127.0.0.1")


def every_way(window: Window, address: str) -> dict[str, Answer]:
    """What each way to write answers."""
    return {
        "a form": window.enter("add", **ADDED),
        "print": window.post("/paper/week", paper="A4"),
        "calendar": window.post("/paper/calendar"),
        "keep": window.post("/changed/keep", by="T1"),
        "agree": window.post(f"{address}/agree", by="T1"),
        "api": api(window),
    }


def api(window: Window) -> Answer:
    came = window.client.post("/api/do/add", json=ADDED | {"cells": "place=A6", "by": "T1"})
    return Answer(came.status_code, came.text, str(came.url))


def test_nothing_is_entered_and_each_says_which_day_it_is(elsewhere: Window) -> None:
    address = given(elsewhere)
    look_from(elsewhere, date(2027, 1, 25))
    assert isinstance(elsewhere.house.path, Path)
    before = elsewhere.house.path.read_bytes()
    for way, answer in every_way(elsewhere, address).items():
        told = (answer.status, TOLD in answer.text, "Go back to today, then" in answer.text)
        assert told == (409, True, True), (way, re.findall(r"why-wrong.*?</p>", answer.html))
    assert elsewhere.house.path.read_bytes() == before


def test_back_on_today_it_is_entered(elsewhere: Window) -> None:
    """Else the test above would pass for whatever cannot be entered anyway."""
    address = given(elsewhere)
    look_from(elsewhere, date(2027, 1, 25))
    look_from(elsewhere, None)
    for way, answer in every_way(elsewhere, address).items():
        assert answer.status == 200, (way, re.findall(r"why-wrong.*?</p>", answer.html))


def test_no_page_shows_a_form_to_enter_by(elsewhere: Window) -> None:
    look_from(elsewhere, date(2027, 1, 25))
    for page in ("/do/add", "/changed", "/paper/calendar"):
        assert 'aria-label="Keep this plan"' not in elsewhere.get(page).html
    assert "go back to today first" in elsewhere.get("/do/add").text
