"""A slip of a unit and the same entered twice are asked about, and kept when they are meant."""

from __future__ import annotations

from datetime import date, datetime, timedelta
from pathlib import Path
from typing import Any

import pytest

from stockroom import clock
from stockroom.errors import NotAllowed
from stockroom.measure.amounts import Amount
from stockroom.measure.parsing import parse_strength
from stockroom.service import checks, stock
from stockroom.service.answers import Done
from stockroom.service.asking import AGAIN
from stockroom.service.making import make_up

WHO: dict[str, Any] = {"on": None, "today": date(2027, 1, 11), "by": "T1"}
PERMANGANATE = "potassium permanganate 0.0200 mol/dm3"


def make(path: Path, cubic: float = 1000, line: str = PERMANGANATE, **more: Any) -> Done:
    said = {"sources": [], **WHO, **more}
    return make_up(path, line, Amount.cm3(cubic), place="D1", **said)


def later(monkeypatch: pytest.MonkeyPatch, by: timedelta) -> None:
    then = datetime.now().replace(microsecond=0) + by
    monkeypatch.setattr(clock, "now", lambda: then)


def test_the_same_make_within_minutes_is_asked_about(own: Path) -> None:
    made = make(own)
    with pytest.raises(NotAllowed, match=rf"{made.bottle} was made .* ago by T1.* Again"):
        make(own, by="T2")
    assert make(own, sure=True).bottle != made.bottle


def test_another_volume_or_another_source_is_another_make(own: Path) -> None:
    make(own, sources=["B10"])
    make(own, 900)
    assert make(own, 500).bottle


def test_long_after_nobody_asks(own: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    make(own)
    later(monkeypatch, AGAIN + timedelta(minutes=1))
    assert make(own).bottle


def test_a_make_put_right_may_be_entered_again(own: Path) -> None:
    made = make(own)
    stock.put_right(own, int(made.entry or 0), "slip", **WHO)
    assert make(own).bottle


def test_many_times_what_is_planned_is_asked_about(own: Path) -> None:
    with pytest.raises(NotAllowed, match=r"51 times .*planned.*: sure\?"):
        make(own, 9000, "starch 0.5 % w/v")
    assert make(own, 9000, "starch 0.5 % w/v", sure=True).bottle


@pytest.mark.parametrize("grams", [0.00001, 0.001])
def test_a_count_too_small_to_be_seen_is_asked_about(own: Path, grams: float) -> None:
    with pytest.raises(NotAllowed, match=r"B06, which holds .* when full: sure"):
        stock.count(own, "B06", Amount.grams(grams), **WHO)
    assert stock.count(own, "B06", Amount.grams(grams), sure=True, **WHO).entry


def test_an_empty_bottle_is_counted_unasked(own: Path) -> None:
    assert stock.count(own, "B06", Amount.grams(0), **WHO).entry


def test_a_strength_found_while_it_still_stands_is_asked_about(own: Path) -> None:
    made, strength = str(make(own).bottle), parse_strength("0.0199 mol/dm3")
    with pytest.raises(NotAllowed, match=f"{made} is still standing until"):
        checks.found(own, made, strength, **WHO)
    assert checks.found(own, made, strength, sure=True, **WHO).entry
