"""The true strength of what a class gets on its day, and how that is known.

Found, expected, by dilution and by the label are kept apart: a figure nobody found is given to
two significant figures, and an exact line that nobody checked in time gets none at all.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date
from decimal import Decimal

from stockroom.keeping.record import Record
from stockroom.keeping.strength import Strengths, strengths_on
from stockroom.planning.amounts import label_scale, say_strength
from stockroom.planning.choosing.fitness import found_valid_from
from stockroom.planning.decisions import Answer, Draw, Make, Plan
from stockroom.planning.facts import Bottle, Closeness, Facts, Line, Requirement
from stockroom.planning.known import by_dilution
from stockroom.reports.words import day_in_words, raised

FOUND, DILUTED, EXPECTED, LABEL, UNCHECKED = (
    "found",
    "by dilution",
    "expected",
    "label",
    "not checked",
)
"""How a strength is known, from the best to none at all."""

_SAME = 1e-3
"""Under a thousandth the figures print alike, so nothing has faded or differs."""

_ISO = re.compile(r"\b\d{4}-(?:0\d|1[0-2])-(?:0\d|[12]\d|3[01])\b")

_DEEPEST = 4
"""Dilutions of dilutions looked through. A house choice: a longer chain is queried by the plan."""


@dataclass(frozen=True, slots=True)
class Known:
    """One strength on the day: `today` in words, "" where there is no figure to give.

    `basis` is one of the words above, `how` the rest of it, `source` the
    bottle or the make it comes from; `card` is what the recipe asks
    for. `label` is what the bottle says, where that is something else. `off` is the part
    by which it is above (below) the card, None where there is no figure to say so of.
    """

    ref: str
    booking: str
    item: str
    card: str
    closeness: str
    today: str
    basis: str
    how: str
    source: str
    label: str = ""
    off: float | None = None


def requirement_of(known: Facts, need: Answer) -> Requirement:
    """The recipe line a need comes from."""
    number = int(need.ref.rsplit(".", 1)[1])
    recipe = known.recipes[need.booking.recipe, need.booking.version]
    return next(each for each in recipe.requirements if each.number == number)


def strengths_of(known: Facts, plan: Plan, needs: tuple[Answer, ...]) -> tuple[Known, ...]:
    """The strengths of these needs, in their order; none for what has no strength to speak of."""
    bottles = {bottle.number: bottle for bottle in known.bottles}
    makes = {make.id: make for make in plan.makes}
    seen = _Seen(known, bottles, makes)
    row = [told for need in needs for told in seen.of(need)]
    return tuple(dict.fromkeys(row))


@dataclass(frozen=True, slots=True)
class _Basis:
    value: float
    basis: str
    how: str
    source: str


@dataclass(frozen=True, slots=True)
class _Seen:
    known: Facts
    bottles: dict[str, Bottle]
    makes: dict[str, Make]

    def of(self, need: Answer) -> Iterator[Known]:
        wanted = requirement_of(self.known, need)
        # any strength will do there, so none is told
        if wanted.closeness is Closeness.PRESENT and wanted.tolerance is None:
            return
        for draw in need.draws:
            line = self.known.lines[draw.line or need.line]
            if draw.bottle in self.bottles and line.strength is not None:
                yield self._told(need, wanted, line, self._in_bottle(draw, line, wanted, need))
        make = self.makes.get(need.make)
        line = self.known.lines[need.line]
        if make is not None and line.strength is not None:
            yield self._told(need, wanted, line, self._made(make, line, wanted, need.booking.on))

    def _told(self, need: Answer, wanted: Requirement, line: Line, basis: _Basis) -> Known:
        named = basis.basis in (FOUND, DILUTED)
        figure = say_strength(line, basis.value) if named else two_figures(line, basis.value)
        blank = basis.basis == UNCHECKED
        return Known(
            ref=need.ref,
            booking=need.booking.number,
            item=need.item,
            card=raised(need.strength),
            closeness=need.closeness,
            today="" if blank else raised(figure),
            basis=basis.basis,
            how=raised(_spelt(basis.how)),
            source=basis.source,
            label="" if _alike(basis.value, line.strength) else raised(line.strength_text),
            off=None if blank else _off(wanted, basis.value),
        )

    def _in_bottle(self, draw: Draw, line: Line, wanted: Requirement, need: Answer) -> _Basis:
        bottle, on = self.bottles[draw.bottle], need.booking.on
        strengths = strengths_on(bottle.record, line.rules, on)
        # as the plan takes it, which may open the bottle first
        value = draw.strength or strengths.likely or line.strength or 0.0
        last = strengths.found_on
        if wanted.closeness is Closeness.EXACT and not _in_time(strengths, wanted, line, on):
            before = f"found {day_in_words(last)}, too long before" if last else ""
            return _Basis(value, UNCHECKED, before, bottle.number)
        if wanted.closeness is Closeness.EXACT and strengths.found and last:
            # in time, so what was found counts; a class reckons with no estimate
            return _Basis(strengths.found, FOUND, day_in_words(last), bottle.number)
        return self._of_bottle(bottle, line, strengths, value)

    def _of_bottle(self, bottle: Bottle, line: Line, strengths: Strengths, value: float) -> _Basis:
        here = bottle.number
        if strengths.found is not None and strengths.found_on is not None:
            found, day = say_strength(line, strengths.found), day_in_words(strengths.found_on)
            if _alike(value, strengths.found):
                return _Basis(value, FOUND, day, here)
            return _Basis(value, EXPECTED, f"carried forward from {found} found {day}", here)
        if not _alike(value, strengths.nominal):
            start = bottle.known_by or "its label"
            return _Basis(value, EXPECTED, f"{start} carried forward", here)
        if bottle.known_by:
            return _Basis(value, DILUTED, _from(bottle.known_by), here)
        return _Basis(value, LABEL, "not checked", here)

    def _made(self, make: Make, line: Line, wanted: Requirement, on: date) -> _Basis:
        value = self._aged(make, line, on)
        method = self.known.methods.get(line.key)
        to_find = method is not None and method.titrated
        when = day_in_words(make.finish_on or make.ready)
        if wanted.closeness is Closeness.EXACT:
            return _Basis(value, UNCHECKED, _titrate(to_find, when), make.id)
        if to_find:
            return _Basis(value, EXPECTED, f"to be titrated {when}", make.id)
        basis, how = self._diluted(make)
        if basis == DILUTED and not _alike(value, line.strength):
            basis = EXPECTED
        return _Basis(value, basis, how, make.id)

    def _aged(self, make: Make, line: Line, on: date) -> float:
        # what a make will hold by then: made to its nominal strength, and fading from there
        record = Record(made=make.ready, nominal=line.strength)
        return strengths_on(record, line.rules, on).likely or line.strength or 0.0

    def _diluted(self, make: Make, depth: int = 0) -> tuple[str, str]:
        """How what a make gives is known: by dilution of something found, or expected."""
        draw = self._solute(make)
        if draw is None:
            return EXPECTED, "made up from its parts"
        bottle = self.bottles.get(draw.bottle)
        if bottle is None:
            earlier = self.makes.get(draw.make)
            if earlier is None or depth > _DEEPEST:
                return EXPECTED, f"from {draw.item}, still to come"
            return self._diluted(earlier, depth + 1)
        line = self.known.lines[bottle.line]
        if draw.strength is None:
            return EXPECTED, f"weighed from {bottle.number}"
        strengths = strengths_on(bottle.record, line.rules, make.on)
        told = by_dilution(bottle, strengths)
        source = self._of_bottle(bottle, line, strengths, draw.strength)
        if told and source.basis in (FOUND, DILUTED):
            return DILUTED, _from(told)
        said = two_figures(line, source.value)
        return EXPECTED, f"by dilution of {bottle.number}, {said} {_basis_words(source.basis)}"

    def _solute(self, make: Make) -> Draw | None:
        method = self.known.methods.get(make.line)
        parts = method.ingredients if method else ()
        lines = {line for part in parts if part.per_dm3 is None for line in part.lines}
        return next((draw for draw in make.sources if draw.line in lines), None)


def two_figures(line: Line, value: float) -> str:
    """A strength nobody found, to two significant figures in the label's own unit: "99 vol".

    Zeros that count are kept: "0.050 mol/dm³". The trade's habit, and a house choice.
    """
    scale, unit = label_scale(line)
    number = Decimal(repr(float(value * scale)))
    if not number:
        return f"0 {unit}".strip()
    shown = round(number, 1 - number.adjusted())
    # 99.6 becomes 100 and has then a figure too many
    shown = round(shown, 1 - shown.adjusted())
    return f"{shown:f} {unit.replace('dm3', 'dm³')}".strip()


def percent_off(off: float) -> str:
    """ "weaker by 3.5 %", "stronger by 12 %": two figures, since neither end is better known."""
    size = abs(off) * 100
    return f"{'stronger' if off > 0 else 'weaker'} by {size:.2g} %"


def differs(told: Known) -> bool:
    """Whether it is worth telling that it is not the card's strength.

    Found: from a thousandth on; else from a hundredth, about what a burette and an indicator
    leave open. Common practice, no source.
    """
    least = _SAME if told.basis == FOUND else 0.01
    return told.off is not None and abs(told.off) > least


def how_words(told: Known, *, plain: bool = False) -> str:
    """How a strength is known: "found 20 Nov 2026, S08", "expected: weighed from B08, M28".

    `plain` leaves out what it comes from: a make has another number in every plan.
    """
    if told.basis == LABEL:
        words = f"by its label, {told.how}"
    elif told.basis == EXPECTED:
        words = f"expected: {told.how}"
    else:
        words = f"{told.basis} {told.how}" if told.today else told.how
    words = words if plain else ", ".join(filter(None, (words, told.source)))
    return f"{words} (label {told.label})" if told.label else words


def _basis_words(basis: str) -> str:
    return "by its label" if basis == LABEL else basis


def _spelt(text: str) -> str:
    return _ISO.sub(lambda found: day_in_words(date.fromisoformat(found[0])), text)


def _titrate(to_find: bool, when: str) -> str:
    return f"to be titrated {when}" if to_find else "nothing finds its strength"


def _from(told: str) -> str:
    return told.removeprefix("by dilution ")


def _alike(one: float, other: float | None) -> bool:
    return bool(other) and abs(one / (other or 1.0) - 1) <= _SAME


def _in_time(strengths: Strengths, wanted: Requirement, line: Line, on: date) -> bool:
    oldest = found_valid_from(wanted, line, on)
    return strengths.found_on is not None and strengths.found_on >= oldest


def _off(wanted: Requirement, value: float) -> float | None:
    low, high = wanted.lowest, wanted.highest
    if not low or not high:
        return None
    if low <= value <= high:
        return None if low != high else 0.0
    nearest = low if value < low else high
    return value / nearest - 1
