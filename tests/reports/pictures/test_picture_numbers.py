"""Every point, bar and line of a picture stands where its figure says."""

from __future__ import annotations

import re
from dataclasses import replace
from datetime import date, timedelta
from itertools import pairwise
from math import exp, log, sqrt
from pathlib import Path
from typing import Any

import houses
import pytest
from fading_bottles import FADES, FOUND, MADE, checked, fade
from random_houses import random_house

from stockroom.keeping.course import Mark
from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.rules import Law, Origin, Rule, RuleKind
from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.planning.decisions import CheckToDo, DayLoad, Plan
from stockroom.planning.facts import Facts
from stockroom.planning.pictures.running import running
from stockroom.planning.plan import plan
from stockroom.reports.pictures import canvas
from stockroom.reports.pictures.fade import fade_of
from stockroom.reports.pictures.fade_drawn import need_words
from stockroom.reports.pictures.fade_words import fade_picture
from stockroom.reports.pictures.level import At, Due, Stock, level_of, level_picture
from stockroom.reports.pictures.load import Load, LoadDay, load_of, load_picture
from stockroom.service.pictures import bottle_fading
from stockroom.service.sheets import known_and_planned

SEEDS = (6, 9, 13, 29, 34, 35, 36, 43)
# two-sided 95 % of Student's distribution with two degrees of freedom, from any table of it
T_OF_TWO = 4.3027
TODAY = houses.MONDAY

House = tuple[Facts, Plan]


@pytest.fixture
def figures(monkeypatch: pytest.MonkeyPatch) -> list[Any]:
    """The axes of each picture drawn, in place of its bytes."""
    found: list[Any] = []

    def kept(figure: Any, form: str) -> bytes:
        found.extend(figure.axes)
        return b""

    monkeypatch.setattr(canvas, "_written", kept)
    return found


@pytest.fixture(scope="module", params=["college", *SEEDS])
def house(request: pytest.FixtureRequest, college_file: Path) -> House:
    if request.param == "college":
        return known_and_planned(college_file, as_at=TODAY)
    known = random_house(request.param)
    return known, plan(known)


def marks(axes: Any, shape: str) -> list[tuple[float, float]]:
    """Where the marks of a shape stand: day number and height."""
    return [
        (float(x), float(y))
        for line in axes.get_lines()
        if line.get_marker() == shape
        for x, y in zip(line.get_xdata(), line.get_ydata(), strict=True)
    ]


def drawn(axes: Any, width: float) -> list[Any]:
    """The lines of a width that mark nothing."""
    lines = axes.get_lines()
    return [one for one in lines if one.get_linewidth() == width and one.get_marker() == "None"]


# -- the fade of a bottle -------------------------------------------------------------


def test_each_result_stands_on_its_day_with_twice_its_doubt_about_it(figures: list[Any]) -> None:
    told = fade(checked(4, 0.0005))
    fade_picture(told)
    (axes,) = figures
    days = [(MADE + timedelta(days=n)).toordinal() for n, _ in FOUND]
    assert marks(axes, "o") == [(on, c) for on, (_, c) in zip(days, FOUND, strict=True)]
    bars = [tuple(map(tuple, s)) for c in axes.containers for s in c[2][0].get_segments()]
    for bar, on, (_, strength) in zip(bars, days, FOUND, strict=True):
        (x, low), (same, high) = bar
        assert x == same == on
        assert (low, high) == pytest.approx((strength - 0.00098, strength + 0.00098), abs=2e-6)


def test_what_is_needed_stands_on_its_day_and_what_is_too_weak_is_hollow(
    figures: list[Any],
) -> None:
    soon, late = TODAY + timedelta(days=3), TODAY + timedelta(days=40)
    needs = (
        Mark("K01", 0.080, TODAY + timedelta(days=20), soon),
        Mark("K02", 0.060, TODAY + timedelta(days=30), late),
    )
    told = fade(checked(2), (FADES,), *needs)
    fade_picture(told)
    (axes,) = figures
    assert sorted(marks(axes, "v")) == sorted(
        (m.by.toordinal(), m.strength) for m in told.wanted if m.by
    )
    faces = {
        float(line.get_xdata()[0]): line.get_markerfacecolor()
        for line in axes.get_lines()
        if line.get_marker() == "v"
    }
    assert {on: face != canvas.PAPER for on, face in faces.items()} == {
        m.by.toordinal(): m.in_time for m in told.wanted if m.by
    }


def test_a_curve_is_drawn_through_its_points(figures: list[Any]) -> None:
    told = fade(checked(0))
    fade_picture(told)
    (line,) = drawn(figures[0], 2.2)
    assert list(zip(line.get_xdata(), line.get_ydata(), strict=True)) == [
        (point.on.toordinal(), point.expected) for point in told.curve
    ]
    for point in told.curve:
        assert point.expected == pytest.approx(0.1 * exp(-0.002 * (point.on - MADE).days))


