"""How often one may try to come in, by a clock that stands where the test puts it."""

from __future__ import annotations

import pytest

from stockroom.web.door.pace import ALL_AT_ONCE, AT_ONCE, EVERY, REMEMBERED, Pace


class Clock:
    def __init__(self) -> None:
        self.now = 1000.0

    def __call__(self) -> float:
        return self.now


@pytest.fixture
def clock() -> Clock:
    return Clock()


@pytest.fixture
def pace(clock: Clock) -> Pace:
    return Pace(clock=clock)


def test_a_few_tries_at_once_and_then_one_now_and_then(pace: Pace, clock: Clock) -> None:
    assert [pace.wait("10.0.0.1") for _ in range(AT_ONCE)] == [0.0] * AT_ONCE
    assert pace.wait("10.0.0.1") == EVERY
    clock.now += EVERY - 1
    assert pace.wait("10.0.0.1") == pytest.approx(1)
    clock.now += 1
    assert pace.wait("10.0.0.1") == 0
    assert pace.wait("10.0.0.1") == EVERY


def test_coming_in_gives_back_its_own_try_and_none_before_it(pace: Pace) -> None:
    assert [pace.wait("10.0.0.1") for _ in range(AT_ONCE)] == [0.0] * AT_ONCE
    pace.came_in("10.0.0.1")
    assert pace.wait("10.0.0.1") == 0
    assert pace.wait("10.0.0.1") > 0


def test_coming_in_again_and_again_uses_up_what_all_together_have(pace: Pace) -> None:
    waits = []
    for _ in range(ALL_AT_ONCE + 1):
        waits.append(pace.wait("10.0.0.1"))
        pace.came_in("10.0.0.1")
    assert (waits[:-1], waits[-1] > 0) == ([0.0] * ALL_AT_ONCE, True)


def test_asking_while_there_is_none_left_costs_nothing_more(pace: Pace, clock: Clock) -> None:
    for _ in range(AT_ONCE + 500):
        pace.wait("10.0.0.1")
    clock.now += EVERY
    assert pace.wait("10.0.0.1") == 0
    assert pace.wait("10.0.0.2") == 0


def test_one_address_does_not_use_up_what_another_has(pace: Pace) -> None:
    for _ in range(AT_ONCE + 500):
        pace.wait("10.0.0.1")
    assert pace.wait("10.0.0.2") == 0


def test_all_together_have_a_bound_whatever_addresses_they_come_from(pace: Pace) -> None:
    waits = [pace.wait(f"10.0.{each // 250}.{each % 250}") for each in range(1000)]
    assert waits.count(0.0) == ALL_AT_ONCE


def test_a_day_of_guessing_gets_no_further_than_the_bound(pace: Pace, clock: Clock) -> None:
    tried = 0
    for each in range(24 * 360):
        clock.now += 10
        tried += pace.wait(f"10.{each // 65536}.{each // 256 % 256}.{each % 256}") == 0
    assert tried <= 24 * 240 + ALL_AT_ONCE


def test_a_machine_with_many_addresses_of_the_long_kind_is_one(pace: Pace) -> None:
    waits = [pace.wait(f"2001:db8:0:1::{each:x}") for each in range(1, 10)]
    assert waits.count(0.0) == AT_ONCE
    assert pace.wait("2001:db8:0:2::1") == 0


def test_an_address_nobody_can_read_is_counted_too(pace: Pace) -> None:
    assert [pace.wait("") for _ in range(AT_ONCE + 1)][-1] > 0


def test_only_so_many_addresses_are_kept_in_mind(pace: Pace) -> None:
    for each in range(3 * REMEMBERED):
        pace.wait(f"10.{each // 65536}.{each // 256 % 256}.{each % 256}")
    assert len(pace._each) == REMEMBERED


@pytest.mark.parametrize("workers", [2, 4, 8])
def test_several_workers_together_let_no_more_through(workers: int, clock: Clock) -> None:
    paces = [Pace(workers, clock) for _ in range(workers)]
    waits = [pace.wait("10.0.0.1") for pace in paces for _ in range(20)]
    assert waits.count(0.0) <= max(AT_ONCE, workers)
