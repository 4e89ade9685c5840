"""This term's use beside the same term a year before: in all, by the group, and in words."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from typing import Any

from houses import booking, cm3, day, g, made_from, planned, recipe, solid, solution, wants

from stockroom.planning.decisions import Plan, Use
from stockroom.planning.facts import Drawn, Facts, FormerUse, Per

SALT = solid()
HALF = solution(0.5)
LAST = (date(2026, 1, 5), date(2026, 3, 27))


def former(amount: int, groups: int | None = None) -> FormerUse:
    return FormerUse(SALT.key, *LAST, amount, groups)


def term(**more: Any) -> Plan:
    """Two groups of 50 g each: 100 g of the salt."""
    per_group = wants(HALF, cm3(1000), per=Per.GROUP)
    return planned(
        [SALT, HALF], methods=[made_from(HALF, SALT)], recipes=[recipe(per_group)],
        bookings=[booking("K1", "02-10", groups=2)], year_before=LAST, **more,
    )  # fmt: skip


def salt(made: Plan) -> Use:
    (use,) = [use for use in made.usage if (use.form, use.line) == ("bought", SALT.key)]
    return use


def test_what_was_written_down_stands_beside_it() -> None:
    use = salt(term(former=(former(g(80), 4),)))
    assert (use.amount, use.groups) == (g(100), 2)
    assert (use.before, use.groups_before, use.basis) == (g(80), 4, "table")


def test_the_bookings_of_that_term_come_before_the_table() -> None:
    held = replace(booking("K0", "2026-02-10", groups=3), version=1)
    use = salt(term(former=(former(g(80), 4),), former_bookings=(held,)))
    assert (use.before, use.groups_before, use.basis) == (g(150), 3, "bookings")


def test_the_entries_come_before_the_bookings_and_keep_their_groups() -> None:
    held = booking("K0", "2026-02-10", groups=3)
    drawn = (
        Drawn("B1", SALT.key, date(2026, 2, 9), g(140)),
        Drawn("B1", SALT.key, date(2026, 2, 10), g(21)),
        # the day after that term, and this term
        Drawn("B1", SALT.key, date(2026, 3, 28), g(1000)),
        Drawn("B1", SALT.key, day("01-04"), g(1000)),
    )
    use = salt(term(former_bookings=(held,), drawn=drawn))
    assert (use.before, use.groups_before, use.basis) == (g(161), 3, "entries")


def test_a_dropped_booking_used_nothing() -> None:
    from stockroom.planning.facts import Firmness

    held = replace(booking("K0", "2026-02-10", groups=3), firmness=Firmness.DROPPED)
    assert salt(term(former_bookings=(held,))).before is None


def test_no_year_before_is_left_out() -> None:
    made = term()
    assert all(use.before is None for use in made.usage)
    assert made.differences == ()


def test_the_difference_in_words_in_all_and_by_the_group() -> None:
    (text,) = term(former=(former(g(80), 4),)).differences
    assert text == (
        "salt: 100 g, 80 g the year before, 25 % more; "
        "by the group 50 g (2) and 20 g (4), 150 % more"
    )


def test_without_groups_the_total_alone_is_told() -> None:
    assert term(former=(former(g(125)),)).differences == (
        "salt: 100 g, 125 g the year before, 20 % less",
    )


def test_the_same_as_last_year_is_no_difference() -> None:
    assert term(former=(former(g(100)),)).differences == ()


def test_five_are_told_the_biggest_for_their_size_first() -> None:
    lines = [solid(f"salt {n}") for n in range(1, 8)]
    # last year ten times as much of the first, twice as much of the second, then ever less apart
    before = (g(1000), g(50), g(110), g(40), g(104), g(103), g(102))
    asked = recipe(*(wants(line, g(100)) for line in lines))
    made = planned(
        lines, recipes=[asked], bookings=[booking("K1", "02-10")], year_before=LAST,
        former=[FormerUse(line.key, *LAST, n) for line, n in zip(lines, before, strict=True)],
    )  # fmt: skip
    assert [text.split(":")[0] for text in made.differences] == [
        "salt 1", "salt 4", "salt 2", "salt 3", "salt 5",
    ]  # fmt: skip


def test_asking_nothing_of_last_year_needs_no_facts_of_it() -> None:
    assert Facts(day("01-04"), day("01-04"), day("03-26"), _calendar()).year_before is None


def _calendar() -> Any:
    from stockroom.measure.workdays import Calendar

    return Calendar()
