"""The page of one bottle as a value: what is said of it, who leans on it, what may be entered."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from datetime import date, timedelta
from typing import Any

import pytest
from houses import MONDAY, cm3, found, g, house, keeps, looked, made_bottle, solid, solution

from stockroom.keeping.record import Record
from stockroom.keeping.rules import Origin, Rule, RuleKind
from stockroom.keeping.unnamed import UNNAMED
from stockroom.keeping.verdict import verdict
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.periods import Period
from stockroom.planning.facts import Bottle, Line
from stockroom.planning.on_shelf import OnShelf
from stockroom.planning.plan import plan
from stockroom.reports.diary_text import DiaryRow
from stockroom.reports.pages.bottle import ENTRIES, BottlePage, bottle_page
from stockroom.reports.pages.bottle_forms import EVERY, Forms, forms_for
from stockroom.safety.clp import Classification
from stockroom.safety.hazards import Hazards

IODINE = solution(0.1, "iodine", rules=(keeps(30),))
ETHER = solid("ether", rules=(Rule(RuleKind.TEST, Period(90, "days"), Origin.OPENED, safety=True),))
BOTTLE = made_bottle("S01", IODINE, cm3(100), "2026-12-20")
NOTHING_HELD = Hazards("S01", "", Classification(entered=False))


def seen(bottle: Bottle, line: Line = IODINE) -> OnShelf:
    return OnShelf(bottle, line, verdict(bottle.record, line.rules, MONDAY))


def entry(number: int, kind: str = "drawn", **more: Any) -> DiaryRow:
    on = date(2027, 1, 1) + timedelta(days=number)
    ten, left = Amount.cm3(-10), Amount.cm3(100)
    return DiaryRow(number, on, on, "T1", kind, ten, left, **more)


def page(
    bottle: Bottle = BOTTLE, entries: Sequence[DiaryRow] = (), line: Line = IODINE, sheet: int = 1
) -> BottlePage:
    known = house([line], bottles=[bottle])
    story = list(entries)
    shelf = seen(bottle, line)
    return bottle_page(known, plan(known), shelf, story, None, NOTHING_HELD, (), (), sheet)


def like(**record: Any) -> Bottle:
    return replace(BOTTLE, record=replace(BOTTLE.record, **record))


def test_days_nobody_wrote_down_are_said_to_be_missing_and_not_guessed() -> None:
    bought = Bottle("B01", IODINE.key, cm3(10), cm3(20), Record(nominal=0.1))
    facts = dict(page(bought).facts)
    assert (facts["received"], facts["opened"]) == ("day not written down", "not yet")
    assert facts["stands"] == "no place written down"


def test_a_guessed_opening_is_told_as_a_guess() -> None:
    bought = Bottle("B01", IODINE.key, 1, 1, Record(opened=MONDAY, opened_guessed=True))
    assert dict(page(bought).facts)["opened"] == "4 Jan 2027 (guessed)"


def test_the_story_is_told_from_the_newest() -> None:
    told = page(entries=[entry(1, "made"), entry(2), entry(3)]).story.entries
    assert [one.number for one in told] == [3, 2, 1]
    assert told[0].happened == "Mon 4 Jan 2027"
    assert told[0].change == "-10 cm³"


def test_what_was_put_right_and_what_did_it_offer_no_putting_right() -> None:
    slip, mending = entry(2, undone_by=3), entry(3, "put right", puts_right=2)
    told = page(entries=[entry(1, "made"), slip, mending]).story.entries
    assert [one.may_mend for one in told] == [False, False, True]


def test_a_long_story_is_told_in_pages_and_past_the_last_is_the_last() -> None:
    long = [entry(n) for n in range(1, ENTRIES + 4)]
    last = page(entries=long, sheet=9).story
    assert (last.first, last.last, last.of, last.sheet) == (
        ENTRIES + 1,
        ENTRIES + 3,
        ENTRIES + 3,
        2,
    )
    assert [one.number for one in last.entries] == [3, 2, 1]


@pytest.mark.parametrize(
    ("kind", "words"),
    [("made", "made from"), ("decanted in", "decanted from"), ("mixed", "mixed from")],
)
def test_how_it_came_from_others_is_in_its_first_entry(kind: str, words: str) -> None:
    assert page(entries=[entry(1, kind), entry(2)]).came == words


def test_a_bottle_that_is_gone_has_a_story_and_nothing_else_to_enter() -> None:
    told = page(like(gone=True), [entry(1, "made"), entry(2, "discarded")])
    assert (told.gone, told.forms, told.hazards) == (True, Forms(), None)
    assert len(told.story.entries) == 2
    assert "good until" not in dict(told.facts)


@pytest.mark.parametrize(
    ("record", "first"),
    [
        ({"made": MONDAY}, ("draw", "count", "look")),
        ({"not_found": True}, ("turned-up",)),
        ({"set_aside": "turned up"}, ("look", "discard")),
        ({"made": None}, ("look", "count")),
        ({"made": date(2026, 1, 1)}, ("discard", "draw")),
    ],
)
def test_the_likely_events_come_first(record: dict[str, Any], first: tuple[str, ...]) -> None:
    assert forms_for(seen(like(**record))).first == first


def test_past_its_safety_date_nothing_that_opens_it_is_offered_first() -> None:
    old = Bottle("B09", ETHER.key, g(1), g(1), Record(opened=date(2026, 1, 1)))
    forms = forms_for(seen(old, ETHER))
    assert forms.first == ("tested", "discard")
    assert page(old, line=ETHER).warning == "do not open or move it; ask"


def test_an_unknown_may_be_named_or_discarded_and_has_no_strength_to_find() -> None:
    line = replace(solid(UNNAMED[Kind.MASS]), molar_mass=None)
    forms = forms_for(seen(Bottle("B36", line.key, 1, 1, Record(set_aside="unknown")), line))
    assert forms.first == ("name-unknown", "discard")
    assert "found" not in forms.rest


def test_overdue_a_check_the_strength_is_asked_for() -> None:
    line = solution(0.1, "iodine", rules=(Rule(RuleKind.RECHECK, Period(7, "days"), Origin.MADE),))
    checked = replace(BOTTLE, record=replace(BOTTLE.record, checks=(found("2026-12-22", 0.1),)))
    assert forms_for(seen(checked, line)).first == ("draw", "count", "found")


@pytest.mark.parametrize("record", [{}, {"not_found": True}, {"set_aside": "x"}, {"made": None}])
def test_each_event_is_offered_once_and_is_one_of_ours(record: dict[str, Any]) -> None:
    forms = forms_for(seen(like(**record)))
    offered = [*forms.first, *forms.rest]
    assert len(set(offered)) == len(offered)
    assert set(offered) <= set(EVERY)


def test_a_remark_is_quoted_as_somebody_wrote_it() -> None:
    odd = replace(BOTTLE, remark="keep till 2027-03-01, 5 dm3")
    assert dict(page(odd).facts)["remark"] == '"keep till 2027-03-01, 5 dm3"'


def test_a_solution_that_only_wants_a_look_asks_for_one() -> None:
    line = solution(0.1, "iodine", rules=(Rule(RuleKind.LOOK, Period(7, "days"), Origin.MADE),))
    stale = replace(BOTTLE, record=replace(BOTTLE.record, checks=(looked("2026-12-22"),)))
    assert forms_for(seen(stale, line)).first == ("look", "discard")
