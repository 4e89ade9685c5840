"""What the term uses, by solution and in bought form, worked out from the bookings alone.

Nothing on the shelf counts here: it is what the term would take if everything
were made from the bottle, at nominal strengths and exact amounts. A dilution is
counted once, in the bought form.
"""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.planning.amounts import draw_for
from stockroom.planning.decisions import Use
from stockroom.planning.explode import Need, amount_needed
from stockroom.planning.facts import Drawn, Facts, Ingredient, Line

SOLUTION = "solution"
STOCK = "stock"
BOUGHT = "bought"


def usage(facts: Facts, needs: Iterable[Need]) -> list[Use]:
    """Totals of the needs: what the classes get ("solution"), what made lines give to
    others ("stock"), and what comes out of bought bottles ("bought"); by form, then line.
    """
    totals: dict[tuple[str, str], dict[str, int]] = {}
    spare: dict[str, int] = {}
    for need in needs:
        made = need.line.key in facts.methods or not _bought(facts, need.line)
        form = SOLUTION if made else BOUGHT
        _add(totals, form, need.line.key, need.booking.number, need.amount)
        plain = amount_needed(need.requirement, need.booking.groups, 0)
        spare[need.line.key] = spare.get(need.line.key, 0) + need.amount - plain
        _explode_into(facts, totals, need, need.line, need.amount)
    order = {SOLUTION: 0, STOCK: 1, BOUGHT: 2}
    return [
        _use(facts.lines[key], form, by_booking, spare.get(key, 0) if form != STOCK else 0)
        for (form, key), by_booking in sorted(totals.items(), key=lambda t: (order[t[0][0]], t[0]))
    ]


def drawn_so_far(facts: Facts, drawn: Iterable[Drawn]) -> list[Use]:
    """What was really drawn, by line, from the ledger: put-right entries already left out."""
    totals: dict[tuple[str, str], dict[str, int]] = {}
    for draw in drawn:
        _add(totals, "drawn", draw.line, draw.bottle, draw.amount)
    return [
        _use(facts.lines[key], "drawn", by_bottle, 0)
        for (_, key), by_bottle in sorted(totals.items())
    ]


def _bought(facts: Facts, line: Line) -> bool:
    return line.key not in facts.methods and not any(
        bottle.made_here for bottle in facts.bottles if bottle.line == line.key
    )


def _explode_into(
    facts: Facts, totals: dict[tuple[str, str], dict[str, int]], need: Need, line: Line, volume: int
) -> None:
    method = facts.methods.get(line.key)
    for ingredient in method.ingredients if method else ():
        source = facts.lines[_plain_choice(ingredient)]
        amount = draw_for(source, source.strength, line, volume, ingredient.per_dm3)
        form = STOCK if source.key in facts.methods else BOUGHT
        _add(totals, form, source.key, need.booking.number, amount)
        _explode_into(facts, totals, need, source, amount)


def _plain_choice(ingredient: Ingredient) -> str:
    """The first choice that is not only used while it is held."""
    choices = [key for key in ingredient.lines if key not in ingredient.only_if_held]
    return choices[0] if choices else ingredient.lines[0]


def _add(
    totals: dict[tuple[str, str], dict[str, int]], form: str, key: str, who: str, amount: int
) -> None:
    by_booking = totals.setdefault((form, key), {})
    by_booking[who] = by_booking.get(who, 0) + amount


def _use(line: Line, form: str, by_booking: dict[str, int], spare: int) -> Use:
    return Use(
        line=line.key,
        item=line.item,
        strength=line.strength_text,
        form=form,
        amount=sum(by_booking.values()),
        kind=line.kind,
        by_booking=tuple(by_booking.items()),
        spare=spare,
    )
