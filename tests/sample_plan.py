"""A small plan made by hand, for tests of what is printed; nothing in it was planned."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.findings import Finding
from stockroom.keeping.verdict import Condition
from stockroom.measure.amounts import Amount, Kind
from stockroom.planning.decisions import (
    Answer,
    CheckToDo,
    Draw,
    Level,
    Make,
    Order,
    Outcome,
    PastBottle,
    Plan,
    Short,
    Use,
)
from stockroom.planning.facts import Booking, Firmness, House

ACID_FIRST = "Acid into water, slowly, stirring, never the reverse."


def cubic(cm3: float) -> int:
    """cm³ as whole microlitres."""
    return Amount.cm3(cm3).micro


def grams(mass: float) -> int:
    """g as whole micrograms."""
    return Amount.grams(mass).micro


CLOCK = Booking("K08", "R01", 1, date(2027, 1, 26), 555, 8, 100, "CH", Firmness.FIRM, "LAB1")
FLAMES = Booking("K01", "R12", 1, date(2027, 1, 12), 555, 10, 100, "CH", Firmness.FIRM, "LAB1")

NEEDS = (
    Answer(
        ref="K08.3",
        booking=CLOCK,
        recipe_title="Iodine clock",
        line="sulfuric acid 0.250 mol/dm3",
        item="sulfuric acid",
        strength="0.250 mol/dm3",
        amount=cubic(1144),
        kind=Kind.VOLUME,
        outcome=Outcome.HAVE,
        draws=(Draw(cubic(1144), Kind.VOLUME, bottle="S04"),),
        closeness="close",
    ),
    Answer(
        ref="K08.2",
        booking=CLOCK,
        recipe_title="Iodine clock",
        line="hydrogen peroxide 0.100 mol/dm3",
        item="hydrogen peroxide",
        strength="0.100 mol/dm3",
        amount=cubic(528),
        kind=Kind.VOLUME,
        outcome=Outcome.MAKE,
        make="M03",
        fresh=True,
        reasons=("fresh: made on the day",),
    ),
    Answer(
        ref="K01.1",
        booking=FLAMES,
        recipe_title="Flame tests",
        line="lithium chloride 0.500 mol/dm3",
        item="lithium chloride",
        strength="0.500 mol/dm3",
        amount=cubic(55),
        kind=Kind.VOLUME,
        outcome=Outcome.SHORT,
        order="O01",
    ),
)

PEROXIDE = Make(
    id="M03",
    line="hydrogen peroxide 0.100 mol/dm3",
    item="hydrogen peroxide",
    strength="0.100 mol/dm3",
    volume=cubic(528),
    needed=cubic(528),
    earliest=date(2027, 1, 26),
    latest=date(2027, 1, 26),
    on=date(2027, 1, 26),
    ready=date(2027, 1, 26),
    bookings=("K08",),
    sources=(Draw(cubic(6.6123), Kind.VOLUME, bottle="B01"),),
    fresh=True,
    minutes=10,
    steps="Measure, make up, mix.",
    cautions=(ACID_FIRST,),
)
PERMANGANATE = Make(
    id="M04",
    line="potassium permanganate 0.0200 mol/dm3",
    item="potassium permanganate",
    strength="0.0200 mol/dm3",
    volume=cubic(4620),
    needed=cubic(4500),
    earliest=date(2027, 1, 20),
    latest=date(2027, 1, 26),
    on=date(2027, 1, 26),
    ready=date(2027, 1, 28),
    finish_on=date(2027, 1, 28),
    good_until=date(2028, 1, 26),
    bookings=("K11", "K13"),
    sources=(Draw(grams(14.6), Kind.MASS, bottle="B10"),),
    fresh=False,
    minutes=25,
    heel=cubic(120),
    heel_kept=True,
    cautions=(ACID_FIRST,),
)
LITHIUM = Order(
    id="O01",
    line="lithium chloride",
    item="lithium chloride",
    pack="100 g",
    packs=1,
    need_by=date(2027, 1, 12),
    order_by=date(2026, 12, 11),
    arrives=date(2027, 1, 18),
    late=6,
    pence=1450,
    shares=(("CH", 1375), ("OU", 75)),
    for_bookings=("K01", "K29"),
    reasons=("B28 not found", "10 open days to come"),
)

PLAN = Plan(
    as_at=date(2027, 1, 4),
    start=date(2027, 1, 4),
    end=date(2027, 3, 26),
    house=House(name="Quillmere College", practice=True),
    needs=NEEDS,
    makes=(PEROXIDE, PERMANGANATE),
    past=(
        PastBottle("S09", "starch", Condition.PAST, date(2026, 12, 21), "made 2026-12-14 + 7 d"),
        PastBottle("B28", "lithium chloride", Condition.NOT_FOUND, None, "counted", ("K01",)),
    ),
    usage=(
        Use(
            line="sodium thiosulfate 0.200 mol/dm3",
            item="sodium thiosulfate",
            strength="0.200 mol/dm3",
            form="solution",
            amount=cubic(4048),
            kind=Kind.VOLUME,
            by_booking=(("K05", cubic(2112)), ("K06", cubic(1936))),
            spare=cubic(368),
        ),
        Use("potassium iodide", "potassium iodide", "", "bought", grams(84.5), Kind.MASS),
    ),
    orders=(LITHIUM,),
    short=(
        Short(
            "K01.1",
            "K01",
            "lithium chloride",
            "0.500 mol/dm3",
            cubic(55),
            Kind.VOLUME,
            "B28 is not found",
        ),
    ),
    checks=(
        CheckToDo(
            subject="S02",
            item="sodium thiosulfate 0.100 mol/dm3",
            what="titrate",
            not_before=date(2027, 2, 4),
            by=date(2027, 3, 4),
            best=date(2027, 3, 3),
            bookings=("K21",),
            reason="found within 28 days",
        ),
    ),
    levels=(
        Level(
            "ammonium iron(II) sulfate hexahydrate",
            "ammonium iron(II) sulfate hexahydrate",
            date(2027, 2, 2),
            grams(78.2),
            grams(100),
            Kind.MASS,
        ),
    ),
    guesses=(Finding("B01", "expected, not titrated"), Finding("ethanol", "lead time taken as 10")),
    notes=(Finding("K15", "18:30 is outside staffed hours"),),
)


@dataclass(frozen=True)
class HandReadiness:
    """Stands for `planning.ready.Readiness`: the same fields."""

    ready: bool = False
    title: str = "K08 Iodine clock, 2027-01-26"
    on: date = date(2027, 1, 26)
    to_do: tuple[str, ...] = ("make M03 in the morning",)
    needs: tuple[Answer, ...] = NEEDS[:2]
    makes: tuple[Make, ...] = (PEROXIDE,)
    checks: tuple[CheckToDo, ...] = ()
    strengths: tuple[str, ...] = ("sulfuric acid 0.250 mol/dm3",)
    cautions: tuple[str, ...] = ("R01 no iron near the set",)
