"""What the term uses, by solution and in bought form, worked out from the bookings alone.

Nothing on the shelf counts here: it is what the term would take if everything
were made from the bottle, at nominal strengths and exact amounts. A dilution is
counted once, in the bought form.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from stockroom.planning.amounts import draw_for
from stockroom.planning.decisions import Use
from stockroom.planning.explode import Need, amount_needed
from stockroom.planning.facts import Drawn, Facts, Form, Ingredient, Line

SOLUTION = "solution"
STOCK = "stock"
BOUGHT = "bought"


Totals = dict[tuple[str, str, str], dict[str, int]]
"""(form, line key, strength as asked for) to booking to micro-units."""


def usage(facts: Facts, needs: Iterable[Need]) -> list[Use]:
    """Totals of the needs: what the classes get ("solution"), what made lines give to
    others ("stock"), and what comes out of bought bottles ("bought"); by form, then line.

    A solution bought as it is used stands under both "solution" and "bought".
    """
    totals: Totals = {}
    groups: dict[str, int] = {}
    bought_lines = _bought(facts)
    spare: dict[tuple[str, str, str], int] = {}
    for need in needs:
        asked = need.requirement.strength_text or need.line.strength_text
        form = SOLUTION if need.line.form is Form.SOLUTION else BOUGHT
        key = (form, need.line.key, asked if form == SOLUTION else need.line.strength_text)
        groups[need.booking.number] = need.booking.groups
        _add(totals, key, need.booking.number, need.amount)
        # told apart for whoever has to justify the term's spending
        plain = amount_needed(need.requirement, need.booking.groups, 0)
        spare[key] = spare.get(key, 0) + need.amount - plain
        if form == SOLUTION and need.line.key in bought_lines:
            bought = (BOUGHT, need.line.key, need.line.strength_text)
            _add(totals, bought, need.booking.number, need.amount)
        _explode_into(facts, totals, bought_lines, need, need.line, need.amount)
    order = {SOLUTION: 0, STOCK: 1, BOUGHT: 2}
    keys = sorted(totals, key=lambda key: (order[key[0]], *key[1:]))
    uses = [_use(facts.lines[key[1]], key, totals[key], spare.get(key, 0)) for key in keys]
    return [
        replace(use, groups=sum(groups[number] for number, _ in use.by_booking)) for use in uses
    ]


def drawn_so_far(facts: Facts, drawn: Iterable[Drawn]) -> list[Use]:
    """What was really drawn, by line, from the ledger: put-right entries already left out."""
    totals: Totals = {}
    for draw in drawn:
        line = facts.lines[draw.line]
        _add(totals, ("drawn", line.key, line.strength_text), draw.bottle, draw.amount)
    return [_use(facts.lines[key[1]], key, by, 0) for key, by in sorted(totals.items())]


def written_off(facts: Facts) -> list[Use]:
    """What was spilled and what is still lent in the period, by line: each its own total.

    `form` says which; never part of what is used. What was lent and came back is left out.
    """
    totals: Totals = {}
    for one in facts.written_off:
        if facts.start <= one.on <= facts.end:
            line = facts.lines[one.line]
            _add(totals, (one.how, line.key, line.strength_text), one.bottle, one.amount)
    uses = [_use(facts.lines[key[1]], key, by, 0) for key, by in sorted(totals.items())]
    return [use for use in uses if use.amount > 0]


def _bought(facts: Facts) -> set[str]:
    """The lines that come in bottles: without a method, and none of them made here."""
    made_here = {bottle.line for bottle in facts.bottles if bottle.made_here}
    return facts.lines.keys() - facts.methods.keys() - made_here


def _explode_into(
    facts: Facts, totals: Totals, bought_lines: set[str], need: Need, line: Line, volume: int
) -> None:
    method = facts.methods.get(line.key)
    for ingredient in method.ingredients if method else ():
        # the choice a bare cupboard would force: what is held this term is gone by next
        source = facts.lines[_plain_choice(ingredient)]
        amount = draw_for(source, source.strength, line, volume, ingredient.per_dm3)
        form = BOUGHT if source.key in bought_lines else STOCK
        _add(totals, (form, source.key, source.strength_text), need.booking.number, amount)
        _explode_into(facts, totals, bought_lines, need, source, amount)


def _plain_choice(ingredient: Ingredient) -> str:
    """The first choice that is not only used while it is held."""
    choices = [key for key in ingredient.lines if key not in ingredient.only_if_held]
    return choices[0] if choices else ingredient.lines[0]


def _add(totals: Totals, key: tuple[str, str, str], who: str, amount: int) -> None:
    by_booking = totals.setdefault(key, {})
    by_booking[who] = by_booking.get(who, 0) + amount


def _use(line: Line, key: tuple[str, str, str], by_booking: dict[str, int], spare: int) -> Use:
    return Use(
        line=line.key,
        item=line.item,
        strength=key[2],
        form=key[0],
        amount=sum(by_booking.values()),
        kind=line.kind,
        by_booking=tuple(by_booking.items()),
        spare=spare,
    )
