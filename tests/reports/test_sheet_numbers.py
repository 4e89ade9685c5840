"""Every number and day on a sheet is the plan's: of the college, and of houses by chance."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import replace
from datetime import date, timedelta
from itertools import combinations
from pathlib import Path

import houses
import pytest
from random_houses import random_house

from stockroom.keeping.record import Blend
from stockroom.keeping.rules import Law, Rule, RuleKind
from stockroom.keeping.verdict import Condition
from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.measure.formats import format_strength
from stockroom.planning.decisions import CheckToDo, Draw, Make, Plan, Worth
from stockroom.planning.facts import Bottle, Drawn, Facts, Firmness, Line
from stockroom.planning.on_shelf import OnShelf, on_shelf
from stockroom.planning.plan import plan
from stockroom.reports.paper.card import Card, cards_of
from stockroom.reports.paper.day import day_of
from stockroom.reports.paper.day_notes import OVERDUE, cover_of
from stockroom.reports.paper.day_times import minutes_to_set_out, times_of
from stockroom.reports.paper.label import Label
from stockroom.reports.paper.label_of import batch_label, full_label, opened_strip
from stockroom.reports.paper.week import Week, monday_of, week_of
from stockroom.reports.paper.week_parts import Job
from stockroom.reports.words import TIED, amount, day, day_in_words, measured, weekday_and_day
from stockroom.safety.clp import Classification
from stockroom.safety.hazards import Hazards
from stockroom.service.sheets import known_and_planned

SEEDS = (1, 6, 9, 13, 29, 34, 35, 36, 40, 43)
UNTOLD = Hazards("", "", Classification(notes=(), unknown=(), entered=False))

House = tuple[Facts, Plan]


@pytest.fixture(scope="module", params=["college", *SEEDS])
def house(request: pytest.FixtureRequest, college_file: Path) -> House:
    if request.param == "college":
        return known_and_planned(college_file, as_at=houses.MONDAY)
    # what was drawn there is of bottles nobody has, of which no sheet can tell
    known = replace(random_house(request.param), drawn=())
    return known, plan(known)


# -- labels ---------------------------------------------------------------------------


def shelf_of(known: Facts) -> tuple[OnShelf, ...]:
    return on_shelf(known.bottles, known.lines, known.places, known.as_at)


def dates(label: Label) -> dict[str, str]:
    return dict(label.dates)


def test_every_date_on_a_label_is_the_record_s_or_the_verdict_s(house: House) -> None:
    for row in shelf_of(house[0]):
        if row.bottle.record.gone or row.line.key.startswith("unknown"):
            continue
        told = dates(full_label(row.bottle, row.line, row.verdict, UNTOLD, house[0].places))
        record, found = row.bottle.record, row.verdict
        for word, on in (("made", record.made), ("received", record.received)):
            assert word not in told or told[word] == (day_in_words(on) if on else ""), row.bottle
        opened = day_in_words(record.opened) if record.opened else ""
        assert told.get("opened", opened).removesuffix(" (guessed)") == opened
        if found.condition is not Condition.NO_DATE:
            last = {told[word] for word in ("good until", "test or discard by") if word in told}
            assert last == ({day_in_words(found.usable_until)} if found.usable_until else set())
            recheck = day_in_words(found.recheck_by) if found.recheck_by else None
            assert told.get("recheck by") == recheck


def test_a_strip_s_last_day_is_the_verdict_s(house: House) -> None:
    for row in shelf_of(house[0]):
        if not row.bottle.record.opened or row.line.key.startswith("unknown"):
            continue
        told = dates(opened_strip(row.bottle, row.line, row.verdict))
        last, recheck = row.verdict.usable_until, row.verdict.recheck_by
        said = {told[word] for word in told if word in ("use by", "test or discard by")} - {""}
        assert said == ({day_in_words(last)} if last else set())
        first = recheck if recheck and (last is None or recheck < last) else None
        assert told.get("recheck by") == (day_in_words(first) if first else None)


def test_the_strength_on_a_label_is_the_one_found_last_and_so_is_its_day() -> None:
    line = houses.solution(0.1, rules=(fading(0.001),))
    found = (("01-02", 0.099), ("01-09", 0.097), ("01-05", 0.098))
    checks = tuple(houses.found(on, strength) for on, strength in found)
    (row,) = shelf_of(alone(houses.made_bottle("S01", line, 1000, checks=checks), line, "01-20"))
    label = full_label(row.bottle, row.line, row.verdict, UNTOLD, ())
    assert label.known == "found 9 Jan 2027"
    assert label.strength.startswith("0.097 ")


def test_a_strength_worked_out_has_the_day_it_was_mixed() -> None:
    line = houses.solution(0.1)
    mixed = Blend(houses.day("01-08"), 0.095)
    bottle = houses.made_bottle("S01", line, 1000, on="01-04", blend=mixed)
    (row,) = shelf_of(alone(bottle, line, "01-20"))
    label = full_label(row.bottle, row.line, row.verdict, UNTOLD, ())
    assert label.known.startswith("worked out 8 Jan 2027")
    assert label.strength == format_strength(0.095, "mol/dm3")


def alone(bottle: Bottle, line: Line, as_at: str) -> Facts:
    return houses.house([line], bottles=[bottle], as_at=houses.day(as_at))


def fading(rate: float) -> Rule:
    return Rule(RuleKind.FADES, law=Law(1, rate))


def test_a_batch_s_label_says_the_days_of_the_plan_and_moves_along(house: House) -> None:
    later = timedelta(days=7)
    for make in house[1].makes:
        line = house[0].lines[make.line]
        now = dates(batch_label(make, line, UNTOLD, None))
        assert now["made"] == day_in_words(make.on)
        assert now.get("ready from", now["made"]) == day_in_words(make.ready)
        plain = all(rule.kind is RuleKind.LIFE and not rule.purpose for rule in line.rules)
        if make.good_until and plain and "good until" in now:
            assert now["good until"] == day_in_words(make.good_until), make.id
        then = dates(batch_label(make, line, UNTOLD, make.on + later))
        assert then["made"] == day_in_words(make.on + later)
        assert then.get("ready from", then["made"]) == day_in_words(make.ready + later)


# -- the week sheet -------------------------------------------------------------------


def weeks_of(house: House) -> list[Week]:
    known, made = house
    days = [b.on for b in known.bookings] + [make.on for make in made.makes]
    days += [make.finish_on for make in made.makes if make.finish_on]
    mondays = sorted({monday_of(on, known.as_at) for on in days if on >= known.as_at})
    return [week_of(known, made, monday, {}) for monday in mondays]


@pytest.fixture(scope="module")
def weeks(house: House) -> list[Week]:
    return weeks_of(house)


def jobs_of(weeks: Iterable[Week], *shelves: str) -> list[tuple[date, Job]]:
    return [
        (rung.on, job)
        for week in weeks
        for rung in week.rungs
        for shelf in rung.shelves
        if shelf.name in shelves
        for job in shelf.jobs
    ]


def test_the_week_has_every_make_on_its_day_with_its_sources(
    house: House, weeks: list[Week]
) -> None:
    known, made = house
    jobs = jobs_of(weeks, "start", "make")
    begun = {job.ref: (on, job) for on, job in jobs if job.ref and " finish " not in job.key}
    ahead = [make for make in made.makes if make.on >= made.as_at]
    assert set(begun) == {make.id for make in ahead}
    by_id = {make.id: make for make in made.makes}
    for make in ahead:
        on, job = begun[make.id]
        assert on == make.on
        assert job.what.endswith(f", {amount(make.volume, Kind.VOLUME)}")
        told = " ".join(job.more)
        for draw in make.sources:
            assert measured(draw.amount, draw.kind) in told
            if draw.make and not draw.bottle:
                assert f"(made {weekday_and_day(by_id[draw.make].ready)})" in told
        assert habits(told) == [
            said for d in make.sources if (said := habit_of(known, make, d)) is not None
        ]
    ends = {(job.ref, on) for on, job in jobs if " finish " in job.key}
    assert ends == {
        (m.id, m.finish_on) for m in made.makes if m.finish_on and m.finish_on > m.on
        and m.finish_on >= made.as_at
    }  # fmt: skip


def habits(told: str) -> list[str]:
    """The amounts after "not": what the label's strength would make it."""
    return [each.strip(",") for each in re.findall(r"\), not ([\d.\s]+(?:cm³|dm³|g|mg))", told)]


