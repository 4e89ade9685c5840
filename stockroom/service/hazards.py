"""The hazards of a bottle, a line, or a substance at a strength; and a supplier's text kept.

Reading is light and works without a store. What is worked out is a starting point:
local rules, the supplier's sheet and the employer's risk assessment come first.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import replace
from datetime import date

from stockroom.errors import BadInput, MissingFigure, StockroomError
from stockroom.measure.strengths import Strength
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Bottle, Form, Line
from stockroom.safety.cautions import Goes, cautions_about
from stockroom.safety.clp import Classification, classify
from stockroom.safety.hazards import Hazards
from stockroom.safety.limits import Ingredient
from stockroom.safety.peroxide_formers import interval
from stockroom.service.answers import Done
from stockroom.service.bench import strength_of
from stockroom.service.hazard_contents import Part, one, parts_of
from stockroom.service.hazard_names import (
    House,
    house_of,
    kept_at,
    line_named,
    shipped_book,
    stuff_named,
)
from stockroom.service.hazard_strengths import counted_as, highest_of
from stockroom.settings import StoreAt
from stockroom.store.likeness import unknown
from stockroom.store.reading import reading
from stockroom.store.sources import citations

_BOTTLE = re.compile(r"[BbSs][0-9]+[a-z]?")


def hazards_of(
    store: StoreAt | None, what: str, strength: str | None = None, *, as_at: date | None = None
) -> Hazards:
    """The hazards of a bottle by number, a line, or a substance (at a strength).

    A bottle counts at the highest strength it could be. Without a strength a substance
    is taken as it is, undiluted. A supplier's text for the line takes the place of what
    is worked out. `as_at` left out is the practice day, else today.
    Raises: UnknownName with the nearest; BadAmount for a strength that cannot be read;
    MissingFigure where it cannot be turned into a per cent by mass; BadInput for no name.
    """
    from stockroom.service.database import day_for, is_practice

    if not what.strip():
        raise BadInput(f"{what!r}: the hazards of what?", "Name a bottle, a line or a substance.")
    if store is None or not store.exists():
        return _cited(_answer(House(shipped_book()), what, strength))
    day, practice = day_for(store, as_at), is_practice(store)
    with reading(store) as reader:
        found = _answer(house_of(reader, day), what, strength)
    return replace(_cited(found), practice=practice)


def _cited(found: Hazards) -> Hazards:
    """The same with the citation of every source it rests on or weighed."""
    from stockroom.service.database import seeds_folder

    held = citations(seeds_folder())
    keys = dict.fromkeys(each.source for each in found.worked_out.weighed)
    return replace(found, sources=tuple((key, held.get(key, key)) for key in keys))


def _answer(house: House, what: str, strength: str | None) -> Hazards:
    if strength is None and _BOTTLE.fullmatch(what.strip()):
        bottle = house.bottle(what.strip()) or house.bottle(what.strip().upper())
        if bottle is not None:
            return of_bottle(house, bottle)
        # B99 is no formula of boron where a bottle of that number was meant
        if house.numbers:
            raise unknown("bottle", what, house.numbers)
    line = line_named(house, what, strength)
    if line is not None:
        return of_kept_line(house, line)
    return _of_substance(house, what, strength)


def of_bottle(house: House, bottle: Bottle) -> Hazards:
    """What a bottle's contents are classed as, at the highest strength they could be."""
    return of_kept_line(house, house.recipes.lines[bottle.line], bottle)


def of_kept_line(house: House, line: Line, bottle: Bottle | None = None) -> Hazards:
    """What a line is classed as at its label's strength, or a bottle of it at its highest."""
    highest = highest_of(line, bottle.record if bottle else None)
    try:
        parts = parts_of(line, highest.strength if highest else None, house.recipes)
        lacking: tuple[str, ...] = ()
    except MissingFigure as missing:
        # no figure, no class: said, with the figure that is wanted
        parts, lacking = (), (missing.message,)
    texts = house.texts(line.key)
    return Hazards(
        what=f"{bottle.number} {line.key}" if bottle else line.key,
        strength=highest.words if highest else "",
        worked_out=classify(_ingredients(house, parts) or [Ingredient(line.key, 100.0)]),
        contents=tuple(part.content for part in parts),
        bottle=bottle.number if bottle else "",
        line=line.key,
        sheet=texts[0] if texts else None,
        older=texts[1:],
        notes=(*_notes(house, parts), *lacking),
        cautions=_cautions(house, parts),
    )


