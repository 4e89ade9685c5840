"""Every question of the API is answered as the command of its name answers under --json."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import pytest
from api_questions import QUESTIONS

if TYPE_CHECKING:
    from conftest import Stockroom
    from windows import Window

LEARNT = [
    ("found", "S02", "0.0961 mol/dm3", "--on", "2026-12-20"),
    ("found", "S02", "0.0953 mol/dm3", "--on", "2026-12-28"),
]


def test_each_question_is_answered_as_its_command_answers(
    window: Window, stockroom: Stockroom
) -> None:
    store: Any = window.house.path
    # something to hold the plan against, and a copy that numbers a sheet
    assert stockroom("plan", "--keep", "--by", "T1", store=store).code == 0
    assert stockroom("lost", "S03", "--by", "T1", store=store).code == 0
    wrong = []
    for question, asked, words in QUESTIONS:
        day = asked.get("as_at", "2027-01-04")
        told = stockroom(*words, "--json", "--as-at", day, store=store)
        if window.api(f"/api/{question}", **asked) != told.json:
            wrong.append(words)
    assert wrong == []


def test_what_its_checks_teach_is_told_as_learn_tells_it(
    window: Window, stockroom: Stockroom, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.delenv("STOCKROOM_BY", raising=False)
    store: Any = window.house.path
    for words in LEARNT:
        assert stockroom(*words, "--by", "T1", "--as-at", "2027-01-04", store=store).code == 0
    told = stockroom("learn", "S02", "--to", "95", "--json", "--as-at", "2027-01-04", store=store)
    assert told.json["order"] == 1
    assert window.api("/api/learn", what="S02", to="95") == told.json


def test_every_question_there_is_stands_in_the_list(onlooker: Window) -> None:
    paths = onlooker.api("/api/openapi.json")["paths"]
    questions = {path.split("/")[2] for path, of in paths.items() if "get" in of}
    assert questions - {asked.split("/")[0] for asked, _, _ in QUESTIONS} == {"learn"}


def test_a_day_given_is_looked_from(onlooker: Window) -> None:
    assert onlooker.api("/api/plan", as_at="2027-02-02")["as_at"] == "2027-02-02"


@pytest.mark.parametrize(
    ("address", "status", "word"),
    [
        ("/api/ready/K99", 404, "K09"),
        ("/api/plan?from=31/02/2027", 422, "February"),
        ("/api/plan?from=2027-02-02&to=2027-02-01", 422, "before"),
        ("/api/why", 422, "ref"),
        ("/api/why?ref=", 422, "names nothing"),
        ("/api/what-if", 422, "Nothing was asked"),
        ("/api/what-if?groups=K08", 422, "groups 'K08'"),
        ("/api/changed", 409, "No plan was kept"),
        ("/api/shelf?what=" + "x" * 201, 422, "200"),
        ("/api/fades/" + "x" * 201, 422, "200"),
        ("/api/nothing", 404, ""),
    ],
)
def test_what_cannot_be_answered_is_a_problem_in_words(
    onlooker: Window, address: str, status: int, word: str
) -> None:
    came = onlooker.client.get(address)
    assert came.status_code == status
    assert came.headers["content-type"] == "application/problem+json"
    told = came.json()
    assert told["status"] == status
    assert word in told["detail"] + told["hint"]


def test_an_answer_the_asker_has_is_not_sent_again(window: Window) -> None:
    first = window.client.get("/api/plan")
    again = window.client.get("/api/plan", headers={"if-none-match": first.headers["etag"]})
    assert (again.status_code, again.content) == (304, b"")
    window.enter("draw", bottle="S13", amount="100 cm3")
    after = window.client.get("/api/plan", headers={"if-none-match": first.headers["etag"]})
    assert after.status_code == 200
    assert after.headers["etag"] != first.headers["etag"]
