"""Every number and day in a file is the plan's: of the college, and of houses by chance."""

from __future__ import annotations

import csv
import io
import re
from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass, replace
from datetime import date, datetime, time, timedelta
from pathlib import Path
from typing import Any

import houses
import icalendar
import pytest
from random_houses import random_house

from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Booking, Facts, Firmness
from stockroom.planning.plan import plan
from stockroom.reports.files.calendar import Calendar, calendar_of
from stockroom.reports.files.calendar_ics import calendar_bytes
from stockroom.reports.files.csv_out import buying_csv, usage_csv
from stockroom.reports.files.handover_parts import Job
from stockroom.reports.files.handover_week import first_week
from stockroom.reports.files.morning import morning_of
from stockroom.reports.files.workbook_sheets import workbook_of
from stockroom.reports.json_plan import plan_json
from stockroom.reports.words import weekday_and_day
from stockroom.service.sheets import known_and_planned

SEEDS = (6, 9, 13, 29, 34, 35, 36, 40)
WHOLE = timedelta(days=1)
DAY = r"([A-Z]\w+\s\d+\s[A-Z]\w+)"
POUNDS = re.compile(r"£(\d+)\.(\d\d)")

House = tuple[Facts, Plan]
Span = tuple[date, date]


@pytest.fixture(scope="module", params=["college", *SEEDS])
def house(request: pytest.FixtureRequest, college_file: Path) -> House:
    if request.param == "college":
        return known_and_planned(college_file, as_at=houses.MONDAY)
    known = random_house(request.param)
    return known, plan(known)


def pence_in(text: str) -> int:
    return sum(100 * int(pounds) + int(pence) for pounds, pence in POUNDS.findall(text))


# -- the calendar ---------------------------------------------------------------------


def whole(days: Iterable[date | None]) -> Counter[Span]:
    return Counter((on, on + WHOLE) for on in days if on is not None)


def moment(on: date, minute: int) -> datetime:
    return datetime.combine(on, time()) + timedelta(minutes=minute)


def planned_days(known: Facts, made: Plan) -> dict[str, Counter[Span]]:
    """What a calendar has to hold, from the plan and the bookings alone: first and end by kind."""
    now = made.as_at
    ends = {b.number: b.minute + b.lasts_minutes for b in known.bookings}
    held = [
        b
        for b in known.bookings
        if b.firmness not in (Firmness.DROPPED, Firmness.DONE)
        and max(known.start, now) <= b.on <= known.end
    ]
    kinds: dict[str, Counter[Span]] = {
        "make": whole(m.on for m in made.makes if m.ready == m.on),
        "start": whole(m.on for m in made.makes if m.ready > m.on),
        "finish": whole(m.finish_on for m in made.makes if m.finish_on and m.finish_on > m.on),
        "order": whole(max(o.order_by, now) for o in made.orders),
        "delivery": whole(max(one.expected, now) for one in made.on_order),
        "booking": Counter(
            (moment(b.on, b.minute), moment(b.on, b.minute + b.lasts_minutes)) for b in held
        ),
        "destroy": Counter(
            (
                moment(w.on, min(ends[w.booking], w.destroy_by)),
                moment(w.on, w.destroy_by),
            )
            for w in made.watch
            if not w.ticked_by
        ),
    }
    for what in {check.what for check in made.checks}:
        kinds[what] = whole(check.best for check in made.checks if check.what == what)
    return {kind: spans for kind, spans in kinds.items() if spans}


def written_days(calendar: Calendar) -> dict[str, Counter[Span]]:
    kinds: dict[str, Counter[Span]] = {}
    for event in icalendar.Calendar.from_ical(calendar_bytes(calendar)).walk("VEVENT"):
        (kind,) = map(str, event.decoded("categories"))
        span: Span = event.decoded("dtstart"), event.decoded("dtend")
        kinds.setdefault(kind, Counter())[span] += 1
    return kinds


def test_every_entry_begins_and_ends_when_the_plan_says(house: House) -> None:
    known, made = house
    found = written_days(calendar_of(known, made))
    found.pop("day before", None)
    assert found == planned_days(known, made)