def _of_substance(house: House, what: str, strength: str | None) -> Hazards:
    stuff, typed = stuff_named(house, what, strength)
    meant = typed or kept_at(stuff)
    amount: Strength | None = strength_of(meant, stuff) if meant else None
    part = one(stuff, amount)
    whose = "as asked" if typed else "as it is usually kept"
    return Hazards(
        what=f"{stuff.name} {typed or ''}".strip(),
        strength=f"{whose}, {amount.text}" if amount else "as it is, undiluted",
        worked_out=classify(_ingredients(house, [part])),
        contents=(part.content,),
        notes=_notes(house, [part]),
        cautions=_cautions(house, [part]),
    )


def _ingredients(house: House, parts: Sequence[Part]) -> list[Ingredient]:
    return [_ingredient(house, part) for part in parts]


def _ingredient(house: House, part: Part) -> Ingredient:
    limits = house.book.of(*house.names(part.stuff))
    return Ingredient(
        part.stuff.substance or part.stuff.name,
        part.percent,
        limits,
        counted_as(part.percent, part.stuff, limits),
        part.stuff.storage_group,
    )


def _notes(house: House, parts: Sequence[Part]) -> tuple[str, ...]:
    notes = [f"{part.stuff.name}: {part.note}" for part in parts if part.note]
    notes += [
        _forms_peroxide(part.stuff.substance or part.stuff.name, former)
        for part in parts
        if (former := house.former(part.stuff)) and part.percent >= _STRONG
    ]
    return tuple(dict.fromkeys(notes))


def _forms_peroxide(substance: str, former: str) -> str:
    with_it, without = (interval(former, opened=True, stabilised=yes) for yes in (True, False))
    said = f"{substance}: peroxide-former of class {former}; once opened, {without.in_words}"
    return said if with_it == without else f"{said}, with a stabiliser {with_it.in_words}"


_STRONG = 20.0
"""Per cent by mass from which an acid or ammonia is concentrated here: ours, no source."""


def _cautions(house: House, parts: Iterable[Part]) -> tuple[str, ...]:
    found = cautions_about(_goes(house, part) for part in parts)
    return tuple(f"{each.step}: {each.text}" for each in found)


def _goes(house: House, part: Part) -> Goes:
    stuff = part.stuff
    return Goes(
        stuff.substance,
        stuff.storage_group,
        solid=stuff.form is Form.SOLID,
        strong=part.percent >= _STRONG,
        percent=part.percent,
        former=house.former(stuff),
    )


def hazards_of_makes(store: StoreAt, plan: Plan) -> dict[str, Hazards]:
    """The hazards of every line a plan makes, at its label's strength, by key.

    Never raises for a line: one that cannot be worked out is "not entered", and says why.
    """
    with reading(store) as reader:
        house = house_of(reader, plan.as_at)
        lines = dict.fromkeys(make.line for make in plan.makes)
        return {key: _or_not_entered(house, key) for key in lines}


def _or_not_entered(house: House, key: str) -> Hazards:
    try:
        return of_kept_line(house, house.recipes.lines[key])
    except StockroomError as trouble:
        lacking = Classification(notes=(trouble.message,), unknown=(key,), entered=False)
        return Hazards(key, "", lacking, line=key)


def enter_text(
    path: StoreAt,
    line: str,
    *,
    text: str,
    signal: str,
    sheet: str,
    why: str,
    today: date,
    by: str,
) -> Done:
    """Keep what the supplier's sheet says of a line; it counts from now on, the older stays.

    Raises: UnknownName for the line; BadInput without a code, a sheet, a reason or initials.
    """
    from stockroom.service.work import working
    from stockroom.store.hazard_texts import enter_text as keep
    from stockroom.store.names import find_line

    with working(path, on=None, today=today, by=by) as work:
        bottle = _BOTTLE.fullmatch(line.strip())
        found = work.line(work.bottle(line)) if bottle else find_line(work.session, line)
        row = keep(
            work.session,
            found,
            text=text,
            signal=signal,
            sheet=sheet,
            why=why,
            by=work.stamp.by,
            today=today,
            at=work.stamp.entered_at,
        )
        words = f"{found.key}: {row.signal_word or 'no signal word'}, {row.statements}"
        return Done(
            f"Hazard text of {words} (from {row.sheet}).",
            next=f'stockroom hazards "{found.key}"',
            practice=work.practice,
        )
