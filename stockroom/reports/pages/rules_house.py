"""Sections of the house rules: places, what is settled once, equipment with its absences."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping
from datetime import date

from stockroom.measure.amounts import Kind
from stockroom.measure.days import format_time
from stockroom.planning.facts import Facts
from stockroom.reports.pages.rules_parts import Row, Section, column_label
from stockroom.reports.words import amount, counted, day_in_words

_ABOUT = {
    "name": "what stands at the top of every sheet",
    "staffed_from": "nothing is made earlier",
    "staffed_to": "nothing is made later",
    "margin_open_days": "open days an order is to come before its booking",
    "lead_open_days": "open days an order takes where nobody wrote it",
    "session_minutes": "how long a class lasts",
    "day_minutes": "hands-on minutes that fill a day; 0: no limit is kept",
    "batch_step_cm3": "batches are rounded up to a whole number of these",
    "heel_floor_cm3": "less than this left over is not kept as stock",
    "finish_day_before": "whether what is not marked fresh is ready the open day before",
}
"""What each setting is for."""

_CALLED = {
    "margin_open_days": "Margin, open days",
    "lead_open_days": "Usual lead time, open days",
    "session_minutes": "A class, minutes",
    "day_minutes": "A day's work, minutes",
    "heel_floor_cm3": "Smallest rest kept, cm³",
}


def places(known: Facts) -> Section:
    """Where things stand, how warm, what for, and how many stand there."""
    stand = Counter(bottle.place for bottle in known.bottles)
    rows = [
        Row(
            (
                place.name,
                place.title,
                "not written" if place.temperature_c is None else f"{place.temperature_c:g} °C",
                place.meant_for,
                counted(stand[place.name], "bottle") if stand[place.name] else "none",
            ),
            key=place.name,
        )
        for place in known.places
    ]
    return Section(
        "places",
        "Places",
        "",
        ("Place", "Name", "How warm", "Meant for", "Stand there"),
        tuple(rows),
        change="places",
        empty="No place is written down.",
        add=("places", "Add a place"),
    )


def settings(known: Facts, written: Mapping[str, str]) -> Section:
    """What is settled once for the whole house; what nobody wrote is as usual."""
    rows = [
        Row((_setting(name), _value(known, written, name), about), key=name)
        for name, about in _ABOUT.items()
    ]
    return Section(
        "settings",
        "Settled for the whole house",
        "",
        ("What", "Now", "What it is for"),
        tuple(rows),
        change="house",
    )


def _setting(name: str) -> str:
    return _CALLED.get(name, column_label(name))


def _value(known: Facts, written: Mapping[str, str], name: str) -> str:
    if name in written:
        return written[name]
    house, calendar = known.house, known.calendar
    usual = {
        "name": house.name,
        "staffed_from": format_time(calendar.open_from),
        "staffed_to": format_time(calendar.open_to),
        "margin_open_days": str(house.margin_days),
        "lead_open_days": str(house.default_lead),
        "session_minutes": "100",
        "day_minutes": str(house.day_minutes),
        "batch_step_cm3": f"{house.batch_step / 1000:g}",
        "heel_floor_cm3": f"{house.heel_floor / 1000:g}",
        "finish_day_before": "yes" if house.finish_day_before else "no",
    }
    return f"{usual[name]}, as usual"


def equipment(known: Facts) -> tuple[Section, ...]:
    """Balances, vessels and measuring glass, each with the days it is away."""
    balances = [
        Row((each.name, amount(each.step, Kind.MASS), away(each.away, known.as_at)))
        for each in known.balances
    ]
    vessels = [
        Row((each.name, amount(each.size, Kind.VOLUME), away(each.away, known.as_at)))
        for each in known.vessels
    ]
    glass = [
        Row(
            (
                each.name,
                str(each.kind),
                amount(each.size, Kind.VOLUME),
                each.glass_class or "not looked",
                "one mark" if each.step is None else amount(each.step, Kind.VOLUME),
                away(each.away, known.as_at),
            )
        )
        for each in known.glassware
    ]
    return (
        _things("balances", "Balances", ("Balance", "Step", "Away"), balances, "balance"),
        _things("vessels", "Vessels", ("Vessel", "Holds", "Away"), vessels, "vessel"),
        _things(
            "glassware",
            "Measuring glass",
            ("Glass", "Kind", "Holds", "Class", "Finest mark", "Away"),
            glass,
            "piece of glass",
        ),
    )


def _things(
    table: str, title: str, head: tuple[str, ...], rows: Iterable[Row], one: str
) -> Section:
    return Section(
        table,
        title,
        "",
        head,
        tuple(rows),
        empty=f"No {one} is written down.",
        add=(table, f"Add a {one}, or days one is away"),
    )


def away(spans: Iterable[tuple[date, date]], seen_from: date) -> str:
    """The days something is away that are not over: "1 Feb 2027 to 12 Feb 2027"; "" for none."""
    ahead = [span for span in spans if span[1] >= seen_from]
    return "; ".join(f"{day_in_words(first)} to {day_in_words(last)}" for first, last in ahead)
