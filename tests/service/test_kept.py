"""What a server keeps in memory: given again while nothing was saved, and never a moment longer."""

from __future__ import annotations

import subprocess
import sys
import threading
import time
from collections import Counter
from collections.abc import Callable, Iterator
from concurrent.futures import ThreadPoolExecutor
from dataclasses import replace
from datetime import date
from pathlib import Path

import houses
import pytest
from small_house import small_house

from stockroom.errors import NotAllowed, UnknownName
from stockroom.measure.amounts import Amount
from stockroom.planning.facts import Facts
from stockroom.planning.plan import whole_plan
from stockroom.service import bookings, kept, known, replayed, stock
from stockroom.service.day import day_asked
from stockroom.service.plan import past_on, ready, term_plan, to_make, why
from stockroom.service.sheets import known_and_planned
from stockroom.settings import StoreAt
from stockroom.store.snapshot import facts_from

TODAY = date(2027, 1, 4)
MANY = 40

ASKED: list[Callable[[StoreAt], object]] = [
    lambda path: term_plan(path, as_at=TODAY),
    lambda path: to_make(path, as_at=TODAY),
    lambda path: past_on(path, as_at=TODAY, on=date(2027, 2, 10)),
    lambda path: ready(path, "K11", as_at=TODAY),
    lambda path: why(path, "K15", as_at=TODAY),
    lambda path: known_and_planned(path, as_at=TODAY),
    lambda path: known_and_planned(path, as_at=TODAY, through=date(2027, 9, 1)),
    lambda path: day_asked(path, None, as_at=TODAY),
]


@pytest.fixture
def serving() -> Iterator[None]:
    """Answers are kept, as they are while a server runs."""
    with kept.answers_kept():
        yield


@pytest.fixture
def read(monkeypatch: pytest.MonkeyPatch) -> Counter[str]:
    """How often the facts were read, and a plan was made, since."""
    counts: Counter[str] = Counter()

    def counted(name: str, call: Callable[..., object]) -> Callable[..., object]:
        def counting(*words: object, **more: object) -> object:
            counts[name] += 1
            return call(*words, **more)

        return counting

    replayed.forget_plans()
    monkeypatch.setattr(known, "facts_from", counted("facts", facts_from))
    monkeypatch.setattr(replayed, "whole_plan", counted("plan", whole_plan))
    return counts


def draw(path: StoreAt) -> None:
    """One cm³ out of S13."""
    stock.draw(path, "S13", Amount.cm3(1), on=None, today=TODAY, by="T1")


def left(path: StoreAt) -> int:
    """What the facts say that S13 holds, in cm³."""
    told, _ = known_and_planned(path, as_at=TODAY)
    micro = next(bottle.left for bottle in told.bottles if bottle.number == "S13")
    return micro // Amount.cm3(1).micro


@pytest.mark.usefixtures("serving")
@pytest.mark.parametrize("ask", ASKED)
def test_asked_again_nothing_is_read_or_planned(
    practice: Path, read: Counter[str], ask: Callable[[StoreAt], object]
) -> None:
    first = ask(practice)
    so_far = Counter(read)
    assert so_far["facts"] > 0
    assert ask(practice) == first
    assert read == so_far


@pytest.mark.parametrize("ask", ASKED)
def test_it_is_the_answer_a_command_gives(practice: Path, ask: Callable[[StoreAt], object]) -> None:
    alone = ask(practice)
    with kept.answers_kept():
        ask(practice)
        assert ask(practice) == alone


def test_a_command_keeps_nothing(practice: Path, read: Counter[str]) -> None:
    for _ in range(2):
        term_plan(practice, as_at=TODAY)
    assert (kept.keeping(), read["facts"]) == (False, 2)


@pytest.mark.usefixtures("serving")
def test_after_an_entry_the_next_who_asks_is_told_of_it(own: Path) -> None:
    before = left(own)
    for number in range(1, 4):
        draw(own)
        assert left(own) == before - number


@pytest.mark.usefixtures("serving")
def test_a_booking_that_was_moved_is_seen_though_no_entry_was_made(own: Path) -> None:
    def groups() -> int:
        told, _ = known_and_planned(own, as_at=TODAY)
        return next(each.groups for each in told.bookings if each.number == "K08")

    before = groups()
    bookings.shift(own, "K08", groups=before + 1, today=TODAY, by="T1")
    assert groups() == before + 1


@pytest.mark.file
@pytest.mark.usefixtures("serving")
def test_what_another_program_saved_is_seen(own: Path) -> None:
    before = left(own)
    code = "UPDATE bottle SET number = 'S13x' WHERE number = 'S14'"
    by_hand = f"import sqlite3, sys; c = sqlite3.connect(sys.argv[1]); c.execute({code!r});"
    subprocess.run([sys.executable, "-c", by_hand + "c.commit(); c.close()", own], check=True)
    told, _ = known_and_planned(own, as_at=TODAY)
    assert left(own) == before
    assert "S13x" in {bottle.number for bottle in told.bottles}


