"""The handover: nothing a successor needs is left out, and every command can be typed."""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import date
from typing import TYPE_CHECKING

import paper_reading
import pytest

from stockroom.reports.files.handover import HANDOVER, Handover, handover_lines, handover_of
from stockroom.reports.files.handover_parts import Beside, Part
from stockroom.reports.typesetting import typeset

if TYPE_CHECKING:
    from pathlib import Path

    from stockroom.planning.decisions import Plan
    from stockroom.planning.facts import Facts

MONDAY = date(2027, 1, 4)
LONG = "whoever wrote this down did so at length and without stopping for breath " * 3


@dataclass(frozen=True)
class Changed:
    """One change of a table."""

    table: str = "keeping"
    row: str = "starch 0.5 % w/v"
    column: str = "look"
    before: str = ""
    after: str = "look after 5 days"
    why: str = "warm room"
    by: str = "T1"
    on: str = "2026-11-30"


@dataclass(frozen=True)
class Hand:
    """Initials in the ledger."""

    initials: str = "T1"
    entries: int = 1
    first: date = MONDAY
    last: date = MONDAY


@dataclass(frozen=True)
class Kept:
    """What the store tells."""

    store: str = "shelf/prep.sqlite"
    terms: int = 1
    settings: tuple[tuple[str, str], ...] = (("margin_open_days", "2"), ("practice", "yes"))
    closures: tuple[tuple[date, date, str], ...] = ((MONDAY, MONDAY, ""),)
    changes: tuple[Changed, ...] = (Changed(),)
    hands: tuple[Hand, ...] = (Hand(),)
    backup: tuple[date, str] | None = (MONDAY, "/media/stick")


@pytest.fixture(scope="module")
def known(practice: Path) -> Facts:
    from stockroom.service.sheets import known_and_planned

    return known_and_planned(practice, as_at=MONDAY)[0]


def _told(known: Facts, plan: Plan, kept: Beside | None = None, monday: date = MONDAY) -> Handover:
    return handover_of(known, plan, kept or Kept(), monday, (("a.pdf", "a sheet"),))


def _part(sheet: Handover, word: str) -> Part:
    return next(part for part in sheet.parts if word in part.title)


def _said(part: Part) -> str:
    return " | ".join(
        text
        for point in part.points
        for text in (point.name, *point.told, *(job.text for job in point.jobs))
    ).replace("\u00a0", " ")


def test_two_weeks_hold_every_make_order_check_and_class_of_them(known: Facts, term: Plan) -> None:
    said = _said(_part(_told(known, term), "first week"))
    last = date(2027, 1, 17)
    for make in term.makes:
        assert (f"Make {make.id} " in said) == (make.on <= last)
    for order in term.orders:
        assert (f"Order {order.item}," in said) == (order.order_by <= last)
    for booking in known.bookings:
        assert (f"Set out {booking.number} " in said) == (MONDAY <= booking.on <= last)


def test_what_is_overdue_is_for_the_first_day(known: Facts, term: Plan) -> None:
    points = _part(_told(known, term), "first week").points
    assert "lithium chloride" in points[2].jobs[0].text
    assert points[2].name == "Mon 4 Jan 2027"
    assert "late by 6 open days" in points[2].jobs[0].text


def test_a_caution_stands_with_its_make(known: Facts, term: Plan) -> None:
    jobs = [job for point in _part(_told(known, term), "first").points for job in point.jobs]
    acid = next(job for job in jobs if "hydrochloric acid 0.400" in job.text)
    assert "Acid into water, slowly" in acid.text
    assert acid.commands == (
        'stockroom make "hydrochloric acid 0.400 mol/dm3" "132 cm3" --place C1 --by XX',
    )


def test_a_look_that_saves_a_make_says_so_before_it(known: Facts, term: Plan) -> None:
    said = _said(_part(_told(known, term), "first"))
    assert "If it is good, see the week again before you make M01." in said
    assert said.index("Look at S12") < said.index("Make M01")


def test_what_is_never_kept_is_told_with_when_it_must_be_gone(known: Facts, term: Plan) -> None:
    said = _said(_part(_told(known, term), "Never"))
    assert "ammoniacal silver" in said
    assert "mix not before 18:00, destroy what is left by 20:40" in said
    assert "Collect silver residues" in said


def test_open_questions_gather_what_nobody_settled(known: Facts, term: Plan) -> None:
    said = _said(_part(_told(known, term), "Open"))
    for word in ("K01.1", "B28", "B35", "B36", 'printed "04/05/27"'):
        assert word in said
    bare = replace(term, short=(), on_order=(), past=(), guesses=())
    assert _part(_told(replace(known, bottles=()), bare), "Open").intro == "Nothing is open."


