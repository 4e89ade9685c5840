"""A bottle nobody knows gets a number and is left alone, until evidence names it."""

from __future__ import annotations

import sqlite3
from collections.abc import Callable
from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadAmount, BadInput, NotAllowed, StockroomError, UnknownName
from stockroom.keeping.verdict import Condition, verdict
from stockroom.measure.amounts import Amount
from stockroom.planning.facts import Bottle
from stockroom.service import checks, stock
from stockroom.service.answers import Done
from stockroom.service.making import make_up
from stockroom.service.pouring import decant
from stockroom.service.unknown import log_unknown, name_unknown
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}


def log(path: Path, look: str = "white powder", size: Amount | None = None, **more: Any) -> Done:
    held = Amount.grams(100) if size is None else size
    return log_unknown(path, look, held, **({"place": "X1"} | WHO | more))


def name(path: Path, bottle: str, line: str = "sodium chloride", **more: Any) -> Done:
    return name_unknown(path, bottle, line, **({"evidence": "label found"} | WHO | more))


def seen(path: Path, number: str) -> Bottle:
    return next(bottle for bottle in facts(path, TODAY).bottles if bottle.number == number)


def condition(path: Path, number: str) -> Condition:
    known = facts(path, TODAY)
    bottle = seen(path, number)
    return verdict(bottle.record, known.lines[bottle.line].rules, TODAY).condition


def test_an_unknown_gets_a_number_a_label_and_a_place(own: Path) -> None:
    done = log(own)
    assert done.text.startswith("B46: unknown, white powder, about 100 g, at X1.")
    assert 'Write on it: B46 "UNKNOWN, do not use or move".' in done.details
    bottle = seen(own, "B46")
    assert (bottle.line, bottle.place, bottle.about) == ("unknown", "X1", True)
    assert condition(own, "B46") is Condition.SET_ASIDE


def test_a_liquid_is_logged_in_cm3_in_any_house(own: Path) -> None:
    number = log(own, "clear, smells", Amount.cm3(250)).bottle
    assert seen(own, number).line == "unknown liquid"
    # a second of the kind, and a solid after it, each find their own line
    assert seen(own, log(own, "yellow oil", Amount.cm3(50)).bottle).line == "unknown liquid"
    assert seen(own, log(own).bottle).line == "unknown"


def test_a_house_without_the_line_makes_it_on_need(tmp_path: Path) -> None:
    from stockroom.service.database import add_row, new_store

    path = tmp_path / "empty.sqlite"
    new_store(path)
    add_row(path, "places", {"place": "X1", "name": "apart"}, by="T1")
    assert log(path, "clear", Amount.cm3(250)).bottle == "B01"
    assert log(path).bottle == "B02"
    assert {bottle.line for bottle in facts(path, TODAY).bottles} == {"unknown", "unknown liquid"}


@pytest.mark.parametrize("number", ["B36", "new"])
def test_an_unknown_is_never_used_opened_moved_or_looked_good(own: Path, number: str) -> None:
    bottle = log(own).bottle if number == "new" else number
    tries: list[Callable[[], object]] = [
        lambda: stock.draw(own, bottle, Amount.grams(1), **WHO),
        lambda: stock.open_bottle(own, bottle, **WHO),
        lambda: stock.move(own, bottle, "A2", **WHO),
        lambda: stock.lend(own, bottle, Amount.grams(1), to="BI", **WHO),
        lambda: checks.look(own, bottle, passed=True, **WHO),
        lambda: make_up(own, "KI 0.100", Amount.cm3(10), sources=[bottle], place=None, **WHO),
    ]
    for attempt in tries:
        said = rf"{bottle} is set aside: unknown.*UNKNOWN, do not use or move\."
        with pytest.raises(NotAllowed, match=said) as caught:
            attempt()
        assert f"stockroom unknown {bottle} --is" in caught.value.hint


def test_setting_aside_put_right_does_not_bring_an_unknown_into_use(own: Path) -> None:
    from stockroom.store.diary import diary

    entry = next(one.entry for one in diary(own, "B36") if one.kind == "set aside")
    stock.put_right(own, entry, "slip", **WHO)
    assert condition(own, "B36") is Condition.SET_ASIDE


def test_an_unknown_may_be_discarded_and_lost(own: Path) -> None:
    number = log(own).bottle
    checks.lost(own, number, **WHO)
    checks.turned_up(own, number, "X1", **WHO)
    stock.discard(own, number, how="taken by the waste firm", why="unknown", **WHO)
    assert number not in {bottle.number for bottle in facts(own, TODAY).bottles}


def test_a_name_needs_evidence_and_then_a_look(own: Path) -> None:
    done = name(own, "B36", evidence="label under the bench")
    assert done.text.startswith("B36 is sodium chloride, by label under the bench.")
    bottle = seen(own, "B36")
    assert bottle.line == "sodium chloride"
    assert bottle.record.set_aside == "named from evidence: needs a look"
    with pytest.raises(NotAllowed, match="named from evidence: needs a look"):
        stock.draw(own, "B36", Amount.grams(1), **WHO)
    checks.look(own, "B36", passed=True, **WHO)
    stock.draw(own, "B36", Amount.grams(1), **WHO)


