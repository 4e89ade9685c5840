"""Rows into facts: a store as the planner sees it, as at one day.

Plain driver, a handful of questions, sums taken in SQL. `snapshot_lines.py`
reads what does not move (lines, methods, recipes), `snapshot_bottles.py` what
stands on the shelves.
"""

from __future__ import annotations

from dataclasses import replace
from datetime import date, timedelta

from stockroom.errors import BadDate
from stockroom.measure.amounts import Amount
from stockroom.measure.days import parse_time
from stockroom.measure.workdays import Calendar
from stockroom.planning.facts import (
    Balance,
    Booking,
    Department,
    Facts,
    Firmness,
    Glass,
    House,
    Place,
    Vessel,
)
from stockroom.settings import StoreAt
from stockroom.store.kinds import DESTROYED, MIXTURE
from stockroom.store.printed_plans import usual_of
from stockroom.store.reading import Reader, Row, reading
from stockroom.store.snapshot_bottles import bottles_of, drawn_of, written_off_of
from stockroom.store.snapshot_lines import lines_of, methods_of, recipes_of
from stockroom.store.snapshot_orders import former_of, placed_of, year_before_of

SPAN = timedelta(days=90)
"""How far ahead to look when no term is written down: about a term."""


def facts(path: StoreAt, as_at: date, start: date | None = None, end: date | None = None) -> Facts:
    """Everything the planner may know of the store at `path`, as at one day.

    Entries that happened later are left out, and bottles that were not there
    yet. The period is the term `as_at` lies in, else the next one, else 90
    days from `as_at`; `start` and `end` take its place where given.

    Raises: StoreTrouble; BadDate when the period runs backwards.
    """
    with reading(path) as reader:
        return facts_from(reader, as_at, start, end)


def facts_from(
    reader: Reader,
    as_at: date,
    start: date | None = None,
    end: date | None = None,
    known_on: date | None = None,
) -> Facts:
    """The same as `facts`, from a store already open; bottles and draws as known on a day."""
    settings = _settings(reader)
    first, last = _period(reader, as_at, start, end)
    before = year_before_of(reader, start or first, end or last)
    bookings = _bookings(
        reader, settings, min(first, start or first, as_at), max(last, end or last)
    )
    drawn = drawn_of(reader, as_at, known_on)
    # what a class still to come has had, even of a bottle thrown away since
    to_come = {one.number for one in bookings if one.on >= as_at}
    served = {one.bottle for one in drawn if to_come.intersection(one.booking.split(";"))}
    every = bottles_of(reader, as_at, known_on, gone=True)
    return Facts(
        as_at=as_at,
        start=start or first,
        end=end or last,
        horizon=max(last, end or last),
        calendar=calendar_of(reader),
        house=_house(reader, settings),
        lines=lines_of(reader),
        methods=methods_of(reader),
        recipes=recipes_of(reader),
        bookings=bookings,
        bottles=tuple(b for b in every if b.left or not b.record.gone or b.number in served),
        balances=_balances(reader),
        glassware=_glassware(reader),
        vessels=_vessels(reader),
        departments=_departments(reader),
        places=places_of(reader),
        drawn=drawn,
        written_off=written_off_of(reader, as_at, known_on),
        usual=usual_of(reader, as_at),
        placed=placed_of(reader, as_at, min(first, as_at)),
        year_before=before,
        former=former_of(reader, before),
        former_bookings=_bookings(reader, settings, *before),
    )


def _settings(reader: Reader) -> dict[str, str]:
    return {row["setting"]: row["value"] for row in reader.rows("house", "")}


def _period(reader: Reader, as_at: date, start: date | None, end: date | None) -> tuple[date, date]:
    """The term the period falls in; its last day never before the first day asked for."""
    # a period asked for in another term is that term's
    asked = start or as_at
    # the earliest not yet over: the one it lies in, else the next
    terms = reader.rows("term", "WHERE ends_on >= ? ORDER BY starts_on LIMIT 1", asked.isoformat())
    # without a term there is still a plan: ninety days are about one
    first, last = (_span(terms[0])) if terms else (asked, asked + SPAN)
    if (end or last) < (start or first):
        raise BadDate(
            f"The plan would run from {start or first} to {end or last}, backwards.",
            "Give --from a day before --to.",
        )
    return first, last


def _span(row: Row) -> tuple[date, date]:
    return date.fromisoformat(row["starts_on"]), date.fromisoformat(row["ends_on"])


def calendar_of(reader: Reader) -> Calendar:
    """The open days and staffed hours of the house."""
    settings = _settings(reader)
    closed = tuple(_span(row) for row in reader.rows("closure", "ORDER BY starts_on, id"))
    usual = Calendar()
    return Calendar(
        closed,
        _minute(settings.get("staffed_from"), usual.open_from),
        _minute(settings.get("staffed_to"), usual.open_to),
    )