def test_the_band_is_that_of_a_straight_line_through_the_logarithms() -> None:
    """By the textbook: the mean of a least-squares line and its 95 % limits at a day."""
    ages, row = [n for n, _ in FOUND], [log(strength) for _, strength in FOUND]
    count, mean = len(ages), sum(ages) / len(ages)
    spread = sum((age - mean) ** 2 for age in ages)
    slope = sum((a - mean) * y for a, y in zip(ages, row, strict=True)) / spread
    middle = sum(row) / count
    over = sum((y - middle - slope * (a - mean)) ** 2 for a, y in zip(ages, row, strict=True))
    scatter = sqrt(over / (count - 2))
    told = {point.on: point for point in fade(checked(4)).curve}
    for age in (30, 70, 91):
        point = told[min(told, key=lambda on: abs((on - MADE).days - age))]
        far = (point.on - MADE).days - mean
        half = T_OF_TWO * scatter * sqrt(1 / count + far * far / spread)
        line = middle + slope * far
        assert (point.low, point.high) == pytest.approx(
            (exp(line - half), exp(line + half)), rel=2e-4
        )


def test_there_is_no_band_before_the_fading_begins() -> None:
    opened = MADE + timedelta(days=8)
    rule = Rule(RuleKind.FADES, origin=Origin.OPENED, law=Law(1, 0.002), source="test")
    record = Record(received=MADE, opened=opened, nominal=0.1, checks=checked(4).checks)
    told = fade(record, (rule,))
    assert told.curve[0].on < opened
    for point in told.curve:
        assert (point.low is not None) is (point.on >= opened)


def test_all_of_a_bottle_written_in_another_unit_is_in_that_unit(practice: Path) -> None:
    known, bottle, fading = bottle_fading(practice, "B01", as_at=TODAY, below=("80 vol",))
    scale = fading.shown[1]
    assert scale != 1
    check = Check(TODAY, CheckKind.FOUND, strength=95 / scale, uncertainty=0.5 / scale)
    told = fade_of(known, replace(bottle, record=replace(bottle.record, checks=(check,))), fading)
    assert told.unit == "vol"
    assert told.nominal == pytest.approx((bottle.record.nominal or 0) * scale)
    assert min(mark.strength for mark in told.wanted) == pytest.approx(80.0)
    [found] = told.found
    assert found.strength == pytest.approx(95.0)
    assert found.uncertainty == pytest.approx(0.5)
    assert {p.on: p.expected for p in told.curve}[TODAY] == pytest.approx(95.0)
    meant = {m.what: m.strength * scale for m in fading.course.marks}
    assert all(m.strength == pytest.approx(meant[m.what]) for m in told.wanted)


@pytest.mark.parametrize("count", [1, 3, 4, 9])
def test_needs_are_named_or_counted_every_one(count: int) -> None:
    row = [Mark(f"K{n:02d}", 0.09, None, TODAY) for n in range(count)]
    said = need_words(row, "vol")
    more = sum(map(int, re.findall(r"and (\d+) more", said)))
    assert len(re.findall(r"\bK\d\d\b", said)) + more == count


# -- the load -------------------------------------------------------------------------


def test_bars_are_the_minutes_titrating_on_top_of_making(house: House, figures: list[Any]) -> None:
    told = load_of(*house)
    load_picture(told)
    bars = {
        (round(bar.get_x() + bar.get_width() / 2), bar.get_y(), bar.get_height())
        for group in figures[0].containers
        for bar in group
    }
    meant = {(one.on.toordinal(), 0, one.makes) for one in told.days if one.makes}
    meant |= {(one.on.toordinal(), one.makes, one.checks) for one in told.days if one.checks}
    assert bars == meant
    limits = [line.get_ydata()[0] for line in drawn(figures[0], 1.6)]
    assert limits == ([told.limit] if told.limit else [])


def test_the_load_is_the_plan_s_day_by_day(house: House) -> None:
    known, made = house
    told = load_of(known, made)
    assert [(d.on, d.minutes, d.over) for d in told.days] == [
        (one.day, one.minutes, one.over) for one in made.loads
    ]
    if made.loads:
        assert told.head.about.startswith(f"{sum(one.minutes for one in made.loads)} minutes")
    for day, load in zip(told.days, made.loads, strict=True):
        sure = [c for c in made.checks if c.subject in load.checks and not c.optional]
        assert day.checks == sum(c.minutes for c in sure if c.best == load.day)


def test_a_look_that_only_saves_work_is_no_load(house: House) -> None:
    known, made = house
    row = tuple(
        CheckToDo("B01", "acid", what, TODAY, TODAY, TODAY, (), "", optional, minutes=minutes)
        for what, optional, minutes in (("titrate", False, 20), ("look", True, 5))
    )
    loads = (DayLoad(TODAY, 60, 300, ("M01",), ("B01",)),)
    (day,) = load_of(known, replace(made, checks=row, loads=loads)).days
    assert (day.makes, day.checks) == (40, 20)


