"""What classes drew teaches the spare: planted ledgers, with the sum done by hand beside it."""

from __future__ import annotations

import math
from datetime import timedelta
from typing import Any

import pytest
from houses import booking, cm3, day, g, house, recipe, solid, solution, wants
from hypothesis import given
from hypothesis import strategies as some

from stockroom.planning.facts import Booking, Drawn, Facts, Firmness, Per
from stockroom.planning.spare import LineSpare, RecipeSpare, spare_of, spares
from stockroom.reports.spare_text import in_words, spare_json, spare_text

THIO, SALT = solution(0.1, "thio"), solid("salt")
LAST = day("03-26")


def ledger(*draws: float, spare: int = 100, groups: int = 8, **more: Any) -> Facts:
    """A class a week of 8 groups × 60 cm³ (480, planned 528), and what was drawn for each."""
    booked = [weekly(n, spare, groups) for n in range(len(draws))]
    drawn = [
        Drawn("S1", THIO.key, one.on, cm3(amount), one.number)
        for one, amount in zip(booked, draws, strict=True)
        if amount
    ]
    more = {"bookings": booked, "drawn": tuple(drawn), "as_at": LAST, **more}
    return house([THIO, SALT], recipes=[recipe(wants(THIO, cm3(60), per=Per.GROUP))], **more)


def weekly(number: int, spare: int = 100, groups: int = 8, **more: Any) -> Booking:
    on = (day("01-05") + timedelta(weeks=number)).isoformat()
    return booking(f"K{number + 1:02d}", on, groups=groups, spare=spare, **more)


def learnt(known: Facts, code: str = "R01") -> RecipeSpare:
    return spare_of(known, code)


def line_of(*draws: float, **more: Any) -> LineSpare:
    (one,) = learnt(ledger(*draws, **more)).lines
    return one


# -- the sum ---------------------------------------------------------------------------------


def test_four_classes_of_455_to_470_of_480_need_two_per_cent() -> None:
    """mean 462.5, s 8.660; t(3, one-sided 95 %) 2.3534 from a table; × √1.25: 485.3 of 480."""
    line = line_of(455, 470, 455, 470)
    assert line.mean == pytest.approx(462.5 / 480)
    assert line.spread == pytest.approx(8.660254 / 480)
    assert line.limit == pytest.approx((462.5 + 2.353363 * 8.660254 * math.sqrt(1.25)) / 480)
    assert line.would_do == 2
    assert in_words(line).replace("\u00a0", " ") == (
        "planned 528, used 455-470 cm³ in four classes: 2 % would do"
    )


@given(some.integers(0, 50), some.integers(3, 9), some.integers(1, 30))
def test_drawn_exactly_as_planned_the_spare_stays(spare: int, count: int, groups: int) -> None:
    planned = 60 * groups * (100 + spare) / 100
    line = line_of(*[planned] * count, spare=10 * spare, groups=groups)
    assert line.would_do == spare
    assert line.as_planned
    assert "what they used is not known" in in_words(line)


@given(some.lists(some.integers(300, 700), min_size=3, max_size=12))
def test_the_spare_that_would_do_covers_the_limit_and_no_per_cent_less_does(
    draws: list[int],
) -> None:
    line = line_of(*draws)
    assert line.limit is not None
    assert line.would_do is not None
    needed = max(line.limit, line.most if line.overdrawn else 0.0)
    assert 1 + line.would_do / 100 >= needed - 1e-9
    assert line.would_do == 0 or 1 + (line.would_do - 1) / 100 < needed


@given(some.lists(some.integers(300, 700), min_size=3, max_size=9), some.integers(2, 5))
def test_classes_of_other_sizes_teach_the_same_by_the_group(draws: list[int], times: int) -> None:
    """A class of twice the groups that draws twice as much is the same class to learn from."""
    booked = [weekly(n, groups=8 * (times if n % 2 else 1)) for n in range(len(draws))]
    drawn = tuple(
        Drawn("S1", THIO.key, one.on, cm3(amount * one.groups / 8), one.number)
        for one, amount in zip(booked, draws, strict=True)
    )
    (mixed,) = learnt(ledger(*draws, bookings=booked, drawn=drawn)).lines
    assert mixed.would_do == line_of(*draws).would_do
    assert "a group" in in_words(mixed)


def test_more_scatter_never_asks_for_less() -> None:
    asked = [line_of(480 - d, 480 + d, 480 - d, 480 + d).would_do for d in (0, 5, 20, 40)]
    assert asked == sorted(asked, key=lambda n: n or 0)
    assert asked[0] == 0


# -- overdrawn, too few, stand-bys --------------------------------------------------------------


def test_a_class_that_drew_more_than_planned_asks_for_more_and_is_named() -> None:
    line = line_of(500, 510, 560)
    assert [one.booking for one in line.overdrawn] == ["K03"]
    assert (line.would_do or 0) > 10
    assert "more than planned was drawn for K03 560\u00a0cm³" in in_words(line)


def test_what_a_class_really_drew_is_covered_among_many_that_drew_less() -> None:
    # twenty at 480 and one at 600: the limit alone would say less than the 25 % it took
    line = line_of(*[480.0] * 20, 600, as_at=day("2027-07-01"))
    assert line.limit is not None
    assert line.limit < 1.25
    assert line.would_do == 25


