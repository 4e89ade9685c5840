"""The week sheet: what stands on which day and why, and what comes out on paper."""

from __future__ import annotations

import re
from collections import Counter
from dataclasses import replace
from datetime import date
from functools import cache
from pathlib import Path
from typing import Any

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    found,
    g,
    house,
    keeps,
    made_bottle,
    made_from,
    recipe,
    solid,
    solution,
    wants,
)
from paper_reading import greys_only, outside, overlapping, page_words, pieces, sizes_mm, words

from stockroom.measure.workdays import Calendar
from stockroom.planning.decisions import DayLoad, LastBackup
from stockroom.planning.facts import Facts, House, Per
from stockroom.planning.plan import plan
from stockroom.reports.paper.week import WEEK, Week, monday_of, week_of
from stockroom.reports.paper.week_parts import Job
from stockroom.reports.typesetting import typeset
from stockroom.service.closures import why_closed
from stockroom.service.sheets import known_and_planned

MONDAY = date(2027, 1, 25)
STAFFED = House(batch_step=cm3(1))


@cache
def college(store: Path, monday: date) -> Week:
    """A week of the invented college, as at the first day of its term."""
    known, planned = known_and_planned(store, as_at=date(2027, 1, 4))
    closed = why_closed(store, monday, date.fromordinal(monday.toordinal() + 6))
    return week_of(known, planned, monday, closed)


def sheet(facts: Facts, monday: date = MONDAY) -> Week:
    """The week of a small house."""
    return week_of(facts, plan(facts), monday, {})


def printed(week: Week, paper: str = "A4") -> bytes:
    """Its PDF."""
    return typeset("week", WEEK.data(week), paper=paper)[0]


def shelf(week: Week, on: str, name: str) -> tuple[Job, ...]:
    """The jobs of one shelf of a day; none where it is left off."""
    (rung,) = (one for one in week.rungs if one.on == date.fromisoformat(f"2027-{on}"))
    return next((one.jobs for one in rung.shelves if one.name == name), ())


def whats(jobs: tuple[Job, ...]) -> str:
    """What they are, on one line."""
    return " | ".join(job.what for job in jobs).replace("\u00a0", " ")


def told(job: Job) -> str:
    """What goes with a job, with plain spaces."""
    return "; ".join(job.more).replace("\u00a0", " ")


# -- the week of the college ------------------------------------------------------------------


def test_what_is_started_on_friday_is_finished_on_monday(practice: Path) -> None:
    (start,) = shelf(college(practice, MONDAY), "01-29", "start")
    assert start.what.replace("\u00a0", " ") == "potassium permanganate 0.0200 mol/dm³, 4 620 cm³"
    assert "stands 48 h; ready Mon 1 Feb" in told(start)
    finish = shelf(college(practice, date(2027, 2, 1)), "02-01", "make")[0]
    assert "finish and titrate" in finish.what
    assert "started Fri 29 Jan" in whats((finish,))
    assert "Filter through glass, never paper or rubber" in finish.cautions


def test_a_source_stronger_or_weaker_than_its_label_says_what_habit_would_take(
    practice: Path,
) -> None:
    # T09: 528 cm³ of 0.100 from 89.5 vol is 6.61 cm³, and 5.92 by the label's 100
    fresh = shelf(college(practice, MONDAY), "01-26", "make")[0]
    assert "6.61 cm³ of B01" in told(fresh)
    assert "(expected 89.5 vol, found 2026-12-08), not 5.92 cm³" in told(fresh)
    iodine = shelf(college(practice, MONDAY), "01-28", "make")[2]
    assert "20.7 cm³ of S10" in told(iodine)
    assert "not 19.8 cm³" in told(iodine)


def test_a_source_as_its_label_says_is_measured_without_a_not(practice: Path) -> None:
    acid = shelf(college(practice, MONDAY), "01-25", "make")[3]
    assert acid.what.startswith("sulfuric acid")
    assert "not " not in told(acid)


def test_what_is_measured_by_parts_is_the_same_however_weak(practice: Path) -> None:
    # one part in ten: the bleach has faded, and still it is one part
    bleach = shelf(college(practice, date(2027, 3, 1)), "03-04", "make")[0]
    assert "88 cm³ of B05a" in told(bleach)
    assert "not " not in told(bleach)