# -- the stock of a line --------------------------------------------------------------


def test_steps_and_marks_stand_on_their_days(house: House, figures: list[Any]) -> None:
    known, made = house
    lines = {order.line for order in made.orders} | {level.line for level in made.levels}
    for key in sorted(lines)[:3]:
        figures.clear()
        stock = level_of(known, made, running(known, key, made.orders))
        level_picture(stock)
        _stands(stock, figures[0])


def test_what_comes_and_what_is_ordered_have_their_own_marks(figures: list[Any]) -> None:
    day = [TODAY + timedelta(days=7 * n) for n in range(5)]
    due = (Due("O1", "1 × 50 g", day[1], day[2]), Due("P1", "1 × 25 g", None, day[3]))
    steps = (At(day[0], 40_000_000, 40_000_000), At(day[2], 10_000_000, 60_000_000))
    head = level_of(*_jar()).head
    stock = Stock(head, "salt", Kind.MASS, day[0], day[4], 20_000_000, steps, due)
    level_picture(stock)
    _stands(stock, figures[0])


def _stands(stock: Stock, axes: Any) -> None:
    unit = PER_UNIT[stock.kind]
    (solid,) = drawn(axes, 2.4)
    # a fall stands on its own day, not on the day before it
    assert solid.get_drawstyle() == "steps-post"
    days = [at.on.toordinal() for at in stock.days]
    assert list(solid.get_xdata()) == [*days, stock.last.toordinal()]
    assert list(solid.get_ydata()) == [
        *(at.left / unit for at in stock.days),
        stock.days[-1].left / unit,
    ]
    if stock.due:
        (dashed,) = drawn(axes, 1.4)
        assert list(dashed.get_ydata())[:-1] == [at.with_orders / unit for at in stock.days]
    comes = sorted(one.comes.toordinal() for one in stock.due if one.comes <= stock.last)
    assert sorted(x for x, _ in marks(axes, "^")) == comes
    by = sorted(one.order_by.toordinal() for one in stock.due if one.order_by)
    assert sorted(x for x, _ in marks(axes, "v")) == by
    levels = [line.get_ydata()[0] for line in drawn(axes, 1.0)]
    assert stock.level is None or stock.level / unit in levels


def _jar() -> tuple[Facts, Plan, Any]:
    """A jar of 50 g, 20 g a week for four weeks, packs of 25 g to be had at once."""
    salt = houses.solid(packs=(houses.pack(houses.g(25), 3, lead=2),), level=houses.g(20))
    known = houses.house(
        [salt],
        recipes=[houses.recipe(houses.wants(salt, houses.g(20)))],
        bookings=[houses.booking(f"K0{n}", f"01-{11 + 7 * n}") for n in range(3)]
        + [houses.booking("K03", "02-01")],
        bottles=[houses.bought_bottle("B01", salt, houses.g(50))],
    )
    made = plan(known)
    return known, made, running(known, "salt", made.orders)


def test_what_is_left_is_what_was_and_came_less_what_was_drawn() -> None:
    known, made, runs = _jar()
    stock = level_of(known, made, runs)
    grams = {at.on: at.with_orders // PER_UNIT[Kind.MASS] for at in stock.days}
    came = {order.arrives: order.amount // PER_UNIT[Kind.MASS] for order in made.orders}
    assert came
    held = {booking.on: 20 for booking in known.bookings}
    for on, left in grams.items():
        arrived = sum(size for day, size in came.items() if day <= on)
        drew = sum(size for day, size in held.items() if day <= on)
        assert left == 50 + arrived - drew, on
    assert set(grams) == {TODAY, *came, *held}
    # of its jar alone: twice 20 g, and then not enough
    assert stock.runs_out == date(2027, 1, 25)


def test_what_comes_on_the_day_it_is_needed_is_drawn_on_it() -> None:
    known, made, _ = _jar()
    needed = date(2027, 1, 25)
    orders = tuple(replace(order, arrives=needed) for order in made.orders)
    runs = running(known, "salt", orders)
    ends = {step.on: step.with_orders // PER_UNIT[Kind.MASS] for step in runs.steps}
    came = sum(order.amount // PER_UNIT[Kind.MASS] for order in orders)
    # 10 g left in the jar is not enough for 20 g
    assert ends[needed] == 50 + came - 60


def test_stock_never_rises_but_when_something_comes(house: House) -> None:
    known, made = house
    for order in made.orders[:4]:
        for before, after in pairwise(running(known, order.line, made.orders).steps):
            if "comes" not in after.what:
                assert after.with_orders <= before.with_orders, (order.line, after)


def test_a_load_without_a_limit_has_no_line(figures: list[Any]) -> None:
    head = level_of(*_jar()).head
    day = LoadDay(TODAY, 40, 20)
    load_picture(Load(head, TODAY, TODAY + timedelta(days=7), 0, (day,), ()))
    assert drawn(figures[0], 1.6) == []
