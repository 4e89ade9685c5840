"""Facts as at a day: what had not happened yet is not there, what was put right never was."""

from __future__ import annotations

import subprocess
import sys
from datetime import date
from pathlib import Path

import pytest

from stockroom.errors import BadDate
from stockroom.measure.amounts import Amount
from stockroom.planning.facts import Bottle, Facts, Firmness
from stockroom.service import bookings, checks, stock
from stockroom.store.reading import house_value, practice_day
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 4)


@pytest.fixture(scope="module")
def known(practice: Path) -> Facts:
    return facts(practice, TODAY)


def bottle(known: Facts, number: str) -> Bottle:
    return next(bottle for bottle in known.bottles if bottle.number == number)


def left(path: Path, number: str, day: date) -> float:
    micro = bottle(facts(path, day), number).left
    return micro / 1_000


# scenario sections 4 and 5, the column Left (cm³; g for B06 and B11)
@pytest.mark.parametrize(
    ("number", "held"),
    [("B01", Amount.cm3(420)), ("B06", Amount.grams(640)), ("B11", Amount.grams(130)),
     ("S05", Amount.cm3(2600)), ("S13", Amount.cm3(130)), ("S24f", Amount.cm3(0))],
)  # fmt: skip
def test_the_shelves_hold_what_the_scenario_lists(known: Facts, number: str, held: Amount) -> None:
    assert bottle(known, number).left == held.micro


def test_fridays_draw_entered_on_monday_is_in_fridays_picture(practice: Path) -> None:
    assert left(practice, "S05", date(2026, 12, 17)) == 2800
    assert left(practice, "S05", date(2026, 12, 18)) == 2600


def test_a_slip_put_right_is_in_no_days_picture(practice: Path) -> None:
    before, slip_day, after = (
        bottle(facts(practice, date(2026, 12, day)), "B06").left for day in (15, 16, 17)
    )
    assert before == slip_day == Amount.grams(690).micro
    assert after == Amount.grams(640).micro


def test_only_the_fifty_grams_meant_count_as_drawn(known: Facts) -> None:
    drawn = [entry.amount for entry in known.drawn if entry.bottle == "B06"]
    assert drawn == [Amount.grams(50).micro]


def test_a_bottle_is_absent_before_it_came(practice: Path) -> None:
    numbers = {bottle.number for bottle in facts(practice, date(2026, 11, 15)).bottles}
    assert "S03" in numbers
    assert numbers.isdisjoint({"B02", "S01", "S02"})


def test_a_discarded_bottle_is_absent_from_its_day_on(own: Path) -> None:
    stock.discard(own, "S14", how="iron waste", why="past", on=None, today=TODAY, by="T1")
    assert "S14" not in {bottle.number for bottle in facts(own, TODAY).bottles}
    assert left(own, "S14", date(2027, 1, 3)) == 200


def test_an_emptied_bottle_stays_until_it_is_discarded(known: Facts) -> None:
    assert bottle(known, "S24f").left == 0


def test_a_lost_bottle_is_not_found_until_it_turns_up(own: Path) -> None:
    assert bottle(facts(own, TODAY), "B28").record.not_found
    checks.turned_up(own, "B28", "A2", on=None, today=TODAY, by="T2")
    assert not bottle(facts(own, TODAY), "B28").record.not_found
    assert bottle(facts(own, date(2027, 1, 3)), "B28").record.not_found


def test_the_unknown_jar_stands_apart(known: Facts) -> None:
    assert bottle(known, "B36").record.set_aside == "unknown, label gone"


def test_a_bad_look_sets_aside_and_a_good_one_clears_it(own: Path) -> None:
    checks.look(own, "S12", passed=False, note="no milk", on=None, today=TODAY, by="T1")
    assert bottle(facts(own, TODAY), "S12").record.set_aside == "no milk"
    checks.look(own, "S12", passed=True, on=None, today=TODAY, by="T1")
    assert bottle(facts(own, TODAY), "S12").record.set_aside == ""


def test_opened_without_a_day_is_a_guess(known: Facts) -> None:
    record = bottle(known, "B35").record
    assert record.opened_guessed
    assert record.undated


