"""The makes of a finished plan: what goes in, what comes out, and whether it will still do."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from stockroom.keeping.rules import Purpose
from stockroom.planning.decisions import Draw, Make
from stockroom.planning.facts import Bottle, Form, Ingredient, Line, Method
from stockroom.planning.replaying.age import faded, good_until, judged_on
from stockroom.planning.replaying.bottles import barred_in, too_old, wrong_strength
from stockroom.planning.replaying.exact import titrated_in_time
from stockroom.planning.replaying.rules import Broken, Fault
from stockroom.planning.replaying.walk import Asked, Giving, Walk

_UL_PER_DM3 = 1_000_000
_LAST_DIGITS = 2e-6
"""What rounding shares to whole micro-units may leave open, as a fraction of an ingredient."""
_JUST = 1 - 1e-9


def faults_of_makes(laid: Walk) -> Iterator[Fault]:
    """What is wrong with what makes take and give, in the order of the makes."""
    for make in laid.plan.makes:
        line, method = laid.facts.lines.get(make.line), laid.facts.methods.get(make.line)
        if line is None or method is None:
            yield Fault(Broken.NAMED, make.id, f"no method for {make.line!r}")
            continue
        yield from _given(laid, make, line)
        yield from _one_sitting(laid, make, line)
        yield from _marked(laid, make, line)
        yield from _goes_in(laid, make, line, method)
        yield from _meets_bars(laid, make)
        for giving in laid.givings.get(make.id, []):
            yield from _still_good(laid, make, line, giving)
            if giving.asked is not None:
                yield from _for_need(laid, make, line, method, giving.asked)


def _given(laid: Walk, make: Make, line: Line) -> Iterator[Fault]:
    given = sum(giving.amount for giving in laid.givings.get(make.id, []))
    if make.volume <= 0 or given > make.volume or given > make.needed:
        words = f"{given} given, {make.needed} said to be needed, {make.volume} made"
        yield Fault(Broken.GIVEN, make.id, words)
    if make.heel != make.volume - make.needed:
        words = f"{make.heel} left over of {make.volume}, of which {make.needed} is needed"
        yield Fault(Broken.GIVEN, make.id, words)
    if make.heel_kept and line.never_kept:
        yield Fault(Broken.NEVER_KEPT, make.id, f"its heel is kept: {line.never_kept}")
    until = good_until(laid, line, make.on)
    if make.good_until != until:
        words = f"said to be good until {make.good_until}, it is until {until}"
        yield Fault(Broken.AGE, make.id, words)


def _still_good(laid: Walk, make: Make, line: Line, giving: Giving) -> Iterator[Fault]:
    until = good_until(laid, line, make.on)
    if until is not None and until < giving.on:
        rule = Broken.NEVER_KEPT if line.never_kept else Broken.AGE
        yield Fault(rule, giving.where, f"{make.id} is good until {until}, used {giving.on}")


def _one_sitting(laid: Walk, make: Make, line: Line) -> Iterator[Fault]:
    """Nothing of what is never kept stands until another class."""
    served = [giving.asked for giving in laid.givings.get(make.id, []) if giving.asked]
    times = {(asked.booking.on, asked.booking.minute) for asked in served}
    if line.never_kept and len(times) > 1:
        classes = ", ".join(sorted({asked.booking.number for asked in served}))
        words = f"mixed once for {classes}, which begin at {len(times)} times"
        yield Fault(Broken.ONE_SITTING, make.id, words)


def _marked(laid: Walk, make: Make, line: Line) -> Iterator[Fault]:
    """A make marked fresh is of a line never kept, or a booking it names wants it fresh."""
    if not make.fresh or line.never_kept:
        return
    # of all bookings, since a part of the plan shows a make whole and not all that it serves
    recipes = (
        laid.facts.recipes.get((booking.recipe, booking.version))
        for booking in laid.facts.bookings
        if booking.number in make.bookings
    )
    wanted = [one for recipe in recipes if recipe for one in recipe.requirements]
    if not any(one.fresh and one.line == make.line for one in wanted):
        yield Fault(Broken.MARKED, make.id, f"{line.item} marked fresh, and nobody asks for it")


def _for_need(laid: Walk, make: Make, line: Line, method: Method, asked: Asked) -> Iterator[Fault]:
    on, where = asked.booking.on, asked.ref
    if asked.fresh and make.on != on:
        yield Fault(Broken.FRESH, where, f"{make.id} made {make.on}, wanted fresh on {on}")
    if too_old(asked.requirement, make.on, on):
        yield Fault(Broken.FRESH, where, f"{make.id} made {make.on}, used {on}")
    wrong = wrong_strength(asked.requirement, faded(laid, line, make, on))
    if wrong:
        yield Fault(Broken.STRENGTH, where, f"{make.id} {wrong}")
    found = make.ready if method.titrated else None
    if asked.exact and not titrated_in_time(laid, asked, make.id, found, make.ready):
        yield Fault(Broken.EXACT, where, f"{make.id} found {found}, and not titrated in time")


# -- what goes in -------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class _Part:
    """One source of a make, the strength it really has that day, and whose place it can take."""

    draw: Draw
    line: Line
    strength: float | None
    places: tuple[int, ...]


def _goes_in(laid: Walk, make: Make, line: Line, method: Method) -> Iterator[Fault]:
    parts = [
        _part(laid, make, draw, laid.facts.lines[draw.line], method)
        for draw in make.sources
        if draw.line in laid.facts.lines
    ]
    for part in parts:
        yield from _right_kind(make, line, method, part)
    yield from _solute(make, line, method, [part for part in parts if part.places])


def _part(laid: Walk, make: Make, draw: Draw, line: Line, method: Method) -> _Part:
    bottle, source = laid.bottles.get(draw.bottle), laid.makes.get(draw.make)
    strength = line.strength
    if bottle is not None:
        strength = judged_on(laid, bottle, make.on, Purpose.ANY).strengths.expected
    elif source is not None:
        strength = faded(laid, line, source, make.on).expected
    places = tuple(i for i, one in enumerate(method.ingredients) if line.key in one.lines)
    if line.form is Form.SOLID:
        strength = _in_a_gram(line, bottle)
    return _Part(draw, line, strength, places)


def _in_a_gram(line: Line, bottle: Bottle | None) -> float | None:
    """Solute in a gram of a solid by the bottle's own assay; None where its line's holds."""
    if bottle is None or bottle.assay is None or not line.solute_per_gram:
        return None
    thousandfold = bottle.assay * 1000.0
    return thousandfold / line.molar_mass if line.molar_mass else thousandfold


def _right_kind(make: Make, product: Line, method: Method, part: _Part) -> Iterator[Fault]:
    draw, line = part.draw, part.line
    held = bool(draw.bottle)
    allowed = [method.ingredients[place] for place in part.places]
    if not any(held or line.key not in one.only_if_held for one in allowed):
        how = "taken" if held else "made or bought"
        yield Fault(Broken.KIND, make.id, f"{line.key!r} {how} for {product.key!r}")
    # a bottle's strength is held against what is told of it where it is taken
    if not held and line.form is not Form.SOLID and not _near(draw.strength, part.strength):
        words = f"{line.key!r} told at {draw.strength}, expected {part.strength}"
        yield Fault(Broken.TOLD, make.id, words)
    if line.form is Form.SOLID or product.strength is None or part.strength is None:
        return
    if all(one.per_dm3 is None for one in allowed) and part.strength < product.strength * _JUST:
        words = f"{line.key!r} at {part.strength:g} for {product.strength:g}: too weak"
        yield Fault(Broken.STRENGTH, make.id, words)


def _solute(make: Make, product: Line, method: Method, parts: list[_Part]) -> Iterator[Fault]:
    """Each ingredient must come out whole: what its sources are of it adds up to 1."""
    open_part = [1.0] * len(method.ingredients)
    rounding = [_LAST_DIGITS] * len(method.ingredients)
    # what can take one place only goes first, so that the rest fills what is open
    for part in sorted(parts, key=lambda one: len(one.places)):
        amount = float(part.draw.amount)
        last = part.places[-1]
        for place in part.places:
            whole = _whole(product, method.ingredients[place], part, make.volume)
            if not whole:
                continue
            share = amount if place == last else min(amount, max(0.0, open_part[place]) * whole)
            open_part[place] -= share / whole
            rounding[place] += 1.0 / whole if share else 0.0
            amount -= share
    for place, ingredient in enumerate(method.ingredients):
        if abs(open_part[place]) > rounding[place] and not _nothing(ingredient, make, product):
            words = f"{1 - open_part[place]:.6g} of the {ingredient.lines[0]!r} it takes"
            yield Fault(Broken.SOLUTE, make.id, words)


def _whole(product: Line, ingredient: Ingredient, part: _Part, volume: int) -> float | None:
    """Micro-units of this source that would be all of an ingredient; None where nothing tells."""
    if ingredient.per_dm3 is not None:
        return volume * ingredient.per_dm3 / _UL_PER_DM3
    if product.strength is None:
        return None
    solute = product.strength * volume / 1000.0
    if part.line.form is Form.SOLID and part.line.solute_per_gram:
        return solute / (part.strength or part.line.solute_per_gram) * 1_000_000
    held = part.line.strength if part.strength is None else part.strength
    return solute / held * 1000.0 if held else None


def _nothing(ingredient: Ingredient, make: Make, product: Line) -> bool:
    """True when there is less of an ingredient than can be measured, or no sum to go by."""
    if ingredient.per_dm3 is None:
        return product.strength is None
    return make.volume * ingredient.per_dm3 / _UL_PER_DM3 <= 1.0


def _near(one: float | None, other: float | None) -> bool:
    if one is None or other is None:
        return one is other
    return abs(one - other) <= 1e-6 * max(abs(one), abs(other))


def _meets_bars(laid: Walk, make: Make) -> Iterator[Fault]:
    lines = {s.line: laid.facts.lines.get(s.line) for s in make.sources}
    for asked in laid.served[make.id]:
        for line in lines.values() if asked.recipe.bars else ():
            reason = barred_in(laid, asked, line.substance) if line else ""
            if line and reason:
                words = f"{line.substance} reaches {asked.ref}: {reason}"
                yield Fault(Broken.BARRED, make.id, words)
