"""What must hold for every bottle under every set of rules, tried on random ones."""

from __future__ import annotations

from dataclasses import replace
from datetime import date, timedelta

from hypothesis import assume, given
from hypothesis import strategies as st

from stockroom.keeping.record import Check, CheckKind, Record, Stay
from stockroom.keeping.rules import Law, Origin, Purpose, Rule, RuleKind
from stockroom.keeping.strength import strengths_on
from stockroom.keeping.verdict import USABLE, Condition, limits_of, verdict
from stockroom.measure.days import PrintedDate
from stockroom.measure.periods import Period

FIRST, LAST = date(2026, 6, 1), date(2027, 6, 1)

dates = st.dates(FIRST, LAST)
temperatures = st.sampled_from([None, 5.0, 18.0, 20.0, 28.0])
strengths = st.floats(0.01, 20.0)
edges = st.sampled_from([None, 0.05, 0.5, 5.0])
laws = st.builds(
    Law, st.sampled_from([0, 1, 2]), st.floats(0.0, 0.05), st.sampled_from([None, 20.0]),
    st.sampled_from([None, 2.2, 3.5]),
)  # fmt: skip
rules = st.builds(
    Rule,
    kind=st.sampled_from(RuleKind),
    lasts=st.builds(Period, st.integers(1, 300), st.sampled_from(["days", "weeks"])),
    origin=st.sampled_from(Origin),
    purpose=st.sampled_from(Purpose),
    law=laws,
    at_c=st.sampled_from([None, 18.0]),
    factor_per_10c=st.sampled_from([None, 2.0, 3.5]),
    above=edges,
    upto=edges,
    colder_than=st.sampled_from([None, 8.0]),
    warmer_than=st.sampled_from([None, 8.0]),
)
several = st.lists(rules, max_size=4).map(tuple)
stays = st.lists(st.builds(Stay, dates, st.just("A1"), temperatures), max_size=3).map(tuple)
looks = st.lists(
    st.builds(Check, dates, st.sampled_from([CheckKind.LOOKED, CheckKind.TESTED])), max_size=2
).map(tuple)
records = st.builds(
    Record,
    received=dates,
    made=st.none() | dates,
    nominal=st.none() | strengths,
    printed=st.none() | dates.map(lambda on: PrintedDate(on.isoformat(), (on,))),
    stays=stays,
    checks=looks,
)


@given(records, several, dates, dates)
def test_strength_never_rises_with_time(
    record: Record, house: tuple[Rule, ...], one: date, other: date
) -> None:
    earlier, later = (strengths_on(record, house, on).expected for on in sorted((one, other)))
    assert (earlier is None) == (later is None)
    assert earlier is None or later is None or later <= earlier


@given(records, several, dates, dates)
def test_opening_a_bottle_never_lengthens_its_life(
    record: Record, house: tuple[Rule, ...], opened: date, on: date
) -> None:
    assume(record.received and record.received <= opened)
    sealed, open_ = (verdict(x, house, on) for x in (record, replace(record, opened=opened)))
    ends = [x.usable_until or date.max for x in (sealed, open_)]
    assert ends[1] <= ends[0]
    assert (open_.strengths.expected or 0) <= (sealed.strengths.expected or 0)


@given(records, several, dates, st.sampled_from(Purpose))
def test_it_is_not_past_on_the_last_good_day_and_is_on_the_next(
    record: Record, house: tuple[Rule, ...], on: date, purpose: Purpose
) -> None:
    until = verdict(record, house, on, purpose).usable_until
    # a check or a move on the way may give another last day: then that one is tried
    assume(until is not None and until < date.max)
    assert until is not None
    last = verdict(record, house, until, purpose)
    if last.usable_until == until:
        assert last.condition in USABLE
    after = verdict(record, house, until + timedelta(1), purpose)
    if after.usable_until == until:
        assert after.condition is Condition.PAST


@given(records, several, dates)
def test_the_date_given_is_that_of_a_limit_and_its_words(
    record: Record, house: tuple[Rule, ...], on: date
) -> None:
    answer = verdict(record, house, on)
    limits = {(limit.until, limit.because) for limit in limits_of(record, house, on)}
    assume(answer.condition is not Condition.WEAK)
    assert (answer.good_until, answer.decided_by) in limits | {(None, "no limit set")}


@given(records, several, dates, dates)
def test_a_look_or_a_titration_never_moves_a_safety_date(
    record: Record, house: tuple[Rule, ...], seen: date, on: date
) -> None:
    looked = replace(record, checks=(*record.checks, Check(seen, CheckKind.LOOKED)))
    dangerous = tuple(r for r in house if r.kind in (RuleKind.TEST, RuleKind.NEVER))
    before, after = (limits_of(x, dangerous, on) for x in (record, looked))
    assert before == after


@given(records, several, dates)
def test_the_order_of_stays_does_not_matter(
    record: Record, house: tuple[Rule, ...], on: date
) -> None:
    assume(len({stay.since for stay in record.stays}) == len(record.stays))
    turned = replace(record, stays=record.stays[::-1])
    assert verdict(turned, house, on) == verdict(record, house, on)


@given(strengths, st.floats(0.0, 0.05), st.integers(1, 200), st.sampled_from([0, 1, 2]))
def test_a_warmer_place_never_keeps_it_stronger(
    strength: float, rate: float, count: int, order: int
) -> None:
    rule = Rule(RuleKind.FADES, law=Law(order, rate, 20.0, 3.5))
    cool, warm = (
        Record(made=FIRST, nominal=strength, stays=(Stay(FIRST, "A1", at),)) for at in (20.0, 28.0)
    )
    on = FIRST + timedelta(count)
    one, other = (strengths_on(x, (rule,), on).expected for x in (cool, warm))
    assert one is not None
    assert other is not None
    assert other <= one
