"""Why a make is not made from another bottle or another line."""

from __future__ import annotations

from stockroom.errors import StockroomError
from stockroom.keeping.rules import Purpose
from stockroom.planning.amounts import draw_for, say
from stockroom.planning.choosing.strengths_held import solute_held
from stockroom.planning.decisions import Draw, Make
from stockroom.planning.facts import Bottle, Ingredient, Line
from stockroom.planning.whys.not_bottle import barred_in, goes_first, too_little
from stockroom.planning.whys.planned_shelf import PlannedShelf


def another_source(planned: PlannedShelf, make: Make, other: Bottle) -> list[str]:
    """Why a make does not take from a bottle, in one line."""
    if any(source.bottle == other.number for source in make.sources):
        taken = sum(s.amount for s in make.sources if s.bottle == other.number)
        kind = planned.facts.lines[other.line].kind
        return [f"{other.number} is used for {make.id}: {say(taken, kind)} of it"]
    head = f"{other.number} was not used for {make.id}"
    part = planned.ingredient(make, other.line)
    if part is None:
        method = planned.facts.methods.get(make.line)
        lines = [key for one in (method.ingredients if method else ()) for key in one.lines]
        takes = f"it takes {' or '.join(dict.fromkeys(lines))}" if lines else "no method is written"
        return [f"{head}: it is {other.line}, and {takes}"]
    return [f"{head}: {_why_another(planned, make, part, other)}"]


def _why_another(planned: PlannedShelf, make: Make, part: Ingredient, other: Bottle) -> str:
    line, product = planned.facts.lines[other.line], planned.facts.lines[make.line]
    shelf = planned.without(make.id)
    booked = [n for n in planned.needs.values() if n.booking.number in make.bookings]
    recipes = {need.recipe.code: need.recipe for need in booked}
    barred = (barred_in(planned.facts, recipe, other) for recipe in recipes.values())
    reason = next(filter(None, barred), "") or shelf.unfit(
        other.number, make.on, Purpose.ANY, planned.judge_of(make, line)
    )
    if reason:
        return reason
    now = [source for source in make.sources if source.line in part.lines]
    try:
        held = solute_held(shelf, line, other.number, make.on)
        wanted = draw_for(line, held, product, make.volume, part.per_dm3)
    except StockroomError as trouble:
        return trouble.message
    rank, booking = planned.rank_of(make), (make.bookings or ("",))[0]
    little = too_little(planned, make.id, rank, other, wanted, booking)
    return little or _goes_first(planned, make, part, now, other)


def _goes_first(
    planned: PlannedShelf, make: Make, part: Ingredient, now: list[Draw], other: Bottle
) -> str:
    chosen = next((source for source in now if source.bottle), None)
    shelf = planned.without(make.id)
    spare = say(shelf.left[other.number], planned.facts.lines[other.line].kind)
    if chosen is None:
        got = ", ".join(s.make or f"{s.line} to be bought" for s in now) or "nothing else"
        return f"it would do: {spare} of it is not promised (the plan takes {got})"
    if chosen.line != other.line:
        if part.lines.index(chosen.line) < part.lines.index(other.line):
            return f"the method takes {chosen.line} first, and {chosen.bottle} has enough of it"
        return f"{chosen.bottle} ({chosen.line}) is taken; {other.line} comes first and would do"
    return goes_first(shelf, make.on, Purpose.ANY, chosen.bottle, other.number) or (
        f"it would do as well: {spare} of it is not promised"
    )


def another_line(planned: PlannedShelf, make: Make, other: Line) -> list[str]:
    """Whether a make could be made from another line, and from which bottle; in one line."""
    if other.key == make.line:
        return [f"{other.key} is what {make.id} makes"]
    held = [bottle for bottle in planned.facts.bottles if bottle.line == other.key]
    if planned.ingredient(make, other.key) is None:
        # said for any bottle of it, so for one there may not be as well
        return another_source(planned, make, held[0])[:1] if held else [
            f"{make.id} is not made from {other.key}: its method does not name it"
        ]  # fmt: skip
    used = [source for source in make.sources if source.line == other.key]
    if used:
        return [f"{make.id} is made from {other.key}: {used[0].bottle or used[0].make or 'to buy'}"]
    rows = [row for bottle in held for row in another_source(planned, make, bottle)]
    return rows or [f"{make.id} could be made from {other.key}, and no bottle of it is held"]