def test_late_classes_end_and_are_destroyed_on_the_day_after(house: House) -> None:
    """Every class moved to 22:30: what follows it falls past midnight."""
    moved = tuple(replace(b, minute=1350, lasts_minutes=120) for b in house[0].bookings)
    late = replace(house[0], bookings=moved)
    made = plan(late)
    found = written_days(calendar_of(late, made))
    found.pop("day before", None)
    assert found == planned_days(late, made)


def test_entries_of_orders_and_makes_say_the_plan_s_money_and_days(house: House) -> None:
    works = [entry.work for entry in calendar_of(*house).entries]
    orders = [" ".join(work.more) for work in works if work.kind == "order"]
    assert sum(map(pence_in, orders)) == sum(order.pence for order in house[1].orders)
    told = [found for text in orders for found in re.findall(rf"needed {DAY}", text)]
    assert Counter(told) == Counter(weekday_and_day(o.need_by) for o in house[1].orders)
    makes = " ".join(" ".join(w.more) for w in works if w.kind in ("make", "start"))
    latest = re.findall(rf"\bon {DAY} at the latest", makes)
    meant = [weekday_and_day(m.latest) for m in house[1].makes if m.latest > m.on]
    assert Counter(latest) == Counter(meant)


# -- the workbook ---------------------------------------------------------------------

OWN = {"subject", "bookings", "year before", "unit then", "groups then", "shares £"}
SHEETS = {
    "Needs": "needs", "Makes": "makes", "Checks": "checks", "Orders": "orders",
    "On order": "on_order", "Past": "past", "Usage": "usage", "Short": "short",
    "Levels": "levels", "Guesses": "guesses", "Notes": "notes",
}  # fmt: skip


def table(house: House, name: str) -> list[dict[str, Any]]:
    (sheet,) = [one for one in workbook_of(*house).sheets if one.name == name]
    return [dict(zip(sheet.headings, row, strict=True)) for row in sheet.rows]


def as_cell(value: Any) -> Any:
    if isinstance(value, list):
        return "; ".join(value) or None
    if isinstance(value, bool):
        return "yes" if value else None
    return None if value == "" else value


def test_every_cell_of_the_workbook_is_that_of_the_plan_as_data(house: House) -> None:
    data = plan_json(house[1])
    for name, key in SHEETS.items():
        rows = table(house, name)
        assert len(rows) == len(data[key]), name
        for row, said in zip(rows, data[key], strict=True):
            for heading in row.keys() - OWN:
                field = {"what": "text"}.get(heading) if name in ("Guesses", "Notes") else None
                field = field or heading.removesuffix(" £").replace(" ", "_")
                assert row[heading] == as_cell(said[field]), (name, heading)


def test_shares_in_the_workbook_add_up_to_the_penny(house: House) -> None:
    for row, order in zip(table(house, "Orders"), house[1].orders, strict=True):
        parts = [each.rsplit(" ", 1) for each in str(row["shares £"] or "").split(", ") if each]
        pence = {code: round(100 * float(pounds)) for code, pounds in parts}
        assert pence == dict(order.shares)
        assert sum(pence.values()) == round(100 * row["cost £"]) == order.pence


def test_the_year_before_in_the_workbook_is_the_plan_s(house: House) -> None:
    told = table(house, "Usage")
    for row, use in zip(told, house[1].usage, strict=True):
        if use.before is None:
            assert (row["year before"], row["groups then"]) == (None, None)
        else:
            assert row["year before"] == pytest.approx(use.before / PER_UNIT[use.kind], rel=1e-5)
            assert row["groups then"] == use.groups_before


def test_each_amount_taken_stands_on_the_day_it_is_taken(house: House) -> None:
    made = house[1]
    kinds = [(need.ref, need.booking.on, d) for need in made.needs for d in need.draws if d.bottle]
    kinds += [(make.id, make.on, draw) for make in made.makes for draw in make.sources]
    told = [(r["for"], r["on"], r["bottle"], r["amount"]) for r in table(house, "Taken from")]
    assert told == [
        (ref, iso(on), d.bottle or None, pytest.approx(d.amount / PER_UNIT[d.kind], rel=1e-5))
        for ref, on, d in kinds
    ]


