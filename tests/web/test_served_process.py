"""The pages as they are really served: many at once at first, and a plan made only once."""

from __future__ import annotations

import json
import shutil
import threading
import urllib.error
import urllib.request
from collections.abc import Callable, Iterator
from concurrent.futures import ThreadPoolExecutor
from functools import partial
from pathlib import Path
from typing import TypeVar

import pytest
from serving_process import PATIENCE, serving
from windows import FIRST_DAY, KEY, Window, window_on

from stockroom.web.house import House

Answered = TypeVar("Answered")

PLANNED = "a plan was made"

COUNTED = f"""
import sys
from stockroom.service import replayed
make = replayed.whole_plan
def whole_plan(*words, **more):
    print({PLANNED!r}, file=sys.stderr, flush=True)
    return make(*words, **more)
replayed.whole_plan = whole_plan
from stockroom.cli.main import run
run()
"""
"""The command, which says each time that a plan is made."""

ASKED = ("/week", "/shelf", "/api/plan", "/api/week", "/bottle/S13", "/day/K15", "/term", "/paper")

pytestmark = pytest.mark.file


def at_once(calls: list[Callable[[], Answered]]) -> list[Answered]:
    """What as many threads are answered, each of which begins when all are there."""
    together = threading.Barrier(len(calls))

    def begin(call: Callable[[], Answered]) -> Answered:
        together.wait(PATIENCE)
        return call()

    with ThreadPoolExecutor(len(calls)) as pool:
        return list(pool.map(begin, calls))


def asked(address: str, paths: tuple[str, ...]) -> list[tuple[int, str]]:
    """The statuses and pages that are answered to all of them at once."""

    def ask(path: str) -> tuple[int, str]:
        with urllib.request.urlopen(address + path, timeout=PATIENCE) as came:
            return came.status, came.read().decode()

    return at_once([partial(ask, path) for path in paths])


def draw(address: str, amount: str) -> int:
    """The status of a draw from S13, sent to the API."""
    values = json.dumps({"bottle": "S13", "amount": amount, "by": "T1"}).encode()
    kind = {"content-type": "application/json"}
    sent = urllib.request.Request(f"{address}/api/do/draw", values, kind)
    try:
        with urllib.request.urlopen(sent, timeout=PATIENCE) as came:
            return int(came.status)
    except urllib.error.HTTPError as refused:
        with refused:
            return refused.code


@pytest.fixture(scope="module")
def twin(practice: Path, tmp_path_factory: pytest.TempPathFactory) -> Window:
    """A window on a store of the same, in this process: what is the right answer."""
    store = Path(shutil.copy(practice, tmp_path_factory.mktemp("twin") / "twin.sqlite"))
    return window_on(House(store, KEY, FIRST_DAY))


@pytest.fixture(scope="module")
def served(
    practice: Path, tmp_path_factory: pytest.TempPathFactory
) -> Iterator[tuple[str, list[str]]]:
    """The address of a server where nothing was read or worked out before, and what it says."""
    store = Path(shutil.copy(practice, tmp_path_factory.mktemp("served") / "own.sqlite"))
    with serving(store=store, program=COUNTED) as (_, address, said):
        yield address, said


def plans(said: list[str]) -> int:
    return "".join(said).count(PLANNED)


def test_eight_who_come_first_of_all_are_told_right(
    served: tuple[str, list[str]], twin: Window
) -> None:
    answers = dict(zip(ASKED, asked(served[0], ASKED), strict=True))
    assert {status for status, _ in answers.values()} == {200}
    for path in ("/api/plan", "/api/week"):
        assert json.loads(answers[path][1]) == twin.api(path)
    for path, told in (("/shelf", "S13"), ("/bottle/S13", "S13"), ("/day/K15", "K15")):
        assert told in answers[path][1], path


def test_a_plan_is_made_once_for_all_who_ask_until_something_is_saved(
    served: tuple[str, list[str]], twin: Window
) -> None:
    address, said = served
    for _ in range(2):
        asked(address, ASKED)
    assert plans(said) == 1
    assert draw(address, "10 cm3") == 200
    told = {text for _, text in asked(address, ("/api/plan",) * 4)}
    asked(address, ASKED)
    assert plans(said) == 2
    twin.enter("draw", bottle="S13", amount="10 cm3")
    assert [json.loads(text) for text in told] == [twin.api("/api/plan")]


def test_of_six_who_draw_at_once_as_many_are_let_as_there_is_enough_for(
    served: tuple[str, list[str]],
) -> None:
    """Of 130 cm³, less what was drawn above, 50 go to two and never to three."""
    done = at_once([partial(draw, served[0], "50 cm3")] * 6)
    assert sorted(done) == [200, 200, 409, 409, 409, 409]
