"""A fault of the program: told in words, written down by the server, and nothing changed."""

from __future__ import annotations

import sqlite3
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from starlette.testclient import TestClient
from windows import FIRST_DAY, KEY

from stockroom.web.app import house_app
from stockroom.web.forms import table
from stockroom.web.house import House

if TYPE_CHECKING:
    from windows import Window

pytestmark = pytest.mark.file


@pytest.fixture
def faulty(own: Path) -> TestClient:
    """A client of a house in which one page and one question of the API have a fault."""
    app = house_app(House(own, KEY, FIRST_DAY))

    @app.get("/faulty")
    @app.post("/faulty")
    @app.get("/api/faulty")
    def fault() -> None:
        raise RuntimeError("the secret reason")

    return TestClient(app, "http://127.0.0.1", raise_server_exceptions=False)


def test_a_fault_is_told_in_words_without_where_it_stands(faulty: TestClient) -> None:
    came = faulty.get("/faulty")
    assert came.status_code == 500
    assert "fault in stockroom itself" in came.text
    assert "secret reason" not in came.text
    assert "Traceback" not in came.text
    assert came.headers["content-type"] == "text/html; charset=utf-8"
    assert "content-security-policy" in came.headers


def test_of_what_was_sent_it_is_not_said_that_nothing_was_saved(faulty: TestClient) -> None:
    assert "and nothing was saved" in faulty.get("/faulty").text
    came = faulty.post("/faulty")
    assert (came.status_code, "nothing was saved" in came.text) == (500, False)
    assert "look before you send it again" in came.text


def test_the_api_is_told_of_it_as_a_problem(faulty: TestClient) -> None:
    came = faulty.get("/api/faulty")
    assert came.headers["content-type"] == "application/problem+json"
    assert (came.status_code, came.json()["status"]) == (500, 500)


def test_the_server_is_given_the_fault_to_write_down(own: Path) -> None:
    app = house_app(House(own, KEY, FIRST_DAY))

    @app.get("/faulty")
    def fault() -> None:
        raise RuntimeError("the secret reason")

    with pytest.raises(RuntimeError, match="the secret reason"):
        TestClient(app, "http://127.0.0.1").get("/faulty")


def entries(store: Path) -> int:
    with sqlite3.connect(store) as connection:
        [[count]] = connection.execute("SELECT count(*) FROM entry")
    connection.close()
    return int(count)


def test_a_form_whose_saving_has_a_fault_changes_nothing_and_may_be_sent_again(
    window: Window, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    before = entries(own)
    with monkeypatch.context() as patched:
        # at the very end: the draw is written, and its answer cannot be
        patched.setattr("stockroom.service.once.asdict", lambda *a, **k: 1 / 0)
        with pytest.raises(ZeroDivisionError):
            window.enter("draw", bottle="S13", amount="100 cm3", once="the same")
    assert entries(own) == before
    told = window.enter("draw", bottle="S13", amount="100 cm3", once="the same")
    assert "30 cm³ left" in told.text
    assert entries(own) == before + 1


def test_a_refused_form_changes_nothing(window: Window, own: Path) -> None:
    before = own.read_bytes()
    for values in ({"bottle": "S99"}, {"bottle": "S13", "amount": "a drop"}, {"bottle": ""}):
        assert window.enter("draw", **values).status >= 400
    assert own.read_bytes() == before


def test_there_are_forms_to_send() -> None:
    assert "draw" in table.BY_NAME
