"""What dated strengths teach of a bottle or a line, and what they cannot."""

from __future__ import annotations

import math
from dataclasses import replace
from datetime import date, timedelta

import pytest
from houses import day, found
from hypothesis import given
from hypothesis import strategies as st
from stability_examples import TABLE_IV, TABLE_VIII

from stockroom.errors import BadAmount, MissingFigure, NotAllowed
from stockroom.keeping.fits import Fit
from stockroom.keeping.laws import DAYS_PER_MONTH, strength_after
from stockroom.keeping.learnt import Learnt, learn_bottle, learn_line, monthly_loss, rate_of
from stockroom.keeping.pooling import Model
from stockroom.keeping.record import Check, CheckKind, Record, Stay
from stockroom.keeping.rules import Law, Origin, Rule, RuleKind
from stockroom.keeping.series import PLAIN, Series, order_of, rule_for, series_of

MADE = day("2026-10-05")
FADES = Rule(RuleKind.FADES, law=Law(1, 0.001))
OPENED = Rule(RuleKind.FADES, origin=Origin.OPENED, law=Law(1, 0.001))
WARM = Rule(RuleKind.FADES, law=Law(1, 0.001, at_c=20.0, factor_per_10c=2.0))


def series(*results: tuple[int, float], bottle: str = "S02") -> Series:
    """A series from (age in days, strength) under a plain law of the first order."""
    ages, strengths = zip(*results, strict=True)
    days = tuple(MADE + timedelta(age) for age in ages)
    return Series(bottle, FADES, MADE, days, tuple(float(age) for age in ages), strengths)


def fading(rate: float, *, noise: float = 0.0005, bottle: str = "S02", order: int = 1) -> Series:
    """Five checks of a bottle that loses by a law, a little off it up and down."""
    law, ages = Law(order, rate), (0, 28, 56, 84, 112)
    true = [strength_after(0.1, law, age) for age in ages]
    off = [1 + noise * sign for sign in (1, -1, 0, -1, 1)]
    results = [(age, s * o) for age, s, o in zip(ages, true, off, strict=True)]
    return series(*results, bottle=bottle)


def learnt_of_table(table: list) -> Learnt:  # type: ignore[type-arg]
    """A published study as if its batches were bottles and its months days."""
    every = [series(*((int(t), y) for t, y in zip(b.times, b.values, strict=True)), bottle=b.name)
             for b in table]  # fmt: skip
    return learn_line(every, 0)


# -- the series ------------------------------------------------------------------------


def test_ages_are_counted_from_the_rules_origin() -> None:
    checks = (found("2026-12-01", 90.0), found("2026-11-01", 92.0))
    record = Record(received=day("2026-09-01"), opened=day("2026-10-02"), checks=checks)
    one = series_of("B01", record, OPENED, day("01-04"))
    assert one
    assert (one.since, one.ages) == (day("2026-10-02"), (30.0, 60.0))
    assert one.strengths == (92.0, 90.0)


def test_what_was_found_while_sealed_says_nothing_of_fading() -> None:
    checks = (found("2026-09-15", 99.0), found("2026-11-01", 92.0))
    record = Record(received=day("2026-09-01"), opened=day("2026-10-02"), checks=checks)
    one = series_of("B01", record, OPENED, day("01-04"))
    assert one
    assert one.strengths == (92.0,)


def test_a_bottle_still_sealed_has_no_series_from_opening() -> None:
    record = Record(received=day("2026-09-01"), checks=(found("2026-11-01", 99.0),))
    assert series_of("B01", record, OPENED, day("01-04")) is None


def test_checks_still_to_come_are_not_counted() -> None:
    record = Record(made=MADE, checks=(found("2026-11-01", 1.0), found("02-01", 0.9)))
    one = series_of("S02", record, FADES, day("01-04"))
    assert one
    assert one.strengths == (1.0,)


