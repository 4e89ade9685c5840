"""Nominal, found and expected are three things; only the last is carried forward."""

from __future__ import annotations

import pytest
from houses import day, found, looked

from stockroom.keeping.laws import DAYS_PER_MONTH
from stockroom.keeping.record import Record, Stay
from stockroom.keeping.rules import Law, Origin, Rule, RuleKind
from stockroom.keeping.strength import Strengths, strengths_on

# house planning figures: common practice, no source, but for the factor (an equipment maker's
# page, about 3.5 per 10 °C)
PEROXIDE = Rule(RuleKind.FADES, origin=Origin.OPENED, law=Law(1, 0.01 / DAYS_PER_MONTH))
BLEACH = Rule(
    RuleKind.FADES, origin=Origin.RECEIVED, law=Law(2, 0.0090 / DAYS_PER_MONTH, 20.0, 3.5)
)


def strengths(record: Record, *rules: Rule, on: str) -> Strengths:
    return strengths_on(record, rules, day(on))


def expected(record: Record, *rules: Rule, on: str) -> float:
    value = strengths(record, *rules, on=on).expected
    assert value is not None
    return value


B01 = Record(
    received=day("2026-09-14"),
    opened=day("2026-09-29"),
    nominal=100.0,
    checks=(found("2026-12-08", 91.0),),
)


def test_the_three_are_kept_apart() -> None:
    three = strengths(B01, PEROXIDE, on="02-10")
    assert (three.nominal, three.found, three.found_on) == (100.0, 91.0, day("2026-12-08"))
    assert three.expected == pytest.approx(89.1, abs=0.05)
    assert three.basis == "found"


def test_before_it_was_found_only_the_label_counts() -> None:
    three = strengths(B01, PEROXIDE, on="2026-12-07")
    assert (three.found, three.basis) == (None, "nominal")
    assert three.expected == pytest.approx(97.8, abs=0.1)


def test_the_day_it_is_found_it_is_expected_as_found() -> None:
    assert expected(B01, PEROXIDE, on="2026-12-08") == 91.0


def test_a_sealed_bottle_is_as_strong_as_its_label() -> None:
    sealed = Record(received=day("2026-11-16"), nominal=100.0)
    assert expected(sealed, PEROXIDE, on="2028-01-01") == 100.0


def test_without_a_law_strength_stays() -> None:
    assert expected(Record(made=day("01-04"), nominal=0.1), on="2030-01-01") == 0.1


def test_no_label_and_nothing_found_is_unknown() -> None:
    three = strengths(Record(made=day("01-04")), BLEACH, on="02-01")
    assert (three.expected, three.basis) == (None, "unknown")


def test_a_look_is_no_strength() -> None:
    seen = Record(made=day("01-04"), nominal=1.0, checks=(looked("01-10"),))
    assert strengths(seen, on="02-01").basis == "nominal"


def test_a_warm_stay_counts_for_more() -> None:
    cool = Record(received=day("01-04"), nominal=12.5, stays=(Stay(day("01-04"), "A3", 20.0),))
    warm = Record(received=day("01-04"), nominal=12.5, stays=(Stay(day("01-04"), "H1", 30.0),))
    assert expected(warm, BLEACH, on="02-23") < expected(cool, BLEACH, on="02-23")
    # fifty days at 30 °C are 3.5 times fifty at 20 °C
    assert expected(warm, BLEACH, on="02-23") == pytest.approx(
        expected(cool, BLEACH, on="06-28"), rel=1e-9
    )


def test_stays_are_added_up_one_by_one() -> None:
    moved = (Stay(day("01-14"), "A3", 20.0), Stay(day("01-04"), "H1", 30.0))
    record = Record(received=day("01-04"), nominal=12.5, stays=moved)
    # ten warm days and ten cool ones are 45 at 20 °C
    cool = Record(received=day("01-04"), nominal=12.5)
    assert expected(record, BLEACH, on="01-24") == pytest.approx(
        expected(cool, BLEACH, on="02-18"), rel=1e-9
    )


def test_moving_to_the_cold_gives_no_strength_back() -> None:
    slow = Rule(RuleKind.FADES, law=Law(1, 0.001), colder_than=8.0)
    fast = Rule(RuleKind.FADES, law=Law(1, 0.05), warmer_than=8.0)
    stays = (Stay(day("01-04"), "A1", 20.0), Stay(day("01-24"), "F1", 5.0))
    record = Record(made=day("01-04"), nominal=1.0, stays=stays)
    assert expected(record, slow, fast, on="01-25") < expected(record, slow, fast, on="01-24")


def test_found_without_any_date_fades_from_the_day_it_was_found() -> None:
    unknown_age = Record(nominal=12.0, checks=(found("01-04", 9.8),))
    assert expected(unknown_age, BLEACH, on="03-04") < 9.8


def test_a_band_of_strength_chooses_the_law() -> None:
    strong = Rule(RuleKind.FADES, law=Law(1, 0.01), above=1.0)
    weak = Rule(RuleKind.FADES, law=Law(1, 0.1), upto=1.0)
    record = Record(made=day("01-04"), nominal=1.0)
    # one part in e after ten days at 0.1 /d
    assert expected(record, strong, weak, on="01-14") == pytest.approx(0.36788, abs=1e-5)
