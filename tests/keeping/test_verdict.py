"""Each kind of rule decides as it should, names itself, and its last good day is included."""

from __future__ import annotations

from dataclasses import replace
from datetime import date, timedelta
from typing import Any

import pytest
from houses import day, days, found, looked

from stockroom.keeping.record import Check, CheckKind, Record, Stay
from stockroom.keeping.rules import Law, Origin, Purpose, Rule, RuleKind
from stockroom.keeping.verdict import USABLE, Condition, Verdict, verdict
from stockroom.measure.days import parse_printed
from stockroom.measure.periods import Period

SIX_MONTHS = Period(6, "months")
RECEIVED, OPENED, MADE = Origin.RECEIVED, Origin.OPENED, Origin.MADE


def life(count: int, origin: Origin = MADE, **more: Any) -> Rule:
    return Rule(RuleKind.LIFE, days(count), origin, **more)


def judged(record: Record, *rules: Rule, on: str, purpose: Purpose = Purpose.ANY) -> Verdict:
    return verdict(record, rules, day(on), purpose)


def both_sides(record: Record, *rules: Rule, last: str) -> tuple[Condition, Condition]:
    """Conditions on the last good day and on the next."""
    on = day(last)
    return tuple(verdict(record, rules, x).condition for x in (on, on + timedelta(1)))  # type: ignore[return-value]


# -- dates ------------------------------------------------------------------------------


def test_a_printed_month_is_good_through_its_last_day() -> None:
    # Source: pharmacopoeia convention, a month alone means its last day
    bottle = Record(received=day("01-04"), printed=parse_printed("02/2028"))
    assert both_sides(bottle, last="2028-02-29") == (Condition.SOUND, Condition.PAST)


def test_a_printed_date_with_two_readings_is_taken_at_the_earlier() -> None:
    bottle = Record(received=day("01-04"), printed=parse_printed("04/05/27"))
    answer = judged(bottle, on="05-01")
    assert (answer.condition, answer.good_until) == (Condition.PAST, day("04-05"))
    assert answer.decided_by == 'printed "04/05/27", read as 2027-04-05 until somebody says'


def test_the_earliest_limit_decides_and_is_named() -> None:
    # the worked case: printed 2028-08, opened 2027-01-10, opened life 180 days
    bottle = Record(received=day("01-04"), opened=day("01-10"), printed=parse_printed("2028-08"))
    answer = judged(bottle, life(180, OPENED), on="01-10")
    assert answer.good_until == day("07-09")
    assert answer.decided_by == "opened 2027-01-10 + 180 days"


@pytest.mark.parametrize(
    ("record", "origin", "words"),
    [
        (Record(received=day("01-04")), RECEIVED, "received 2027-01-04 + 10 days"),
        (Record(made=day("01-04")), MADE, "made 2027-01-04 + 10 days"),
        (
            Record(received=day("01-01"), opened=day("01-04")),
            OPENED,
            "opened 2027-01-04 + 10 days",
        ),
    ],
)
def test_a_life_counts_from_its_own_day(record: Record, origin: Origin, words: str) -> None:
    assert both_sides(record, life(10, origin), last="01-14") == (Condition.SOUND, Condition.PAST)
    assert judged(record, life(10, origin), on="01-05").decided_by == words


def test_a_life_from_opening_leaves_a_sealed_bottle_alone() -> None:
    answer = judged(Record(received=day("01-04")), life(10, OPENED), on="2031-01-01")
    assert (answer.condition, answer.decided_by) == (Condition.SOUND, "no limit set")
    assert answer.good_until is None


def test_months_of_a_life_are_steps_of_the_calendar() -> None:
    rule = Rule(RuleKind.LIFE, Period(1, "months"), MADE)
    assert judged(Record(made=day("01-31")), rule, on="02-01").good_until == day("02-28")


def test_an_opening_day_nobody_wrote_is_marked_as_guessed() -> None:
    bottle = Record(received=day("01-04"), opened=day("01-04"), opened_guessed=True)
    answer = judged(bottle, life(60, OPENED), on="01-05")
    assert answer.decided_by == "opened 2027-01-04 (guessed) + 60 days"


def test_same_day_is_past_the_next_morning() -> None:
    fresh, rule = Record(made=day("01-04")), Rule(RuleKind.SAME_DAY)
    assert both_sides(fresh, rule, last="01-04") == (Condition.SOUND, Condition.PAST)
    assert judged(fresh, rule, on="01-05").decided_by == "made 2027-01-04, same day only"