def test_what_was_found_before_a_top_up_is_not_mixed_in() -> None:
    checks = tuple(found(on, 0.1) for on in ("2026-11-01", "2026-12-01", "2026-12-20"))
    one = series_of("S02", Record(made=MADE, checks=checks), FADES, day("01-04"), day("2026-12-01"))
    assert one
    assert one.ages == (0.0, 19.0)


def test_a_warm_day_ages_for_more_than_one() -> None:
    stays = (Stay(MADE, "H1", 30.0),)
    record = Record(made=MADE, stays=stays, checks=(found("2026-10-15", 0.1),))
    one = series_of("S02", record, WARM, day("01-04"))
    assert one
    assert one.ages == pytest.approx((20.0,))


def test_looks_are_no_strengths() -> None:
    looked = Check(day("2026-11-01"), CheckKind.LOOKED)
    assert series_of("S02", Record(made=MADE, checks=(looked,)), FADES, day("01-04")) is None


def test_without_a_rule_the_calendar_counts_and_the_first_order_is_asked() -> None:
    rule = rule_for(Record(made=MADE), (), MADE)
    assert (rule, order_of(rule)) == (PLAIN, 1)
    assert series_of("S02", Record(made=MADE, checks=(found("2026-10-15", 0.1),)), rule, MADE
                     + timedelta(99))  # fmt: skip


def test_the_order_is_that_of_the_houses_rule() -> None:
    bleach = Rule(RuleKind.FADES, law=Law(2, 0.0003))
    assert order_of(rule_for(Record(made=MADE), (bleach,), MADE)) == 2


# -- one bottle ----------------------------------------------------------------------------


@pytest.mark.parametrize(("order", "rate"), [(0, 0.0001), (1, 0.002), (2, 0.02)])
def test_the_rate_behind_the_checks_is_found(order: int, rate: float) -> None:
    learnt = learn_bottle(fading(rate, order=order, noise=1e-4), order)
    assert learnt.rate("S02").value == pytest.approx(rate, rel=0.01)


@pytest.mark.parametrize("order", [0, 1, 2])
def test_the_life_ends_before_the_line_itself_gets_there(order: int) -> None:
    learnt = learn_bottle(fading(0.002), order)
    bottle, life = learnt.life(0.08)
    law = learnt.law(learnt.rate(bottle).value)
    assert learnt.lower_limit(bottle, life) == pytest.approx(0.08)
    assert strength_after(0.1, law, life) > 0.08


def test_the_interval_holds_the_rate_and_its_upper_limit() -> None:
    rate = learn_bottle(fading(0.002), 1).rate("S02")
    assert rate.low < rate.value < rate.most < rate.high
    assert rate.clear


def test_a_rate_that_may_be_nothing_is_not_clear() -> None:
    assert not learn_bottle(fading(0.0001, noise=0.01), 1).rate("S02").clear


def test_the_single_published_batch_lives_as_published() -> None:
    # LeBlond 2011 batch b4, months read as days (a+b)
    assert learnt_of_table(TABLE_VIII[:1]).life(95.0)[1] == pytest.approx(40.791762, abs=1e-5)


def test_a_month_of_a_first_order_rate_is_lost_by_the_exponential() -> None:
    assert monthly_loss(7.0, Law(1, 0.01)) == pytest.approx(1 - math.exp(-0.01 * DAYS_PER_MONTH))


def test_the_law_learnt_keeps_the_temperature_its_ages_were_counted_at() -> None:
    learnt = learn_bottle(replace(fading(0.002), rule=WARM), 1)
    assert learnt.law(0.002) == Law(1, 0.002, at_c=20.0, factor_per_10c=2.0)


def test_a_named_law_gives_way_to_a_rate_with_its_own_energy() -> None:
    named = Rule(RuleKind.FADES, law=Law(2, 0.0, at_c=20.0, named="hypochlorite"))
    law = learn_bottle(replace(fading(0.02, order=2), rule=named), 2).law(0.02)
    assert (law.named, law.order, law.at_c) == ("", 2, 20.0)
    # the enthalpy of Adam and Gordon 1999, 101.8 kJ/mol (a), and RT beside it
    assert law.ea_kj_mol == pytest.approx(101.8 + 2.44, abs=0.02)


