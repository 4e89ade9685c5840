"""The college's term as it goes: each event entered at the command line, and what must follow."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom

Enter = Callable[..., Any]


@pytest.fixture
def enter(stockroom: Stockroom, own: Path) -> Enter:
    """Enter one event on a day and give back the plan of that day as data."""

    def entering(day: str, *words: str, by: str = "T1") -> Any:
        done = stockroom(*words, "--as-at", day, "--by", by, store=own)
        assert done.code == 0, done.err
        return stockroom("plan", "--as-at", day, "--json", store=own).json

    return entering


def makes(plan: Any, item: str, strength: str) -> list[Any]:
    return [m for m in plan["makes"] if m["item"] == item and m["strength"].startswith(strength)]


def need(plan: Any, booking: str, item: str) -> Any:
    [found] = [n for n in plan["needs"] if n["booking"] == booking and n["item"] == item]
    return found


def ordered(plan: Any) -> set[str]:
    return {order["item"] for order in plan["orders"]}


def test_a_clear_look_at_the_iodide_saves_the_order(
    enter: Enter, stockroom: Stockroom, own: Path
) -> None:
    """T08. S03 is looked at on 11 January: good until 11 April, and no iodide is ordered."""
    plan = enter("2027-01-11", "look", "S03", "--good", "--note", "starch blank clear")
    assert "potassium iodide" not in ordered(plan)
    told = stockroom("why", "S03", "--as-at", "2027-01-11", store=own).out
    assert "good until 2027-04-11" in told


def test_iodide_from_the_bottle_is_too_close_only_for_the_last_class(enter: Enter) -> None:
    """388.8 of 400 cm³ would leave 11: K28, the last, gets its 19 cm³ worth from the solid."""
    plan = enter("2027-01-11", "look", "S03", "--good")
    first, last = makes(plan, "potassium iodide", "0.100")
    assert (first["for"], first["sources"][0]["bottle"]) == (["K08", "K09", "K24"], "S03")
    assert (last["for"], last["sources"][0]["bottle"]) == (["K28"], "B08")


def test_a_failed_look_sets_the_carboy_aside(enter: Enter) -> None:
    """S12 fails its breath check on 12 January: limewater is made that day, ready on the 13th."""
    plan = enter("2027-01-12", "look", "S12", "--bad", "--note", "stays clear")
    [first, _] = makes(plan, "limewater", "saturated")
    assert (first["on"], first["ready"], first["for"]) == ("2027-01-12", "2027-01-13", ["K04"])
    assert {"S12": "set aside"}.items() <= {
        p["bottle"]: p["condition"] for p in plan["past"]
    }.items()


def test_suspect_acid_is_set_aside_and_made_again(enter: Enter) -> None:
    """S05 has a yellow tinge on 15 January: K05, K06, K07, K22 get acid made from B14."""
    plan = enter("2027-01-15", "spoil", "S05", "--why", "yellow tinge, iron suspected")
    [strong] = makes(plan, "hydrochloric acid", "2.00")
    [dilute] = makes(plan, "hydrochloric acid", "1.00")
    assert dilute["for"] == ["K05", "K06", "K07", "K22"]
    assert strong["sources"][0]["bottle"] == "B14"
    assert dilute["sources"][0]["make"] == strong["id"]


def test_a_bigger_class_makes_the_shared_batch_bigger(enter: Enter) -> None:
    """K06 goes from 11 to 13 groups: 4 048 becomes 4 400 cm³, 880 of S01."""
    plan = enter("2027-01-18", "shift", "K06", "--groups", "13")
    [batch] = makes(plan, "sodium thiosulfate", "0.200")
    assert batch["volume"] == 4400
    assert batch["sources"] == [{"bottle": "S01", "amount": 880, "unit": "cm3"}]


def test_lithium_arrives_for_the_last_show_only(enter: Enter) -> None:
    """Ordered on the first day it comes on 18 January: a new number; K29 is covered."""
    words = ("arrive", "lithium chloride", "100 g", "--printed", "none", "--place", "A2")
    plan = enter("2027-01-18", *words)
    [batch] = makes(plan, "lithium chloride", "0.500")
    assert batch["for"] == ["K29"]
    assert batch["sources"][0]["bottle"] == "B46"
    assert "lithium chloride" not in ordered(plan)


def test_the_new_permanganate_serves_at_its_found_strength(
    enter: Enter, stockroom: Stockroom, own: Path
) -> None:
    """Made 29 January, found 0.0201 on 1 February: K11 and K13 have it, and the slip says so."""
    line = "potassium permanganate 0.0200 mol/dm3"
    enter("2027-01-29", "make", line, "4620 cm3", "--from", "B10", "--place", "D1")
    plan = enter("2027-02-01", "found", "S25", "0.0201 mol/dm3")
    for booking in ("K11", "K13", "K25"):
        assert need(plan, booking, "potassium permanganate")["outcome"] == "have"
    told = stockroom("ready", "K11", "--as-at", "2027-02-01", store=own).out
    assert "0.0201 mol/dm³" in told


def test_a_moved_class_gets_its_iron_made_for_the_new_day(enter: Enter) -> None:
    """K13 goes from 4 to 9 February: its iron(II) is made on the 8th."""
    plan = enter("2027-02-02", "shift", "K13", "--on", "2027-02-09")
    days = {tuple(m["for"]): m["on"] for m in makes(plan, "ammonium iron(II) sulfate", "0.100")}
    assert days[("K13",)] == "2027-02-08"


def test_weaker_bromine_gives_more(enter: Enter) -> None:
    """B27 found 0.11 on 22 February: K17 takes 20.0 cm³ of it instead of 11.0."""
    plan = enter("2027-02-22", "found", "B27", "0.11 mol/dm3", "--sure")
    [batch] = makes(plan, "bromine water", "0.020")
    assert batch["sources"] == [{"bottle": "B27", "amount": 20, "unit": "cm3"}]


def test_the_slip_prints_the_thiosulfate_as_found(
    enter: Enter, stockroom: Stockroom, own: Path
) -> None:
    enter("2027-03-03", "found", "S02", "0.0979 mol/dm3")
    told = stockroom("ready", "K21", "--as-at", "2027-03-03", store=own).out
    assert "sodium thiosulfate 0.0979 mol/dm³" in told


def test_a_spill_is_not_consumption(enter: Enter, stockroom: Stockroom, own: Path) -> None:
    plan = enter("2027-03-22", "spill", "B18", "2 g", "--why", "knocked over")
    assert "silver nitrate" not in {use["item"] for use in plan["drawn"]}
    assert "5.8 g left" in stockroom("why", "B18", "--as-at", "2027-03-22", store=own).out


def test_the_second_of_two_draws_is_told_what_is_left(
    enter: Enter, stockroom: Stockroom, own: Path
) -> None:
    """T41. S13 holds 130 cm³: T1 draws 100; T2's 100 is refused, with 30 left."""
    enter("2027-01-20", "draw", "S13", "100 cm3")
    second = stockroom("draw", "S13", "100 cm3", "--by", "T2", "--as-at", "2027-01-20", store=own)
    assert second.code == 1
    assert "30 cm³" in second.err


