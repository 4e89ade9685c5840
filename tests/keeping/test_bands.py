"""Strength bands meet: no strength in two of them, none left out."""

from __future__ import annotations

from stockroom.keeping.bands import band_faults, overlapping
from stockroom.keeping.rules import Origin, Purpose, Rule, RuleKind
from stockroom.measure.periods import Period


def life(above: float | None, upto: float | None, days: int = 7, **more: object) -> Rule:
    return Rule(RuleKind.LIFE, Period(days, "days"), above=above, upto=upto, **more)  # type: ignore[arg-type]


def test_bands_that_meet_have_no_fault() -> None:
    assert band_faults([life(None, 0.06), life(0.06, 0.5), life(0.5, None)], "mol/dm3") == []


def test_a_strength_in_no_band_is_named() -> None:
    faults = band_faults([life(None, 0.05), life(0.1, None)], "mol/dm3")
    assert faults == ["life: no life given between 0.05 and 0.1 mol/dm³."]


def test_a_strength_in_two_bands_is_named() -> None:
    faults = band_faults([life(None, 0.1), life(0.05, 1)], "mol/dm3")
    assert faults == ["life: two rules for between 0.05 and 0.1 mol/dm³."]


def test_two_rules_for_every_strength_above_are_named() -> None:
    faults = band_faults([life(0.5, None), life(0.5, None)], "mol/dm3")
    assert faults == ["life: two rules for above 0.5 mol/dm³."]


def test_a_line_without_bands_is_passed_over() -> None:
    assert band_faults([life(None, None), life(None, None)], "mol/dm3") == []


def test_rules_for_another_purpose_or_origin_are_no_second_rule() -> None:
    rules = [
        life(None, 0.1),
        life(0.1, None),
        life(0.05, None, purpose=Purpose.EXACT),
        life(0.2, None, origin=Origin.OPENED),
    ]
    assert band_faults(rules, "mol/dm3") == []


def test_rules_that_hold_for_the_same_bottles_are_found() -> None:
    rule, wide, cold = life(0.1, 0.5), life(None, None, 9), life(0.1, 0.5, 30, colder_than=8)
    warm, strong = life(0.1, 0.5, 3, warmer_than=8), life(0.5, None)
    assert overlapping(rule, [rule, wide, cold, warm, strong]) == [wide, cold, warm]
    assert overlapping(cold, [rule, wide, cold, warm, strong]) == [rule, wide]


def test_another_purpose_or_origin_is_another_thing_said() -> None:
    exact, opened = life(None, None, purpose=Purpose.EXACT), life(None, None, origin=Origin.OPENED)
    assert overlapping(life(None, None), [exact, opened]) == []
