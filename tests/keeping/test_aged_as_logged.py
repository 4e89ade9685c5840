"""A logged place ages its bottles by the record; the place's own temperature counts elsewhere."""

from __future__ import annotations

from dataclasses import replace
from datetime import date, datetime, timedelta
from typing import Any

import pytest
from houses import day, days
from hypothesis import given
from hypothesis import strategies as st

from stockroom.keeping.course import Mark, course
from stockroom.keeping.record import Check, CheckKind, Record, Stay
from stockroom.keeping.rules import Law, Origin, Rule, RuleKind
from stockroom.keeping.strength import aged, day_below, doubts_of, strengths_on
from stockroom.keeping.temperatures import TemperatureLog
from stockroom.keeping.verdict import Condition, limits_of, verdict
from stockroom.keeping.warming import where_it_stood

MONDAY = day("01-04")
# the house's planning figure: common practice, no source
FADES = Rule(RuleKind.FADES, origin=Origin.MADE, law=Law(2, 0.003, 20.0, 3.5))
BY_ENERGY = replace(FADES, law=Law(1, 0.002, 20.0, ea_kj_mol=90.0))
KEEPS = Rule(RuleKind.LIFE, days(90), Origin.MADE, at_c=18.0, factor_per_10c=3.5)


def logged(celsius: float, start: str = "2026-12-31", hours: int = 24 * 100) -> TemperatureLog:
    """An hourly record at one temperature, from midnight of a day on."""
    first = datetime.combine(day(start), datetime.min.time())
    return TemperatureLog.of((first + timedelta(hours=at), celsius) for at in range(hours + 1))


def bottle(*stays: Stay, **more: Any) -> Record:
    return replace(Record(made=MONDAY, nominal=1.6, stays=stays), **more)


def standing(celsius: float | None, log: TemperatureLog | None = None) -> Record:
    return bottle(Stay(MONDAY, "A3", celsius, log))


def expected(record: Record, rule: Rule, on: date) -> float:
    found = strengths_on(record, (rule,), on).expected
    assert found is not None
    return found


@pytest.mark.parametrize("rule", [FADES, BY_ENERGY])
@pytest.mark.parametrize("celsius", [5.0, 18.0, 28.0])
def test_a_constant_record_ages_as_a_place_of_that_temperature(rule: Rule, celsius: float) -> None:
    by_record = expected(standing(20.0, logged(celsius)), rule, day("03-15"))
    assert by_record == pytest.approx(expected(standing(celsius), rule, day("03-15")), rel=1e-9)


def test_what_was_logged_counts_before_what_the_place_is_said_to_be() -> None:
    warm, said = standing(20.0, logged(28.0)), standing(20.0)
    assert expected(warm, FADES, day("02-04")) < expected(said, FADES, day("02-04"))


def test_after_the_record_the_place_counts() -> None:
    # ten logged days at 30 °C are 35 at 20 °C, and ten more in the place at 20 °C
    record = standing(20.0, logged(30.0, "01-04", 240))
    assert expected(record, FADES, day("01-24")) == pytest.approx(
        expected(standing(20.0), FADES, MONDAY + timedelta(45)), rel=1e-9
    )


def test_a_life_is_used_up_by_the_record() -> None:
    # Worked out by hand: 90 days at 18 °C and 3.5 per 10 °C are 25.7 days at 28 °C
    (limit,) = limits_of(standing(18.0, logged(28.0)), (KEEPS,), day("02-20"))
    assert limit.until == MONDAY + timedelta(25)
    assert limit.because.endswith("25 d as logged to 2027-02-20, else at 18 °C")


def test_a_life_that_outlasts_its_record_goes_on_at_the_places_own() -> None:
    # ten days at 28 °C use 35 of 90; the other 55 are lived at 18 °C
    record = standing(18.0, logged(28.0, "01-04", 240))
    (limit,) = limits_of(record, (KEEPS,), day("01-20"))
    assert limit.until == MONDAY + timedelta(10 + 55)


def test_the_day_looked_from_does_not_move_the_last_good_day() -> None:
    record = standing(18.0, logged(28.0))
    until = {limits_of(record, (KEEPS,), day(on))[0].until for on in ("01-05", "01-20", "02-20")}
    assert until == {MONDAY + timedelta(25)}


def test_a_weak_verdict_says_by_which_record() -> None:
    answer = verdict(standing(20.0, logged(30.0)), (FADES,), day("03-20"))
    assert answer.condition is Condition.WEAK
    assert answer.decided_by.endswith("of its label strength, temperatures as logged to 2027-03-20")


def test_days_at_the_laws_own_temperature_are_added_up_over_stays() -> None:
    record = bottle(Stay(MONDAY, "H1", 30.0), Stay(day("01-14"), "A3", 20.0, logged(10.0)))
    found = aged(record, FADES, MONDAY, day("01-24"))
    assert found == pytest.approx(10 * 3.5 + 10 / 3.5)


celsius = st.floats(0.0, 40.0)
stays = st.lists(
    st.builds(
        lambda at, own, warm: Stay(
            MONDAY + timedelta(at), "A1", own, None if warm is None else logged(warm)
        ),
        st.integers(0, 120),
        st.none() | celsius,
        st.none() | celsius,
    ),
    max_size=4,
)
laws = st.one_of(
    st.builds(Law, st.sampled_from([0, 1, 2]), st.floats(1e-5, 0.02), st.just(20.0), st.just(3.0)),
    st.builds(
        Law,
        st.sampled_from([0, 1, 2]),
        st.floats(1e-5, 0.02),
        st.just(20.0),
        st.none(),
        st.floats(20.0, 120.0),
    ),
    st.builds(Law, st.just(2), st.just(0.0), st.just(20.0), named=st.just("hypochlorite")),
)


