"""What is learnt of a bottle re-dates it, sets it aside, or is asked about."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadAmount, BadDate, BadInput, NotAllowed, StockroomError
from stockroom.keeping.record import CheckKind
from stockroom.keeping.verdict import Condition
from stockroom.measure.amounts import Amount
from stockroom.measure.parsing import parse_strength
from stockroom.planning.facts import Bottle
from stockroom.reports.shelf_text import shelf_text
from stockroom.service import checks, hit, stock
from stockroom.service.making import make_up
from stockroom.service.shelf import shelf
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}


def seen(path: Path, number: str) -> Bottle:
    return next(bottle for bottle in facts(path, TODAY).bottles if bottle.number == number)


def test_a_found_strength_is_kept_in_the_lines_unit(own: Path) -> None:
    done = checks.found(own, "S02", parse_strength("97.9 mM"), **WHO)
    assert "found 97.9 mM, 11 January 2027" in done.text
    check = seen(own, "S02").record.checks[-1]
    assert (check.on, check.kind) == (TODAY, CheckKind.FOUND)
    assert check.strength == pytest.approx(0.0979)


def test_a_found_strength_restarts_the_recheck(own: Path) -> None:
    # recheck 28 days: scenario section 5
    done = checks.found(own, "S02", parse_strength("0.0979 M"), **WHO)
    assert done.details[0].startswith("Now sound, until 8 February 2027")


def test_peroxide_is_found_in_vol(own: Path) -> None:
    checks.found(own, "B01", parse_strength("90 vol"), **WHO)
    # 90 / 11.207 = 8.03 mol/dm³; worked out from 22.414 dm³/mol
    assert seen(own, "B01").record.checks[-1].strength == pytest.approx(8.031, rel=1e-3)


def test_an_unusual_strength_is_asked_about(own: Path) -> None:
    with pytest.raises(NotAllowed, match=r"Unusual: 0.13 M against 0.100 mol/dm3"):
        checks.found(own, "S02", parse_strength("0.13 M"), **WHO)
    checks.found(own, "S02", parse_strength("0.13 M"), sure=True, **WHO)
    assert seen(own, "S02").record.checks[-1].strength == pytest.approx(0.13)


@pytest.mark.parametrize("written", ["saturated", "1 in 10"])
def test_a_strength_without_a_number_is_no_result(own: Path, written: str) -> None:
    with pytest.raises(BadAmount, match=f'"{written}" cannot be set beside'):
        checks.found(own, "S02", parse_strength(written), **WHO)


def test_a_good_look_redates(own: Path) -> None:
    # scenario section 7: looked at on 01-11, S03 is good to 2027-04-11
    done = checks.look(own, "S03", passed=True, note="starch blank clear", **WHO)
    assert done.details[0].startswith("Now sound, until 11 April 2027")


def test_a_bad_look_sets_aside(own: Path) -> None:
    done = checks.look(own, "S12", passed=False, **WHO)
    assert "did not pass: set aside" in done.text
    assert seen(own, "S12").record.set_aside != ""


def test_a_test_moves_a_safety_date(own: Path) -> None:
    done = checks.tested(own, "B29", passed=True, **WHO)
    assert done.details[0].startswith("Now sound, until 11 July 2027")


def test_a_test_is_only_for_what_has_one(own: Path) -> None:
    with pytest.raises(NotAllowed, match="has no test of its own"):
        checks.tested(own, "S03", passed=True, **WHO)


def test_nothing_extends_what_is_never_kept(own: Path) -> None:
    from stockroom.service.database import add_row

    row = {"bottle": "S90", "line": "ammoniacal silver", "size_cm3": "50", "made": "2027-01-11"}
    add_row(own, "bottles", row, by="T1")
    with pytest.raises(NotAllowed, match=r"never kept\. There is no test that extends it"):
        checks.look(own, "S90", passed=True, **WHO)


def test_setting_aside_lists_what_was_made_from_it(own: Path) -> None:
    done = checks.spoil(own, "B16", "rust specks", **WHO)
    # the plan draws on S20, and not on what it was made from: stockroom why S20
    assert done.details == ("Made from it: S20 ammonia 2.00 mol/dm3. Drawn on for K16, K27.",)
    assert seen(own, "B16").record.set_aside == "rust specks"


# worked out by hand from the plan: S01 gives 0.200 to K05 and K06, 0.500 to K17, the rest 0.0500
LEANS_ON_S01 = "Drawn on by the plan for K05, K06, K08, K09, K17, K24, K28: stockroom plan"


def test_setting_aside_names_the_bookings_that_lean_on_it(own: Path) -> None:
    done = checks.spoil(own, "S01", "cloudy", **WHO)
    assert done.details[-1] == LEANS_ON_S01


def test_a_need_served_straight_from_a_lost_bottle_is_named(own: Path) -> None:
    done = checks.lost(own, "S11", **WHO)
    assert done.details == ("Drawn on by the plan for K07: stockroom plan",)


def test_what_is_over_by_the_day_of_entry_is_not_named(own: Path) -> None:
    late: dict[str, Any] = {"on": TODAY, "today": date(2027, 1, 22), "by": "T1"}
    named = checks.lost(own, "S01", **late).details[0]
    assert "K05" not in named
    assert "K28" in named


def test_losing_what_no_booking_leans_on_names_none(own: Path) -> None:
    assert checks.lost(own, "S14", **WHO).details == ()


def test_a_bottle_is_set_aside_though_no_plan_can_be_made(
    own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def fail(known: object) -> object:
        raise BadInput("A method goes round.", "Mend it.")

    monkeypatch.setattr(hit, "replayed_plan", fail)
    done = checks.spoil(own, "S01", "cloudy", **WHO)
    assert "no plan can be made: A method goes round." in done.details[-1]
    assert seen(own, "S01").record.set_aside == "cloudy"


def test_what_was_made_from_a_spoiled_bottle_is_doubted_wherever_it_is_met(own: Path) -> None:
    made = make_up(
        own, "hydrochloric acid 0.400 mol/dm3", Amount.cm3(500), sources=["S05"], place=None, **WHO
    )
    done = checks.spoil(own, "S05", "yellow tinge", **WHO)
    assert any(f"Made from it: {made.bottle} " in detail for detail in done.details)
    assert done.next == f"stockroom look {made.bottle}"
    doubt = f"{made.bottle} was made from S05, since set aside (yellow tinge): look before it is"
    drawn = stock.draw(own, made.bottle, Amount.cm3(10), **WHO)
    looked = checks.look(own, made.bottle, passed=True, **WHO)
    assert [any(doubt in one for one in each.details) for each in (drawn, looked)] == [True, True]
    found = shelf(own, made.bottle, on=TODAY)
    assert found.rows[0].doubt == "made from S05, since set aside (yellow tinge)"
    assert "made from S05, since set aside" in " ".join(shelf_text(found, 100).split())
    # in doubt, and not set aside by itself: whoever looks decides
    assert found.rows[0].verdict.condition is Condition.SOUND


def test_what_is_set_aside_is_set_aside_again_for_another_reason_only(own: Path) -> None:
    checks.spoil(own, "S12", "cloudy", **WHO)
    with pytest.raises(NotAllowed, match="S12 is set aside already: cloudy; nothing entered"):
        checks.spoil(own, "S12", "Cloudy ", **WHO)
    done = checks.spoil(own, "S12", "smells", **WHO)
    assert done.details[0] == "It was set aside already: cloudy."
    checks.lost(own, "B41", **WHO)
    checks.turned_up(own, "B41", None, **WHO)
    assert checks.spoil(own, "B41", "wet", **WHO).text.startswith("Set aside B41")


def test_what_turned_up_does_not_turn_up_twice(own: Path) -> None:
    checks.turned_up(own, "B28", None, **WHO)
    with pytest.raises(NotAllowed, match=r"it is set aside \(turned up: needs a look\), at A2"):
        checks.turned_up(own, "B28", None, **WHO)


def test_setting_aside_wants_a_word(own: Path) -> None:
    with pytest.raises(BadInput, match="Why set B16 aside") as caught:
        checks.spoil(own, "B16", "", **WHO)
    assert "One word is enough, but I need it" in caught.value.hint


def test_a_lost_bottle_shows_its_last_place(own: Path) -> None:
    assert "it last stood at D1" in checks.lost(own, "S01", **WHO).text
    assert seen(own, "S01").record.not_found


def test_a_lost_bottle_is_not_lost_twice(own: Path) -> None:
    said = r"B28 is not found already, since 27 November 2026, T2.*; nothing entered"
    with pytest.raises(NotAllowed, match=said):
        checks.lost(own, "B28", **WHO)


def test_what_was_used_later_was_not_lost_before(own: Path) -> None:
    drawn = stock.draw(own, "S11", Amount.cm3(10), on=date(2027, 1, 8), today=TODAY, by="T2")
    late: dict[str, Any] = {"on": date(2027, 1, 7), "today": TODAY, "by": "T1"}
    said = f"S11 was there after 7 January 2027: entry {drawn.entry}, drawn 8 January 2027 by T2"
    with pytest.raises(NotAllowed, match=said):
        checks.lost(own, "S11", **late)
    assert not seen(own, "S11").record.not_found
    checks.lost(own, "S11", **{**late, "on": date(2027, 1, 8)})
    assert seen(own, "S11").record.not_found


def test_what_turned_up_is_back_where_it_stood(own: Path) -> None:
    done = checks.turned_up(own, "B28", None, **WHO)
    assert "turned up at A2" in done.text
    assert done.next == "stockroom look B28"


def test_only_a_missing_bottle_turns_up(own: Path) -> None:
    with pytest.raises(NotAllowed, match="S01 was not missing: it is in use, at D1"):
        checks.turned_up(own, "S01", "D1", **WHO)


def test_a_solid_has_no_strength_to_find(own: Path) -> None:
    with pytest.raises(NotAllowed, match=r"B06 .* is measured by mass: it is no solution"):
        checks.found(own, "B06", parse_strength("1.4 mol/dm3"), **WHO)


def printed(path: Path, number: str) -> tuple[date, ...]:
    found = seen(path, number).record.printed
    return found.readings if found else ()


def test_a_date_with_two_readings_is_settled_by_saying_which(own: Path) -> None:
    assert printed(own, "B21") == (date(2027, 4, 5), date(2027, 5, 4))
    done = checks.printed(own, "B21", date(2027, 5, 4), **WHO)
    assert printed(own, "B21") == (date(2027, 5, 4),)
    assert done.details[0].startswith("Now sound, until 4 May 2027")


def test_a_date_read_wrongly_can_be_read_again_or_put_right(own: Path) -> None:
    checks.printed(own, "B21", date(2027, 5, 4), **WHO)
    again = checks.printed(own, "B21", date(2027, 4, 5), **WHO)
    assert printed(own, "B21") == (date(2027, 4, 5),)
    stock.put_right(own, again.entry or 0, "misread", **WHO)
    assert printed(own, "B21") == (date(2027, 5, 4),)


@pytest.mark.parametrize(
    ("bottle", "day", "kind", "said"),
    [
        ("B21", date(2027, 6, 4), BadDate, "5 April 2027 or 4 May 2027, and not 4 June 2027"),
        ("B06", date(2027, 6, 4), BadDate, "B06 has no printed date"),
        ("B22", date(2026, 12, 31), NotAllowed, "can only be 31 December 2026"),
    ],
)
def test_a_reading_the_label_does_not_give_is_refused(
    own: Path, bottle: str, day: date, kind: type[StockroomError], said: str
) -> None:
    with pytest.raises(kind, match=said):
        checks.printed(own, bottle, day, **WHO)


def test_what_turned_up_waits_for_a_look(own: Path) -> None:
    checks.turned_up(own, "B28", "A2", **WHO)
    assert seen(own, "B28").record.set_aside == "turned up: needs a look"
    checks.look(own, "B28", passed=True, **WHO)
    assert seen(own, "B28").record.set_aside == ""


def test_a_strength_found_since_is_as_good_as_a_look(own: Path) -> None:
    checks.lost(own, "S02", **WHO)
    checks.turned_up(own, "S02", None, **WHO)
    checks.found(own, "S02", parse_strength("0.0987 M"), **WHO)
    assert seen(own, "S02").record.set_aside == ""


def test_what_was_set_aside_before_it_was_lost_stays_so(own: Path) -> None:
    checks.spoil(own, "S05", "yellow tinge", **WHO)
    checks.lost(own, "S05", **WHO)
    checks.turned_up(own, "S05", None, **WHO)
    checks.found(own, "S05", parse_strength("2.00 M"), **WHO)
    assert seen(own, "S05").record.set_aside == "yellow tinge"


def test_a_look_at_a_bottle_past_its_printed_date_says_still_past(own: Path) -> None:
    done = checks.look(own, "B03", passed=True, **WHO)
    assert done.details[0].startswith("Still past: good until 31 October 2026")
