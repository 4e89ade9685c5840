"""Why, and why not: words into what is asked about, the plan made, its reasons told.

Opens the store for reading only, so nothing heavy is loaded.
"""

from __future__ import annotations

from dataclasses import replace
from datetime import date

from stockroom.errors import BadAmount, BadDate, BadInput, UnknownName
from stockroom.measure.amounts import Amount
from stockroom.measure.days import parse_day
from stockroom.measure.parsing import parse_amount
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.planning.whys.why import why as reasons_for
from stockroom.planning.whys.why_not import Other, why_not
from stockroom.service.finding import line_among
from stockroom.service.replayed import replayed_plan
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain, unknown
from stockroom.store.reading import reading
from stockroom.store.snapshot_bottles import bottle_of


def reasons(path: StoreAt, known: Facts, ref: str, instead: str | None) -> tuple[str, ...]:
    """The reasons behind a reference, or why `instead` does not stand in its place.

    At most five lines of at most two rows of a terminal. Raises: UnknownName with the
    nearest when nothing of either name is known; BadDate, BadAmount for a day or an amount
    that cannot be read; BadInput for an empty name; BrokenPlan.
    """
    if not ref.strip():
        raise BadInput(f'Why what? "{ref}" names nothing.', "stockroom why K15")
    # from the first booking still to come, or promises made to it would be missing
    known = replace(known, start=min(known.start, known.as_at))
    whole = replayed_plan(known)
    if instead is not None:
        return _instead(path, known, whole, ref, instead)
    lines = reasons_for(known, whole, _as_day(ref), _substances(path, ref))
    lines = lines or _gone(path, ref, known.as_at)
    if not lines:
        what = "need, booking, make, order, bottle, day, recipe or item"
        raise unknown(what, ref, _names(known, whole))
    return lines


def _as_day(ref: str) -> str:
    """A day however it is written, as ISO; any other name as it is."""
    if sum(map(str.isdigit, ref)) < 6:
        return ref
    try:
        return parse_day(ref).isoformat()
    except BadDate:
        return ref


def _names(known: Facts, whole: Plan) -> list[str]:
    names = [*(b.number for b in known.bookings), *(a.ref for a in whole.needs)]
    names += [*(m.id for m in whole.makes), *(o.id for o in whole.orders)]
    names += [one.number for one in whole.on_order]
    names += [*(b.number for b in known.bottles), *(r.code for r in known.recipes.values())]
    return [*names, *known.lines]


def _gone(path: StoreAt, ref: str, as_at: date) -> tuple[str, ...]:
    """What there is to say of a bottle discarded since."""
    with reading(path) as reader:
        bottle = bottle_of(reader, ref.strip().upper(), as_at)
    return (f"{bottle.number} {bottle.line}: gone, discarded",) if bottle else ()


def _substances(path: StoreAt, ref: str) -> list[str]:
    """The substances a text is another name of: "hypo" is sodium thiosulfate."""
    with reading(path) as reader:
        named = {row["id"]: row["substance"] for row in reader.rows("substance")}
        others = [(row["name"], named[row["substance_id"]]) for row in reader.rows("other_name")]
    return [substance for name, substance in others if plain(name) == plain(ref)]


# -- instead ---------------------------------------------------------------------------------


def _instead(path: StoreAt, known: Facts, whole: Plan, ref: str, text: str) -> tuple[str, ...]:
    if not text.strip():
        raise BadInput(f"Instead of {ref}, what?", "stockroom why K11 --instead S10")
    lines = why_not(known, whole, ref, _other(path, known, whole, ref, text))
    if not lines:
        asked = [a.booking.number for a in whole.needs] + [a.ref for a in whole.needs]
        asked += [m.id for m in whole.makes] + [o.id for o in whole.orders]
        raise unknown("booking, need, make, order or bottle", ref, [*asked, *_numbers(known)])
    return lines


def _other(path: StoreAt, known: Facts, whole: Plan, ref: str, text: str) -> Other:
    """What was typed behind --instead: a label's number before a name, a day before an amount."""
    wanted = text.strip().lower()
    for bottle in known.bottles:
        if bottle.number.lower() == wanted:
            return bottle
    for make in whole.makes:
        if make.id.lower() == wanted:
            return make
    measured = _day_or_amount(text)
    if measured is not None:
        return measured
    if _sells(known, whole, ref, text):
        return text
    return _line(path, known, text)


def _numbers(known: Facts) -> list[str]:
    return [bottle.number for bottle in known.bottles]


def _day_or_amount(text: str) -> date | Amount | None:
    typed = text.strip()
    # a bare number beside a make can only be its volume
    if typed.replace(".", "", 1).isdigit() and len(typed) < 8:
        return Amount.cm3(float(typed))
    digits = sum(map(str.isdigit, typed))
    if digits >= 6 and typed[:1].isdigit() and not any(mark.isspace() for mark in typed):
        return parse_day(typed)
    try:
        return parse_amount(typed)
    except BadAmount:
        pass
    try:
        return parse_day(typed)
    except BadDate:
        return None


def _sells(known: Facts, whole: Plan, ref: str, text: str) -> bool:
    """True for a supplier of the line that the order asked about is for."""
    order = next((o for o in whole.orders if o.id.lower() == ref.strip().lower()), None)
    packs = known.lines[order.line].packs if order else ()
    return any(pack.supplier.lower() == text.strip().lower() for pack in packs if pack.supplier)


def _line(path: StoreAt, known: Facts, text: str) -> Other:
    names = {plain(x) for n in known.lines.values() for x in (n.key, n.item, n.substance)}
    # another name of a substance before a part of the name of one: "hypo" is no hypochlorite
    others = [] if plain(text) in names else _substances(path, text)
    try:
        return line_among(known, next(iter(others), text))
    except UnknownName as trouble:
        if text.strip()[1:].rstrip("abcdef").isdigit():
            raise _no_number(path, known, text) from None
        raise trouble


def _no_number(path: StoreAt, known: Facts, text: str) -> BadInput:
    gone = _gone(path, text, known.as_at)
    if gone:
        return UnknownName(f"{gone[0]}: it stands in nobody's place.", "Ask about a bottle held.")
    return unknown("bottle or make", text, _numbers(known))
