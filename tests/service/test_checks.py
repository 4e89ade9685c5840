"""What is learnt of a bottle re-dates it, sets it aside, or is asked about."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadAmount, BadInput, NotAllowed
from stockroom.keeping.record import CheckKind
from stockroom.measure.parsing import parse_strength
from stockroom.planning.facts import Bottle
from stockroom.service import checks
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
    assert done.details == ("Made from it: S20 ammonia 2.00 mol/dm3.",)
    assert seen(own, "B16").record.set_aside == "rust specks"


def test_setting_aside_wants_a_word(own: Path) -> None:
    with pytest.raises(BadInput, match="Why set B16 aside") as caught:
        checks.spoil(own, "B16", "", **WHO)
    assert "One word is enough, but I need it" in caught.value.hint


def test_a_lost_bottle_shows_its_last_place(own: Path) -> None:
    assert "it last stood at D1" in checks.lost(own, "S01", **WHO).text
    assert seen(own, "S01").record.not_found


def test_a_lost_bottle_is_not_lost_twice(own: Path) -> None:
    with pytest.raises(NotAllowed, match="So it is found"):
        checks.lost(own, "B28", **WHO)


def test_what_turned_up_is_back_where_it_stood(own: Path) -> None:
    done = checks.turned_up(own, "B28", None, **WHO)
    assert "turned up at A2" in done.text
    assert done.next == "stockroom look B28"


def test_only_a_missing_bottle_turns_up(own: Path) -> None:
    with pytest.raises(NotAllowed, match="S01 was not missing: it is in use, at D1"):
        checks.turned_up(own, "S01", "D1", **WHO)
