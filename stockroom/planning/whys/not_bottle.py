"""Why a bottle, or a make, does not serve a need: unfit, too little, or another goes first."""

from __future__ import annotations

from datetime import date, timedelta

from stockroom.keeping.rules import Purpose
from stockroom.measure.amounts import Kind
from stockroom.planning.amounts import say, say_left
from stockroom.planning.choosing.fitness import found_valid_from, judge_for_need
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.decisions import Answer, Make
from stockroom.planning.explode import Need
from stockroom.planning.facts import Bottle, Closeness, Facts, Form, Recipe
from stockroom.planning.numbers import natural
from stockroom.planning.whys.planned_shelf import Claim, PlannedShelf, Rank, purpose_of
from stockroom.planning.windows import good_until, will_do
from stockroom.safety.bars import barred_by


def bottle_for_need(planned: PlannedShelf, answer: Answer, other: Bottle) -> list[str]:
    """Why a bottle of the line a need asks for does not serve it, in one line or two."""
    need = planned.needs[answer.ref]
    mine = [draw for draw in answer.draws if draw.bottle == other.number]
    if mine:
        amount = say(sum(draw.amount for draw in mine), answer.kind)
        return [f"{other.number} is used for {answer.ref}: {amount} of it"]
    shelf = planned.without(answer.ref)
    reason = (
        _never_kept(need)
        or barred_in(planned.facts, need.recipe, other)
        or shelf.unfit(other.number, need.on, purpose_of(need),
                       judge_for_need(need.requirement, need.line, need.on))
        or too_little(planned, answer.ref, need.rank, other, need.missing, need.booking.number)
    )  # fmt: skip
    if reason:
        old = stale(need, shelf, other.number)
        return [f"{other.number} was not used for {answer.ref}: {reason}", *([old] if old else [])]
    chosen = [draw.bottle for draw in planned.promised(answer)]
    return [_second(planned, shelf, answer, chosen, other)]


def _never_kept(need: Need) -> str:
    kept = need.line.never_kept
    return f"{need.line.item} is never kept, so none is counted on: {kept}" if kept else ""


def barred_in(facts: Facts, recipe: Recipe, other: Bottle) -> str:
    """Why a recipe bars what a bottle holds or was made from; "" if it does not."""
    lines = [facts.lines[one.line] for one in recipe.requirements if one.line in facts.lines]
    own = {line.substance for line in lines}
    by_number = {bottle.number: bottle for bottle in facts.bottles}
    for number in (other.number, *other.lineage):
        parent = by_number.get(number)
        substance = facts.lines[parent.line].substance if parent else ""
        reason = barred_by(recipe, substance, own)
        if reason:
            made = "" if number == other.number else f"made from {number}, "
            return f"{made}{substance} is barred in {recipe.code}: {reason}"
    return ""


def too_little(
    planned: PlannedShelf, ref: str, rank: Rank, other: Bottle, wanted: int, booking: str
) -> str:
    """Why a bottle does not hold enough for a need or a make, promises counted; "" if it does.

    A solid is put together from several jars, so that one that holds anything will do.
    """
    line, shelf = planned.facts.lines[other.line], planned.without(ref)
    left = shelf.left[other.number]
    claims = [claim for claim in planned.claims.get(other.number, []) if claim.ref != ref]
    if other.left <= 0:
        return "it is empty"
    if left <= 0 or (left < wanted and line.form is not Form.SOLID):
        held = f"{say_left(other, line)} of it, {say(wanted, line.kind)} wanted"
        return f"only {held}" if not claims else f"{held}, and {_promised(claims, rank, line.kind)}"
    if line.form is not Form.SOLID and shelf.too_close(other.number, wanted, booking):
        gone, held = say(other.left - left + wanted, line.kind), say_left(other, line)
        return f"{gone} of {held} in it would be promised: too close to call"
    return ""


def _promised(claims: list[Claim], rank: Rank, kind: Kind) -> str:
    """Who has it: "48 cm³ is promised to K13.1, which ranks before it"."""
    before = [claim for claim in claims if claim.rank < rank]
    named = before or claims
    names, total = ", ".join(c.ref for c in named), say(sum(c.amount for c in named), kind)
    if not before:
        return f"{total} is kept for {names}"
    which = "which ranks" if len(named) == 1 else "which rank"
    return f"{total} is promised to {names}, {which} before it"