def habit_of(known: Facts, make: Make, draw: Draw) -> str | None:
    """As much of what the label says as holds what is really taken; None where it is the same."""
    line = known.lines[draw.line] if draw.bottle else None
    if line is None or not line.strength or not draw.strength:
        return None
    parts = [p for p in known.methods[make.line].ingredients if line.key in p.lines]
    by_label = draw.amount * draw.strength / line.strength
    if all(p.per_dm3 is not None for p in parts) or abs(by_label / draw.amount - 1) < 0.0011:
        return None
    return measured(round(by_label), draw.kind)


def test_what_is_set_out_is_each_draw_s_own_amount(house: House, weeks: list[Week]) -> None:
    items = {
        item.key: item
        for _, job in jobs_of(weeks, "set out")
        for item in job.items
    }  # fmt: skip
    for need in house[1].needs:
        drawn = [draw for draw in need.draws if draw.bottle]
        key = f"{need.booking.on} set out {need.booking.number} "
        row = [one for name, one in items.items() if name.startswith(key)]
        if len(drawn) < 2 or need.outcome.value in ("short", "refused") or not row:
            continue
        parts = [f"{amount(d.amount, d.kind)} from {d.bottle}".replace(" ", TIED) for d in drawn]
        assert any(all(part in one.whence for part in parts) for one in row), need.ref


