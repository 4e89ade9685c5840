"""Is everything good for a booking, or for all of a day? Yes, or what is still to do."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.keeping.strength import strengths_on
from stockroom.planning.amounts import say, say_strength
from stockroom.planning.decisions import Answer, CheckToDo, Make, Outcome, Plan
from stockroom.planning.facts import Facts, Recipe
from stockroom.planning.known import how_known
from stockroom.planning.making.make_card import goes_of
from stockroom.planning.never_kept import dangers_of
from stockroom.safety.cautions import Caution, Step, cautions_about


@dataclass(frozen=True, slots=True)
class Readiness:
    """The answer for one booking or one day. `to_do` is empty when `ready`.

    `cautions` is what each recipe says of handling, destroying and waste, which local
    risk assessment covers it, and what the list of cautions says besides of using what
    the classes get, and of clearing it away.
    """

    ready: bool
    title: str
    on: date
    to_do: tuple[str, ...]
    needs: tuple[Answer, ...]
    makes: tuple[Make, ...]
    checks: tuple[CheckToDo, ...]
    strengths: tuple[str, ...]
    cautions: tuple[str, ...] = ()


def readiness(
    facts: Facts, plan: Plan, numbers: tuple[str, ...], title: str, on: date
) -> Readiness:
    """Whether these bookings have all they need as things stand on the plan's day.

    A make still to be done, an order still to come, a check still to do or
    anything short is something to do; nothing booked is ready.
    """
    wanted = set(numbers)
    needs = tuple(answer for answer in plan.needs if answer.booking.number in wanted)
    makes = tuple(make for make in plan.makes if wanted & set(make.bookings))
    # a look that only saves a make is no reason to say no
    checks = tuple(
        check for check in plan.checks if not check.optional and wanted & set(check.bookings)
    )
    to_do = (*_shorts(plan, wanted), *buys_of(plan, needs), *_makes(makes), *_checks(checks))
    strengths = _strengths(facts, needs)
    cautions = (*_words(facts, wanted), *_at_the_bench(facts, needs))
    return Readiness(not to_do, title, on, to_do, needs, makes, checks, strengths, cautions)


def _shorts(plan: Plan, wanted: set[str]) -> list[str]:
    return [
        f"short: {say(s.amount, s.kind)} of {s.item} {s.strength} for {s.booking}: {s.reason}"
        for s in plan.short
        if s.booking in wanted
    ]


def buys_of(plan: Plan, needs: tuple[Answer, ...]) -> tuple[str, ...]:
    """What is bought for these needs: each order once, as it is ordered; else how much of what.

    An order is for a whole pack, and often of what a need is made from, not of the need itself.
    """
    orders = {order.id: order for order in plan.orders}
    coming = {each.number: each for each in plan.on_order}
    row = []
    for need in needs:
        if need.outcome is not Outcome.BUY:
            continue
        if need.order in orders:
            order = orders[need.order]
            what = f"{order.item}, {order.packs} × {order.pack}, by {order.order_by}"
            row.append(f"order {order.id}: {what}")
        elif need.order in coming:
            placed = coming[need.order]
            row.append(f"wait for {placed.number}: {placed.item}, expected {placed.expected}")
        else:
            row.append(f"buy: {say(need.amount, need.kind)} of {need.item}".rstrip())
    return tuple(dict.fromkeys(row))


def _makes(makes: tuple[Make, ...]) -> list[str]:
    return [
        f"make {make.id} on {make.on}: {make.item} {make.strength}".rstrip()
        + (" (fresh, that day)" if make.fresh else "")
        for make in makes
    ]


def _checks(checks: tuple[CheckToDo, ...]) -> list[str]:
    return [
        f"{c.what} {c.subject} ({c.item}) between {c.not_before} and {c.by}: {c.reason}"
        for c in checks
    ]


def _strengths(facts: Facts, needs: tuple[Answer, ...]) -> tuple[str, ...]:
    """The strength each class really gets, from the bottles chosen, and how it is known."""
    bottles = {bottle.number: bottle for bottle in facts.bottles}
    row = []
    for need in needs:
        line = facts.lines[need.line]
        for draw in need.draws:
            if draw.strength is not None and line.strength and draw.bottle in bottles:
                said = say_strength(line, draw.strength)
                bottle = bottles[draw.bottle]
                known = strengths_on(bottle.record, line.rules, need.booking.on)
                row.append(f"{need.item} {said}: {draw.bottle}, {how_known(bottle, known)}")
    return tuple(dict.fromkeys(row))


def _words(facts: Facts, wanted: set[str]) -> tuple[str, ...]:
    row = []
    for recipe in _recipes(facts, wanted):
        waste = f"waste: {recipe.waste}" if recipe.waste else ""
        covered = recipe.assessment or "none named: ask before it runs"
        lines = [facts.lines[each.line] for each in recipe.requirements]
        why = dangers_of(recipe.never_kept, recipe, lines) if recipe.never_kept else ()
        local = f"local risk assessment: {covered}"
        said = (recipe.handling, *why, recipe.never_kept, waste, local)
        row += [f"{recipe.code} {words}" for words in said if words]
    return tuple(row)


def _recipes(facts: Facts, wanted: set[str]) -> list[Recipe]:
    booked = {(b.recipe, b.version) for b in facts.bookings if b.number in wanted}
    return [facts.recipes[key] for key in sorted(booked)]


def _at_the_bench(facts: Facts, needs: tuple[Answer, ...]) -> tuple[str, ...]:
    """The cautions of using these things and of clearing them away, each once, unless said."""
    items: dict[tuple[Caution, bool], list[str]] = {}
    for need in needs:
        # each recipe's own words cover its own class, and no other of that day
        recipe = facts.recipes[need.booking.recipe, need.booking.version]
        said = (recipe.handling, recipe.never_kept, recipe.waste)
        thing = goes_of(facts.lines[need.line])
        for caution in cautions_about([thing], said=said, steps=(Step.USE, Step.WASTE)):
            # no container takes what is never kept before it is destroyed; what it then is, and
            # where it goes, its recipe knows best
            after = bool(recipe.never_kept) and caution.collects
            if after and recipe.waste:
                continue
            items.setdefault((caution, after), []).append(need.item)
    order = list(Step)
    row = sorted(items.items(), key=lambda pair: (order.index(pair[0][0].step), pair[0][0].number))
    return tuple(
        f"{caution.step} ({'; '.join(dict.fromkeys(names))}): "
        f"{'once destroyed: ' if after else ''}{caution.text}"
        for (caution, after), names in row
    )