# -- checks -----------------------------------------------------------------------------


RECHECK = Rule(RuleKind.RECHECK, days(28))
LOOK = Rule(RuleKind.LOOK, days(90))
TEST = Rule(RuleKind.TEST, SIX_MONTHS, OPENED, safety=True)


def test_an_overdue_recheck_makes_it_watch_and_not_past() -> None:
    thiosulfate = Record(made=day("2026-12-02"), checks=(found("2026-12-10", 0.0987),))
    assert both_sides(thiosulfate, RECHECK, last="01-07") == (Condition.SOUND, Condition.WATCH)
    answer = judged(thiosulfate, RECHECK, on="02-01")
    assert answer.decided_by == "found 2026-12-10 + 28 days"
    assert (answer.recheck_by, answer.usable_until) == (day("01-07"), None)


def test_a_recheck_never_done_counts_from_its_origin() -> None:
    answer = judged(Record(made=day("01-04")), RECHECK, on="01-05")
    assert answer.decided_by == "made 2027-01-04, not checked since + 28 days"


def test_a_new_titration_restarts_the_recheck() -> None:
    bottle = Record(made=day("01-04"), checks=(found("01-20", 0.1), found("02-10", 0.099)))
    assert judged(bottle, RECHECK, on="02-11").good_until == day("03-10")


def test_a_check_still_to_come_is_not_known_yet() -> None:
    bottle = Record(made=day("01-04"), checks=(found("03-01", 0.1),))
    assert judged(bottle, RECHECK, on="02-11").condition is Condition.WATCH


def test_of_two_titrations_on_one_day_the_later_entry_counts() -> None:
    bottle = Record(made=day("01-04"), checks=(found("01-20", 0.104), found("01-20", 0.099)))
    assert judged(bottle, RECHECK, on="01-21").strengths.found == 0.099


def test_an_overdue_look_makes_it_past_until_somebody_looks() -> None:
    iodide = Record(made=day("2026-10-05"))
    assert both_sides(iodide, LOOK, last="01-03") == (Condition.SOUND, Condition.PAST)
    assert judged(iodide, LOOK, on="01-04").look_would_do
    seen = replace(iodide, checks=(looked("01-11"),))
    answer = judged(seen, LOOK, on="01-11")
    assert (answer.condition, answer.good_until) == (Condition.SOUND, day("04-11"))
    assert answer.decided_by == "looked 2027-01-11 + 90 days"


def test_a_look_that_failed_dates_nothing() -> None:
    bottle = Record(made=day("2026-10-05"), checks=(looked("01-11", passed=False),))
    assert judged(bottle, LOOK, on="01-11").condition is Condition.PAST


def test_a_titration_is_a_look_as_well() -> None:
    bottle = Record(made=day("2026-10-05"), checks=(found("01-11", 0.05),))
    assert judged(bottle, LOOK, on="02-01").good_until == day("04-11")


def test_a_look_would_not_do_where_a_life_is_over_too() -> None:
    answer = judged(Record(made=day("2026-10-05")), LOOK, life(30), on="01-04")
    assert not answer.look_would_do


def test_test_or_discard_runs_from_opening() -> None:
    cyclohexene = Record(received=day("2026-05-11"), opened=day("2026-09-02"))
    assert both_sides(cyclohexene, TEST, last="03-02") == (Condition.SOUND, Condition.PAST)
    answer = judged(cyclohexene, TEST, on="03-03")
    assert answer.safety
    assert answer.decided_by.endswith("+ 6 months, test or discard")


@pytest.mark.parametrize("kind", [CheckKind.LOOKED, CheckKind.FOUND])
def test_a_safety_date_is_not_moved_by_a_look_or_a_titration(kind: CheckKind) -> None:
    bottle = Record(opened=day("2026-09-02"), received=day("2026-09-02"))
    checked = replace(bottle, checks=(Check(day("02-01"), kind, True, 1.0),))
    assert judged(checked, TEST, on="03-03").condition is Condition.PAST


def test_a_safety_date_is_moved_by_its_own_test() -> None:
    bottle = Record(opened=day("2026-09-02"), received=day("2026-09-02"))
    tested = replace(bottle, checks=(Check(day("02-01"), CheckKind.TESTED),))
    assert judged(tested, TEST, on="03-03").good_until == day("08-01")