def test_what_two_bottles_give_is_told_apart() -> None:
    salt = houses.solid()
    known = houses.house(
        [salt],
        recipes=[houses.recipe(houses.wants(salt, houses.g(30)))],
        bookings=[houses.booking("K01", "01-12")],
        bottles=[houses.bought_bottle(f"B0{n}", salt, houses.g(20)) for n in (1, 2)],
    )
    made = plan(known)
    [(_, job)] = jobs_of(weeks_of((known, made)), "set out")
    whence = job.items[0].whence.replace(TIED, " ")
    parts = {d.bottle: d.amount // PER_UNIT[Kind.MASS] for d in made.needs[0].draws}
    assert sorted(parts.values()) == [10, 20]
    assert all(f"{grams} g from {number}" in whence for number, grams in parts.items())


@pytest.mark.xfail(strict=True, raises=KeyError, reason="a bottle thrown away stands in no facts")
def test_what_was_drawn_of_a_bottle_thrown_away_since_is_told() -> None:
    """The last of a bottle drawn for tomorrow, and the empty bottle discarded."""
    salt = houses.solid()
    known = houses.house(
        [salt],
        recipes=[houses.recipe(houses.wants(salt, houses.g(30)))],
        bookings=[houses.booking("K01", "01-05")],
        drawn=(Drawn("B01", "salt", houses.MONDAY, houses.g(30), "K01"),),
    )
    made = plan(known)
    assert [draw.bottle for draw in made.needs[0].draws] == ["B01"]
    [(_, job)] = jobs_of(weeks_of((known, made)), "set out")
    assert "B01" in job.items[0].whence
    assert "B01" in day_of(known, made, houses.day("01-05")).parts[0].rows[0].items[0].origin


def test_a_week_has_its_number_from_the_monday_of_the_first_day() -> None:
    """A term that begins on a Wednesday: its first week is that of the Monday before."""
    known = houses.house([], as_at=houses.day("01-06"), end=houses.day("03-26"))
    made = plan(known)
    for number, monday in ((1, "01-04"), (2, "01-11"), (5, "02-01")):
        assert week_of(known, made, houses.day(monday), {}).head.title.startswith(f"Week {number}:")


def test_orders_stand_in_the_week_of_their_day_its_sunday_too(house: House) -> None:
    known, made = house
    monday, sunday = date(2027, 1, 25), date(2027, 1, 31)
    if not made.orders:
        return
    for on, told in ((monday, True), (sunday, True), (sunday + timedelta(days=1), False)):
        order = replace(made.orders[0], order_by=on, late=0)
        also = week_of(known, replace(made, orders=(order,), on_order=()), monday, {}).also
        text = [one.text for one in also if one.about.startswith("order")]
        assert bool(text) is told
        assert not told or f"order by {weekday_and_day(on)}" in text[0]


def test_what_is_left_is_poured_away_when_the_last_class_with_it_is_over() -> None:
    salt = houses.solid()
    made = houses.solution(0.1, rules=(houses.keeps(1),))
    known = houses.house(
        [salt, made],
        methods=[houses.made_from(made, salt)],
        recipes=[houses.recipe(houses.wants(made, houses.cm3(100)))],
        bookings=[
            houses.booking("K01", "01-12", 600, lasts_minutes=60),
            houses.booking("K02", "01-12", 780, lasts_minutes=95),
        ],
        bottles=[houses.bought_bottle("B01", salt, houses.g(500))],
    )
    found = plan(known)
    assert [make.bookings for make in found.makes] == [("K01", "K02")]
    tidy = [job for _, job in jobs_of(weeks_of((known, found)), "tidy")]
    assert {job.time for job in tidy if "pour away" in job.what} <= {"14:35", ""}


def test_a_look_s_worth_is_all_the_orders_it_saves(house: House, weeks: list[Week]) -> None:
    told = " ".join(" ".join(job.more) for _, job in jobs_of(weeks, "check"))
    saved = [
        sum(pence for _, pence in check.worth.orders)
        for check in house[1].checks
        if check.optional and check.worth and check.best >= house[1].as_at
    ]
    said = [int(p) * 100 + int(q) for p, q in re.findall(r"£(\d+)\.(\d\d) of orders", told)]
    assert sorted(said) == sorted(pence for pence in saved if pence)


def test_of_two_orders_a_look_saves_both_are_told() -> None:
    known = houses.house([])
    worth = Worth(orders=(("O1", 250), ("O2", 1100)))
    on = houses.MONDAY
    look = CheckToDo("B01", "salt", "look", on, on, on, (), "", True, worth=worth)
    week = week_of(known, replace(plan(known), checks=(look,)), on, {})
    [(_, job)] = jobs_of([week], "check")
    assert job.more[0] == "a good look saves £13.50 of orders"


# -- the page for the day -------------------------------------------------------------


def test_one_pair_of_hands_is_never_at_two_things_and_all_stands_before_its_class(
    house: House,
) -> None:
    known, made = house
    over = (Firmness.DONE, Firmness.DROPPED)
    held = [b for b in known.bookings if b.firmness not in over and b.on >= known.as_at]
    makes = {make.id: make for make in made.makes}
    for on in sorted({b.on for b in held}):
        times = times_of(known, made, on)
        spans = [
            (times.set_out[b.number], minutes_to_set_out(known, b), b.number)
            for b in held
            if b.on == on
        ]
        spans += [(minute, makes[one].minutes, one) for one, minute in times.makes.items()]
        sure = [each for each in spans if each[2] not in times.too_late]
        for one, other in combinations(sure, 2):
            apart = one[0] + one[1] <= other[0] or other[0] + other[1] <= one[0]
            assert apart, (on, one, other)
        for booking in held:
            # on a closed day nobody opens the doors
            sure_of = booking.number not in times.too_late and known.calendar.is_open(on)
            if booking.on != on or not sure_of:
                continue
            out = times.set_out[booking.number]
            assert out + minutes_to_set_out(known, booking) <= booking.minute
            for number, minute in times.makes.items():
                if booking.number in makes[number].bookings and number not in times.too_late:
                    assert minute + makes[number].minutes <= out, (number, booking.number)


@pytest.mark.parametrize("minutes", [(600, 840), (660, 660)])
def test_what_is_made_for_two_classes_is_done_before_the_first_is_set_out(
    minutes: tuple[int, int],
) -> None:
    salt, on = houses.solid(), houses.day("01-12")
    made = houses.solution(0.1)
    known = houses.house(
        [salt, made],
        methods=[houses.made_from(made, salt, minutes=20)],
        recipes=[houses.recipe(houses.wants(made, houses.cm3(100)))],
        bookings=[houses.booking(f"K0{n}", "01-12", at) for n, at in enumerate(minutes, 1)],
        bottles=[houses.bought_bottle("B01", salt, houses.g(500))],
    )
    found = plan(known)
    (make,) = found.makes
    assert make.bookings == ("K01", "K02")
    that_day = replace(make, on=on, ready=on)
    times = times_of(known, replace(found, makes=(that_day,)), on)
    assert times.too_late == frozenset()
    assert times.makes[make.id] + 20 <= min(times.set_out.values())


def test_a_batch_that_stands_has_its_strength_from_the_day_it_is_ready() -> None:
    """What stands two days fades from the day it can be used, as the plan reckons it."""
    salt = houses.solid()
    made = houses.solution(1.0, rules=(fading(0.05),))
    wanted = houses.wants(made, houses.cm3(100), tolerance=0.4)
    wanted = replace(wanted, lowest=0.6, highest=1.4)
    known = houses.house(
        [salt, made],
        methods=[houses.made_from(made, salt, stands_hours=48.0)],
        recipes=[houses.recipe(wanted)],
        bookings=[houses.booking("K01", "01-14")],
        bottles=[houses.bought_bottle("B01", salt, houses.g(500))],
    )
    found = plan(known)
    (make,) = found.makes
    assert make.ready > make.on
    aged = (houses.day("01-14") - make.ready).days
    (told,) = day_of(known, found, houses.day("01-14")).parts[0].strengths
    at_ready = 2.718281828 ** (-0.05 * aged)
    at_start = 2.718281828 ** (-0.05 * (houses.day("01-14") - make.on).days)
    said = float(told.today.split()[0])
    assert abs(said - at_ready) <= 0.051 < at_ready - at_start + 0.051
    assert abs(said - at_ready) < abs(said - at_start)


def test_what_is_missing_is_told_by_how_much_is_missing(house: House) -> None:
    known, made = house
    for short in made.short:
        (need,) = [one for one in made.needs if one.ref == short.ref]
        parts = day_of(known, made, need.booking.on).parts
        told = [text.replace(TIED, " ") for part in parts for text in part.different]
        said = f"goes without {amount(short.amount, short.kind)}".replace(TIED, " ")
        assert any(text.startswith(need.booking.number) and said in text for text in told), short


def test_what_is_missing_of_a_need_is_less_than_the_need() -> None:
    salt = houses.solid()
    known = houses.house(
        [salt],
        recipes=[houses.recipe(houses.wants(salt, houses.g(30)))],
        bookings=[houses.booking("K01", "01-12")],
        bottles=[houses.bought_bottle("B01", salt, houses.g(20))],
    )
    made = plan(known)
    (short,) = made.short
    one = replace(made, short=(replace(short, amount=houses.g(11)),))
    told, *_ = day_of(known, one, houses.day("01-12")).parts[0].different
    assert told.replace(TIED, " ").startswith("K01 goes without 11 g of salt")


@pytest.mark.parametrize(
    ("lowest", "highest", "off"), [(1.25, 1.5, -0.2), (0.5, 0.8, 0.25), (0.9, 1.1, None)]
)
def test_how_far_off_is_counted_from_the_nearer_end_of_what_is_asked(
    lowest: float, highest: float, off: float | None
) -> None:
    line = houses.solution(1.0)
    known = houses.house(
        [line],
        recipes=[houses.recipe(houses.wants(line, houses.cm3(100), tolerance=0.5))],
        bookings=[houses.booking("K01", "01-12")],
        bottles=[houses.made_bottle("S01", line, houses.cm3(500))],
    )
    made = plan(known)
    wanted = replace(known.recipes["R01", 1].requirements[0], lowest=lowest, highest=highest)
    other = replace(known, recipes={("R01", 1): houses.recipe(wanted)})
    (told,) = day_of(other, made, houses.day("01-12")).parts[0].strengths
    assert told.off == (None if off is None else pytest.approx(off))


def test_bottles_passed_over_are_named_or_counted_every_one(house: House) -> None:
    known, made = house
    for need in made.needs:
        passed = [each for each in need.reasons if " not used: " in each]
        five = tuple(f"B9{n} not used: past" for n in range(5))
        if passed or not any(d.bottle for d in need.draws) or need.booking.on < known.as_at:
            continue
        one = replace(made, needs=tuple(
            replace(n, reasons=five) if n.ref == need.ref else n for n in made.needs
        ))  # fmt: skip
        parts = day_of(known, one, need.booking.on, need.booking.number).parts
        told = " ".join(text for part in parts for text in part.different if "B9" in text)
        named = len(set(re.findall(r"\bB9\d\b", told)))
        (more,) = re.findall(r"and (\d+) more", told)
        assert named + int(more) == 5
        return


@pytest.mark.parametrize(
    ("reference", "review", "said"),
    [
        ("RA 14, written 2026-02-01, review 2027-01-12", "2027-01-12", ""),
        ("RA 14, review 2027-01-11; first 2025-03-02", "2027-01-11", OVERDUE),
    ],
)
def test_a_review_is_overdue_from_the_day_after_its_own(
    reference: str, review: str, said: str
) -> None:
    recipe = houses.recipe(assessment=reference)
    known = houses.house([], recipes=[recipe], bookings=[houses.booking("K01", "01-12")])
    (cover,) = cover_of(known, known.bookings)
    assert (cover.review, cover.said) == (review, said)


# -- make cards -----------------------------------------------------------------------


@pytest.fixture(scope="module")
def cards(house: House) -> list[tuple[Make, Card]]:
    known, made = house
    used = {draw.bottle or draw.line for make in made.makes for draw in make.sources}
    told = dict.fromkeys(used | {make.line for make in made.makes}, UNTOLD)
    return list(zip(made.makes, cards_of(known, made, made.makes, told).cards, strict=True))


def test_a_card_takes_what_the_plan_takes_and_each_vessel_its_part(
    cards: list[tuple[Make, Card]],
) -> None:
    for make, card in cards:
        assert card.volume == amount(make.volume, Kind.VOLUME)
        assert [each.amount for each in card.takes] == [
            measured(draw.amount, draw.kind) for draw in make.sources
        ]
        for draw, taken in zip(make.sources, card.takes, strict=True):
            each = measured(round(draw.amount / make.vessels), draw.kind)
            assert taken.each == (f"{make.vessels} × {each}" if make.vessels > 1 else "")
        if make.vessels > 1:
            part = amount(round(make.volume / make.vessels), Kind.VOLUME)
            assert f"{part} in each" in card.vessels
            whole = f"to {part} in each of {make.vessels} vessels, {card.volume} in all"
            assert whole in {detail for step in card.steps for detail in step.details}
        (typed,) = [each for each in card.type_back if each.startswith("stockroom make ")]
        (size,) = re.findall(r" '([\d.]+) (?:c|d)m3'", typed)
        assert size == re.sub(r"[^\d.]", "", card.volume)


def test_a_card_s_not_is_what_the_label_would_make_it(
    house: House, cards: list[tuple[Make, Card]]
) -> None:
    for make, card in cards:
        for draw, taken in zip(make.sources, card.takes, strict=True):
            line = house[0].lines[draw.line]
            if not taken.habit:
                same = draw.kind is Kind.MASS or not draw.strength or not line.strength
                assert same or draw.strength == pytest.approx(line.strength, rel=0.0011)
                continue
            assert draw.strength
            assert line.strength
            # as much of the solute in the one as in the other
            by_label = draw.amount * draw.strength / line.strength
            assert taken.habit.startswith(f"not {measured(round(by_label), draw.kind)}, ")


def test_a_card_s_last_day_is_the_plan_s(cards: list[tuple[Make, Card]]) -> None:
    for make, card in cards:
        said = re.findall(r"good until ([^;]+)", card.good_until)
        if said:
            assert make.good_until
            assert said == [day(make.good_until)]
        ends = make.finish_on or make.ready
        if ends > make.on:
            assert day(ends) in [step.day for step in card.steps]


def test_what_is_titrated_is_known_from_the_day_it_is_finished() -> None:
    salt = houses.solid()
    rechecked = Rule(RuleKind.RECHECK, houses.days(30))
    made = houses.solution(1.0, rules=(rechecked,))
    method = houses.made_from(
        made, salt, minutes=30, finish_minutes=20, titrated=True, stands_hours=48.0
    )
    known = houses.house(
        [salt, made],
        methods=[method],
        recipes=[houses.recipe(houses.wants(made, houses.cm3(100)))],
        bookings=[houses.booking("K01", "01-21")],
        bottles=[houses.bought_bottle("B01", salt, houses.g(500))],
    )
    found = plan(known)
    (make,) = found.makes
    (card,) = cards_of(known, found, found.makes, {"B01": UNTOLD, made.key: UNTOLD}).cards
    assert make.finish_on
    assert make.finish_on > make.on
    assert f"recheck by {day(make.finish_on + timedelta(days=30))}" in card.good_until


def test_the_assay_on_a_card_is_the_bottle_s_own() -> None:
    salt = houses.solid(assay=0.98)
    made = houses.solution(1.0)
    jar = replace(houses.bought_bottle("B01", salt, houses.g(500)), assay=0.9)
    known = houses.house(
        [salt, made],
        methods=[houses.made_from(made, salt)],
        recipes=[houses.recipe(houses.wants(made, houses.cm3(100)))],
        bookings=[houses.booking("K01", "01-12")],
        bottles=[jar],
    )
    found = plan(known)
    (card,) = cards_of(known, found, found.makes, {"B01": UNTOLD, made.key: UNTOLD}).cards
    assert [each.known for each in card.takes] == ["assay 90 % counted in"]
    assert found.makes[0].sources[0].amount == pytest.approx(
        found.makes[0].volume / 1e6 * 100 / 0.9 * 1e6, rel=0.01
    )
