"""What can be entered beside each line of the week: its make, its check, its draws, its order."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import date

from stockroom.findings import Danger, DangerKind, Moves
from stockroom.keeping.rules import RuleKind
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.planning.decisions import Answer, CheckToDo, Coming, Draw, Make, Order
from stockroom.planning.facts import Bottle, Drawn, Facts, Form
from stockroom.planning.numbers import natural
from stockroom.reports.pages.parts import Act, Pairs
from stockroom.reports.words import day_heading, listed

ANOTHER = "another amount"

_MOVED = 3
"""Bottles offered to be moved from beside one; more stand in its sentence. Our choice."""


def typed(micro: int, kind: Kind) -> str:
    """An amount as a form takes it, and reads it back."""
    return format_amount(Amount(kind, micro))


def make_act(known: Facts, make: Make) -> Act:
    """A make as it is planned; only its whole form while something it is made from is to come."""
    sources = listed(dict.fromkeys(draw.bottle for draw in make.sources if draw.bottle))
    whole = (("line", make.line), ("volume", typed(make.volume, Kind.VOLUME)))
    place = usual_place(known, make.line)
    if not all(draw.bottle for draw in make.sources):
        known_already: Pairs = (*whole, ("place", place)) if place else whole
        return Act("make", known_already, other="made otherwise")
    word = "Started" if make.ready > make.on else "Made"
    asked = (("place", place),)
    return Act("make", (*whole, ("sources", sources)), (("", word),), asked, other=ANOTHER)


def usual_place(known: Facts, line: str) -> str:
    """Where the last bottle of a line that has a place stands; "" where none has."""
    placed = [each for each in known.bottles if each.line == line and each.place]
    return max(placed, key=lambda each: natural(each.number)).place if placed else ""


def check_act(check: CheckToDo, bottles: dict[str, Bottle]) -> tuple[Act, ...]:
    """A look or a titration of a bottle that is there; none of a make still to come."""
    if check.subject not in bottles:
        return ()
    bottle = (("bottle", check.subject),)
    if check.what == "look":
        buttons = (("good", "Good"), ("bad", "Not good"))
        return (Act("look", bottle, buttons, (("note", ""),), "passed"),)
    found = (("", "Found"),)
    return (
        Act("found", bottle, found, (("strength", ""),), other="with its uncertainty"),
        Act("titrate", bottle, other="from its titres"),
    )


def entered_for(known: Facts) -> dict[tuple[str, str], list[Drawn]]:
    """What is entered as drawn, by booking and line, in the order it was entered."""
    found: dict[tuple[str, str], list[Drawn]] = {}
    for each in known.drawn:
        if each.booking:
            found.setdefault((each.booking, each.line), []).append(each)
    return found


def drawn_and_left(need: Answer, entered: list[Drawn]) -> tuple[list[Drawn], list[Draw]]:
    """What of a need is drawn already, and the draws still to make from bottles that are there."""
    drawn, left = [], list(need.draws)
    for each in entered:
        like = (each.bottle, each.amount)
        # an entry of another need of the same line serves that one
        one = next((draw for draw in left if (draw.bottle, draw.amount) == like), None)
        if one is not None:
            left.remove(one)
            drawn.append(each)
    return drawn, [draw for draw in left if draw.bottle and draw.amount]


def draw_acts(known: Facts, need: Answer, row: list[Draw]) -> Iterator[Act]:
    """One for each draw still to make; for what a shop sells, its arrival."""
    for draw in row:
        word = f"Drawn from {draw.bottle}" if len(row) > 1 else "Drawn"
        fields = (
            ("bottle", draw.bottle),
            ("amount", typed(draw.amount, draw.kind)),
            ("booking", need.booking.number),
        )
        yield Act("draw", fields, (("", word),), other=ANOTHER)
    if not row and not need.draws and known.lines[need.line].form is Form.SUNDRY:
        yield Act("arrive", (("line", need.line),), other="Bought")


def destroy_act(number: str, ticked_by: str = "") -> Act:
    """The tick that what is never kept was destroyed, or the way to take it back."""
    booking = (("booking", number),)
    if ticked_by:
        return Act("destroyed-undo", booking, other="Take the tick back")
    return Act("destroyed", booking, (("", "Destroyed"),))


def discard_act(number: str, how: str, why: str) -> Act:
    """A bottle poured away or collected, because its last day is over."""
    fields = (("bottle", number), ("how", how), ("why", why))
    return Act("discard", fields, (("", "Discarded"),), other="otherwise")


def order_act(order: Order) -> Act:
    """An order of the plan that was sent off as it stands; what it is of goes with its number."""
    # numbers move when another order is sent: a page left open must not order something else
    known = (("order", order.id), ("meant", order.wanted))
    return Act("order-planned", known, (("", "Ordered"),), other="otherwise")


def coming_acts(coming: Coming) -> tuple[Act, ...]:
    """What is on its way: it came, it comes another day. The date printed on it must be read."""
    order = (("order", coming.number),)
    arrived = Act("arrive", (*order, ("line", coming.line)), other="Arrived")
    return arrived, Act("order-put-off", order, other="Put off")


def danger_acts(known: Facts, danger: Danger) -> tuple[Act, ...]:
    """What mends it: the bottle that is to go is moved, a peroxide-former has its test."""
    bottle = (("bottle", danger.subject),)
    if danger.kind in (DangerKind.BESIDE, DangerKind.WARM):
        others = danger.kind is DangerKind.BESIDE and danger.moves is Moves.OTHER
        goes = danger.others[:_MOVED] if others else (danger.subject,)
        return tuple(Act("move", (("bottle", one),), other=f"Move {one}") for one in goes)
    line = next(each.line for each in known.bottles if each.number == danger.subject)
    kinds = {rule.kind for rule in known.lines[line].rules}
    if danger.kind is DangerKind.SAFETY_DATE and RuleKind.TEST in kinds:
        return (Act("tested", bottle, other="Enter its test"),)
    return ()


def printed_acts(bottle: Bottle | None) -> tuple[Act, ...]:
    """A printed date that can be read as two days: one press for each."""
    date_on = bottle.record.printed if bottle else None
    if bottle is None or date_on is None or not date_on.ambiguous:
        return ()
    days: list[date] = list(date_on.readings)
    buttons = tuple((day.isoformat(), day_heading(day)) for day in days)
    return (Act("printed", (("bottle", bottle.number),), buttons, choice="reading"),)