def test_a_date_with_two_readings_keeps_both(known: Facts) -> None:
    printed = bottle(known, "B21").record.printed
    assert printed is not None
    assert printed.text == "04/05/27"
    assert printed.readings == (date(2027, 4, 5), date(2027, 5, 4))


def test_found_strengths_are_checks_of_their_day(known: Facts) -> None:
    check = bottle(known, "S02").record.checks[0]
    assert check.on == date(2026, 12, 10)
    assert check.strength == pytest.approx(0.0987)


def test_a_moved_bottle_has_stood_in_both_places(own: Path) -> None:
    stock.move(own, "S01", "F1", on=None, today=TODAY, by="T1")
    moved = bottle(facts(own, TODAY), "S01")
    assert moved.place == "F1"
    assert [stay.temperature_c for stay in moved.record.stays] == [20.0, 5.0]


def test_lineage_names_the_nearest_first(known: Facts) -> None:
    assert bottle(known, "S20").lineage == ("B16",)
    assert bottle(known, "B16").lineage == ()


@pytest.mark.parametrize(
    ("as_at", "start", "end"),
    [
        (date(2027, 2, 10), date(2027, 1, 4), date(2027, 3, 26)),
        (date(2026, 12, 1), date(2027, 1, 4), date(2027, 3, 26)),
        (date(2027, 4, 1), date(2027, 4, 1), date(2027, 6, 30)),
    ],
)
def test_the_period_is_this_term_or_the_next_or_ninety_days(
    practice: Path, as_at: date, start: date, end: date
) -> None:
    known = facts(practice, as_at)
    assert (known.start, known.end) == (start, end)


def test_a_period_asked_for_still_knows_the_bookings_of_the_term(practice: Path) -> None:
    known = facts(practice, TODAY, date(2027, 2, 1), date(2027, 2, 5))
    assert (known.start, known.end) == (date(2027, 2, 1), date(2027, 2, 5))
    assert known.horizon == date(2027, 3, 26)
    assert len(known.bookings) == 29


def test_a_period_that_runs_backwards_is_refused(practice: Path) -> None:
    with pytest.raises(BadDate, match="2027-02-05 to 2027-02-01"):
        facts(practice, TODAY, date(2027, 2, 5), date(2027, 2, 1))


def test_dropped_bookings_are_told_as_dropped(own: Path) -> None:
    bookings.cancel(own, "K06", today=TODAY, by="T1")
    firmness = {booking.number: booking.firmness for booking in facts(own, TODAY).bookings}
    assert firmness["K06"] is Firmness.DROPPED
    assert len(firmness) == 29


def test_a_settled_house_is_read_as_set(known: Facts, practice: Path) -> None:
    assert known.house.practice
    assert known.house.batch_step == Amount.cm3(1).micro
    assert known.house.largest_vessel == Amount.cm3(5000).micro
    assert (house_value(practice, "name"), practice_day(practice)) == ("Quillmere College", TODAY)
    assert house_value(practice, "colour") is None


def test_alternatives_keep_their_order_and_their_conditions(known: Facts) -> None:
    part = known.methods["potassium iodide 0.100 mol/dm3"].ingredients[0]
    assert part.lines == ("potassium iodide 1.00 mol/dm3", "potassium iodide")
    assert part.only_if_held == {"potassium iodide 1.00 mol/dm3"}


@pytest.mark.file
def test_reading_loads_nothing_heavy(practice: Path) -> None:
    code = (
        "import sys, datetime, pathlib; from stockroom.store.snapshot import facts;"
        " facts(pathlib.Path(sys.argv[1]), datetime.date(2027, 1, 4));"
        " print(*sorted({'sqlmodel', 'sqlalchemy', 'alembic', 'pint', 'molmass', 'rapidfuzz',"
        " 'dateutil', 'pydantic'} & set(sys.modules)))"
    )
    ran = subprocess.run(
        [sys.executable, "-c", code, str(practice)], capture_output=True, text=True, check=True
    )
    assert ran.stdout.strip() == ""
