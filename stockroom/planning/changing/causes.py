"""Why a plan changed: the nearest thing that was entered, else time, else another change.

Nearness is counted in steps: what was entered for the thing's own booking or bottle, then for
its line, then for what it is made from, then for what shares that with it. Two plans are
never made to find a cause out: it is told by what hangs together, and says so by naming it.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

from stockroom.planning.changing.changes import About, Change, Comparison, What
from stockroom.planning.changing.differences import differences
from stockroom.planning.changing.kept import KeptMake, KeptPlan
from stockroom.planning.facts import Happened, HappenedKind

MOST_NAMED = 2
"""So many causes equally near are named; a longer list would explain nothing. Our choice."""

_OWN, _OWN_BESIDE, _LINE, _PART, _SHARES, _FAMILY, _HOUSE = range(7)

_Rank = tuple[int, int]


@dataclass(frozen=True, slots=True)
class _Root:
    """One thing that may be a cause. `sense` is 1 where more is asked for, -1 where less.

    `what` is in what a booking differs; `past` says that its day has gone by, no more.
    """

    happened: Happened
    what: frozenset[What] = frozenset()
    sense: int = 0
    past: bool = False


@dataclass(frozen=True, slots=True)
class _Web:
    """What hangs together in the two plans, line by line.

    `parts` is everything a line is made from, at whatever remove; `beside` what may take its
    place in something; `kin` all that can be reached; `asked_by` the bookings that hang on it.
    """

    parts: dict[str, frozenset[str]]
    beside: dict[str, frozenset[str]]
    asked_by: dict[str, frozenset[str]]
    kin: dict[str, frozenset[str]]


def compared(
    before: KeptPlan,
    after: KeptPlan,
    happened: Sequence[Happened] = (),
    *,
    supposed: bool = False,
) -> Comparison:
    """Two plans and every change between them with its cause, in the order of `differences`.

    `happened` is what was entered between them, the earliest first. `supposed` says that the
    bookings were not changed by anybody, only thought to be.
    """
    found = differences(before, after, happened)
    roots = _roots(found, happened)
    web = _web(before, after)
    told = [
        replace(change, cause="as asked")
        if supposed and change.about is About.BOOKING
        else _caused(change, roots, web, before, after, supposed=supposed)
        for change in found
    ]
    whole = tuple(
        change if change.cause else replace(change, cause=_follows(change, told, web))
        for change in told
    )
    return Comparison(before, after, whole)


def _roots(found: Iterable[Change], happened: Sequence[Happened]) -> list[_Root]:
    """What may be a cause: bookings as they really differ, and all else as it was entered."""
    bookings = [
        _Root(
            _of_booking(change, happened), frozenset(change.what), change.touched.sense, change.done
        )
        for change in found
        if change.about is About.BOOKING
    ]
    others = [
        _Root(each, sense=each.sense) for each in happened if each.kind is not HappenedKind.BOOKING
    ]
    return bookings + others


def _of_booking(change: Change, happened: Sequence[Happened]) -> Happened:
    number = change.now or change.ref
    # several changes of one booking come to one difference: the last hand is named
    hands = [h for h in happened if h.kind is HappenedKind.BOOKING and h.subject == number]
    last = hands[-1] if hands and not change.done else None
    return Happened(
        HappenedKind.BOOKING,
        number,
        f"{number}'s day is past" if change.done else f"{number} {change.text}",
        on=last.on if last else None,
        by=last.by if last else "",
        bookings=(number,),
    )


def _caused(
    change: Change,
    roots: Sequence[_Root],
    web: _Web,
    before: KeptPlan,
    after: KeptPlan,
    *,
    supposed: bool = False,
) -> Change:
    later = f"today is later, {after.as_at}"
    if change.about is About.BOOKING and not change.done:
        return replace(change, cause=_by_whom(change, roots))
    if change.done:
        return replace(change, cause="done" if What.DONE in change.what else later)
    ranked = sorted(
        (rank, place)
        for place, root in enumerate(roots)
        if (rank := _rank(change, root, web)) is not None
    )
    if supposed and len(ranked) > 1:
        # each may do nothing alone: what was supposed together is not told apart
        alike = [roots[place] for _, place in ranked]
        return replace(change, cause=f"supposed together: {_named(alike)}")
    nearest = ranked[0][0][0] if ranked else _HOUSE
    missed = _missed(change, roots, web, before, after) if nearest > _OWN else ""
    if missed:
        return replace(change, cause=f"today is later: {missed}")
    if ranked:
        near = [roots[place] for rank, place in ranked if rank == ranked[0][0]]
        # so far off it is a guess, and a guess is said to be one
        guess = "most likely: " if _SHARES <= nearest < _HOUSE else ""
        return replace(change, cause=guess + _named(near))
    if before.as_at < after.as_at:
        return replace(change, cause=f"{later}; it was {before.as_at} when the plan was kept")
    return change


def _missed(
    change: Change, roots: Sequence[_Root], web: _Web, before: KeptPlan, after: KeptPlan
) -> str:
    """What should have been done by now and was not: the thing itself, or an order it waits for."""
    day, line = change.touched.day, change.touched.line
    if day is not None and before.as_at <= day < after.as_at:
        return f"{day} is past, and nothing was entered for it"
    came = {r.happened.line for r in roots if r.happened.kind in _CAME}
    waited_for = {line, *web.parts.get(line, ())} - came
    for order in before.orders:
        if order.line in waited_for and before.as_at <= order.order_by < after.as_at:
            return f"{order.id} {order.item} was to be ordered by {order.order_by}, and was not"
    return ""


_CAME = (HappenedKind.ARRIVED, HappenedKind.ORDERED)


def _named(near: Sequence[_Root]) -> str:
    """Those equally near, in words; time alone is said to be it where nobody did anything."""
    said = list(dict.fromkeys(root.happened.words for root in near))
    more = f"; and {len(said) - MOST_NAMED} more" if len(said) > MOST_NAMED else ""
    later = "today is later: " if near[0].past else ""
    return later + "; ".join(said[:MOST_NAMED]) + more


def _by_whom(change: Change, roots: Iterable[_Root]) -> str:
    number = change.now or change.ref
    mine = next(r.happened for r in roots if r.happened.subject == number)
    if mine.by:
        return f"entered {mine.on} by {mine.by}"
    return "no hand was kept with it" if mine.on is None else f"entered {mine.on}"


def _rank(change: Change, root: _Root, web: _Web) -> _Rank | None:
    """How near a root stands to a change, the smaller the nearer; None when it has no part.

    The second figure sets what pulls the same way before what pulls neither, and what a plan
    may have foreseen, a draw or an opening, behind the rest.
    """
    kind = root.happened.kind
    foreseen = int(root.past or kind in (HappenedKind.TAKEN, HappenedKind.MADE))
    if kind is HappenedKind.BOOKING:
        step = _booking_step(change, root, web)
    elif kind is HappenedKind.HOUSE:
        step = _HOUSE
    else:
        step = _shelf_step(change, root.happened, web)
    if step is None:
        return None
    # asking for more takes nothing away: such a root is named only where there is no other
    own = root.happened.subject in change.touched.bottles
    pull = 0 if own else root.sense * change.touched.sense
    return (max(step, _FAMILY) if pull < 0 else step, foreseen - pull)


def _booking_step(change: Change, root: _Root, web: _Web) -> int | None:
    touched, number = change.touched, root.happened.subject
    if number in touched.bookings:
        kinds = set(change.what)
        # what came or went takes its makes along; more groups make more, and change no bottle
        if {What.ADDED, What.GONE, What.PAST, What.DONE} & root.what:
            whole = kinds <= {What.ADDED, What.GONE, What.AMOUNT, What.OUTCOME}
            return _OWN if whole else _OWN_BESIDE
        if kinds & root.what:
            return _OWN
        return _SHARES if root.what == {What.DAY} else _OWN_BESIDE
    if number in web.asked_by.get(touched.line, frozenset()):
        return _SHARES
    near = web.kin.get(touched.line, frozenset())
    return _FAMILY if any(number in web.asked_by.get(line, ()) for line in near) else None


def _shelf_step(change: Change, each: Happened, web: _Web) -> int | None:
    touched = change.touched
    if each.subject in touched.bottles:
        return _OWN
    line = touched.line
    if not line:
        return _FAMILY if set(each.bookings) & touched.bookings else None
    if each.line == line:
        # a bottle of the very line that comes or falls out decides whether it is made at all
        whole = {What.GONE, What.ADDED, What.OUTCOME, What.SOURCES} & set(change.what)
        return _OWN if whole else _OWN_BESIDE
    if each.line in web.beside.get(line, frozenset()):
        return _LINE
    if each.line in web.parts.get(line, frozenset()):
        return _PART
    if line in web.parts.get(each.line, frozenset()):
        return _LINE
    return _FAMILY if each.line in web.kin.get(line, frozenset()) else None


def _follows(change: Change, told: Sequence[Change], web: _Web) -> str:
    """The nearest other change that has a cause, named; in a house where nothing is near, so said.

    Nearest is one that shares a line, then a booking, then a bottle, then what they are made from.
    """
    near = web.kin.get(change.touched.line, frozenset())

    def distance(other: Change) -> tuple[int, int]:
        mine, theirs = change.touched, other.touched
        shares = (
            mine.line == theirs.line != "",
            bool(mine.bookings & theirs.bookings),
            bool(mine.bottles & theirs.bottles),
            theirs.line in near,
        )
        return shares.index(True) if True in shares else len(shares), told.index(other)

    others = [other for other in told if other is not change and other.cause]
    if not others:
        return "nothing entered since explains it: worked out anew"
    nearest = min(others, key=distance)
    return f"follows from {nearest.now or nearest.ref} {nearest.item}"


def _web(before: KeptPlan, after: KeptPlan) -> _Web:
    makes = [*before.makes, *after.makes]
    direct: dict[str, set[str]] = {}
    asked: dict[str, set[str]] = {}
    for make in makes:
        direct.setdefault(make.line, set()).update(_lines(make))
        for line in (make.line, *_lines(make)):
            asked.setdefault(line, set()).update(make.bookings)
    for need in (*before.needs, *after.needs):
        for line in (need.line, *(source.line for source in need.sources)):
            asked.setdefault(line, set()).add(need.booking)
    for order in (*before.orders, *after.orders):
        asked.setdefault(order.line, set()).update(order.bookings)
    both: dict[str, set[str]] = {}
    beside: dict[str, set[str]] = {}
    for line, below in direct.items():
        for part in below:
            both.setdefault(line, set()).add(part)
            both.setdefault(part, set()).add(line)
            beside.setdefault(part, set()).update(below - {part})
    return _Web(
        parts={line: _closed(line, direct) for line in direct},
        beside={line: frozenset(others) for line, others in beside.items()},
        asked_by={line: frozenset(numbers) for line, numbers in asked.items()},
        kin={line: _closed(line, both) for line in both},
    )


def _lines(make: KeptMake) -> set[str]:
    return {source.line for source in make.sources}


def _closed(start: str, steps: dict[str, set[str]]) -> frozenset[str]:
    """Everything reached from a line, itself left out."""
    found: set[str] = set()
    ahead = [start]
    while ahead:
        new = steps.get(ahead.pop(), set()) - found
        found |= new
        ahead += sorted(new)
    return frozenset(found - {start})