def _commands(part: Part) -> list[str]:
    return [c for point in part.points for job in point.jobs for c in job.commands]


def test_what_is_dangerous_stands_first_and_only_there(known: Facts, term: Plan) -> None:
    sheet = _told(known, term)
    first = sheet.parts[0].points[0]
    assert first.boxed
    said = " | ".join(job.text for job in first.jobs)
    for word in ("S19 tight cap", "chlorine if they meet", "B05a stands at 28", "B29", "B36"):
        assert word in said
    assert said.index("S19") < said.index("B04 stands") < said.index("B36")
    assert "B13 stands" not in said
    commands = [command for job in first.jobs for command in job.commands]
    assert "stockroom move B04 PLACE --by XX" in commands
    assert "tight cap" not in _said(_part(sheet, "noticed"))
    sound = replace(term, notes=(), past=())
    assert _told(known, sound).parts[0].points[0].name == "Before anything else"


def test_a_safety_date_that_is_over_is_not_to_be_tested(known: Facts, term: Plan) -> None:
    late = replace(term, as_at=date(2027, 3, 10))
    jobs = _told(known, late).parts[0].points[0].jobs
    told = next(job for job in jobs if "B29" in job.text)
    assert told.commands == ("stockroom shelf B29",)


def test_each_open_question_has_what_to_type(known: Facts, term: Plan) -> None:
    part = _part(_told(known, term), "Open")
    assert all(point.jobs for point in part.points)
    assert "stockroom printed B21 2027-05-04 --by XX" in _commands(part)
    assert "stockroom turned-up B28 --by XX" in _commands(part)
    assert "S01" not in _said(part)
    assert "never titrated" in _said(_part(_told(known, term), "leans on"))


def test_the_first_week_soaks_the_splints_and_says_what_is_short(known: Facts, term: Plan) -> None:
    part = _part(_told(known, term), "first week")
    before = next(point for point in part.points if point.name == "Mon 11 Jan 2027")
    assert "Splints soak overnight" in before.jobs[0].text
    said = _said(part)
    assert "SHORT: 55 cm³ of lithium chloride" in said
    assert "It stands 24 h before it is finished." in said
    assert any("--price 14.50 --expected 2027-01-18" in each for each in _commands(part))
    assert "paid by CH" in said


def test_it_says_how_to_install_and_which_store_to_open(known: Facts, term: Plan) -> None:
    real = replace(term, house=replace(term.house, practice=False))
    part = _told(known, real, Kept(store="my shelf/p.sqlite")).parts[0]
    assert "stockroom --store 'my shelf/p.sqlite' plan" in _commands(part)
    assert "pip install ." in _commands(part)
    assert "stockroom demo" in _commands(_told(known, term).parts[0])


def test_no_term_is_said(known: Facts, term: Plan) -> None:
    assert "No term is entered" in _told(known, term, Kept(terms=0)).parts[0].intro
    assert "No term" not in _told(known, term).parts[0].intro


def test_rules_come_with_who_when_and_why(known: Facts, term: Plan) -> None:
    part = _part(_told(known, term), "House rules")
    said = _said(part)
    assert "2026-11-30 T1, keeping: starch 0.5 % w/v, look" in said
    assert "why: warm room" in said
    assert "was not there; now look after 5 days" in said
    assert "margin open days: 2" in said
    assert "practice" not in said
    never = _part(_told(known, term, Kept(changes=())), "House rules")
    assert never.intro.startswith("No rule or table was ever changed")


def test_recipes_give_handling_bars_swaps_and_the_assessment(known: Facts, term: Plan) -> None:
    part = _part(_told(known, term), "Recipes")
    assert len(part.points) == len({code for code, _ in known.recipes})
    said = _said(part)
    assert "never with hydrochloric acid: permanganate oxidises chloride" in said
    assert "in place of potassium iodide 0.100 mol/dm³: sodium iodide, × 0.903" in said
    assert "assessment: not written down" in said


def test_only_the_newest_version_of_a_recipe_is_told(known: Facts, term: Plan) -> None:
    (code, version), one = next(iter(known.recipes.items()))
    newer = replace(one, version=version + 1, handling="with care")
    more = replace(known, recipes={**known.recipes, (code, version + 1): newer})
    part = _part(_told(more, term), "Recipes")
    assert len(part.points) == len(_part(_told(known, term), "Recipes").points)
    assert any(f"version {version + 1}" in p.name and "with care" in p.told[0] for p in part.points)