@pytest.mark.usefixtures("serving")
def test_saved_while_it_was_worked_out_it_is_not_kept_for_later(own: Path) -> None:
    def slow() -> int:
        found = left(own)
        # somebody saves after this was read, and before it is kept
        draw(own)
        return found

    first = kept.kept(own, "slow", (), slow)
    assert kept.kept(own, "slow", (), lambda: left(own)) == first - 1


@pytest.mark.usefixtures("serving")
def test_forty_who_ask_at_once_wait_for_one(practice: Path, read: Counter[str]) -> None:
    together = threading.Barrier(MANY)

    def ask(_: int) -> object:
        together.wait()
        return term_plan(practice, as_at=TODAY)

    with ThreadPoolExecutor(MANY) as pool:
        plans = list(pool.map(ask, range(MANY)))
    assert read == {"facts": 1, "plan": 1}
    assert all(plan is plans[0] for plan in plans)


@pytest.mark.usefixtures("serving")
def test_an_error_is_told_to_all_who_wait_and_not_kept(practice: Path) -> None:
    asked, waiting = [], threading.Barrier(2)

    def refuse() -> str:
        asked.append(1)
        waiting.wait()
        time.sleep(0.2)
        raise NotAllowed("not now", "later")

    def ask(make: Callable[[], str]) -> str:
        try:
            return kept.kept(practice, "refused", (), make)
        except NotAllowed as refusal:
            return refusal.message

    with ThreadPoolExecutor(2) as pool:
        first = pool.submit(ask, refuse)
        waiting.wait()
        second = pool.submit(ask, lambda: "made anew")
        assert (first.result(), second.result()) == ("not now", "not now")
    assert len(asked) == 1
    assert ask(lambda: "made anew") == "made anew"


@pytest.mark.usefixtures("serving")
def test_a_name_not_known_is_refused_each_time(practice: Path) -> None:
    for _ in range(2):
        with pytest.raises(UnknownName, match="K99"):
            ready(practice, "K99", as_at=TODAY)


@pytest.mark.usefixtures("serving")
def test_no_more_are_kept_than_was_said(practice: Path) -> None:
    made: list[int] = []

    def ask(number: int) -> None:
        kept.kept(practice, "few", (number,), lambda: made.append(number), most=2)

    for number in (1, 2, 1, 3, 1, 2):
        ask(number)
    # the second was asked for longest ago when the third came
    assert made == [1, 2, 3, 2]


@pytest.mark.usefixtures("serving")
def test_two_stores_are_kept_apart(own: Path, practice: Path) -> None:
    before = left(practice)
    draw(own)
    assert (left(own), left(practice)) == (before - 1, before)


@pytest.mark.file
def test_once_it_is_over_nothing_is_held_or_kept(own: Path) -> None:
    with kept.answers_kept():
        left(own)
    assert not kept.keeping()
    assert [each.name for each in own.parent.glob("own.sqlite*")] == ["own.sqlite"]


@pytest.mark.file
@pytest.mark.usefixtures("serving")
def test_sixteen_at_once_see_all_that_was_saved_before_they_asked(tmp_path: Path) -> None:
    path = small_house(tmp_path / "small.sqlite")
    begun, saved, lock = [0], [0], threading.Lock()
    full = left(path)

    def write(_: int) -> None:
        for _ in range(6):
            with lock:
                begun[0] += 1
            draw(path)
            with lock:
                saved[0] += 1

    def look(_: int) -> list[tuple[int, int, int]]:
        seen = []
        for _ in range(12):
            least = saved[0]
            drawn = full - left(path)
            seen.append((least, drawn, begun[0]))
        return seen

    with ThreadPoolExecutor(16) as pool:
        writers = [pool.submit(write, number) for number in range(4)]
        readers = [pool.submit(look, number) for number in range(12)]
        for each in writers:
            each.result()
        seen = [row for each in readers for row in each.result()]
    assert [row for row in seen if not row[0] <= row[1] <= row[2]] == []
    assert left(path) == full - 24


def test_sixteen_at_once_plan_different_days_without_a_word_of_each_other() -> None:
    line = houses.solution(0.1)
    base = houses.house(lines=[line])

    def ask(number: int) -> bool:
        facts: Facts = replace(base, end=base.end.replace(day=1 + number % 9))
        return replayed.replayed_plan(facts).end == facts.end

    replayed.forget_plans()
    with ThreadPoolExecutor(16) as pool:
        assert all(pool.map(ask, range(400)))