def test_the_slip_of_the_pen_counts_fifty_grams(stockroom: Stockroom, practice: Path) -> None:
    """T39. B06 drawn 500 g by mistake, put right, 50 g drawn: consumption is 50 g."""
    words = ("usage", "--from", "2026-12-01", "--to", "2026-12-31", "--json")
    drawn = stockroom(*words, store=practice).json["drawn"]
    by_item = {use["item"]: (use["amount"], use["unit"]) for use in drawn}
    assert by_item["sodium thiosulfate pentahydrate"] == (50, "g")


@pytest.mark.file
def test_ammoniacal_silver_cannot_be_saved(stockroom: Stockroom, own: Path) -> None:
    """T32. Asked to enter leftover ammoniacal silver as stock: refused, and nothing is entered."""
    before = own.read_bytes()
    asked = stockroom("make", "ammoniacal silver", "50 cm3", "--by", "T1", store=own)
    assert asked.code == 1
    assert "never kept" in asked.err
    assert own.read_bytes() == before


def test_hydrochloric_acid_is_not_drawn_for_permanganate(stockroom: Stockroom, own: Path) -> None:
    """T32. R03 bars it: the draw for K25 is refused with the recipe's reason."""
    asked = stockroom("draw", "B14", "10 cm3", "--for", "K25", "--by", "T1", store=own)
    assert asked.code == 1
    assert "bars hydrochloric acid" in asked.err


def test_the_wrong_form_gives_the_right_mass(stockroom: Stockroom, own: Path) -> None:
    """T24. B07, anhydrous, for a litre of 1.00 thiosulfate: 158.1 g; B20 for copper: 79.8 g."""
    day = ("--by", "T1", "--as-at", "2027-01-05")
    hypo = ("make", "sodium thiosulfate 1.00 mol/dm3", "1 L", "--from", "B07")
    blue = ("make", "copper(II) sulfate 0.500 mol/dm3", "1 L", "--from", "B20")
    assert "158.1" in stockroom(*hypo, *day, store=own).out
    assert "79.8" in stockroom(*blue, *day, store=own).out