def test_bookings_in_the_workbook_are_all_those_of_the_term(house: House) -> None:
    known = house[0]

    def said(each: Booking) -> tuple[object, ...]:
        begins = f"{each.minute // 60:02d}:{each.minute % 60:02d}"
        spare = pytest.approx(each.spare / 10)
        return each.number, each.on.isoformat(), begins, each.lasts_minutes, each.groups, spare

    # its last day is part of a term
    last = max(b.on for b in known.bookings)
    short = replace(known, end=last)
    told = [
        (r["booking"], r["on"], r["begins"], r["minutes"], r["groups"], r["spare %"])
        for r in table((short, house[1]), "Bookings")
    ]
    assert told == [said(b) for b in known.bookings if known.start <= b.on <= last]


# -- tables to read in ----------------------------------------------------------------


def read(content: bytes) -> list[dict[str, str]]:
    return list(csv.DictReader(io.StringIO(content.decode("utf-8"), newline="")))


def iso(when: date | None) -> str:
    return when.isoformat() if when else ""


def test_every_field_of_the_buying_table_is_its_order_s(house: House) -> None:
    orders = {order.id: order for order in house[1].orders}
    rows = read(buying_csv(house[1]))
    assert {row["id"] for row in rows} == set(orders)
    assert len(rows) == len(orders)
    for row in rows:
        order = orders[row["id"]]
        assert (row["order_by"], row["need_by"], row["arrives"]) == (
            iso(order.order_by),
            iso(order.need_by),
            iso(order.arrives),
        )
        assert row["falls_below"] == iso(order.falls_below)
        assert row["runs_out"] == iso(order.runs_out)
        assert (int(row["packs"]), int(row["late_open_days"])) == (order.packs, order.late)
        assert pence_in(f"£{row['cost']}") == order.pence


def test_days_below_and_out_stand_in_their_own_columns(house: House) -> None:
    """Of most houses one of the two is blank, so that a swap would not show."""
    below, out = date(2027, 2, 3), date(2027, 2, 17)
    if not house[1].orders:
        return
    order = replace(house[1].orders[0], falls_below=below, runs_out=out)
    one = replace(house[1], orders=(order,))
    (row,) = read(buying_csv(one))
    assert (row["falls_below"], row["runs_out"]) == (iso(below), iso(out))
    (cells,) = table((house[0], one), "Orders")
    assert (cells["falls below"], cells["runs out"]) == (iso(below), iso(out))


