"""Readers for the tables that describe the house: settings, days, places, equipment."""

from __future__ import annotations

from datetime import date
from decimal import Decimal

from sqlmodel import SQLModel, col, select

from stockroom.chemistry.glassware import GlassKind, class_of
from stockroom.errors import BadAmount, BadDate, BadInput
from stockroom.measure.amounts import Amount
from stockroom.measure.days import format_time, parse_day, parse_time
from stockroom.measure.reading import read_number
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields, yes_or_no
from stockroom.store.likeness import plain, unknown
from stockroom.store.tables import (
    Balance,
    BalanceAway,
    Closure,
    Department,
    Glassware,
    GlasswareAway,
    House,
    Place,
    Term,
    Vessel,
    VesselAway,
)

_YES_NO = ("practice", "finish_day_before")
_VOLUMES = ("batch_step_cm3", "heel_floor_cm3")
# over a year of open days: a slip, or a supplier nobody would wait for
LONGEST_LEAD = 400
# wider than any house needs; beyond them a figure is in another unit, or a slip
_BOUNDS: dict[str, tuple[Decimal | int, int]] = {
    "margin_open_days": (0, 100),
    "lead_open_days": (0, LONGEST_LEAD),
    "session_minutes": (1, 600),
    # 0: no limit is kept; a whole day and a night are no figure for hands-on work
    "day_minutes": (0, 1440),
    # nothing can be measured to less than a microlitre
    "batch_step_cm3": (Decimal("0.001"), 10_000),
    "heel_floor_cm3": (0, 10_000),
}
_TIMES = ("staffed_from", "staffed_to")
# colder than any freezer here, hotter than any oven a bottle is kept in
_COLDEST, _HOTTEST = -90, 120
SETTINGS = ("name", "practice_day", *_YES_NO, *_BOUNDS, *_TIMES)


def read_setting(desk: Desk, fields: Fields) -> None:
    """One house setting; a setting given again takes the place of the old value.

    Raises: BadInput for a value that no plan could read.
    """
    setting = fields.need("setting")
    if setting not in SETTINGS:
        raise unknown("house setting", setting, SETTINGS)
    value = _canonical(setting, fields.need("value"))
    if setting in _TIMES:
        _check_hours(desk, setting, value)
    # settings are the one thing replaced and not added to; history does not lean on them
    desk.session.merge(House(setting=setting, value=value, source=fields.text("source")))


def _canonical(setting: str, value: str) -> str:
    """A setting in the one way of writing that every plan reads. Raises: BadInput, quoting it."""
    if setting in _TIMES:
        return format_time(parse_time(value, where=setting))
    if setting == "practice_day":
        return parse_day(value, where=setting).isoformat()
    if setting in _YES_NO:
        return "yes" if yes_or_no(value, where=setting) else "no"
    if setting in _BOUNDS:
        return _number(setting, value)
    return value


def _number(setting: str, value: str) -> str:
    number = read_number(value, where=setting)
    least, most = _BOUNDS[setting]
    if not least <= number <= most:
        raise BadAmount(
            f'{setting} "{value}" is not between {least} and {most}.', "Check the figure."
        )
    if setting not in _VOLUMES and number != int(number):
        raise BadAmount(f'{setting} "{value}" is not a whole number.', "Give a whole number.")
    # as plain digits: "2.0", "1 000" and "1e3" are all read differently or not at all
    return f"{number.normalize():f}"


def _check_hours(desk: Desk, setting: str, value: str) -> None:
    # compared with what was said alone: of two new hours the first must not meet a usual one
    said = {row.setting: row.value for row in desk.session.exec(select(House))} | {setting: value}
    start, end = (said.get(name) for name in _TIMES)
    if start and end and parse_time(start) >= parse_time(end):
        raise BadDate(
            f'{setting} "{value}": staffed from {start} to {end} runs backwards.',
            "Give the later of the two hours first, or check both.",
        )


def read_term(desk: Desk, fields: Fields) -> None:
    """A term; two terms never overlap."""
    name = new_name(desk, Term, "term", fields.need("term"))
    first, last = fields.span("from", "to")
    # a day in two terms would give two answers to "this term"
    for other in desk.session.exec(select(Term)):
        if other.starts_on <= last and first <= other.ends_on:
            raise BadDate(
                f"{name} ({first} to {last}) overlaps {other.term}"
                f" ({other.starts_on} to {other.ends_on}).",
                "Move one of them.",
            )
    row = Term(term=name, starts_on=first, ends_on=last, source=fields.text("source"))
    desk.save(row)


def read_closure(desk: Desk, fields: Fields) -> None:
    """Days the house is shut."""
    first, last = fields.span("from", "to")
    reason, source = fields.text("reason"), fields.text("source")
    desk.save(Closure(starts_on=first, ends_on=last, reason=reason, source=source))