def test_a_new_unknown_that_is_named_has_no_date_of_its_own(own: Path) -> None:
    number = log(own).bottle
    name(own, number)
    assert seen(own, number).record.received is None


@pytest.mark.file
def test_the_name_it_had_stays_on_record(own: Path) -> None:
    name(own, "B36", evidence="label found")
    with sqlite3.connect(own) as connection:
        rows = connection.execute("SELECT row_key, before, after, why, by FROM row_change")
        assert rows.fetchall() == [("B36", "unknown", "sodium chloride", "label found", "T1")]
    connection.close()


def test_a_name_put_right_makes_it_an_unknown_again(own: Path) -> None:
    done = name(own, "B36")
    told = stock.put_right(own, done.entry or 0, "another bottle", **WHO)
    assert any("B36 is unknown again" in detail for detail in told.details)
    assert (seen(own, "B36").line, condition(own, "B36")) == ("unknown", Condition.SET_ASIDE)
    # and may be named anew
    assert name(own, "B36", "potassium iodide").text.startswith("B36 is potassium iodide")


@pytest.mark.parametrize(
    ("bottle", "line", "more", "kind", "said"),
    [
        ("B36", "sodium chloride", {"evidence": " "}, BadInput, "By what evidence is B36"),
        ("B36", "sodium chloride", {"by": ""}, BadInput, "Whose initials"),
        ("B36", "unobtainium", {}, UnknownName, "unobtainium"),
        ("B36", "unknown", {}, BadInput, "B36 is unknown already"),
        ("B06", "sodium chloride", {}, NotAllowed, "B06 is no unknown: it is sodium thio"),
        ("B36", "ethanol", {}, NotAllowed, r"logged by mass \(100 g\), and ethanol.* by volume"),
    ],
)
def test_a_name_that_cannot_be_given_is_refused(
    own: Path, bottle: str, line: str, more: dict[str, Any],
    kind: type[StockroomError], said: str,
) -> None:  # fmt: skip
    with pytest.raises(kind, match=said):
        name(own, bottle, line, **more)
    assert seen(own, "B36").line == "unknown"


@pytest.mark.parametrize(
    ("look", "size", "more", "kind", "said"),
    [
        (" ", Amount.grams(5), {}, BadInput, "look like"),
        ("B36", Amount.grams(5), {}, BadInput, "B36 has a number already"),
        ("brown", Amount.grams(0), {}, BadAmount, "0 g of an unknown"),
        ("brown", Amount.items(2), {}, BadAmount, "2 items of an unknown"),
        ("brown", Amount.grams(5), {"place": "Z9"}, UnknownName, 'No place "Z9"'),
        ("brown", Amount.grams(5), {"by": ""}, BadInput, "Whose initials"),
    ],
)
def test_an_unknown_that_cannot_be_logged_is_refused(
    own: Path, look: str, size: Amount, more: dict[str, Any],
    kind: type[StockroomError], said: str,
) -> None:  # fmt: skip
    with pytest.raises(kind, match=said):
        log(own, look, size, **more)


def test_an_unknown_changes_no_plan(own: Path) -> None:
    from stockroom.service.plan import term_plan

    before = term_plan(own, as_at=TODAY)
    number = log(own).bottle
    after = term_plan(own, as_at=TODAY)
    assert (after.needs, after.makes, after.orders) == (before.needs, before.makes, before.orders)
    assert number in {one.bottle for one in after.past}


def test_a_name_it_was_used_by_is_not_put_right_before_the_uses(own: Path) -> None:
    number = log(own).bottle
    named = name(own, number)
    checks.look(own, number, passed=True, **WHO)
    drawn = stock.draw(own, number, Amount.grams(10), **WHO)
    poured = decant(own, number, Amount.grams(20), place="A2", **WHO)
    with pytest.raises(NotAllowed, match=f"entry {drawn.entry} drawn .*decanted") as refused:
        stock.put_right(own, named.entry or 0, "wrong label", **WHO)
    assert f"{poured.bottle} sodium chloride poured from it" in refused.value.message
    for slip in (poured, drawn):
        stock.put_right(own, slip.entry or 0, "wrong label", **WHO)
    stock.put_right(own, named.entry or 0, "wrong label", **WHO)
    assert condition(own, number) is Condition.SET_ASIDE


def test_before_it_was_named_it_stood_apart(own: Path) -> None:
    """Of a day gone by the name is told, since it is known now, and that nobody knew it then."""
    early, between = date(2027, 1, 5), date(2027, 1, 8)
    number = log(own, on=early).bottle
    name(own, number)
    checks.look(own, number, passed=True, **WHO)
    then = {one.number: one for one in facts(own, between).bottles}[number]
    assert (then.line, then.record.set_aside) == ("sodium chloride", "unknown: white powder")
    assert not seen(own, number).record.set_aside
