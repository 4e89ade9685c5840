"""What is said the moment something is entered: wrong neighbours, tight caps, water lost."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadInput, NotAllowed
from stockroom.measure.amounts import Amount
from stockroom.measure.parsing import parse_strength
from stockroom.planning.facts import Bottle
from stockroom.service import checks, stock
from stockroom.service.answers import Done
from stockroom.service.making import make_up
from stockroom.store.diary import diary
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}


def seen(path: Path, number: str) -> Bottle:
    return next(bottle for bottle in facts(path, TODAY).bottles if bottle.number == number)


def arrive(path: Path, line: str, place: str, **more: Any) -> Done:
    usual: dict[str, Any] = {"printed": "none", "place": place}
    return stock.arrive(path, line, Amount.cm3(500), **(usual | WHO | more))


# -- where it stands ------------------------------------------------------------------

# A1 is the acids' cupboard, with B13, B14 and B15 in it: scenario section 5
BESIDE_ACID = "stands beside B13, B14, B15 in A1, kept for acid: bleach beside acid, chlorine"


def test_an_arrival_among_wrong_neighbours_is_told_and_kept(own: Path) -> None:
    done = arrive(own, "sodium hypochlorite 12 % w/v", "A1")
    assert done.details == (f"{done.bottle}: {BESIDE_ACID} if they meet: move it.",)
    assert seen(own, done.bottle).place == "A1"


def test_an_arrival_where_it_belongs_needs_no_words(own: Path) -> None:
    assert arrive(own, "hexane", "F2").details == ()


def test_of_several_alike_it_is_said_once(own: Path) -> None:
    assert len(arrive(own, "sodium hypochlorite 12 % w/v", "A1", count=3).details) == 1


def test_a_move_among_wrong_neighbours_is_told(own: Path) -> None:
    (told,) = stock.move(own, "S06", "A1", **WHO).details
    assert told.startswith("S06: stands beside B13, B14, B15 in A1, kept for acid: acid beside")
    assert stock.move(own, "S06", "A4", **WHO).details == ()


def test_a_make_put_among_wrong_neighbours_is_told(own: Path) -> None:
    where: dict[str, Any] = {"sources": [], "place": "A4"}
    made = make_up(own, "sulfuric acid 1.00", Amount.cm3(100), **where, **WHO)
    assert made.details[-1].startswith(f"{made.bottle}: stands beside ")
    assert "in A4, kept for alkali: acid beside alkali" in made.details[-1]


# -- caps -----------------------------------------------------------------------------


@pytest.mark.parametrize(("cap", "told"), [("tight", 1), (" Tight ", 1), ("vented", 0), ("", 0)])
def test_a_tight_cap_on_what_gives_off_gas_is_told(own: Path, cap: str, told: int) -> None:
    done = arrive(own, "hydrogen peroxide 100 vol", "A3", cap=cap)
    assert seen(own, done.bottle).cap == cap.strip().lower()
    assert [detail for detail in done.details if "tight cap" in detail] == [
        f"{done.bottle}: tight cap on a solution that gives off gas: "
        "vent it with care, change the cap."
    ] * told


def test_a_tight_cap_on_anything_else_is_as_it_should_be(own: Path) -> None:
    assert arrive(own, "hexane", "F2", cap="tight").details == ()


def test_another_cap_is_refused_with_nothing_written(own: Path) -> None:
    before = facts(own, TODAY)
    with pytest.raises(BadInput, match='Cap "loose"'):
        arrive(own, "hydrogen peroxide 100 vol", "A3", cap="loose")
    assert facts(own, TODAY) == before


# -- a count that is less -------------------------------------------------------------


def count(path: Path, bottle: str, cubic: float) -> tuple[str, ...]:
    return stock.count(path, bottle, Amount.cm3(cubic), **WHO).details


def test_less_with_nothing_drawn_asks_which_it_was(own: Path) -> None:
    # worked out by hand: 500 to 480 cm³ is ×1.042; S17 is barium chloride 0.100, counted at 480
    stock.count(own, "S17", Amount.cm3(500), **WHO)
    lost, drawn = count(own, "S17", 480)
    assert "×1.042 by now" in lost
    assert lost.endswith('stockroom found S17 "0.1042 mol/dm³" --note "water lost"')
    assert drawn.startswith("Or drawn, not written down?")
    # it never picks by itself
    assert seen(own, "S17").record.checks == ()


def test_the_strength_offered_can_be_entered_as_it_stands(own: Path) -> None:
    stock.count(own, "S17", Amount.cm3(500), **WHO)
    said = count(own, "S17", 480)[0].split('"')[1]
    checks.found(own, "S17", parse_strength(said), note="water lost", **WHO)
    assert seen(own, "S17").record.checks[-1].strength == pytest.approx(0.1042)


def test_what_was_found_grows_and_not_the_label(own: Path) -> None:
    # S02 was found 0.0987: scenario section 5
    lost, _ = count(own, "S02", 1300)
    assert "×1.077" in lost
    assert "0.1063 mol/dm³" in lost


def test_with_something_drawn_since_it_is_not_asked(own: Path) -> None:
    stock.draw(own, "S05", Amount.cm3(100), **WHO)
    assert count(own, "S05", 2500) == ()
    # counted since: what is missing now went by itself
    assert len(count(own, "S05", 2400)) == 2


@pytest.mark.parametrize(
    ("bottle", "amount"),
    [
        ("S05", Amount.cm3(2590)),  # what a count by eye can miss
        ("S05", Amount.cm3(0)),
        ("S11", Amount.cm3(400)),  # Benedict's reagent has no strength
        ("B06", Amount.grams(500)),
        ("B14", Amount.cm3(300)),  # a neat liquid does not grow stronger
    ],
)
def test_where_water_cannot_be_the_reason_it_is_not_asked(
    own: Path, bottle: str, amount: Amount
) -> None:
    assert stock.count(own, bottle, amount, **WHO).details == ()


@pytest.mark.parametrize(("cubic", "told"), [(2800, 0), (2900, 1)])
def test_much_more_than_entered_is_a_new_make(own: Path, cubic: float, told: int) -> None:
    # S05 is a bottle of 5 dm³ with 2 600 cm³ left by now: 5 % of its size is 250 cm³
    said = count(own, "S05", cubic)
    assert said == ("Topped up? Then it is a new make, with a number of its own.",) * told


# -- by dilution ----------------------------------------------------------------------


def make(path: Path, line: str, *sources: str) -> Done:
    volume = Amount.cm3(100)
    return make_up(path, line, volume, sources=list(sources), place="D1", **WHO)


def test_a_dilution_of_what_was_found_keeps_the_factor_and_names_the_check(own: Path) -> None:
    checks.found(own, "S01", parse_strength("1.06 M"), **WHO)
    done = make(own, "sodium thiosulfate 0.200 mol/dm3", "S01")
    made = seen(own, done.bottle)
    assert made.known_by == "by dilution of S01, found 2027-01-11"
    # no check of its own: its recheck does not count from another bottle's
    assert made.record.checks == ()
    assert diary(own, done.bottle)[0].said == made.known_by
    assert any(made.known_by in detail and "close" in detail for detail in done.details)


def test_a_dilution_of_a_dilution_names_both(own: Path) -> None:
    checks.found(own, "S04", parse_strength("1.98 M"), **WHO)
    first = make(own, "sulfuric acid 0.500 mol/dm3", "S04").bottle
    assert seen(own, first).known_by == "by dilution of S04, found 2027-01-11"
    second = seen(own, make(own, "ammonium iron(II) sulfate 0.100 mol/dm3", "B11", first).bottle)
    # the acid it is made up in says nothing of the iron
    assert second.known_by == ""


@pytest.mark.parametrize(
    ("line", "source"),
    [("sodium thiosulfate 0.200 mol/dm3", "S01"), ("sodium thiosulfate 1.00 mol/dm3", "B06")],
)
def test_from_a_label_or_a_solid_nothing_is_carried(own: Path, line: str, source: str) -> None:
    done = make(own, line, source)
    assert seen(own, done.bottle).known_by == ""
    assert not any("by dilution" in detail for detail in done.details)


# -- what must not be opened ----------------------------------------------------------


def test_a_condemned_bottle_that_turns_up_is_not_to_be_looked_at(own: Path) -> None:
    checks.tested(own, "B29", peroxide="30 mg/kg", **WHO)
    checks.lost(own, "B29", **WHO)
    done = checks.turned_up(own, "B29", "F2", **WHO)
    assert done.next == ""
    assert "look" not in " ".join(done.details)


def test_a_make_from_a_condemned_bottle_suggests_no_look(own: Path) -> None:
    checks.tested(own, "B29", peroxide="30 mg/kg", **WHO)
    with pytest.raises(NotAllowed) as refused:
        make(own, "sodium thiosulfate 0.200 mol/dm3", "B29")
    assert "look" not in refused.value.hint