def _minute(written: str | None, usual: int) -> int:
    return parse_time(written) if written else usual


def _house(reader: Reader, settings: dict[str, str]) -> House:
    usual = House()
    vessels = [row["size"] for row in reader.rows("vessel")]
    return House(
        name=settings.get("name", usual.name),
        practice=settings.get("practice") == "yes",
        margin_days=int(settings.get("margin_open_days", usual.margin_days)),
        default_lead=int(settings.get("lead_open_days", usual.default_lead)),
        batch_step=_volume(settings.get("batch_step_cm3", "50")),
        heel_floor=_volume(settings.get("heel_floor_cm3", "50")),
        finish_day_before=settings.get("finish_day_before", "yes") == "yes",
        # None: no vessel is written down, so none bounds a batch
        largest_vessel=max(vessels, default=None),
        day_minutes=int(settings.get("day_minutes", usual.day_minutes)),
    )


def _volume(cubic: str) -> int:
    return Amount.cm3(float(cubic)).micro


def bookings_between(reader: Reader, first: date, last: date) -> tuple[Booking, ...]:
    """The bookings of the days from `first` to `last`, both counted, by day and time."""
    return _bookings(reader, _settings(reader), first, last)


def _bookings(
    reader: Reader, settings: dict[str, str], first: date, last: date
) -> tuple[Booking, ...]:
    lasts = int(settings.get("session_minutes", "100"))
    recipes = {row["id"]: (row["recipe"], row["version"]) for row in reader.rows("recipe")}
    payers = reader.pairs("SELECT id, department FROM department")
    # the last word counts: a tick may have been taken back
    ticks = reader.pairs(_TICKED, MIXTURE)
    rows = reader.rows(
        "booking",
        "WHERE on_day BETWEEN ? AND ? ORDER BY on_day, minute, number",
        first.isoformat(),
        last.isoformat(),
    )
    return tuple(
        replace(_booking(row, recipes, payers, lasts), destroyed_by=ticks.get(row["id"], ""))
        for row in rows
    )


_TICKED = f"""
    SELECT booking_id, CASE after WHEN '{DESTROYED}' THEN by ELSE '' END
    FROM booking_change WHERE what = ? ORDER BY id
"""


def _booking(
    row: Row, recipes: dict[int, tuple[str, int]], payers: dict[int, str], lasts: int
) -> Booking:
    recipe, version = recipes[row["recipe_id"]]
    return Booking(
        number=row["number"],
        recipe=recipe,
        version=version,
        on=date.fromisoformat(row["on_day"]),
        minute=row["minute"],
        groups=row["groups"],
        spare=row["spare"],
        department=payers[row["department_id"]],
        firmness=Firmness(row["firmness"]),
        room=row["room"],
        lasts_minutes=lasts,
    )


def _away(reader: Reader, table: str, owner: str) -> dict[int, tuple[tuple[date, date], ...]]:
    """The days each thing is away, by its row number, in order."""
    found: dict[int, tuple[tuple[date, date], ...]] = {}
    for row in reader.rows(table, "ORDER BY starts_on, id"):
        found[row[owner]] = (*found.get(row[owner], ()), _span(row))
    return found


def _balances(reader: Reader) -> tuple[Balance, ...]:
    away = _away(reader, "balance_away", "balance_id")
    return tuple(
        Balance(row["balance"], row["step"], away.get(row["id"], ()))
        for row in reader.rows("balance")
    )


def _glassware(reader: Reader) -> tuple[Glass, ...]:
    away = _away(reader, "glassware_away", "glassware_id")
    return tuple(
        Glass(
            row["glass"],
            row["kind"],
            row["size"],
            row["glass_class"],
            row["step"],
            away.get(row["id"], ()),
        )
        for row in reader.rows("glassware")
    )


def _vessels(reader: Reader) -> tuple[Vessel, ...]:
    away = _away(reader, "vessel_away", "vessel_id")
    return tuple(
        Vessel(row["vessel"], row["size"], away.get(row["id"], ())) for row in reader.rows("vessel")
    )


def _departments(reader: Reader) -> tuple[Department, ...]:
    rows = reader.rows("department")
    return tuple(Department(row["department"], row["name"], row["left_pence"]) for row in rows)


def places_of(reader: Reader) -> tuple[Place, ...]:
    """Every place of the house."""
    return tuple(
        Place(row["place"], row["name"], row["temperature_c"], row["meant_for"])
        for row in reader.rows("place")
    )
