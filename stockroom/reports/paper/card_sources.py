"""What a make is made from, as it stands large on its card: how much, of which bottle."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass

from stockroom.chemistry.water_words import parted
from stockroom.keeping.strength import strengths_on
from stockroom.measure.amounts import Kind
from stockroom.planning.amounts import say_strength
from stockroom.planning.decisions import Draw, Make, Plan
from stockroom.planning.facts import Bottle, Facts, Form, Line
from stockroom.reports.paper.card_steps import Amounts
from stockroom.reports.words import TIED, amount, day, day_heading, measured, named, raised

NOT_CHECKED = "nominal, not checked"


@dataclass(frozen=True, slots=True)
class Taken:
    """One thing taken. `habit` is the amount the label would say, "" where it is the same.

    `form` is the hydrate, or that there is none; `tool` the balance or glass the plan reckons
    with; `filled`: it makes up to the mark, so that its amount is the whole volume.
    """

    amount: str
    what: str
    form: str = ""
    bottle: str = ""
    place: str = ""
    origin: str = ""
    known: str = ""
    habit: str = ""
    each: str = ""
    tool: str = ""
    filled: bool = False
    weighed: bool = False


def taken_of(known: Facts, plan: Plan, make: Make, draw: Draw) -> Taken:
    """One source of a make, as its card shows it."""
    line = known.lines.get(draw.line)
    bottle = next((each for each in known.bottles if each.number == draw.bottle), None)
    # the form decides the mass: a card must name it larger than the rest of the name
    form = parted(draw.item)[1] if draw.kind is Kind.MASS else ""
    often = measured(round(draw.amount / make.vessels), draw.kind)
    return Taken(
        amount=measured(draw.amount, draw.kind),
        what=_what(line, draw),
        form=form,
        bottle=draw.bottle,
        place=bottle.place if bottle else "",
        origin="" if draw.bottle else _origin(plan, draw),
        known=_known(line, bottle, draw, make),
        habit=_habit(line, draw),
        each=f"{make.vessels} × {often}" if make.vessels > 1 else "",
        tool=_tool(known, make, draw),
        filled=draw.kind is Kind.VOLUME and draw.amount >= make.volume,
        weighed=draw.kind is Kind.MASS,
    )


def _what(line: Line | None, draw: Draw) -> str:
    if line is None or draw.kind is Kind.MASS:
        return raised(draw.item)
    return named(line.item, line.strength_text)


def _origin(plan: Plan, draw: Draw) -> str:
    made = next((make for make in plan.makes if make.id == draw.make), None)
    if made is not None:
        return f"{made.id}, made first, {day_heading(made.finish_on or made.on)}"
    return "no bottle yet: to be bought"


def _known(line: Line | None, bottle: Bottle | None, draw: Draw, make: Make) -> str:
    """How the strength is known that the amount was worked out with."""
    if line is None or draw.kind is Kind.MASS:
        assay = bottle.assay if bottle and bottle.assay else line.assay if line else 1.0
        return f"assay {assay * 100:g} % counted in" if assay != 1.0 else ""
    if draw.strength is None:
        return "" if line.form is not Form.SOLUTION else "strength not known"
    said = say_strength(line, draw.strength)
    if bottle is None:
        return f"at {said}, {NOT_CHECKED}"
    if bottle.record.blend is not None:
        return f"at {said}, {bottle.known_by or 'worked out, not found'}"
    now = strengths_on(bottle.record, line.rules, make.on)
    if now.found is None or now.found_on is None:
        same = line.strength and abs(draw.strength / line.strength - 1) < 1e-3
        return f"at {said}, " + (NOT_CHECKED if same else "expected, not checked")
    if abs(draw.strength / now.found - 1) < 1e-3:
        return f"at {said}, found {day(now.found_on)}"
    return f"at {said}, expected; found {say_strength(line, now.found)} {day(now.found_on)}"


def _habit(line: Line | None, draw: Draw) -> str:
    """The amount the label's strength would say, where the bottle is no longer that strong."""
    if line is None or draw.kind is Kind.MASS or not line.strength or not draw.strength:
        return ""
    if abs(draw.strength / line.strength - 1) <= 1e-3:
        return ""
    by_label = round(draw.amount * draw.strength / line.strength)
    return f"not {measured(by_label, draw.kind)}, the label's {raised(line.strength_text)}"


def _tool(known: Facts, make: Make, draw: Draw) -> str:
    if draw.kind is Kind.MASS:
        # the plan weighs on the finest that is in that day
        here = [each for each in known.balances if each.here(make.on)]
        finest = min(here, key=lambda each: (each.step, each.name), default=None)
        return finest.name if finest else ""
    # the plan tells of measuring in its reasons alone: "6.6 cm³ of B01: 10 cm³ pipette, ±1 %; ..."
    start = re.compile(rf"(?:\d+ × )?[^:]* of {re.escape(draw.bottle or draw.line)}: ([^;]+)")
    found = (start.match(reason) for reason in make.reasons)
    told = next((each.group(1) for each in found if each), "")
    # a size is not parted from its unit
    return "" if "nothing here measures" in told else re.sub(r"(?<=\d) (?=\D)", TIED, told)


def amounts_of(make: Make, takes: Sequence[Taken]) -> Amounts:
    """The sources in words, for the steps they belong to."""
    return Amounts(
        weighed=tuple(_take_words(each) for each in takes if each.weighed),
        measured=tuple(_take_words(e) for e in takes if not e.weighed and not e.filled),
        filled=tuple(f"with {each.what}{_from(each)}" for each in takes if each.filled),
        volume=_volume_words(make),
    )


def _take_words(taken: Taken) -> str:
    how = f", {'on ' if taken.weighed else ''}{taken.tool}" if taken.tool else ""
    often = f" ({taken.each})" if taken.each else ""
    return f"{taken.amount}{often} of {taken.what}{_from(taken)}{how}"


def _from(taken: Taken) -> str:
    if taken.bottle:
        return f" from {taken.bottle}"
    return f" ({taken.origin})" if taken.origin else ""


def _volume_words(make: Make) -> str:
    whole = amount(make.volume, Kind.VOLUME)
    if make.vessels < 2:
        return f"to {whole} in all"
    each = amount(round(make.volume / make.vessels), Kind.VOLUME)
    return f"to {each} in each of {make.vessels} vessels, {whole} in all"