# -- several bottles ----------------------------------------------------------------------


def test_bottles_alike_are_read_as_one_line() -> None:
    learnt = learnt_of_table(TABLE_IV)
    assert learnt.model == Model.COMMON
    # LeBlond 2011 table V, months read as days (a+b)
    assert learnt.life(95.0)[1] == pytest.approx(25.995763, abs=1e-5)


def test_bottles_unlike_are_read_apart_and_the_worst_decides() -> None:
    learnt = learnt_of_table(TABLE_VIII)
    assert learnt.model == Model.POOLED
    name, life = learnt.life(95.0)
    assert name == "b8"
    # LeBlond 2011 table IX (a+b)
    assert life == pytest.approx(15.606131, abs=1e-5)


def test_each_ones_own_scatter_may_be_asked_for() -> None:
    learnt = learnt_of_table(TABLE_VIII)
    assert learnt.pooled
    # JMP 12.0.1 (a+b)
    life = learnt.life(95.0, learnt.pooled.fits(Model.OWN))[1]
    assert life == pytest.approx(15.844878, abs=1e-5)


def test_a_bottle_checked_once_is_left_out_and_named() -> None:
    learnt = learn_line([fading(0.002), series((30, 0.09), bottle="S05")], 1)
    assert learnt.model == "one bottle"
    assert [(one.subject, one.text) for one in learnt.left_out] == [
        ("S05", "checked on one day only")
    ]


def test_two_checks_each_teach_together_where_one_alone_would_not() -> None:
    few = series((0, 0.1), (60, 0.089), bottle="S05")
    assert set(learn_line([fading(0.002), few], 1).fits) == {"S02", "S05"}


# -- what cannot be learnt -----------------------------------------------------------------


def test_one_check_is_too_few_and_the_next_day_is_told() -> None:
    with pytest.raises(MissingFigure, match="One check of S02 so far") as refused:
        learn_bottle(series((30, 0.1)), 1)
    assert "on 2 more days, the first after 2026-12-02" in refused.value.hint


def test_two_checks_are_too_few_but_say_what_they_can() -> None:
    # 0.1 to 0.09 in two months is five per cent a month
    with pytest.raises(MissingFigure, match=r"2 checks of S02 .*, 5 % a month between them;"):
        learn_bottle(series((0, 0.1), (61, 0.09)), 1)


def test_two_checks_of_known_uncertainty_bound_the_loss() -> None:
    two = replace(series((0, 0.1), (61, 0.09)), uncertainties=(0.0005, 0.0005))
    with pytest.raises(MissingFigure, match=r"5 % a month between them \(4\.3 to 5\.6 by"):
        learn_bottle(two, 1)


def test_the_next_check_is_as_far_on_as_the_checks_have_come() -> None:
    with pytest.raises(MissingFigure) as refused:
        learn_bottle(series((0, 0.1), (61, 0.09)), 1)
    assert f"after {MADE + timedelta(122)}" in refused.value.hint


def test_checks_of_one_day_are_one() -> None:
    with pytest.raises(MissingFigure, match="All 3 checks of S02 are of 2026-10-05"):
        learn_bottle(series((0, 0.1), (0, 0.1002), (0, 0.0999)), 1)


def test_three_checks_on_two_days_are_too_few() -> None:
    with pytest.raises(MissingFigure, match=r"3 checks of S02 so far .* on 2 days"):
        learn_bottle(series((0, 0.1), (0, 0.1002), (60, 0.09)), 1)


def test_two_of_each_leave_no_scatter() -> None:
    pairs = [series((0, 0.1), (60, 0.09), bottle=name) for name in ("S02", "S05")]
    with pytest.raises(MissingFigure, match="4 checks of 2 bottles"):
        learn_line(pairs, 1)


