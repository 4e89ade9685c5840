"""Small houses built by hand: a few lines, methods, recipes and bottles, and their plan.

Everything is in cm³ and g on the way in and whole micro-units in the facts.
The house opens on Monday 4 January 2027, is shut at weekends only, measures to
1 cm³ unless a test says otherwise, and works from 08:00 to 16:30.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace
from datetime import date
from typing import Any

from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.rules import Origin, Rule, RuleKind
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.periods import Period
from stockroom.measure.workdays import Calendar
from stockroom.planning.decisions import Answer, Make, Outcome, Plan
from stockroom.planning.facts import (
    Booking,
    Bottle,
    Closeness,
    Facts,
    Form,
    House,
    Ingredient,
    Line,
    Method,
    Pack,
    Per,
    Recipe,
    Requirement,
)
from stockroom.planning.plan import plan

MONDAY = date(2027, 1, 4)


def day(text: str) -> date:
    """ "01-26" is 26 January 2027; a whole ISO date is itself."""
    return date.fromisoformat(text if len(text) > 5 else f"2027-{text}")


def cm3(volume: float) -> int:
    """cm³ as whole microlitres."""
    return Amount.cm3(volume).micro


def g(mass: float) -> int:
    """g as whole micrograms."""
    return Amount.grams(mass).micro


# -- rules ----------------------------------------------------------------------------


def days(count: int) -> Period:
    """A period of so many days."""
    return Period(count, "days")


def keeps(count: int, origin: Origin = Origin.MADE, **more: Any) -> Rule:
    """A plain life of so many days."""
    return Rule(RuleKind.LIFE, days(count), origin, **more)


def found(on: str, strength: float) -> Check:
    """A strength found on a day."""
    return Check(day(on), CheckKind.FOUND, True, strength)


def looked(on: str, passed: bool = True) -> Check:
    """A look on a day, good unless said otherwise."""
    return Check(day(on), CheckKind.LOOKED, passed)


# -- lines and methods ----------------------------------------------------------------


def solid(name: str = "salt", molar_mass: float | None = 100.0, **more: Any) -> Line:
    """A bought solid; 100 g/mol unless said otherwise, so that sums can be done in the head."""
    return Line(name, name, name, Form.SOLID, Kind.MASS, molar_mass=molar_mass, **more)


def solution(strength: float | None, name: str = "salt solution", **more: Any) -> Line:
    """A solution in mol/dm³, its key the name with the strength ("saturated" for None)."""
    text = "saturated" if strength is None else f"{strength:g} mol/dm3"
    more = {"substance": name, "unit": "mol/dm3", **more}
    return Line(
        f"{name} {text}", name, form=Form.SOLUTION, kind=Kind.VOLUME, strength=strength,
        strength_text=text, **more,
    )  # fmt: skip


def made_from(line: Line, *sources: Line | Ingredient, minutes: int = 10, **more: Any) -> Method:
    """A method: each plain line is the solute, worked out from the strengths."""
    row = tuple(x if isinstance(x, Ingredient) else Ingredient((x.key,)) for x in sources)
    return Method(line.key, row, minutes, **more)


def pack(size: int, pounds: float, lead: int | None = 10) -> Pack:
    """A pack of so many micro-units, at a price in pounds."""
    return Pack(size, "pack", round(100 * pounds), lead)


# -- recipes and bookings ---------------------------------------------------------------


def wants(line: Line, amount: int, number: int = 1, **more: Any) -> Requirement:
    """A recipe line asking for so many micro-units per class, close, at the line's strength."""
    more = {"per": Per.CLASS, "closeness": Closeness.CLOSE, **more}
    strengths = {"lowest": line.strength, "highest": line.strength}
    return Requirement(number, line.key, amount, **{**strengths, **more})


def recipe(*requirements: Requirement, code: str = "R01", **more: Any) -> Recipe:
    """A recipe of these lines, numbered in their order."""
    numbered = tuple(replace(one, number=n) for n, one in enumerate(requirements, 1))
    return Recipe(code, 1, f"practical {code}", numbered, **more)


def booking(number: str, on: str, minute: int = 555, **more: Any) -> Booking:
    """One group, no spare, 09:15, on recipe R01 unless said otherwise."""
    usual = {"recipe": "R01", "version": 1, "groups": 1, "spare": 0, "department": "CH"}
    return Booking(number, on=day(on), minute=minute, **{**usual, **more})


# -- bottles ------------------------------------------------------------------------------


def made_bottle(number: str, line: Line, left: int, on: str = "01-04", **record: Any) -> Bottle:
    """A bottle made here on a day."""
    kept = Record(**{"made": day(on), "nominal": line.strength, **record})
    return Bottle(number, line.key, left, left, kept, made_here=True)


def bought_bottle(number: str, line: Line, left: int, on: str = "01-04", **record: Any) -> Bottle:
    """A bought bottle received on a day, sealed unless `opened` is given."""
    kept = Record(**{"received": day(on), "nominal": line.strength, **record})
    return Bottle(number, line.key, left, left, kept)


# -- the house ----------------------------------------------------------------------------


def house(
    lines: Iterable[Line],
    *,
    methods: Iterable[Method] = (),
    recipes: Iterable[Recipe] = (),
    bookings: Iterable[Booking] = (),
    bottles: Iterable[Bottle] = (),
    **more: Any,
) -> Facts:
    """Facts of a small house; whatever is not said is as in the module's words."""
    more = {"as_at": MONDAY, "end": day("03-26"), "house": House(batch_step=cm3(1)), **more}
    return Facts(
        start=more.pop("start", more["as_at"]),
        calendar=more.pop("calendar", Calendar()),
        lines={line.key: line for line in lines},
        methods={method.line: method for method in methods},
        recipes={(one.code, one.version): one for one in recipes},
        bookings=tuple(bookings),
        bottles=tuple(bottles),
        **more,
    )


def planned(*args: Any, **more: Any) -> Plan:
    """The plan of `house(...)`."""
    return plan(house(*args, **more))


def outcomes(made: Plan) -> dict[str, Outcome]:
    """What became of each need, by its reference."""
    return {answer.ref: answer.outcome for answer in made.needs}


def answer(made: Plan, ref: str) -> Answer:
    """The one answer to a need."""
    (one,) = (answer for answer in made.needs if answer.ref == ref)
    return one


def make_of(made: Plan, line: Line) -> Make:
    """The one make of a line."""
    (one,) = (make for make in made.makes if make.line == line.key)
    return one


def reasons(made: Plan, ref: str) -> str:
    """All the reasons of a need in one text."""
    return "; ".join(answer(made, ref).reasons)