def test_fresh_makes_are_poured_away_the_same_day_and_not_kept_for_the_next_class(
    practice: Path,
) -> None:
    tidy = shelf(college(practice, MONDAY), "01-26", "tidy")
    assert whats(tidy) == (
        "K08 Decolourise iodine with thiosulfate. | "
        "hydrogen peroxide 0.100 mol/dm³, the one made Tue 26 Jan: pour away what is left"
    )
    assert told(tidy[1]) == "good today only; do not keep it for Thu 28 Jan"
    assert [job.time for job in tidy] == ["10:55", "10:55"]


def test_what_the_cautions_say_of_waste_is_collected_and_not_poured_away(practice: Path) -> None:
    bromine = shelf(college(practice, date(2027, 3, 1)), "03-01", "tidy")[0]
    assert bromine.what.replace("\u00a0", " ").startswith(
        "bromine water 0.020 mol/dm³, the one made Mon 22 Feb: collect"
    )
    assert bromine.cautions[0].startswith("Oxidising and nitric waste: a vented container")
    bleach = shelf(college(practice, date(2027, 3, 1)), "03-04", "tidy")[-1]
    assert bleach.what.startswith("bleach")
    assert "Never with acid (chlorine) nor with ammonia (chloramines)" in bleach.cautions


def test_what_is_never_kept_has_its_first_and_last_minute_and_a_blank_to_sign(
    practice: Path,
) -> None:
    week = college(practice, date(2027, 2, 8))
    mix = shelf(week, "02-10", "make")[0]
    assert (mix.time, mix.what) == (
        "from 18:00",
        "mix for K16 Silver mirror, not sooner: never kept",
    )
    (destroy,) = shelf(week, "02-10", "destroy")
    assert (destroy.time, destroy.sign) == ("by 20:40", True)
    assert "excess sodium chloride or dilute hydrochloric acid" in told(destroy)
    assert "ticked by ........" in WEEK.text(week, 100)


def test_splints_soak_the_day_before_and_juice_is_fetched(practice: Path) -> None:
    soak = shelf(college(practice, date(2027, 1, 11)), "01-11", "start")
    assert whats(soak) == "Splints soak overnight: start the day before."
    assert "Splints" not in whats(shelf(college(practice, date(2027, 1, 11)), "01-12", "set out"))
    shop = shelf(college(practice, date(2027, 2, 1)), "02-02", "start")
    assert whats(shop) == "from a shop: 220 cm³ of orange juice, 220 cm³ of lemon juice"


def test_a_lack_is_said_and_has_no_box(practice: Path) -> None:
    (out, *_) = shelf(college(practice, date(2027, 1, 11)), "01-12", "set out")
    lack = out.items[0]
    assert not lack.tick
    assert lack.whence.startswith("SHORT: no lithium chloride in hand by 2027-01-11")
    assert all(item.tick for item in out.items[1:])


def test_wrong_neighbours_are_told_once_for_each_pair(practice: Path) -> None:
    also = college(practice, MONDAY).also
    beside = {each.about: each.text for each in also if "stands beside" in each.text}
    assert set(beside) == {"B04", "S12"}
    assert beside["B04"].startswith("stands beside B13, B14, B15 in A1")


def test_guesses_are_those_of_this_week_on_their_own_days(practice: Path) -> None:
    week = college(practice, MONDAY)
    assert week.guess_count == "3 guesses"
    assert [each.about for each in week.guesses] == ["B01", "S01", "S04"]
    assert week.guesses[0].text.startswith("expected 89.5 vol, carried forward from 91 vol")
    assert college(practice, date(2027, 2, 15)).guess_count == "nothing guessed"


def test_a_closed_week_says_why(practice: Path) -> None:
    week = college(practice, date(2027, 2, 15))
    assert [rung.told for rung in week.rungs] == ["Closed: mid-term week."]
    assert "MON 15 FEB TO FRI 19 FEB" in words(printed(week))


# -- keys that stay with their lines ------------------------------------------------------------