def test_a_bottle_that_surely_gains_is_refused_with_what_to_look_for() -> None:
    with pytest.raises(NotAllowed, match="S02: stronger from check to check") as refused:
        learn_bottle(series((0, 0.1), (30, 0.1051), (60, 0.11), (90, 0.1149)), 1)
    assert "top-up" in refused.value.hint


@pytest.mark.parametrize("order", [0, 1, 2])
def test_a_bottle_that_rises_within_its_scatter_shows_no_loss(order: int) -> None:
    with pytest.raises(NotAllowed, match="S02: no loss to be seen"):
        learn_bottle(series((0, 0.1), (30, 0.0999), (60, 0.1002), (90, 0.1)), order)


def test_the_one_that_rises_among_unlike_lines_is_named() -> None:
    rising = series((0, 0.1), (28, 0.101), (56, 0.1021), (84, 0.103), bottle="S05")
    with pytest.raises(NotAllowed, match="S05: stronger"):
        learn_line([fading(0.002), rising], 1)


def test_the_same_figure_each_time_has_nothing_to_teach() -> None:
    with pytest.raises(NotAllowed, match=r"S02: found at 0\.0987 each time"):
        learn_bottle(series((0, 0.0987), (30, 0.0987), (60, 0.0987)), 1)


def test_figures_exactly_on_a_line_are_asked_about() -> None:
    with pytest.raises(MissingFigure, match="3 results lie on a line exactly"):
        learn_bottle(series((0, 0.100), (30, 0.099), (60, 0.098)), 0)


def test_a_strength_of_nothing_fits_no_exponential() -> None:
    with pytest.raises(BadAmount, match="S02 was found at 0 on 2026-12-04"):
        learn_bottle(series((0, 0.1), (30, 0.05), (60, 0.0)), 1)


# -- always ---------------------------------------------------------------------------------


@given(st.floats(0.0005, 0.01), st.floats(1e-4, 3e-3), st.floats(0.1, 50))
def test_counted_in_another_unit_the_first_order_rate_is_the_same(
    rate: float, noise: float, scale: float
) -> None:
    one = fading(rate, noise=noise)
    other = replace(one, strengths=tuple(strength * scale for strength in one.strengths))
    rates = [learn_bottle(each, 1).rate("S02").value for each in (one, other)]
    assert rates[1] == pytest.approx(rates[0], rel=1e-6)


@given(st.floats(0.0005, 0.01), st.integers(0, 300))
def test_counting_from_another_day_moves_the_life_and_not_the_rate(rate: float, by: int) -> None:
    one = fading(rate)
    later = replace(one, ages=tuple(age + by for age in one.ages), since=MADE - timedelta(by))
    first, second = (learn_bottle(each, 1) for each in (one, later))
    assert second.rate("S02").value == pytest.approx(first.rate("S02").value, rel=1e-6)
    assert second.life(0.05)[1] == pytest.approx(first.life(0.05)[1] + by, rel=1e-6)


@given(st.floats(0.0005, 0.01), st.floats(1e-4, 3e-3), st.floats(1.5, 3))
def test_more_scatter_never_promises_more(rate: float, noise: float, times: float) -> None:
    calm, wild = (learn_bottle(fading(rate, noise=n), 1) for n in (noise, noise * times))
    assert wild.life(0.05)[1] < calm.life(0.05)[1]


@given(st.dates(date(2026, 10, 6), date(2027, 6, 1)))
def test_the_days_of_the_checks_are_kept(on: date) -> None:
    record = Record(made=MADE, checks=(Check(on, CheckKind.FOUND, True, 0.1),))
    one = series_of("S02", record, FADES, date(2027, 7, 1))
    assert one
    assert (one.days, one.ages) == ((on,), (float((on - MADE).days),))


def test_the_rate_of_a_second_order_line_is_its_slope() -> None:
    line = Fit(0.0, 10.0, 0.02, 0.01, 3, 0.2, 0.001)
    assert rate_of(line, 2).value == 0.02
    assert rate_of(replace(line, slope=-0.02), 1).value == 0.02