@given(stays, laws, st.integers(0, 300), st.integers(0, 300))
def test_strength_never_rises_with_time_or_moves_however_warm_it_was(
    moves: list[Stay], law: Law, one: int, other: int
) -> None:
    record, rule = bottle(*moves), replace(FADES, law=law)
    early, late = (
        expected(record, rule, MONDAY + timedelta(count)) for count in sorted((one, other))
    )
    assert late <= early <= 1.6


@given(stays, laws, st.floats(0.05, 1.7), st.integers(0, 100))
def test_it_falls_below_on_that_day_and_not_the_day_before(
    moves: list[Stay], law: Law, lowest: float, begun: int
) -> None:
    record, rule, since = bottle(*moves), replace(FADES, law=law), MONDAY + timedelta(begun)
    first = day_below(record, (rule,), lowest, since)
    if first is None:
        assert expected(record, rule, since + timedelta(36_525)) >= lowest
        return
    assert expected(record, rule, first) < lowest
    assert first == since or expected(record, rule, first - timedelta(1)) >= lowest


@given(stays, laws, st.floats(0.001, 0.1), st.integers(0, 300))
def test_the_range_of_what_was_found_holds_what_is_expected(
    moves: list[Stay], law: Law, doubt: float, later: int
) -> None:
    found = Check(MONDAY, CheckKind.FOUND, True, 1.5, doubt)
    known = strengths_on(
        bottle(*moves, checks=(found,)), (replace(FADES, law=law),), MONDAY + timedelta(later)
    )
    assert known.lowest is not None
    assert known.highest is not None
    assert known.expected is not None
    assert known.lowest <= known.expected <= known.highest <= 1.5 + 2 * doubt + 1e-9


def test_a_result_without_its_uncertainty_has_no_range() -> None:
    found = Check(MONDAY, CheckKind.FOUND, True, 1.5)
    known = strengths_on(bottle(checks=(found,)), (FADES,), day("02-04"))
    assert (known.lowest, known.highest, known.uncertainty) == (None, None, None)


def test_on_the_day_it_was_found_the_range_is_two_uncertainties() -> None:
    found = Check(MONDAY, CheckKind.FOUND, True, 1.5, 0.01)
    known = strengths_on(bottle(checks=(found,)), (FADES,), MONDAY)
    assert known.lowest == pytest.approx(1.48)
    assert known.highest == pytest.approx(1.52)


def test_an_old_bleach_fades_by_the_salt_it_was_made_with() -> None:
    rule = replace(FADES, law=Law(2, 0.0, 20.0, named="hypochlorite"))
    found = Check(day("02-01"), CheckKind.FOUND, True, 1.0)
    strong = replace(bottle(checks=(found,)), nominal=2.1)
    weak = replace(strong, nominal=1.0)
    assert expected(strong, rule, day("06-01")) < expected(weak, rule, day("06-01"))


def test_a_law_used_where_it_was_not_fitted_is_said_to_be_a_guess() -> None:
    rule = replace(FADES, law=Law(2, 0.0, 20.0, named="hypochlorite"))
    (doubt,) = doubts_of(standing(5.0), (rule,), day("02-04"))
    assert doubt.startswith("at 5 °C it is a guess")
    assert doubts_of(standing(20.0), (rule,), day("02-04")) == ()
    assert doubts_of(standing(5.0), (FADES,), day("02-04")) == ()


def test_the_course_tells_the_stays_and_the_kinetic_mean() -> None:
    record = bottle(Stay(MONDAY, "H1", 28.0), Stay(day("01-14"), "A3", 18.0, logged(20.0)))
    found = course(record, (FADES,), day("01-24"))
    assert [(stay.place, stay.logged_days) for stay in found.stood] == [("H1", 0), ("A3", 10)]
    assert found.stood[1].kinetic == pytest.approx(20.0)
    # ten days at 28 and ten at 20 °C, worked out with the formula of USP 29 <1160>
    assert found.kinetic == pytest.approx(24.83, abs=0.01)


def test_the_course_has_t90_where_it_stands_now() -> None:
    # 1/(9 k C₀) at 20 °C, and 3.5 times as fast at 30 °C
    found = course(standing(30.0), (FADES,), day("01-05"))
    assert found.t90 == pytest.approx(1 / (9 * 0.003 * 1.6) / 3.5)
    assert found.half == pytest.approx(1 / (0.003 * 1.6) / 3.5)


def test_a_mark_is_dated_and_held_against_the_day_it_is_wanted() -> None:
    wanted = [Mark("K01", 1.55, by=day("01-05")), Mark("K02", 1.55, by=day("02-05"))]
    found = course(standing(20.0), (FADES,), MONDAY, wanted)
    assert [mark.in_time for mark in found.marks] == [True, False]
    assert found.marks[0].on == day("01-11")


def test_a_bottle_without_law_or_strength_has_less_to_tell() -> None:
    found = course(Record(made=MONDAY), (), day("02-04"), [Mark("half", 0.5)])
    assert (found.rule, found.t90, found.marks, found.kinetic) == (None, None, (), None)


def test_a_life_used_up_in_two_places_is_not_told_as_one() -> None:
    record = bottle(Stay(MONDAY, "A1", 18.0), Stay(MONDAY + timedelta(7), "H1", 28.0))
    later = MONDAY + timedelta(14)
    assert where_it_stood(record, MONDAY + timedelta(3)) == "at 18 °C"
    assert where_it_stood(record, later) == "where it stood, now at 28 °C"
