"""A logger's record: what so much warmth comes to, straight between readings, apart from gaps."""

from __future__ import annotations

from datetime import date, datetime, timedelta

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadDate
from stockroom.keeping.arrhenius import (
    Response,
    by_energy,
    by_factor,
    kinetic_response,
    mean_kinetic,
)
from stockroom.keeping.storage_limits import limits_for, minutes_outside
from stockroom.keeping.temperatures import (
    MINUTES_PER_DAY,
    Stretch,
    TemperatureLog,
    midnight,
    minute_of,
    moment_of,
)

START = datetime(2027, 1, 4)
DAY = date(2027, 1, 4)
THREEFOLD = by_factor(20.0, 3.0)

degrees = st.floats(-20.0, 45.0)
responses = st.one_of(
    st.builds(by_factor, st.just(20.0), st.floats(1.1, 5.0)),
    st.builds(by_energy, st.just(20.0), st.floats(10.0, 200.0)),
)
steps = st.lists(st.tuples(st.integers(1, 4000), degrees), min_size=1, max_size=40)
minutes = st.integers(-2 * MINUTES_PER_DAY, 60 * MINUTES_PER_DAY)


def logged(*celsius: float, every: int = 60) -> TemperatureLog:
    """Readings from Monday midnight, so many minutes apart."""
    return TemperatureLog.of(
        (START + timedelta(minutes=every * at), each) for at, each in enumerate(celsius)
    )


@st.composite
def logs(draw: st.DrawFn) -> TemperatureLog:
    at, row = minute_of(START), []
    for step, celsius in draw(steps):
        at += step
        row.append((moment_of(at), celsius))
    return TemperatureLog.of(row)


def test_minutes_and_clock_times_undo_each_other() -> None:
    moment = datetime(2027, 10, 31, 1, 59)
    assert moment_of(minute_of(moment)) == moment
    assert moment_of(midnight(DAY)) == START


def test_an_hour_at_ten_degrees_more_counts_threefold() -> None:
    log = logged(30.0, 30.0)
    start = midnight(DAY)
    assert log.own_minutes(THREEFOLD, start, start + 60) == pytest.approx(180.0)


def test_between_two_readings_the_pace_runs_straight() -> None:
    # from pace 1 to pace 3: the first half hour holds a quarter of the rise
    log, start = logged(20.0, 30.0), midnight(DAY)
    assert log.own_minutes(THREEFOLD, start, start + 30) == pytest.approx(30 + 30 * 2 / 4)
    assert log.own_minutes(THREEFOLD, start, start + 60) == pytest.approx(60 * 2)


def test_before_and_after_the_record_the_place_counts() -> None:
    log, start = logged(30.0, 30.0), midnight(DAY)
    assert log.own_minutes(THREEFOLD, start - 100, start + 160, 0.5) == pytest.approx(50 + 180 + 50)


def test_a_gap_counts_at_the_places_own_pace() -> None:
    # readings every hour, then none for two days
    row = [(START + timedelta(hours=at), 30.0) for at in (*range(5), *range(52, 57))]
    log, start = TemperatureLog.of(row), midnight(DAY)
    assert log.gap_limit == MINUTES_PER_DAY
    assert log.told_minutes(start, start + 60 * 56) == 8 * 60
    assert log.own_minutes(THREEFOLD, start, start + 60 * 56, 1.0) == pytest.approx(
        3 * 8 * 60 + 48 * 60
    )


def test_a_slow_logger_has_longer_gaps() -> None:
    assert logged(20, 20, 20, every=2 * MINUTES_PER_DAY).gap_limit == 6 * MINUTES_PER_DAY


@given(logs(), responses, st.lists(minutes, min_size=3, max_size=3), st.floats(0.0, 5.0))
def test_the_integral_is_additive(
    log: TemperatureLog, response: Response, cuts: list[int], elsewhere: float
) -> None:
    one, two, three = (midnight(DAY) + cut for cut in sorted(cuts))
    whole = log.own_minutes(response, one, three, elsewhere)
    parts = log.own_minutes(response, one, two, elsewhere)
    parts += log.own_minutes(response, two, three, elsewhere)
    assert parts == pytest.approx(whole, rel=1e-9, abs=1e-6)


@given(degrees, st.integers(2, 50), st.integers(1, 600), responses)
def test_a_constant_record_is_as_that_temperature(
    celsius: float, count: int, every: int, response: Response
) -> None:
    log, span = logged(*[celsius] * count, every=every), every * (count - 1)
    start = midnight(DAY)
    own = log.own_minutes(response, start, start + span)
    assert own == pytest.approx(span * response.pace(celsius), rel=1e-9)


@given(logs(), responses, minutes, minutes, st.floats(0.0, 5.0))
def test_time_is_never_given_back(
    log: TemperatureLog, response: Response, one: int, two: int, elsewhere: float
) -> None:
    start, end = (midnight(DAY) + cut for cut in sorted((one, two)))
    assert log.own_minutes(response, start, end, elsewhere) >= -1e-9


