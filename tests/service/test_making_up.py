"""A make draws its sources, gets a number and parents, in one piece or not at all."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadAmount, NotAllowed, NotEnough, StockroomError, UnknownName
from stockroom.measure.amounts import Amount
from stockroom.measure.parsing import parse_strength
from stockroom.planning.facts import Bottle
from stockroom.service import checks, stock
from stockroom.service.answers import Done
from stockroom.service.making import make_up
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}


def make(path: Path, line: str, cubic: float, *sources: str) -> Done:
    volume = Amount.cm3(cubic)
    return make_up(path, line, volume, sources=list(sources), place="D1", sure=True, **WHO)


def shelf(path: Path) -> dict[str, Bottle]:
    return {bottle.number: bottle for bottle in facts(path, TODAY).bottles}


def used(path: Path, before: dict[str, Bottle], number: str) -> float:
    """How much less of a bottle there is than before, in g or cm³."""
    after = shelf(path)[number]
    kind = facts(path, TODAY).lines[after.line].kind
    return Amount(kind, before[number].left - after.left).number


# scenario sections 8 and 9: T10 14.6 g, T30 810 cm³, T24 158.1 g; worked out by hand
@pytest.mark.parametrize(
    ("line", "cubic", "source", "amount"),
    [
        ("potassium permanganate 0.0200 mol/dm3", 4620, "B10", 14.60),
        ("sodium thiosulfate 0.200 mol/dm3", 4048, "S01", 809.6),
        ("sodium thiosulfate 1.00 mol/dm3", 1000, "B07", 158.1),
        ("sodium thiosulfate 1.00 mol/dm3", 1000, "B06", 248.2),
        ("copper(II) sulfate 0.500 mol/dm3", 1000, "B20", 79.8),
        ("sodium hydroxide 0.400 mol/dm3", 1000, "B17", 16.5),
        ("sulfuric acid 2.00 mol/dm3", 5000, "B13", 544.0),
        ("limewater", 1000, "B26", 3.0),
    ],
)
def test_the_draw_follows_the_form_in_the_bottle(
    own: Path, line: str, cubic: float, source: str, amount: float
) -> None:
    before = shelf(own)
    make(own, line, cubic, source)
    assert used(own, before, source) == pytest.approx(amount, rel=2e-3)


def test_a_weakened_source_is_drawn_at_its_expected_strength(own: Path) -> None:
    before = shelf(own)
    done = make(own, "hydrogen peroxide 0.100 mol/dm3", 528, "B01")
    # scenario T09: 6.61 cm³ at 89.5 vol on 01-26; on 01-11 it is still 90.0 vol (worked out)
    assert used(own, before, "B01") == pytest.approx(6.58, abs=0.01)
    assert "from its found strength" in done.details[0]


def test_a_make_is_a_new_bottle_with_parents(own: Path) -> None:
    done = make(own, "potassium permanganate 0.0200 mol/dm3", 2000, "B10")
    made = shelf(own)[done.bottle]
    assert done.bottle == "S25"
    assert (made.lineage, made.place, made.made_here) == (("B10",), "D1", True)
    assert (made.left, made.record.made) == (Amount.cm3(2000).micro, TODAY)


def test_the_solvent_is_drawn_too(own: Path) -> None:
    acid = make(own, "sulfuric acid 0.500 mol/dm3", 1320).bottle
    before = shelf(own)
    make(own, "ammonium iron(II) sulfate 0.100 mol/dm3", 1320)
    assert used(own, before, "B11") == pytest.approx(51.8, abs=0.05)
    assert used(own, before, acid) == pytest.approx(1320)


def test_without_a_named_source_the_one_going_past_soonest_is_taken(own: Path) -> None:
    newer = make(own, "sodium thiosulfate 1.00 mol/dm3", 500, "B06").bottle
    assert "S01" in make(own, "sodium thiosulfate 0.100 mol/dm3", 100).details[0]
    stock.count(own, "S01", Amount.cm3(5), **WHO)
    assert newer in make(own, "sodium thiosulfate 0.100 mol/dm3", 100).details[0]


def test_a_source_past_its_look_is_passed_over(own: Path) -> None:
    # S03 went past on 01-04, so iodide is made from the solid until somebody looks
    assert "B08 potassium iodide" in make(own, "KI 0.100", 100).details[0]
    checks.look(own, "S03", passed=True, **WHO)
    assert "S03" in make(own, "KI 0.100", 100).details[0]


def test_a_dilution_from_too_weak_a_bottle_is_refused(own: Path) -> None:
    checks.found(own, "S01", parse_strength("0.15 M"), sure=True, **WHO)
    with pytest.raises(NotAllowed, match=r"Cannot reach 0\.2 mol/dm³ from 0\.15 mol/dm³"):
        make(own, "sodium thiosulfate 0.200 mol/dm3", 100, "S01")


@pytest.mark.parametrize(
    ("line", "amount", "sources", "kind", "said"),
    [
        ("ammoniacal silver", Amount.cm3(10), [], NotAllowed, "Ammoniacal silver is never kept"),
        ("Benedict's reagent", Amount.cm3(10), [], NotAllowed, "has no method"),
        ("KI 0.100", Amount.grams(10), [], BadAmount, "10 g of potassium iodide 0.100"),
        ("KI 0.100", Amount.cm3(0), [], BadAmount, "0 cm³ of potassium iodide"),
        ("KI 0.100", Amount.cm3(10), ["B10"], NotAllowed, "B10 holds potassium permanganate"),
        ("KI 0.100", Amount.cm3(10), ["B08", "S03"], NotAllowed, "S03 is a second source"),
        ("KI 0.100", Amount.cm3(10), ["B99"], UnknownName, 'No bottle "B99"'),
        ("lithium chloride 0.500", Amount.cm3(9), ["B28"], NotAllowed, "So it is found"),
        ("lithium chloride 0.500", Amount.cm3(9), [], NotEnough, "No bottle of lithium chloride"),
        ("silver nitrate 0.100", Amount.cm3(900), ["B18"], NotEnough, "B18 holds 7.8 g"),
    ],
)
def test_a_make_that_cannot_be_leaves_everything_as_it_was(
    own: Path, line: str, amount: Amount, sources: list[str],
    kind: type[StockroomError], said: str,
) -> None:  # fmt: skip
    before = facts(own, TODAY)
    with pytest.raises(kind, match=said):
        make_up(own, line, amount, sources=sources, place="D1", **WHO)
    assert facts(own, TODAY) == before


def test_a_make_whose_last_draw_fails_draws_nothing(own: Path) -> None:
    acid = make(own, "sulfuric acid 0.500 mol/dm3", 100).bottle
    before = facts(own, TODAY)
    with pytest.raises(NotEnough, match=f"{acid} holds 100 cm³; 500 cm³ asked"):
        make(own, "ammonium iron(II) sulfate 0.100 mol/dm3", 500, "B11", acid)
    assert facts(own, TODAY) == before


def test_a_source_gone_past_is_used_all_the_same_and_said(own: Path) -> None:
    # B22 ascorbic acid was good until 31 December 2026: scenario section 4
    done = make(own, "ascorbic acid 0.1 % w/v", 100, "B22")
    [told] = [detail for detail in done.details if "used all the same" in detail]
    assert told.startswith("B22 is past (printed")


def test_a_sound_source_needs_no_words(own: Path) -> None:
    done = make(own, "sodium thiosulfate 1.00 mol/dm3", 1000, "B06")
    assert not [detail for detail in done.details if "used all the same" in detail]