def read_place(desk: Desk, fields: Fields) -> None:
    """A place bottles stand at."""
    row = Place(
        place=new_name(desk, Place, "place", fields.need("place"), typed="places"),
        name=fields.text("name"),
        temperature_c=temperature_of(fields, "temperature_c"),
        meant_for=fields.text("meant_for"),
        source=fields.text("source"),
    )
    desk.save(row)


def temperature_of(fields: Fields, column: str) -> float | None:
    """A place's temperature in °C, -90 to 120; None when blank. Raises: BadAmount."""
    return fields.within(column, _COLDEST, _HOTTEST, "In °C, and not in kelvin?")


def read_department(desk: Desk, fields: Fields) -> None:
    """A department and the pounds it has left; blank means no limit is kept."""
    code = fields.need("department")
    row = Department(
        department=new_name(desk, Department, "department", code, typed="departments"),
        name=fields.text("name"),
        left_pence=fields.pence("left_gbp"),
        source=fields.text("source"),
    )
    desk.save(row)


def read_balance(desk: Desk, fields: Fields) -> None:
    """A balance, or a further absence of one already entered."""
    name = fields.need("balance")
    found = desk.session.exec(select(Balance).where(Balance.balance == name)).first()
    step = fields.number("step_g")
    if found is None:
        if not step:
            raise BadInput(f"step_g of {name} is blank or 0.", "Give its step, as 0.01.")
        found = Balance(balance=name, step=Amount.grams(step).micro, source=fields.text("source"))
        desk.save(found)
    away = _absence(fields)
    if away:
        assert found.id is not None
        desk.save(BalanceAway(balance_id=found.id, starts_on=away[0], ends_on=away[1]))


def read_vessel(desk: Desk, fields: Fields) -> None:
    """A vessel to make up in, or a further absence of one already entered."""
    name, away = fields.need("vessel"), _absence(fields)
    found = desk.session.exec(select(Vessel).where(Vessel.vessel == name)).first()
    size = fields.volume("size_cm3")
    # the same vessel again without an absence says nothing new: a second one wants its own name
    if found is None or not away:
        name = new_name(desk, Vessel, "vessel", name)
        if not size:
            raise BadInput(f"size_cm3 of {name} is blank or 0.", "Give what it holds, as 2000.")
        found = Vessel(vessel=name, size=size, source=fields.text("source"))
        desk.save(found)
    if size and size != found.size:
        raise BadAmount(
            f"size_cm3 of {name} is {fields.text('size_cm3')} cm³ here, and"
            f" {found.size / 1000:g} cm³ where it was entered.",
            "Leave the size blank, or give the other vessel another name.",
        )
    if away:
        assert found.id is not None
        desk.save(VesselAway(vessel_id=found.id, starts_on=away[0], ends_on=away[1]))


def read_glassware(desk: Desk, fields: Fields) -> None:
    """A piece of measuring glass, or a further absence of one already entered."""
    name = fields.need("glass")
    found = desk.session.exec(select(Glassware).where(Glassware.glass == name)).first()
    if found is None:
        found = _new_glass(name, fields)
        desk.save(found)
    away = _absence(fields)
    if away:
        assert found.id is not None
        desk.save(GlasswareAway(glassware_id=found.id, starts_on=away[0], ends_on=away[1]))


def _new_glass(name: str, fields: Fields) -> Glassware:
    kind = fields.choice("kind", GlassKind)
    # read for its check alone: what nobody looked at stays blank
    glass_class = fields.text("class") and class_of(fields.text("class"))
    step, size = fields.volume("step_cm3"), fields.volume("size_cm3")
    if not size:
        raise BadInput(f"size_cm3 of {name} is blank or 0.", "Give what it measures, as 25.")
    if step and step >= size:
        raise BadAmount(
            f"step_cm3 of {name} is not below its size of {fields.text('size_cm3')} cm³.",
            "Give its finest mark, as 0.1; none for glass with one mark.",
        )
    return Glassware(
        glass=name,
        kind=kind,
        size=size,
        glass_class=glass_class,
        step=step or None,
        source=fields.text("source"),
    )


def _absence(fields: Fields) -> tuple[date, date] | None:
    """The days something is away; None when it is not. Raises: BadInput, BadDate for half of it."""
    # one day without the other is a slip, whichever of them it is
    away = fields.text("away_from") or fields.text("away_to")
    return fields.span("away_from", "away_to") if away else None


def new_name(
    desk: Desk, table: type[SQLModel], column: str, name: str, *, what: str = "", typed: str = ""
) -> str:
    """The name itself, when no row of the table has it yet.

    `what` a row is called, if not as its column; `typed` names the table for
    those whose rows can be corrected. Raises: BadInput.
    """
    names = desk.session.exec(select(col(getattr(table, column)))).all()
    if plain(name) in {plain(str(other)) for other in names}:
        mend = f"To correct it: stockroom change {typed} '{name}' COLUMN=VALUE --why …"
        raise BadInput(
            f'There is already a {what or column} "{name}".',
            mend if typed else "Give another name.",
        )
    return name
