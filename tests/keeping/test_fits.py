"""A straight line through results, the limits of its mean, and where they meet a bound."""

from __future__ import annotations

import math

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st
from stability_examples import batch

from stockroom.errors import BadAmount, MissingFigure
from stockroom.keeping.fits import (
    Fit,
    Side,
    crossing,
    fit_line,
    reach_of,
    shelf_life,
    slope_interval,
    straightened,
    strength_at,
)

# single batches, at least 95 %, one-sided. b4: (a+b), README of the R package expirest 0.1.7;
# b8: (a+b), JMP 12.0.1 as quoted in its tests; the others recomputed (b)
LIVES = {
    "b2": 23.326376,
    "b3": 23.115959,
    "b4": 40.791762,
    "b5": 23.148042,
    "b7": 25.052511,
    "b8": 15.844878,
}


def fitted(name: str) -> Fit:
    one = batch(name)
    return fit_line(one.times, one.values)


@pytest.mark.parametrize(("name", "months"), LIVES.items())
def test_a_single_batch_lives_as_long_as_published(name: str, months: float) -> None:
    assert shelf_life(fitted(name), lowest=95) == pytest.approx(months, abs=1e-5)


def test_the_line_of_a_batch_is_the_published_one() -> None:
    # (a+b) README of the R package expirest 0.1.7
    b4 = fitted("b4")
    assert b4.start == pytest.approx(104.070646, abs=1e-6)
    assert b4.slope == pytest.approx(-0.196151, abs=1e-6)
    assert b4.scatter == pytest.approx(0.424310, abs=1e-6)
    assert reach_of(b4.df) == pytest.approx(1.943180, abs=1e-6)


def test_the_line_itself_meets_the_bound_later_than_its_limit() -> None:
    # point estimate of b4 (a+b)
    b4 = fitted("b4")
    assert crossing(b4, 95, Side.LOWER, 0.0) == pytest.approx(46.2431, abs=1e-4)


@pytest.mark.parametrize(
    ("df", "two_sided", "t"),
    # from memory: the t table of any statistics text
    [(1, True, 12.706), (5, False, 2.015), (10, True, 2.228), (29, False, 1.699)],
)
def test_students_t_is_that_of_the_tables(df: int, two_sided: bool, t: float) -> None:
    assert reach_of(df, two_sided=two_sided) == pytest.approx(t, abs=5e-4)


def test_the_slope_has_its_interval() -> None:
    # t is 4.3027 for two degrees of freedom, from memory; the times are 5 about their mean
    line = fit_line([0, 1, 2, 3], [10.0, 9.1, 7.9, 7.0])
    error = line.scatter / math.sqrt(5)
    low, high = slope_interval(line)
    assert (low, high) == pytest.approx((-1.02 - 4.3027 * error, -1.02 + 4.3027 * error), abs=1e-4)


# -- bounds of every kind -----------------------------------------------------------------


def test_a_limit_that_starts_below_gives_no_life() -> None:
    assert shelf_life(fitted("b4"), lowest=104) == 0.0


def test_a_line_that_surely_rises_never_falls_out() -> None:
    assert shelf_life(fit_line([0, 1, 2, 3], [1.0, 2.1, 2.9, 4.0]), lowest=0.1) == math.inf


def test_a_slope_that_may_be_nothing_still_has_a_life() -> None:
    # its limits spread for ever, so the lower one meets every bound
    flat = fit_line([0, 10, 20, 30], [99.0, 100.0, 100.4, 99.2])
    assert slope_interval(flat)[0] < 0 < slope_interval(flat)[1]
    life = shelf_life(flat, lowest=95)
    assert flat.limit(life, Side.LOWER, reach_of(flat.df)) == pytest.approx(95)


def test_a_rise_within_its_scatter_has_a_life_too() -> None:
    rising = fit_line([0, 10, 20, 30], [99.0, 100.0, 100.4, 99.5])
    assert rising.slope > 0
    assert 30 < shelf_life(rising, lowest=90) < math.inf


def test_without_scatter_it_lives_as_long_as_the_line() -> None:
    assert shelf_life(fit_line([0, 1, 2], [10.0, 9.0, 8.0]), lowest=5) == pytest.approx(5.0)


def test_without_scatter_or_slope_it_lives_for_ever() -> None:
    assert shelf_life(fit_line([0, 1, 2], [10.0, 10.0, 10.0]), lowest=5) == math.inf


def test_an_upper_bound_is_the_lower_one_in_a_mirror() -> None:
    one = batch("b4")
    mirrored = fit_line(one.times, [-y for y in one.values])
    assert shelf_life(mirrored, highest=-95) == pytest.approx(LIVES["b4"], abs=1e-5)


def test_of_two_bounds_the_nearer_decides() -> None:
    assert shelf_life(fitted("b4"), lowest=95, highest=110) == shelf_life(fitted("b4"), lowest=95)


def test_no_bound_at_all_is_never_met() -> None:
    assert shelf_life(fitted("b4")) == math.inf