def test_a_failed_test_moves_nothing() -> None:
    bottle = Record(opened=day("2026-09-02"), received=day("2026-09-02"))
    failed = replace(bottle, checks=(Check(day("02-01"), CheckKind.TESTED, passed=False),))
    assert judged(failed, TEST, on="03-03").condition is Condition.PAST


def test_never_kept_is_past_the_day_after_mixing_whatever_is_checked() -> None:
    silver = Record(made=day("01-04"), checks=(looked("01-05"), found("01-05", 0.1)))
    never = Rule(RuleKind.NEVER)
    assert both_sides(silver, never, last="01-04") == (Condition.SOUND, Condition.PAST)
    answer = judged(silver, never, on="01-06")
    assert (answer.decided_by, answer.safety) == ("made 2027-01-04, never kept", True)


def test_a_fading_rule_sets_no_date_and_makes_it_weak() -> None:
    # 1 % of the label a day in a straight line: below four fifths of it from the 21st day
    fades = Rule(RuleKind.FADES, law=Law(0, 0.01))
    bottle = Record(made=day("01-04"), nominal=1.0)
    assert both_sides(bottle, fades, last="01-24") == (Condition.SOUND, Condition.WEAK)
    answer = judged(bottle, fades, on="02-03")
    assert answer.decided_by == "expected at 70 % of its label strength"
    assert answer.good_until is None


def test_an_exact_use_can_have_its_own_shorter_interval() -> None:
    iodine = Record(made=day("01-04"))
    standard = Rule(RuleKind.RECHECK, days(60), purpose=Purpose.EXACT)
    assert judged(iodine, standard, on="06-01").condition is Condition.SOUND
    exact = judged(iodine, standard, on="06-01", purpose=Purpose.EXACT)
    assert exact.condition is Condition.WATCH


# -- bands of strength and of place ---------------------------------------------------------

THIOSULFATE = (
    life(180, above=0.5),
    Rule(RuleKind.RECHECK, days(28), above=0.05, upto=0.5),
    life(7, upto=0.05),
)


@pytest.mark.parametrize(
    ("strength", "until"),
    [
        (1.0, "07-03"),
        (0.5, "02-01"),
        (0.1, "02-01"),
        (0.05, "01-11"),
        (0.02, "01-11"),
        (0.05 + 2e-8, "01-11"),
    ],
)
def test_a_life_goes_by_the_band_of_strength(strength: float, until: str) -> None:
    bottle = Record(made=day("01-04"), nominal=strength)
    assert judged(bottle, *THIOSULFATE, on="01-04").good_until == day(until)


@pytest.mark.parametrize(
    ("place", "until"),
    # the worked figures: 90 days at 18 °C are 25.7 at 28 °C with 3.5 per 10 °C, so 25 whole ones
    [(18.0, "04-04"), (28.0, "01-29"), (8.0, "11-15"), (None, "04-04")],
)
def test_a_life_is_shorter_in_a_warm_place(place: float | None, until: str) -> None:
    rule = Rule(RuleKind.RECHECK, days(90), RECEIVED, at_c=18.0, factor_per_10c=3.5)
    bleach = Record(received=day("01-04"), stays=(Stay(day("01-04"), "H1", place),))
    assert judged(bleach, rule, on="01-04").recheck_by == day(until)


def test_the_scaled_life_says_both_temperatures() -> None:
    rule = life(90, at_c=18.0, factor_per_10c=3.5)
    bottle = Record(made=day("01-04"), stays=(Stay(day("01-04"), "H1", 28.0),))
    said = judged(bottle, rule, on="01-04").decided_by
    assert said == "made 2027-01-04 + 90 days at 18 °C, 25 d at 28 °C"


def test_a_life_used_up_in_the_warm_is_not_given_back_by_moving() -> None:
    rule = life(90, at_c=18.0, factor_per_10c=3.5)
    moved = (Stay(day("01-04"), "H1", 28.0), Stay(day("02-10"), "A3", 18.0))
    answer = judged(Record(made=day("01-04"), stays=moved), rule, on="02-11")
    assert (answer.condition, answer.good_until) == (Condition.PAST, day("01-29"))


def test_ten_warm_days_use_up_thirty_five() -> None:
    rule = life(90, at_c=18.0, factor_per_10c=3.5)
    moved = (Stay(day("01-04"), "H1", 28.0), Stay(day("01-14"), "A3", 18.0))
    answer = judged(Record(made=day("01-04"), stays=moved), rule, on="01-20")
    assert answer.good_until == day("01-14") + timedelta(55)


