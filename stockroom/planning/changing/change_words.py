"""A difference in words. Each part is (in what it differs, the words for it)."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import date

from stockroom.measure.amounts import Kind
from stockroom.measure.days import format_time
from stockroom.planning.amounts import say
from stockroom.planning.changing.kept import (
    KeptBooking,
    KeptCheck,
    KeptMake,
    KeptNeed,
    KeptOrder,
    KeptPlan,
    KeptSource,
)
from stockroom.planning.facts import Firmness
from stockroom.planning.numbers import natural

Parts = list[tuple[str, str]]

_SAME = 5e-4
"""Amounts this near, as a fraction, print alike to four figures: no change. Our choice."""


def named(item: str, strength: str) -> str:
    """An item with its strength."""
    return f"{item} {strength}".strip()


def booking_parts(was: KeptBooking, now: KeptBooking) -> Parts:
    """In what a booking that stands differs: day, groups, recipe, firmness."""
    parts: Parts = []
    if was.on != now.on:
        parts.append(("day", f"moved {was.on} → {now.on}"))
    if was.minute != now.minute:
        parts.append(("day", f"{format_time(was.minute)} → {format_time(now.minute)}"))
    if was.groups != now.groups:
        parts.append(("amount", f"{was.groups} → {_groups(now.groups)}"))
    if was.spare != now.spare:
        parts.append(("amount", f"spare {was.spare / 10:g} → {now.spare / 10:g} %"))
    if (was.recipe, was.version) != (now.recipe, now.version):
        old, new = f"{was.recipe} version {was.version}", f"{now.recipe} version {now.version}"
        parts.append(("sources", f"{old} → {new}"))
    if was.firmness is not now.firmness:
        parts.append(("outcome", f"{was.firmness} → {now.firmness}"))
    return parts


def booking_added(now: KeptBooking) -> str:
    """A booking that was not in the kept plan."""
    said = "" if now.firmness is Firmness.FIRM else f", {now.firmness}"
    return f"booked {now.on} {format_time(now.minute)}, {_groups(now.groups)}{said}"


def booking_gone(was: KeptBooking, now: KeptBooking | None) -> str:
    """A booking the plan no longer counts."""
    if now is None:
        return f"was {was.on}, {_groups(was.groups)}; no longer in the days planned"
    return f"{now.firmness}; was {was.on}, {_groups(was.groups)}"


def _groups(count: int) -> str:
    return "1 group" if count == 1 else f"{count} groups"


def need_parts(was: KeptNeed, now: KeptNeed) -> Parts:
    """In what a need of both plans differs: outcome, amount, bottles."""
    parts: Parts = []
    if was.outcome is not now.outcome or bool(was.short) != bool(now.short):
        parts.append(("outcome", f"{need_now(was)} → {need_now(now)}"))
    elif was.short and not _alike(was.short, now.short):
        parts.append(("outcome", f"short {say(was.short, was.kind)} → {say(now.short, now.kind)}"))
    resized = not _alike(was.amount, now.amount)
    if resized:
        parts.append(("amount", f"{say(was.amount, was.kind)} → {say(now.amount, now.kind)}"))
    # what a need is served from is told with what becomes of it
    if not parts or (resized and len(parts) == 1):
        parts += _moved(was.sources, now.sources, resized=resized)
    return parts


def need_now(need: KeptNeed) -> str:
    """What becomes of a need: "have from S03", "make", "short 55 cm³"."""
    if need.short:
        return f"{need.outcome} {need_short(need)}"
    bottles = [source.bottle for source in need.sources if source.bottle]
    return f"{need.outcome} from {' + '.join(bottles)}" if bottles else str(need.outcome.value)


def need_short(need: KeptNeed) -> str:
    """What cannot be had of it."""
    return say(need.short, need.kind)


def make_parts(was: KeptMake, now: KeptMake, before: KeptPlan, after: KeptPlan) -> Parts:
    """In what a make of both plans differs: amount, day and what the move saves, sources."""
    parts: Parts = []
    resized = not _alike(was.volume, now.volume)
    if resized:
        parts.append(("amount", f"{_volume(was)} → {_volume(now)}"))
    if was.bookings != now.bookings:
        parts.append(("amount", f"for {_list(was.bookings)} → {_list(now.bookings)}"))
    if was.on != now.on:
        moved = f"moved from {was.on} to {now.on}{_saves(was, now, before, after)}"
        parts.append(("day", moved))
    elif was.finish_on != now.finish_on:
        parts.append(("day", f"finished {_day(was.finish_on)} → {_day(now.finish_on)}"))
    elif was.ready != now.ready:
        parts.append(("day", f"ready {was.ready} → {now.ready}"))
    parts += _moved(was.sources, now.sources, resized=resized)
    if was.minutes != now.minutes:
        parts.append(("amount", f"{was.minutes} → {now.minutes} min"))
    return _once(parts)


def make_now(now: KeptMake) -> str:
    """A make that was not in the kept plan."""
    return (
        f"{_volume(now)} on {now.on} for {_list(now.bookings) or 'stock'}{_from(now.sources)}"
        f", {now.minutes} min"
    )


def make_gone(was: KeptMake) -> str:
    """A make the plan no longer has."""
    return f"was {_volume(was)} on {was.on} for {_list(was.bookings) or 'stock'}"


def _saves(was: KeptMake, now: KeptMake, before: KeptPlan, after: KeptPlan) -> str:
    """What a move saves in hands-on minutes, where it does; "" where less is made anyway."""
    for line in (was.line, *(s.line for s in (*was.sources, *now.sources) if not s.bottle)):
        old = [make for make in before.makes if make.line == line]
        new = [make for make in after.makes if make.line == line]
        saved = sum(make.minutes for make in old) - sum(make.minutes for make in new)
        served = {n for make in old for n in make.bookings} <= {n for m in new for n in m.bookings}
        if saved > 0 and served:
            one = next((m for m in new if m.line == was.line and len(m.bookings) > 1), None)
            batch = now if line == was.line and len(now.bookings) > 1 else one
            why = f"one batch for {_and(batch.bookings)}" if batch else f"one batch of {line}"
            return f": saves {saved} min: {why}"
    return ""


def order_parts(was: KeptOrder, now: KeptOrder) -> Parts:
    """In what an order of both plans differs: packs, days, money."""
    parts: Parts = []
    if (was.packs, was.pack) != (now.packs, now.pack):
        parts.append(("amount", f"{_packs(was)} → {_packs(now)}"))
    if was.pence != now.pence:
        parts.append(("amount", f"{_money(was.pence)} → {_money(now.pence)}"))
    if was.order_by != now.order_by:
        parts.append(("day", f"order by {was.order_by} → {now.order_by}"))
    elif was.need_by != now.need_by:
        parts.append(("day", f"needed {was.need_by} → {now.need_by}"))
    return _once(parts)


def order_now(now: KeptOrder) -> str:
    """An order that was not in the kept plan."""
    served = f" for {_list(now.bookings)}" if now.bookings else ""
    return f"{_packs(now)} by {now.order_by}{served}, {_money(now.pence)}"


def order_gone(was: KeptOrder) -> str:
    """An order the plan no longer has."""
    return f"was {_packs(was)} by {was.order_by}, {_money(was.pence)}"


def check_parts(was: KeptCheck, now: KeptCheck) -> Parts:
    """In what a check of both plans differs: its best day and its last, and whether it must be."""
    parts: Parts = []
    if was.best != now.best:
        parts.append(("day", f"{was.what} {was.best} → {now.best}"))
    # the day to do it and the last there is are often one
    if was.by != now.by and (was.best, now.best) != (was.by, now.by):
        parts.append(("day", f"by {was.by} → {now.by}"))
    if was.optional != now.optional:
        must, may = f"{now.what} must be done", f"{now.what} only saves work"
        parts.append(("outcome", may if now.optional else must))
    return _once(parts)


def check_now(now: KeptCheck) -> str:
    """A check that was not in the kept plan."""
    return f"{now.what} on {now.best}, by {now.by}, for {_list(now.bookings) or 'its date'}"


def check_gone(was: KeptCheck) -> str:
    """A check the plan no longer has."""
    return f"was {was.what} on {was.best}, by {was.by}"


def _moved(was: tuple[KeptSource, ...], now: tuple[KeptSource, ...], *, resized: bool) -> Parts:
    """Other bottles, or other amounts of the same where nothing else makes them differ."""
    old, new = _places(was), _places(now)
    if list(old) != list(new):
        return [("sources", f"from {_names(old)} → {_names(new)}")] if old and new else []
    if resized:
        return []
    uneven = [p for p in old if not _alike(old[p].amount, new[p].amount)]
    return [
        ("sources", f"{p} {say(old[p].amount, old[p].kind)} → {say(new[p].amount, new[p].kind)}")
        for p in uneven
    ]


def _places(sources: Iterable[KeptSource]) -> dict[str, KeptSource]:
    return {source.bottle or source.line: source for source in sources}


def _names(places: Iterable[str]) -> str:
    return " + ".join(places)


def _from(sources: tuple[KeptSource, ...]) -> str:
    return f" from {_names(_places(sources))}" if sources else ""


def _alike(one: int, other: int) -> bool:
    return abs(one - other) <= _SAME * max(abs(one), abs(other))


def _volume(make: KeptMake) -> str:
    return say(make.volume, Kind.VOLUME)


def _packs(order: KeptOrder) -> str:
    return f"{order.packs} × {order.pack}"


def _money(pence: int) -> str:
    return f"£{pence // 100}.{pence % 100:02d}"


def _day(day: date | None) -> str:
    return day.isoformat() if day else "at once"


def _list(numbers: Iterable[str]) -> str:
    return ", ".join(sorted(numbers, key=natural))


def _and(numbers: Iterable[str]) -> str:
    *most, last = sorted(numbers, key=natural)
    return f"{', '.join(most)} and {last}" if most else last


def _once(parts: Parts) -> Parts:
    """One part for each thing it differs in, their words together in order."""
    merged: dict[str, list[str]] = {}
    for part, text in parts:
        merged.setdefault(part, []).append(text)
    return [(part, ", ".join(texts)) for part, texts in merged.items()]