def test_fewer_than_three_classes_are_too_few() -> None:
    line = line_of(455, 470)
    assert line.would_do is None
    assert "in two classes: too few to tell, 3 classes are needed" in in_words(line)
    assert learnt(ledger(455, 470)).would_do is None


def test_what_no_spare_covers_is_an_amount_to_mend() -> None:
    assert "mend the amount in the recipe" in in_words(line_of(900, 910, 905))


def test_a_stand_by_carries_no_spare_and_decides_nothing() -> None:
    asks = recipe(wants(THIO, cm3(60), per=Per.GROUP), wants(SALT, g(25), spare=False))
    known = ledger(455, 470, 455, 470)
    jars = tuple(Drawn("B1", SALT.key, b.on, g(40), b.number) for b in known.bookings)
    both = learnt(house([THIO, SALT], recipes=[asks], bookings=known.bookings, as_at=LAST,
                        drawn=(*known.drawn, *jars)))  # fmt: skip
    assert both.decides is not None
    assert both.decides.line == THIO.key
    assert both.would_do == 2


def test_the_line_that_needs_most_decides_for_the_recipe() -> None:
    asks = recipe(wants(THIO, cm3(60), per=Per.GROUP), wants(SALT, g(25)))
    known = ledger(455, 470, 455, 470)
    jars = tuple(Drawn("B1", SALT.key, b.on, g(26), b.number) for b in known.bookings)
    both = learnt(house([THIO, SALT], recipes=[asks], bookings=known.bookings, as_at=LAST,
                        drawn=(*known.drawn, *jars)))  # fmt: skip
    assert (both.would_do, both.decides and both.decides.line) == (4, SALT.key)


# -- which draws count ---------------------------------------------------------------------------


def test_draws_for_nobody_or_for_another_line_are_left_out() -> None:
    known = ledger(455, 470, 455, 470)
    stray = (
        Drawn("S1", THIO.key, day("01-05"), cm3(400)),
        Drawn("B1", SALT.key, day("01-05"), g(400), "K01"),
    )
    more = ledger(455, 470, 455, 470, drawn=(*known.drawn, *stray))
    assert learnt(more) == learnt(known)


def test_two_draws_for_one_class_are_one_amount() -> None:
    known = ledger(455, 470, 455, 470)
    first = known.drawn[0]
    split = (
        Drawn("S1", THIO.key, first.on, cm3(400), "K01"),
        Drawn("S2", THIO.key, first.on, cm3(55), "K01"),
        *known.drawn[1:],
    )
    assert learnt(ledger(455, 470, 455, 470, drawn=split)) == learnt(known)


def test_a_class_nobody_drew_for_is_not_counted_and_one_to_come_neither() -> None:
    line = line_of(455, 470, 455, 0, 470)
    assert [one.booking for one in line.sittings] == ["K01", "K02", "K03", "K05"]
    early = learnt(ledger(455, 470, 455, 470, as_at=day("01-19")))
    assert early.classes == 2
    assert [number for number, _ in early.ahead] == ["K03", "K04"]


def test_todays_class_counts_once_it_is_said_to_be_done() -> None:
    known = ledger(455, 470, 455, as_at=day("01-19"))
    done = [weekly(n, firmness=Firmness.DONE if n == 2 else Firmness.FIRM) for n in range(3)]
    assert learnt(known).classes == 2
    assert learnt(ledger(455, 470, 455, as_at=day("01-19"), bookings=done)).classes == 3


def test_a_dropped_class_teaches_nothing() -> None:
    booked = [weekly(n, firmness=Firmness.DROPPED if n == 0 else Firmness.FIRM) for n in range(4)]
    assert learnt(ledger(900, 470, 455, 470, bookings=booked)).classes == 3


def test_two_lines_of_one_stock_are_one_sum() -> None:
    asks = recipe(wants(THIO, cm3(60), per=Per.GROUP), wants(THIO, cm3(20)))
    known = ledger(455, 470, 455, 470)
    (line,) = learnt(house([THIO], recipes=[asks], bookings=known.bookings, as_at=LAST,
                           drawn=known.drawn)).lines  # fmt: skip
    assert {one.plain for one in line.sittings} == {cm3(500)}


def test_nothing_drawn_is_no_recipe_to_tell_of() -> None:
    assert spares(ledger(0, 0, 0)) == []


# -- told ------------------------------------------------------------------------------------------


def test_the_text_says_what_would_do_and_how_to_use_it_and_changes_nothing() -> None:
    known = ledger(455, 470, 455, 470, 0, as_at=day("02-01"))
    said = " ".join(spare_text(spares(known), 300, as_at=known.as_at).split())
    assert "planned 528, used 455-470 cm³ in four classes: 2 % would do (10 % now)" in said
    assert "2 % spare would do for the whole recipe, 10 % now (thio 0.1 mol/dm³ decides" in said
    assert "stockroom book R01 --on DATE --at TIME --groups NUMBER --dept CODE --spare 2" in said
    assert "Booked already, and left as they are: K05 (10 %)" in said


def test_the_data_holds_every_class_and_the_figures() -> None:
    known = ledger(455, 470, 455, 470)
    (told,) = spare_json(spares(known), as_at=known.as_at)["recipes"]
    assert (told["recipe"], told["would_do"], told["spare_now"]) == ("R01", 2, [10.0])
    (line,) = told["lines"]
    assert [one["used"] for one in line["classes"]] == [455, 470, 455, 470]
    assert {one["planned"] for one in line["classes"]} == {528.0}
    assert line["unit"] == "cm3"
