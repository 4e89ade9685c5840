"""What an order number of the plan, O02, stands for: on the sheet kept last, else in the plan now.

Placing one order renumbers the rest, so a number is read as on the sheet it was printed on.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.errors import NotAllowed
from stockroom.measure.days import spell_day
from stockroom.planning.changing.kept import KeptOrder
from stockroom.planning.changing.kept_form import read
from stockroom.planning.decisions import Order, Plan
from stockroom.planning.facts import Facts, Placed
from stockroom.service.known import known_from
from stockroom.service.replayed import replayed_plan
from stockroom.service.work import Work
from stockroom.store import orders
from stockroom.store.likeness import unknown
from stockroom.store.printed_plans import Printed, last_kept


@dataclass(frozen=True, slots=True)
class Numbered:
    """An order of the plan as it is now, what its number was read from, and what to say of it."""

    order: Order
    told: tuple[str, ...]


def numbered(work: Work, number: str, today: date, meant: str = "") -> Numbered:
    """The order that a number stands for, as the plan now has it.

    `meant` is what stood beside the number (`Order.wanted`) in the plan it was read off: then
    that is what it stands for, and nothing else.
    Raises: UnknownName for a number neither has; NotAllowed where an order placed since is of
    it already, or the plan now has something else under the number; BrokenPlan.
    """
    wanted = number.strip().upper()
    if meant:
        return _as_meant(wanted, meant, replayed_plan(known_from(work.reader, today)))
    printed = last_kept(work.reader, today)
    # made as the sheet was: on the safe side the same bookings may want more
    cautious = printed is not None and printed.cautious
    known = known_from(work.reader, today, cautious=cautious)
    now = replayed_plan(known)
    kept, unread = _kept(printed, wanted)
    if printed is not None and kept is not None:
        return _as_kept(work, printed, kept, known, now)
    found = next((one for one in now.orders if one.id == wanted), None)
    if found is None:
        raise unknown("order of the plan", number, [one.id for one in now.orders])
    moved = (_MOVED,) if len(now.orders) > 1 else ()
    return Numbered(found, (f"{wanted} of the plan now.", *unread, *moved))


_MOVED = (
    "The rest of the plan has other numbers now: look again with stockroom buying, or keep the"
    " plan you print with stockroom plan --keep."
)


def _as_meant(number: str, meant: str, now: Plan) -> Numbered:
    """What stood beside the number where it was read, and as the plan still has it.

    Raises: NotAllowed where the plan has it no more, or in other packs.
    """
    alike = [one for one in now.orders if one.wanted == meant]
    # its own number first, should two orders be of the same
    alike.sort(key=lambda one: one.id != number)
    if alike:
        moved = f"It was {number} when it was shown, and {alike[0].id} by now."
        return Numbered(alike[0], () if alike[0].id == number else (moved,))
    same = next((one for one in now.orders if one.id == number), None)
    line = next((one for one in now.orders if meant.startswith(f"{one.line}, ")), None)
    told = f"which is no longer to be ordered so: {number} of the plan now is "
    raise NotAllowed(
        f"{number} was {meant}, {told}{same.wanted if same else 'nothing'}.",
        f"The plan now wants {line.wanted} ({line.id}): look again, then enter it."
        if line
        else "Was it ordered a moment ago? Look again before more is ordered.",
    )


def _kept(printed: Printed | None, wanted: str) -> tuple[KeptOrder | None, tuple[str, ...]]:
    """The order of that number in the plan kept last, if any; and that it cannot be read."""
    if printed is None:
        return None, ()
    try:
        kept = read(printed.decisions)
    except (ValueError, TypeError, KeyError):
        return None, (f"Plan {printed.number} cannot be read, so its numbers count for nothing.",)
    return next((one for one in kept.orders if one.id == wanted), None), ()


def _as_kept(work: Work, printed: Printed, kept: KeptOrder, known: Facts, now: Plan) -> Numbered:
    sheet = f"{kept.id} of plan {printed.number}"
    found = next((one for one in now.orders if one.line == kept.line), None)
    since = _placed_since(work, printed, kept, known.placed)
    if since is not None:
        raise _ordered_already(sheet, since, found)
    same = next((one for one in now.orders if one.id == kept.id), None)
    if found is None:
        other = f", and {kept.id} of the plan now is {same.line}" if same is not None else ""
        raise NotAllowed(
            f"{sheet} is {kept.line}, which is no longer to be ordered{other}.",
            "See stockroom buying; what is wanted all the same is ordered by its name.",
        )
    told = [f"{sheet} is {found.line}."]
    if (found.packs, found.pack) != (kept.packs, kept.pack):
        was = f"{kept.packs} × {kept.pack}"
        told.append(f"The sheet has {was}; the plan now has {found.packs} × {found.pack}.")
    # whoever read the number off the screen meant that one
    if same is not None and same.line != kept.line:
        told.append(f"Not {same.line}, which has {kept.id} in the plan now.")
    return Numbered(found, tuple(told))


def _placed_since(
    work: Work, printed: Printed, kept: KeptOrder, placed: tuple[Placed, ...]
) -> Placed | None:
    """The order of the same line entered after the sheet was kept, if it still stands."""
    last = printed.marks.get("placed", 0)
    for one in placed:
        if one.line != kept.line or one.cancelled is not None:
            continue
        # by the row and not by the day: a sheet may be kept and worked through on one day
        if (orders.find_order(work.session, one.number).id or 0) > last:
            return one
    return None


def _ordered_already(sheet: str, since: Placed, still: Order | None) -> NotAllowed:
    words = (
        f"{sheet} is {since.line}, and {since.number} of {spell_day(since.ordered)} is the order"
        f" of it: {since.packs} × {since.pack}."
    )
    if still is None:
        return NotAllowed(words, f"More of it all the same? {_by_name(since.line, since.pack)}")
    rest = f"The plan still wants {still.packs} × {still.pack}: "
    return NotAllowed(words, f"{rest}{_by_name(still.line, still.pack, still.packs)}")


def _by_name(line: str, pack: str, packs: int = 1) -> str:
    return f'stockroom order "{line}" {packs} "{pack}"'