COLD, WARM = life(7, colder_than=8.0), life(2, warmer_than=8.0)


@pytest.mark.parametrize(("place", "until"), [(5.0, "01-11"), (8.0, "01-11"), (20.0, "01-06")])
def test_a_rule_may_hold_for_a_cold_or_a_warm_place(place: float, until: str) -> None:
    starch = Record(made=day("01-04"), stays=(Stay(day("01-04"), "F1", place),))
    assert judged(starch, COLD, WARM, on="01-04").good_until == day(until)


def test_in_an_unknown_place_the_shorter_life_decides() -> None:
    assert judged(Record(made=day("01-04")), COLD, WARM, on="01-04").good_until == day("01-06")


# -- out of use -----------------------------------------------------------------------------


def test_no_date_at_all_wants_a_look() -> None:
    answer = judged(Record(), LOOK, on="01-04")
    assert (answer.condition, answer.decided_by) == (
        Condition.NO_DATE,
        "no date on it: needs a look",
    )
    assert answer.look_would_do


def test_the_look_then_starts_its_life() -> None:
    bottle = Record(checks=(looked("01-11"),))
    assert both_sides(bottle, life(30, RECEIVED), last="02-10") == (
        Condition.SOUND,
        Condition.PAST,
    )


def test_a_second_look_does_not_give_a_life_again() -> None:
    bottle = Record(checks=(looked("02-01"), looked("01-11")))
    assert judged(bottle, life(30, RECEIVED), on="02-01").good_until == day("02-10")


def test_before_the_look_it_had_no_date() -> None:
    assert judged(Record(checks=(looked("01-11"),)), on="01-10").condition is Condition.NO_DATE


def test_a_look_does_not_date_a_peroxide_former() -> None:
    answer = judged(Record(checks=(looked("01-11"),)), TEST, on="01-12")
    assert (answer.condition, answer.safety) == (Condition.PAST, True)


@pytest.mark.parametrize(
    ("state", "condition", "words"),
    [
        ({"gone": True}, Condition.GONE, "discarded"),
        ({"not_found": True}, Condition.NOT_FOUND, "not found when last looked for"),
        ({"set_aside": "rust specks"}, Condition.SET_ASIDE, "rust specks"),
    ],
)
def test_what_is_out_of_use_says_why(
    state: dict[str, Any], condition: Condition, words: str
) -> None:
    answer = judged(Record(made=day("01-04"), **state), life(30), on="01-04")
    assert (answer.condition, answer.decided_by) == (condition, words)
    assert answer.condition not in USABLE


def test_gone_is_said_before_all_else() -> None:
    bottle = Record(gone=True, not_found=True, set_aside="why", made=day("2020-01-01"))
    assert judged(bottle, life(1), on="01-04").condition is Condition.GONE


def test_past_is_said_before_watch_and_weak() -> None:
    fades = Rule(RuleKind.FADES, law=Law(1, 0.1))
    bottle = Record(made=day("2026-01-04"), nominal=1.0)
    assert judged(bottle, RECHECK, fades, life(60), on="01-04").condition is Condition.PAST


def test_a_hard_limit_ties_before_a_recheck() -> None:
    answer = judged(Record(made=day("01-04")), RECHECK, life(28), on="03-01")
    assert answer.decided_by == "made 2027-01-04 + 28 days"


def test_the_same_record_is_judged_as_at_any_day() -> None:
    bottle, rule = Record(made=date(2027, 1, 4)), life(10)
    first = judged(bottle, rule, on="02-10")
    judged(bottle, rule, on="01-05")
    assert judged(bottle, rule, on="02-10") == first


@pytest.mark.parametrize(
    "known",
    [
        {"received": date(2026, 9, 1)},
        {"made": date(2026, 9, 1)},
        {"opened": date(2026, 9, 1)},
        {"printed": parse_printed("03/2027")},
    ],
)
def test_any_day_that_is_known_dates_a_bottle(known: dict[str, Any]) -> None:
    judged = verdict(Record(**known), (), date(2027, 1, 4))
    assert judged.condition is Condition.SOUND
    assert verdict(Record(), (), date(2027, 1, 4)).condition is Condition.NO_DATE


def test_a_printed_date_alone_ends_its_use() -> None:
    judged = verdict(Record(printed=parse_printed("Oct-26")), (), date(2026, 11, 1))
    assert (judged.condition, judged.decided_by) == (Condition.PAST, 'printed "Oct-26"')