def test_the_usage_table_has_every_use_with_its_own_figures(house: House) -> None:
    made = house[1]
    uses = [*made.usage, *made.drawn, *made.written_off]
    if uses:
        # spilled, and known of the year before: the college has neither as at its first day
        first = replace(uses[0], spare=uses[0].amount // 3, groups=7, before=12_000_000)
        first = replace(first, groups_before=5)
        made = replace(made, written_off=(*made.written_off, first))
        uses.append(first)
    rows = read(usage_csv(made))
    assert len(rows) == len(uses)
    for row, use in zip(rows, uses, strict=True):
        unit = PER_UNIT[use.kind]
        assert float(row["amount"]) == pytest.approx(use.amount / unit, rel=1e-5)
        assert float(row["spare"]) == pytest.approx(use.spare / unit, rel=1e-5)
        assert (int(row["groups"] or 0), row["groups_year_before"]) == (
            use.groups,
            str(use.groups_before or ""),
        )
        if use.before is not None:
            assert float(row["year_before"]) == pytest.approx(use.before / unit, rel=1e-5)
        parts = [each.split(" ") for each in row["bookings"].split("; ") if each]
        assert [n for n, _ in parts] == [number for number, _ in use.by_booking]
        assert [float(p) for _, p in parts] == pytest.approx(
            [part / unit for _, part in use.by_booking], rel=1e-4
        )


# -- the morning note -----------------------------------------------------------------


@pytest.mark.parametrize("later", [0, 1, 8, 24])
def test_a_note_holds_what_is_due_and_counts_it(house: House, later: int) -> None:
    known = replace(house[0], as_at=house[0].as_at + timedelta(days=later))
    made = plan(known)
    note, now = morning_of(known, made), made.as_at
    parts = {part.title: part.rows for part in note.parts}
    rest = sum(len(rows) for name, rows in parts.items() if name not in UNCOUNTED)
    assert note.count == rest
    orders = [order for order in made.orders if order.order_by <= now]
    assert [row.what.split(":")[0] for row in parts.get("ORDER", ())] == [
        f"{o.item}, {o.packs} × {o.pack}".replace("mol/dm3", "mol/dm³") for o in orders
    ]
    for row, order in zip(parts.get("ORDER", ()), orders, strict=True):
        told = "; ".join(row.more)
        assert pence_in(told) == order.pence
        assert f"needed {weekday_and_day(order.need_by)}" in told
    coming = [one.number for one in made.on_order if one.expected <= now]
    assert [row.what.rsplit(" ", 1)[1] for row in parts.get("DELIVERIES", ())] == coming
    begun = [make for make in made.makes if make.on == now]
    assert len(parts.get("MAKE", ())) == sum(make.ready == now for make in begun)
    assert len(parts.get("START", ())) == sum(make.ready > now for make in begun)
    ended = [make for make in made.makes if make.finish_on == now and make.on < now]
    assert len(parts.get("FINISH", ())) == len(ended)


UNCOUNTED = ("CLASSES", "WOULD SAVE WORK")


def test_a_class_is_asked_for_from_the_day_after_it_for_a_fortnight() -> None:
    salt = houses.solid()
    known = houses.house(
        [salt],
        recipes=[houses.recipe(houses.wants(salt, houses.g(1)))],
        bookings=[houses.booking("K01", "01-12")],
        bottles=[houses.bought_bottle("B01", salt, houses.g(500))],
    )

    def asked(on: date) -> bool:
        then = replace(known, as_at=on, start=known.start)
        return any(part.title == "NOT WRITTEN DOWN" for part in morning_of(then, plan(then)).parts)

    days = [houses.day("01-12") + timedelta(days=n) for n in (-1, 0, 1, 14, 15)]
    assert [asked(on) for on in days] == [False, False, True, True, False]


# -- the handover ---------------------------------------------------------------------


@dataclass(frozen=True)
class Beside:
    """What the store tells, as little of it as there is."""

    store: str = "prep.sqlite"
    terms: int = 1
    settings: tuple[tuple[str, str], ...] = ()
    closures: tuple[Any, ...] = ()
    changes: tuple[Any, ...] = ()
    hands: tuple[Any, ...] = ()
    backup: tuple[date, str] | None = None


def jobs_of(house: House) -> dict[str, list[Job]]:
    part = first_week(*house, house[1].as_at, Beside())
    return {point.name: list(point.jobs) for point in part.points}


def test_what_is_typed_for_an_order_comes_to_its_price_and_its_day(house: House) -> None:
    now, last = house[1].as_at, house[1].as_at + timedelta(days=13)
    due = [order for order in house[1].orders if order.order_by <= last]
    jobs = [job for row in jobs_of(house).values() for job in row if job.text.startswith("Order ")]
    assert len(jobs) == len(due)
    # day by day, and what is late on the first
    meant = sorted(due, key=lambda order: max(order.order_by, now))
    for job, order in zip(jobs, meant, strict=True):
        typed = [re.search(r'" (\d+) "[^"]*"(?: --price (\S+))?', c) for c in job.commands]
        whole_price = sum(int(m[1]) * pence_in(f"£{m[2] or '0.00'}") for m in typed if m)
        # packs of one size share what they cost, to the penny below
        assert whole_price <= order.pence < whole_price + max(order.packs, 1)
        days = {on for c in job.commands for on in re.findall(r"--expected (\S+)", c)}
        assert days <= {order.arrives.isoformat()}
        assert f", expected {order.arrives}" in job.text or "expected" not in job.text


def test_what_is_typed_for_a_make_is_the_volume_planned(house: House) -> None:
    last = house[1].as_at + timedelta(days=13)
    jobs = [job for row in jobs_of(house).values() for job in row if job.text.startswith("Make ")]
    typed = [found for job in jobs for found in re.findall(r'"([\d.]+) cm3"', job.commands[0])]
    meant = sorted((m for m in house[1].makes if m.on <= last), key=lambda make: make.on)
    volumes = [make.volume / PER_UNIT[Kind.VOLUME] for make in meant]
    assert [float(each) for each in typed] == pytest.approx(volumes)