@pytest.mark.parametrize("monday", [date(2027, 1, 11), MONDAY, date(2027, 3, 22)])
def test_every_line_has_a_key_of_its_own_and_no_number_of_a_make_in_it(
    practice: Path, monday: date
) -> None:
    week = college(practice, monday)
    keys = [job.key for rung in week.rungs for one in rung.shelves for job in one.jobs]
    keys += [i.key for r in week.rungs for s in r.shelves for j in s.jobs for i in j.items]
    assert [key for key, count in Counter(keys).items() if count > 1] == []
    said = WEEK.lines(week)
    assert [text for text in (*said, *said.values()) if re.search(r"\b[MO]\d\d\b", text)] == []


# -- small houses -----------------------------------------------------------------------------


def test_a_caution_or_a_guess_that_is_new_is_marked_and_a_figure_of_the_day_is_not(
    practice: Path,
) -> None:
    week = college(practice, MONDAY)
    before = dict(WEEK.lines(week))
    (starch,) = (key for key in before if key.endswith("make starch 0.5 % w/v"))
    caution = "; ! Boiling water: pour the cream in slowly"
    assert caution in before[starch]
    milder = before | {starch: before[starch].replace(caution, "")}
    assert WEEK.since(week, "0001", milder).marked == (starch,)
    (guess,) = (key for key in before if key.startswith("guess B01"))
    assert "89.5" not in guess + before[guess]
    fewer = {key: said for key, said in before.items() if key != guess}
    assert WEEK.since(week, "0001", fewer).changes == (f"new: {before[guess]}",)


def crowded(classes: int, *, on: tuple[int, ...], long: bool = False) -> Facts:
    """A house with so many classes, each with a make, spread over days of January."""
    salt = solid()
    lines, methods, recipes, booked = [salt], [], [], []
    for number in range(classes):
        name = f"salt {number}"
        if long:
            name = f"tetra{'tetra' * 7} hexakis sulfatocobaltate of a most unlikely name {number}"
        made = solution(0.1 + number / 100, name, rules=(keeps(3),))
        lines.append(made)
        methods.append(
            made_from(made, salt, cautions=("Collect the residues " * (5 if long else 1),))
        )
        code = f"R{number:02d}"
        written = recipe(
            wants(made, cm3(100 + number)),
            code=code,
            handling="Bath at 35 °C from 20 min before. Ice to hand.",
            waste="Collect it.",
        )
        title = "a practical with everything anybody ever thought of putting in " * 4
        recipes.append(replace(written, title=title[:200]) if long else written)
        day = f"2027-01-{on[number % len(on)]}"
        booked.append(booking(f"K{number:02d}", day, 540 + 10 * (number % 30), recipe=code))
    bottles = [bought_bottle("B01", salt, g(5000))]
    return house(
        lines, methods=methods, recipes=recipes, bookings=booked, bottles=bottles,
    )  # fmt: skip


def test_a_week_of_sixty_jobs_turns_the_page_between_days() -> None:
    week = sheet(crowded(12, on=(25, 26, 27, 28, 29)))
    jobs = [job for rung in week.rungs for one in rung.shelves for job in one.jobs]
    assert len(jobs) >= 60
    pdf = printed(week)
    pages = page_words(pdf)
    assert len(pages) == 2
    for rung in week.rungs:
        name = rung.name.replace("\u00a0", " ").upper()
        (at,) = (number for number, page in enumerate(pages) if name in page)
        for each in rung.classes:
            assert f"{each.time} {each.what}" in pages[at]
        for one in rung.shelves:
            for job in one.jobs:
                assert " ".join(job.what.split()) in pages[at]
    assert "continued" not in words(pdf)
    assert (overlapping(pdf), outside(pdf, 20)) == ([], [])


def test_a_day_longer_than_a_page_goes_on_under_its_own_name() -> None:
    week = sheet(crowded(16, on=(26,)))
    pdf = printed(week, "Letter")
    pages = page_words(pdf)
    named = [page for page in pages if "TUE 26 JAN" in page]
    assert len(named) >= 2
    assert ["continued" in page for page in named] == [False, *[True] * (len(named) - 1)]
    out = [job for job in shelf(week, "01-26", "set out") if job.items]
    wanted = [" ".join(item.what.split()) for job in out for item in job.items]
    assert len(wanted) == 16
    assert all(any(what in page for page in pages) for what in wanted)
    assert (overlapping(pdf), outside(pdf, 20)) == ([], [])


