"""Every form as a request: the object sent in, done once, refused with the field it is about."""

from __future__ import annotations

import json
from datetime import date
from typing import TYPE_CHECKING, Any

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom
    from windows import Window

DRAW = {"bottle": "S13", "amount": "100 cm3", "by": "T1"}


def do(window: Window, form: str, sent: Any, **headers: str) -> tuple[int, Any]:
    """A form sent in as JSON: the status and the answer."""
    named = {name.replace("_", "-"): value for name, value in headers.items()}
    named |= {"content-type": "application/json"}
    came = window.client.post(f"/api/do/{form}", content=json.dumps(sent), headers=named)
    return came.status_code, came.json()


def left(window: Window) -> float:
    """What S13 holds, in cm³."""
    return float(window.api("/api/shelf", what="S13")["bottles"][0]["left"])


def test_a_draw_is_answered_as_the_command_answers(window: Window, stockroom: Stockroom) -> None:
    status, told = do(window, "draw", DRAW)
    words = ["draw", "S14", "100 cm3", "--by", "T1", "--json", "--as-at", "2027-01-04"]
    store: Any = window.house.path
    command = stockroom(*words, store=store).json
    assert status == 200
    assert list(told) == list(command)
    assert told["text"].startswith("Drew 100 cm³ from S13")


def test_what_was_saved_is_seen_by_the_next_question(window: Window) -> None:
    before = left(window)
    do(window, "draw", DRAW)
    assert left(window) == before - 100


def test_sent_again_with_the_same_key_it_counts_once(window: Window) -> None:
    first = do(window, "draw", DRAW, idempotency_key="one")
    assert do(window, "draw", DRAW, idempotency_key="one") == first
    assert left(window) == 30


def test_the_same_key_for_another_form_is_another_event(window: Window) -> None:
    do(window, "draw", DRAW | {"amount": "10 cm3"}, idempotency_key="one")
    do(window, "spill", DRAW | {"amount": "10 cm3"}, idempotency_key="one")
    assert left(window) == 110


def test_the_same_key_for_something_else_is_refused_and_not_dropped(window: Window) -> None:
    do(window, "draw", DRAW | {"amount": "10 cm3"}, idempotency_key="one")
    status, told = do(window, "draw", DRAW | {"amount": "20 cm3"}, idempotency_key="one")
    assert (status, told["hint"]) == (422, "Draw a new key for each event.")
    assert left(window) == 120


REFUSED: list[tuple[dict[str, Any], int, str]] = [
    ({"amount": "300 cm3"}, 409, "amount"),
    ({"amount": "a drop"}, 422, "amount"),
    ({"bottle": "S99"}, 404, "bottle"),
    ({"by": ""}, 422, "by"),
    ({"amount": 1.5}, 422, "amount"),
    ({"amount": ["1 g"]}, 422, "amount"),
    ({"amount": "1 g\ud800"}, 422, "amount"),
    ({"booking": "K16\x00"}, 422, "booking"),
    ({"amount": "9" * 600}, 422, "amount"),
]
"""What a draw is sent with, the status, and the field the refusal names."""


def test_a_refusal_names_its_field_and_saves_nothing(window: Window) -> None:
    before = window.client.get("/api/shelf").content
    for sent, status, field in REFUSED:
        came = do(window, "draw", DRAW | sent)
        assert (came[0], came[1].get("field")) == (status, field), sent
        assert window.client.get("/api/shelf").content == before, sent


def test_the_hint_of_a_refusal_names_the_request_and_not_the_command(window: Window) -> None:
    on_its_day = window.on(date(2027, 1, 12))
    _, told = do(on_its_day, "destroyed", {"booking": "K01", "by": "T1"})
    assert "POST /api/do/discard" in told["hint"]
    assert "stockroom " not in told["hint"]


def test_a_key_that_is_no_field_is_refused_with_those_that_are(window: Window) -> None:
    status, told = do(window, "draw", DRAW | {"amont": "1 cm3"})
    assert (status, "amount" in told["hint"]) == (422, True)


@pytest.mark.parametrize(
    ("body", "kind", "status"),
    [
        ("[]", "application/json", 400),
        ("{", "application/json", 400),
        ("[" * 30_000, "application/json", 400),
        ('{"bottle": "S13"}', "text/plain", 415),
        ("bottle=S13", "application/x-www-form-urlencoded", 415),
    ],
)
def test_what_is_no_object_in_json_is_refused(
    window: Window, body: str, kind: str, status: int
) -> None:
    came = window.client.post("/api/do/draw", content=body, headers={"content-type": kind})
    assert came.status_code == status


def test_true_and_whole_numbers_are_read_as_they_would_be_typed(window: Window) -> None:
    told = do(window, "count", {"bottle": "S13", "amount": "1 cm3", "by": "T1"})
    entry = {"entry": told[1]["entry"], "why": "twice", "by": "T1"}
    assert do(window, "put-right", entry)[0] == 200


def test_every_form_can_be_sent_in_and_is_described(onlooker: Window) -> None:
    from stockroom.web.forms.table import FORMS

    paths = onlooker.api("/api/openapi.json")["paths"]
    for form in FORMS:
        body = paths[f"/api/do/{form.name}"]["post"]["requestBody"]
        schema = body["content"]["application/json"]["schema"]
        assert set(schema["properties"]) == {"by", *(each.name for each in form.fields)}
