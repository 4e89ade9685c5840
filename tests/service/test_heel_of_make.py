"""A make beside what the plan meant: for whom, planned and made, who lacks, what is over."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import NotAllowed
from stockroom.measure.amounts import Amount
from stockroom.measure.formats import format_amount, format_number
from stockroom.planning.decisions import Make
from stockroom.service import stock
from stockroom.service.answers import Done
from stockroom.service.making import make_up
from stockroom.service.plan import term_plan
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}
LINE = "potassium permanganate 0.0200 mol/dm3"


def planned(path: Path, line: str = LINE) -> Make:
    return next(make for make in term_plan(path, as_at=TODAY).makes if make.line == line)


def make(path: Path, micro: int, line: str = LINE, *sources: str) -> Done:
    volume = Amount.cm3(micro / 1000)
    return make_up(path, line, volume, sources=list(sources), place=None, **WHO)


def said(done: Done) -> str:
    return " ".join(done.details)


def test_the_planned_volume_is_as_planned(own: Path) -> None:
    meant = planned(own)
    done = make(own, meant.volume)
    assert f"For {', '.join(meant.bookings)}, as planned." in done.details


def test_another_volume_says_planned_and_made(own: Path) -> None:
    meant = planned(own)
    done = make(own, meant.volume + 500_000)
    assert "as planned" not in said(done)
    both = [
        format_amount(Amount.cm3(micro / 1000)) for micro in (meant.volume, meant.volume + 500_000)
    ]
    assert f"{both[0]} planned, {both[1]} made" in said(done)


def test_less_than_is_needed_names_who_lacks(own: Path) -> None:
    meant = planned(own)
    done = make(own, meant.needed - 100_000)
    assert f"100 cm³ short of what is needed for {meant.bookings[-1]}: make the rest." in said(done)
    assert "will be over" not in said(done)


@pytest.mark.parametrize(("over", "worth"), [(40_000, False), (300_000, True)])
def test_what_will_be_over_is_worth_a_label_or_is_not(own: Path, over: int, worth: bool) -> None:
    # 50 cm³ is the least heel worth a label: a house setting
    needed = planned(own).needed
    done = make(own, needed + over)
    assert f"{over // 1000} cm³ will be over" in said(done)
    # the figure it is taken from stands beside it
    assert f", {format_number(needed / 1000)} cm³ needed, " in said(done)
    assert done.next == "stockroom move S25 PLACE"
    assert ("worth a label. It stays in S25" in said(done)) is worth
    assert ("not worth a label" in said(done)) is not worth


def test_what_does_not_keep_is_never_worth_a_label(own: Path) -> None:
    from stockroom.planning.windows import good_until

    known = facts(own, TODAY)
    makes = term_plan(own, as_at=TODAY).makes
    # ascorbic acid for titrating is good for its own day only
    meant = next(m for m in makes if good_until(known.lines[m.line], m.on) == m.on)
    morning: dict[str, Any] = {"on": None, "today": meant.on, "by": "T1"}
    volume = Amount.cm3((meant.needed + 500_000) / 1000)
    done = make_up(own, meant.line, volume, sources=[], place=None, **morning)
    assert "not worth a label" in said(done)
    assert "discard" not in said(done)


def test_a_solution_is_not_made_from_itself(own: Path) -> None:
    with pytest.raises(NotAllowed, match=r"S01 is sodium thiosulfate 1\.00 mol/dm3 already"):
        make(own, 100_000, "sodium thiosulfate 1.00 mol/dm3", "S01")


def test_the_bottle_made_is_the_stock(own: Path) -> None:
    done = make(own, planned(own).volume)
    assert "left" in stock.draw(own, done.bottle, Amount.cm3(10), **WHO).text


def test_a_make_too_early_is_credited_to_no_booking_it_does_not_reach(own: Path) -> None:
    starch = "starch 0.5 % w/v"
    meant = planned(own, starch)
    done = make(own, meant.volume, starch)
    assert not any(each.startswith("For ") for each in done.details)
    assert f"Planned for {', '.join(meant.bookings)} too, and not used there" in said(done)