@pytest.mark.parametrize("paper", ["A4", "Letter"])
def test_long_names_wrap_and_nothing_is_cut_off(paper: str) -> None:
    week = sheet(crowded(5, on=(25, 26, 28), long=True))
    pdf = printed(week, paper)
    assert (overlapping(pdf), outside(pdf, 20)) == ([], [])
    # a word too long for its line may be broken at places that have no width
    read = words(pdf).replace("\u200b", "")
    for job in (job for rung in week.rungs for one in rung.shelves for job in one.jobs):
        for text in (job.what, *job.more, *job.cautions):
            assert " ".join(text.split()) in read


def _spoken(text: str) -> list[str]:
    # boxes, marks and the day it is as at are drawn otherwise on paper, headings in capitals
    text = re.sub(r"as at \w{3}\s", "as at ", text)
    plain = text.replace("[ ]", " ").replace("\u00a0", " ").casefold()
    return [word for word in re.findall(r"[^\s.,;:!>–()]+", plain) if word != "printed"]


@pytest.mark.parametrize("monday", [date(2027, 1, 11), MONDAY, date(2027, 2, 8)])
def test_paper_says_every_word_of_the_text(practice: Path, monday: date) -> None:
    week = college(practice, monday)
    pdf = printed(week)
    paper = Counter(_spoken(words(pdf)))
    text = Counter(_spoken(WEEK.text(week, 100)))
    # every sentence is on paper as often as on the screen
    assert {word: count for word, count in (text - paper).items() if word != "........"} == {}
    assert (overlapping(pdf), outside(pdf, 20)) == ([], [])
    assert greys_only(pdf)


def test_both_papers_have_their_own_size(practice: Path) -> None:
    week = college(practice, date(2027, 2, 8))
    assert set(sizes_mm(printed(week))) == {(210.0, 297.0)}
    assert set(sizes_mm(printed(week, "Letter"))) == {(215.9, 279.4)}


def test_type_is_smaller_only_where_that_saves_a_page() -> None:
    def shown(classes: int) -> tuple[int, float]:
        pdf = printed(sheet(crowded(classes, on=(25, 26, 27, 28, 29))))
        heading = next(each for each in pieces(pdf) if each.text.startswith("MON"))
        return len(page_words(pdf)), heading.top - heading.bottom

    (few, large), (more, small), (most, again) = shown(4), shown(5), shown(7)
    assert (few, more, most) == (1, 1, 2)
    assert small < 0.9 * large
    assert again == pytest.approx(large)


def test_text_keeps_to_eighty_columns(practice: Path) -> None:
    for monday in (MONDAY, date(2027, 2, 8)):
        lines = WEEK.text(college(practice, monday), 80).splitlines()
        assert [line for line in lines if len(line) > 80] == []


# -- what else stands at the foot --------------------------------------------------------------


def _foot(facts: Facts, **more: Any) -> dict[str, str]:
    planned = replace(plan(facts), **more)
    return {each.about: each.text for each in week_of(facts, planned, MONDAY, {}).also}


def test_an_old_backup_is_told_and_a_young_one_is_not() -> None:
    facts = replace(crowded(1, on=(26,)), as_at=MONDAY)
    old, young = date(2027, 1, 17), date(2027, 1, 18)
    assert "8 days ago" in _foot(facts, backup=LastBackup(old))["backup"]
    assert "no backup of this store yet" in _foot(facts, backup=LastBackup(None))["backup"]
    assert "backup" not in _foot(facts, backup=LastBackup(young))


def test_a_day_over_the_limit_says_by_how_much() -> None:
    facts = crowded(2, on=(26,))
    row = (DayLoad(MONDAY, 340, 300, movable=(("M01", date(2027, 1, 22)),)),)
    said = _foot(facts, loads=row)["too much"].replace("\u00a0", " ")
    assert said.startswith("Mon 25 Jan has 340 min of hands-on work, 40 over: could go earlier: ")
    assert said.endswith("on Fri 22 Jan")