@given(st.lists(degrees, min_size=1, max_size=30), st.integers(1, 600))
def test_readings_equally_far_apart_count_alike(celsius: list[float], every: int) -> None:
    found = logged(*celsius, every=every).summary()
    assert found is not None
    assert found.kinetic == pytest.approx(mean_kinetic(celsius), abs=1e-9)
    assert found.mean == pytest.approx(sum(celsius) / len(celsius), abs=1e-9)
    assert (found.lowest, found.highest) == (min(celsius), max(celsius))


def test_a_published_row_of_readings_comes_out_as_worked_out() -> None:
    # E8, worked out again (b) from the formula of USP 29 <1160> (a, page copy)
    found = logged(17.5, 18.0, 19.5, 21.0, 24.5, 28.0, 22.0).summary()
    assert found is not None
    assert found.kinetic == pytest.approx(22.1883, abs=5e-4)


def test_readings_unequally_far_apart_count_by_their_time() -> None:
    # E9 by trapezoid, worked out again (b)
    row = zip((0, 4, 6, 12, 24), (20.0, 22.0, 30.0, 26.0, 20.0), strict=True)
    found = TemperatureLog.of((START + timedelta(hours=at), each) for at, each in row).summary()
    assert found is not None
    assert found.kinetic == pytest.approx(24.8774, abs=5e-4)


def test_a_summary_of_some_days_looks_at_those_only() -> None:
    log = logged(*[20.0] * 24, *[30.0] * 24)
    found = log.summary(midnight(DAY), midnight(DAY) + 60 * 23)
    assert found is not None
    assert (found.count, found.highest, found.last) == (24, 20.0, START + timedelta(hours=23))
    assert log.summary(0, 1) is None


def test_a_single_reading_is_its_own_mean() -> None:
    found = logged(21.5).summary()
    assert found is not None
    assert [found.mean, found.kinetic] == pytest.approx([21.5, 21.5])


def test_a_summary_names_its_gaps() -> None:
    row = [(START + timedelta(days=at), 20.0) for at in (0, 1, 2, 3, 4, 14)]
    found = TemperatureLog.of(row).summary()
    assert found is not None
    assert found.gaps == ((START + timedelta(days=4), START + timedelta(days=14)),)


@pytest.mark.parametrize(
    ("at", "celsius"), [((), ()), ((5, 5), (20.0, 20.0)), ((7, 5), (20.0, 20.0)), ((5,), ())]
)
def test_a_record_must_run_forward(at: tuple[int, ...], celsius: tuple[float, ...]) -> None:
    with pytest.raises(BadDate, match=f"{len(at)} times with {len(celsius)} temperatures"):
        TemperatureLog(at, celsius)


def test_two_records_alike_are_one() -> None:
    one, two = logged(20.0, 21.0), logged(20.0, 21.0)
    one.summary()
    assert one == two
    assert hash(one) == hash(two)


@given(logs(), responses, st.integers(0, 40), st.floats(0.0, 400.0), st.floats(0.0, 35.0))
def test_a_life_reaches_to_its_last_day_and_not_beyond(
    log: TemperatureLog, response: Response, begun: int, life: float, celsius: float
) -> None:
    since = DAY + timedelta(days=begun)
    stretch = Stretch(DAY, since, celsius, log)
    last = stretch.reach(response, since, life)
    assert stretch.own_days(response, since, last) <= life + 1e-6
    if last < date.max:
        assert stretch.own_days(response, since, last + timedelta(1)) > life - 1e-6


def test_a_life_in_the_cold_for_ever_has_no_last_day() -> None:
    assert Stretch(DAY, DAY, -200.0).reach(by_factor(20.0, 5.0), DAY, 1000.0) == date.max


def test_half_a_rise_over_the_limit_is_half_the_time_outside() -> None:
    # Source: USP <659>, as restated in exam notes (a, secondary): refrigerator 2 to 8 °C
    limits = limits_for(5.0)
    assert limits is not None
    assert minutes_outside(logged(6.0, 10.0, 10.0), limits) == (0.0, 90.0)
    assert minutes_outside(logged(2.0, 0.0), limits) == (60.0, 0.0)


@pytest.mark.parametrize(
    ("celsius", "name"),
    [(5, "refrigerator"), (12, "cool place"), (20, "controlled room temperature")],
)
def test_a_place_is_held_to_the_limits_of_its_kind(celsius: float, name: str) -> None:
    limits = limits_for(celsius)
    assert limits is not None
    assert limits.name == name


@pytest.mark.parametrize("celsius", [None, -18.0, 37.0])
def test_freezers_and_ovens_have_no_limits_here(celsius: float | None) -> None:
    assert limits_for(celsius) is None


def test_the_kinetic_response_has_its_own_gas_constant() -> None:
    assert kinetic_response().theta == pytest.approx(10_000, abs=0.5)


def test_two_readings_a_month_apart_tell_nothing_of_the_time_between() -> None:
    # three of their own steps would be a quarter of a year
    assert logged(5.0, 5.0, every=30 * 1440).gap_limit == 7 * 1440
    assert logged(*[5.0] * 5, every=7 * 1440).gap_limit == 7 * 1440