def test_every_place_and_every_bottle_stands_somewhere(known: Facts, term: Plan) -> None:
    said = _said(_part(_told(known, term), "places"))
    assert all(bottle.number in said for bottle in known.bottles)
    assert "temperature not written" in said
    away = replace(known, bottles=(replace(known.bottles[0], place=""), *known.bottles[1:]))
    assert f"No place written | {known.bottles[0].number}" in _said(
        _part(_told(away, term), "places")
    )


def test_an_empty_house_says_what_is_not_written(known: Facts, term: Plan) -> None:
    bare = replace(known, places=(), bottles=(), recipes={}, lines={}, bookings=())
    plan = replace(term, orders=(), checks=(), makes=(), watch=(), notes=(), guesses=(), past=())
    kept = Kept(settings=(), changes=(), hands=(), closures=())
    sheet = _told(bare, plan, kept)
    assert [part.intro for part in sheet.parts if not part.points][-4:] == [
        "No rule or table was ever changed: all rules are those the house began with.",
        "No recipe is written down.",
        "No pack of anything is written down.",
        "No entry was made yet.",
    ]
    assert len(typeset("handover", HANDOVER.data(sheet))) == 1


def test_leave_lead_times_and_suppliers_are_told(known: Facts, term: Plan) -> None:
    key = next(key for key, line in known.lines.items() if line.packs)
    asked = replace(known.lines[key], ask_first="the head", ask_days=3)
    said = _said(_part(_told(replace(known, lines={**known.lines, key: asked}), term), "Suppliers"))
    assert "ask the head first: 3 open days" in said
    assert "supplier not entered" in said


def test_the_backup_is_told_or_asked_for(known: Facts, term: Plan) -> None:
    real = replace(term, house=replace(term.house, practice=False))
    part = _part(_told(known, real), "backup")
    assert "2027-01-04" in part.intro
    assert "/media/stick" in part.intro
    assert "shelf/prep.sqlite" in _said(part)
    assert "make one today" in _part(_told(known, real, Kept(backup=None)), "backup").intro
    practice = _part(_told(known, term, Kept(backup=None)), "backup")
    assert "practice store" in practice.intro
    assert "prep.sqlite" not in _said(practice)


def test_no_command_is_broken_over_two_lines(known: Facts, term: Plan) -> None:
    sheet = _told(known, term)
    text = HANDOVER.text(sheet, 80)
    commands = [
        c for part in sheet.parts for p in part.points for job in p.jobs for c in job.commands
    ]
    assert len(commands) > 20
    assert all(f"         $ {command}\n" in text for command in commands)
    others = [line for line in text.splitlines() if len(line) > 80 and "$ " not in line]
    assert others == []


def test_lines_hold_what_lasts_and_not_what_is_to_be_done(known: Facts, term: Plan) -> None:
    lines = handover_lines(_told(known, term))
    assert not any("first week" in key for key in lines)
    moved = handover_lines(_told(known, term, Kept(changes=(Changed(why="cold room"),))))
    assert [key for key in lines if lines[key] != moved.get(key)] == [
        "House rules and their reasons: 2026-11-30 T1, keeping: starch 0.5 % w/v, look"
    ]


@pytest.mark.parametrize("paper", ["A4", "Letter"])
def test_hideous_texts_stay_on_the_paper(known: Facts, term: Plan, paper: str) -> None:
    kept = Kept(
        store="/" + "x" * 60,
        changes=tuple(Changed(row=LONG, why=LONG, before=LONG) for _ in range(3)),
        hands=(Hand(initials="WWWWWWWW"),),
        closures=((MONDAY, MONDAY, LONG),),
    )
    some = dict(list(known.recipes.items())[:3])
    recipes = {
        key: replace(one, handling=LONG, waste=LONG, title=LONG) for key, one in some.items()
    }
    makes = tuple(replace(make, item=LONG, cautions=(LONG, LONG)) for make in term.makes[:4])
    short = replace(known, recipes=recipes, bookings=())
    plan = replace(
        term, makes=makes, notes=(), house=replace(term.house, practice=False, name=LONG[:90])
    )
    pdf = typeset("handover", HANDOVER.data(_told(short, plan, kept)), paper=paper)[0]
    assert paper_reading.outside(pdf, margin=8) == []
    assert paper_reading.overlapping(pdf) == []
    assert "PRACTICE" not in paper_reading.words(pdf)
