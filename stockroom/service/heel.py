"""What was made beside what the plan meant: whom it does for, and what will be over."""

from __future__ import annotations

from dataclasses import dataclass, replace

from stockroom.errors import BrokenPlan, StockroomError
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount, format_number
from stockroom.planning.decisions import Make, Plan
from stockroom.planning.facts import Facts, Line
from stockroom.planning.making.batch import keeps
from stockroom.service.replayed import replayed_plan


@dataclass(frozen=True, slots=True)
class Meant:
    """The make the plan has of a line next, and how far a volume (µL) goes towards it.

    `bookings` get all they need of it, in their order; `unserved` do not, and lack `lacking` µL
    among them. `over` µL are left when all have had theirs. `missed` are those it does not reach.
    """

    planned: Make | None = None
    bookings: tuple[str, ...] = ()
    unserved: tuple[str, ...] = ()
    lacking: int = 0
    over: int = 0
    missed: tuple[str, ...] = ()


def meant_for(known: Facts, product: Line, volume: int) -> Meant:
    """What the plan has this line made for next, as far as the volume goes."""
    # what the plan meant it for is kept with the bottle, or another class would be given it
    try:
        whole = replayed_plan(known)
    except BrokenPlan:
        # what was made must be written down all the same, and then for nobody in particular
        return Meant()
    planned = next((make for make in whole.makes if make.line == product.key), None)
    return Meant() if planned is None else _meant(whole, planned, volume)


def _meant(whole: Plan, planned: Make, volume: int) -> Meant:
    served: list[str] = []
    unserved: list[str] = []
    left = volume
    wanted: dict[str, int] = {}
    for answer in whole.needs:
        if answer.make == planned.id:
            number = answer.booking.number
            wanted[number] = wanted.get(number, 0) + answer.amount
    for booking in planned.bookings:
        left -= wanted.get(booking, 0)
        (served if left >= 0 else unserved).append(booking)
    # what goes on into another make is no booking's own need, and counts all the same
    short = max(0, planned.needed - volume)
    return Meant(planned, tuple(served), tuple(unserved), short, max(0, volume - planned.needed))


def served_from(known: Facts, bottle: str) -> frozenset[str] | None:
    """The bookings that are given of a bottle by the plan as it is once it stands there.

    None where no plan can be made. What is made from it serves those it is made for.
    """
    try:
        whole = replayed_plan(known)
    except StockroomError:
        return None
    direct = {
        need.booking.number
        for need in whole.needs
        if any(draw.bottle == bottle for draw in need.draws)
    }
    through = {
        number
        for make in whole.makes
        if any(draw.bottle == bottle for draw in make.sources)
        for number in make.bookings
    }
    return frozenset(direct | through)


def reached(meant: Meant, served: frozenset[str] | None) -> Meant:
    """The same, less the bookings it turns out not to reach: too early, too late, too little."""
    if served is None:
        return meant
    return replace(
        meant,
        bookings=tuple(one for one in meant.bookings if one in served),
        missed=tuple(one for one in meant.bookings if one not in served),
    )


def told_of_make(
    known: Facts, product: Line, volume: Amount, bottle: str, meant: Meant
) -> list[str]:
    """What to say of a make: for whom, planned beside made, who lacks, and what will be over."""
    planned = meant.planned
    if planned is None:
        return []
    told = []
    if meant.bookings:
        needed = f"{_cm3(planned.needed)} needed, " if meant.over else ""
        beside = _beside(planned.volume, volume)
        told.append(f"For {', '.join(meant.bookings)}, {needed}{beside}.")
    if meant.missed:
        who = ", ".join(meant.missed)
        told.append(f"Planned for {who} too, and not used there: stockroom why {meant.missed[0]}.")
    if meant.lacking:
        who = f" for {', '.join(meant.unserved)}" if meant.unserved else ""
        told.append(f"{_cm3(meant.lacking)} short of what is needed{who}: make the rest.")
    if meant.over:
        told.append(_heel(known, product, bottle, meant.over))
    return told


def _beside(planned: int, made: Amount) -> str:
    if planned == made.micro:
        return "as planned"
    return f"{_cm3(planned)} planned, {format_amount(made)} made"


def _heel(known: Facts, product: Line, bottle: str, over: int) -> str:
    """What will be over, and what to do with it: a label where it is worth one."""
    left = f"{_cm3(over)} will be over"
    if keeps(known, product, over, known.as_at):
        return (
            f"{left}: worth a label. It stays in {bottle}; into a smaller bottle:"
            f' stockroom decant {bottle} "{_cm3(over)}"'
        )
    # no command to throw it away stands beside this: all of it still serves its classes
    return f"{left}: not worth a label. Once all have had theirs, pour the rest of {bottle} away."


def _cm3(micro: int) -> str:
    # four figures: what is needed is a sum, and nobody measures its last digit
    return f"{format_number(Amount(Kind.VOLUME, micro).number)} cm³"