def test_what_may_go_either_way_lives_shorter() -> None:
    # one bound at 95 % is longer than the same bound at 97.5 %: ICH Q1E section 2 (a)
    either = shelf_life(fitted("b4"), lowest=95, two_sided=True)
    assert either == pytest.approx(shelf_life(fitted("b4"), lowest=95, confidence=0.975))
    assert either < LIVES["b4"]


# -- refusals -------------------------------------------------------------------------------


def test_two_points_leave_no_scatter() -> None:
    with pytest.raises(MissingFigure, match="2 points"):
        fit_line([0, 1], [2.0, 1.0])


def test_points_of_one_time_make_no_line() -> None:
    with pytest.raises(MissingFigure, match="all at 3"):
        fit_line([3, 3, 3], [2.0, 1.0, 1.5])


def test_no_points_make_no_line() -> None:
    with pytest.raises(MissingFigure, match="all none"):
        fit_line([], [])


@pytest.mark.parametrize("odd", [math.nan, math.inf])
def test_what_is_no_number_is_no_point(odd: float) -> None:
    with pytest.raises(BadAmount, match=str(odd)):
        fit_line([0, 1, 2], [1.0, odd, 1.0])


def test_times_without_values_are_refused() -> None:
    with pytest.raises(BadAmount, match="3 times and 2 values"):
        fit_line([0, 1, 2], [1.0, 2.0])


@pytest.mark.parametrize("order", [1, 2])
def test_a_strength_of_nothing_fits_no_curve(order: int) -> None:
    with pytest.raises(BadAmount, match=f"order {order}"):
        straightened(0.0, order)


def test_an_order_nobody_knows_is_refused() -> None:
    with pytest.raises(BadAmount, match="order 3"):
        straightened(1.0, 3)


# -- always ---------------------------------------------------------------------------------

times = st.lists(st.integers(0, 400), min_size=4, max_size=12).map(sorted)


@st.composite
def lines(draw: st.DrawFn) -> Fit:
    when = draw(times)
    assume(len(set(when)) > 1)
    slope = draw(st.floats(-0.2, 0.05))
    noise = draw(st.lists(st.floats(-2, 2), min_size=len(when), max_size=len(when)))
    return fit_line(when, [100 + slope * t + e for t, e in zip(when, noise, strict=True)])


@given(lines(), st.floats(50, 99))
def test_at_the_end_of_its_life_the_limit_meets_the_bound(line: Fit, bound: float) -> None:
    life, reach = shelf_life(line, lowest=bound), reach_of(line.df)
    # a flat line without scatter meets it where the numbers end
    assume(0 < life < 1e6)
    assert line.limit(life, Side.LOWER, reach) == pytest.approx(bound, abs=1e-6)


@given(lines(), st.floats(50, 99), st.floats(0, 0.999))
def test_until_then_the_limit_is_inside(line: Fit, bound: float, part: float) -> None:
    life = min(shelf_life(line, lowest=bound), 1e5)
    assume(life > 0)
    assert line.limit(part * life, Side.LOWER, reach_of(line.df)) >= bound - 1e-6


@given(lines())
def test_a_limit_that_starts_on_the_bound_has_no_time_at_all(line: Fit) -> None:
    reach = reach_of(line.df)
    assert crossing(line, line.limit(0.0, Side.LOWER, reach), Side.LOWER, reach) <= 1e-6


@given(st.floats(0, 300), st.floats(80, 120), st.floats(-1, -1e-3), st.floats(10, 70))
def test_without_scatter_the_limit_is_the_line(
    centre: float, mean: float, slope: float, bound: float
) -> None:
    line = Fit(centre, mean, slope, 0.0, 3, 0.2, 1e-4)
    life = crossing(line, bound, Side.LOWER, 2.0)
    assert life == pytest.approx(centre + (bound - mean) / slope, rel=1e-6)


@given(lines(), st.floats(50, 90), st.floats(0, 9))
def test_asking_for_more_never_lengthens_the_life(line: Fit, bound: float, more: float) -> None:
    assert shelf_life(line, lowest=bound + more) <= shelf_life(line, lowest=bound) * (1 + 1e-9)


@given(st.sampled_from(sorted(LIVES)), st.floats(0.01, 100))
def test_another_unit_of_time_changes_the_figure_only(name: str, scale: float) -> None:
    one = batch(name)
    line = fit_line([t * scale for t in one.times], one.values)
    assert shelf_life(line, lowest=95) == pytest.approx(LIVES[name] * scale, rel=1e-6)


@given(st.sampled_from(sorted(LIVES)), st.randoms(use_true_random=False))
def test_the_order_of_the_results_does_not_matter(name: str, chance: object) -> None:
    points = list(zip(batch(name).times, batch(name).values, strict=True))
    chance.shuffle(points)  # type: ignore[attr-defined]
    line = fit_line([t for t, _ in points], [y for _, y in points])
    assert shelf_life(line, lowest=95) == pytest.approx(LIVES[name], abs=1e-5)


@given(st.floats(1e-4, 50), st.sampled_from([0, 1, 2]))
def test_straightening_is_undone(strength: float, order: int) -> None:
    assert strength_at(straightened(strength, order), order) == pytest.approx(strength, rel=1e-9)