# -- times ------------------------------------------------------------------------------------


def _fresh(*minutes: int, opens: int = 480) -> list[tuple[str, str]]:
    """Fresh makes of 20 min for classes at these minutes, with the time beside each."""
    salt, lines, methods, recipes, booked = solid(), [], [], [], []
    for number, minute in enumerate(minutes):
        made = solution(0.1 + number / 10, f"salt {number}")
        lines.append(made)
        methods.append(made_from(made, salt, minutes=20))
        recipes.append(recipe(wants(made, cm3(100), fresh=True, per=Per.CLASS), code=f"R0{number}"))
        booked.append(booking(f"K0{number}", "01-26", minute, recipe=f"R0{number}"))
    facts = house(
        [salt, *lines], methods=methods, recipes=recipes, bookings=booked,
        bottles=[bought_bottle("B01", salt, g(500))], calendar=Calendar(open_from=opens),
    )  # fmt: skip
    return [(job.what[:6], job.time) for job in shelf(sheet(facts), "01-26", "make")]


def test_fresh_makes_are_begun_one_after_the_other_half_an_hour_before_the_class() -> None:
    # ten minutes to set out each class lie between
    assert _fresh(660) == [("salt 0", "10:00")]
    assert _fresh(660, 660) == [("salt 0", "09:30"), ("salt 1", "09:50")]
    assert _fresh(660, 600) == [("salt 1", "09:00"), ("salt 0", "10:00")]


def test_no_make_is_begun_before_the_doors_open() -> None:
    # half an hour would be 07:45: then set out as the class begins
    assert _fresh(525) == [("salt 0", "08:15")]
    assert _fresh(525, 525) == [("salt 0", "08:00"), ("salt 1", "08:05")]


def test_two_of_one_thing_poured_away_on_two_days_are_told_apart(practice: Path) -> None:
    week = college(practice, date(2027, 2, 1))
    assert "ammonium iron(II) sulfate 0.100 mol/dm³, the one made Mon 1 Feb" in whats(
        shelf(week, "02-03", "tidy")
    )
    assert "ammonium iron(II) sulfate 0.100 mol/dm³, the one made Wed 3 Feb" in whats(
        shelf(week, "02-05", "tidy")
    )


def test_the_week_of_a_weekend_is_the_next_where_none_is_asked_for() -> None:
    assert monday_of(None, date(2027, 1, 29)) == MONDAY
    assert monday_of(None, date(2027, 1, 30)) == date(2027, 2, 1)
    assert monday_of(date(2027, 1, 31), date(2027, 1, 4)) == MONDAY


def test_a_class_on_a_saturday_brings_its_day_onto_the_sheet() -> None:
    salt = solid()
    water = solution(0.1)
    facts = house(
        [salt, water], recipes=[recipe(wants(water, cm3(50)))],
        bookings=[booking("K01", "01-30")],
        bottles=[made_bottle("S01", water, cm3(500), checks=(found("01-04", 0.0987),))],
    )  # fmt: skip
    week = sheet(facts)
    (saturday,) = (rung for rung in week.rungs if rung.on == date(2027, 1, 30))
    assert saturday.told == "Closed."
    (out,) = shelf(week, "01-30", "set out")
    whence = out.items[0].whence.replace("\u00a0", " ")
    assert whence == "from S01, expected 0.0987 mol/dm³ (found 2027-01-04)"


def test_what_is_past_stands_today_until_it_is_poured_away() -> None:
    starch = solution(0.1, "starch", rules=(keeps(3),))
    facts = house(
        [starch], bottles=[made_bottle("S28", starch, cm3(500), "01-18")],
        start=date(2027, 1, 4), as_at=date(2027, 1, 27),
    )  # fmt: skip
    week = sheet(facts)
    (job,) = shelf(week, "01-27", "tidy")
    assert whats((job,)).startswith("S28 starch")
    assert told(job) == "its last day was Thu 21 Jan"
    assert not shelf(week, "01-28", "tidy")