def stale(need: Need, shelf: Shelf, number: str) -> str:
    """Why what was found of a bottle is too old for an exact need; "" if it is not."""
    if need.requirement.closeness is not Closeness.EXACT:
        return ""
    oldest = found_valid_from(need.requirement, need.line, need.on)
    found = shelf.verdict(number, shelf.facts.as_at).strengths.found_on
    if found is not None and found >= oldest:
        return ""
    last = f"it was last found {found}" if found else "its strength was never found"
    return f"exact needs a result after {oldest - timedelta(days=1)}, and {last}"


def _second(
    planned: PlannedShelf, shelf: Shelf, answer: Answer, chosen: list[str], other: Bottle
) -> str:
    """A bottle that is good for a need: what set another before it."""
    need, head = planned.needs[answer.ref], f"{other.number} was not used for {answer.ref}"
    if not chosen:
        spare = say(shelf.left[other.number], need.line.kind)
        by = answer.make or answer.order or answer.outcome
        return f"{head}, and would do: {spare} of it is not promised (the plan has {by})"
    why = goes_first(shelf, need.on, purpose_of(need), chosen[0], other.number)
    old, held = stale(need, shelf, other.number), stale(need, shelf, chosen[0])
    if old and not held:
        return f"{head}: {old}"
    if not why:
        spare = say(shelf.left[other.number], need.line.kind)
        why = f"it would do as well: {spare} of it is not promised, and one bottle is enough"
    return f"{head}: {why}" + (f"; {old}" if old else "")


def goes_first(shelf: Shelf, on: date, purpose: Purpose, chosen: str, other: str) -> str:
    """What sets a chosen bottle before another that is good too; "" if nothing does.

    In the order the planner looks: for an exact need the latest result, then what goes
    past soonest, what is open already, and last the lower number.
    """
    if purpose is Purpose.EXACT:
        last, older = (shelf.verdict(n, shelf.facts.as_at).strengths.found_on
                       for n in (chosen, other))  # fmt: skip
        if last and last > (older or date.min):
            return f"{chosen} was checked more recently ({last}; {other} {older or 'never'})"
    sooner, later = (
        shelf.usable_until(number, purpose, shelf.opening(number) or on)
        for number in (chosen, other)
    )
    if sooner < later:
        when = "has no such date" if later == date.max else f"{later}"
        return f"{chosen} goes past sooner ({sooner}; {other} {when})"
    if sooner > later:
        return ""
    sealed, lower = shelf.is_sealed(other), natural(chosen) < natural(other)
    if sealed and not shelf.is_sealed(chosen):
        return f"{chosen} is open already, and {other} sealed"
    return f"{chosen} is as good, and has the lower number" if lower else ""


def make_for_need(planned: PlannedShelf, answer: Answer, other: Make) -> list[str]:
    """Why a make of the line a need asks for does not serve it, in one line."""
    need = planned.needs[answer.ref]
    head = f"{other.id} does not serve {answer.ref}"
    if answer.make == other.id:
        return [f"{other.id} is the make that serves {answer.ref}"]
    if need.fresh and other.on != need.on:
        return [f"{head}: it is made on {other.on}, and this is made fresh on {need.on}"]
    if other.ready > need.on:
        return [f"{head}: it is ready on {other.ready}, and that is wanted on {need.on}"]
    if not will_do(need.line, need.requirement, other.on, need.on):
        until = good_until(need.line, other.on)
        keeps = f", good until {until}" if until else ""
        return [f"{head}: made on {other.on}{keeps}, it would not do on {need.on}"]
    held = ", ".join(draw.bottle for draw in planned.promised(answer))
    if held:
        return [f"{head}: {held} covers it, and what stands there is used before anything is made"]
    over = say(other.volume - other.needed, need.line.kind)
    apart = answer.make or answer.order or answer.outcome
    return [f"{head}: it would keep till then, and makes {over} over what it is for; "
            f"the plan has {apart} for it"]  # fmt: skip
