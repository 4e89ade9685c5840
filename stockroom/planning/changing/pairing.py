"""Which make, order or check of one kept plan is which of another: by what it serves.

Numbers are no help: M14 becomes M13 when something before it is gone.
"""

from __future__ import annotations

from collections.abc import Callable, Hashable, Iterable
from typing import TypeVar

from stockroom.planning.changing.kept import KeptCheck, KeptMake, KeptOrder

Thing = TypeVar("Thing")
Pair = tuple[Thing | None, Thing | None]


def paired_makes(before: Iterable[KeptMake], after: Iterable[KeptMake]) -> list[Pair[KeptMake]]:
    """Each make with the one it became: of the same line, with most bookings in common.

    Ties go to fewest bookings besides, then to the nearer day, then to the earlier. A make that
    shares no booking with any other is told as gone, or as added. In order of line, then day.
    """
    pairs: list[Pair[KeptMake]] = []
    for was, now in _alike(before, after, lambda make: make.line):
        hits = [(a, b) for a in was for b in now if set(a.bookings) & set(b.bookings)]
        hits.sort(key=lambda pair: _unlikeness(*pair))
        pairs += _greedy(hits, was, now)
    return pairs


def _unlikeness(was: KeptMake, now: KeptMake) -> tuple[int, int, int, int, int]:
    common, either = set(was.bookings) & set(now.bookings), set(was.bookings) | set(now.bookings)
    apart = abs((was.on - now.on).days)
    return -len(common), len(either), apart, was.on.toordinal(), now.on.toordinal()


def paired_orders(before: Iterable[KeptOrder], after: Iterable[KeptOrder]) -> list[Pair[KeptOrder]]:
    """Each order with the one it became: of the same line, of the same pack where there is one."""
    pairs: list[Pair[KeptOrder]] = []
    for was, now in _alike(before, after, lambda order: order.line):
        hits = [(a, b) for a in was for b in now]
        hits.sort(key=lambda pair: (pair[0].pack != pair[1].pack, _apart(*pair)))
        pairs += _greedy(hits, was, now)
    return pairs


def _apart(was: KeptOrder, now: KeptOrder) -> tuple[int, int]:
    return abs((was.order_by - now.order_by).days), was.order_by.toordinal()


def paired_checks(before: Iterable[KeptCheck], after: Iterable[KeptCheck]) -> list[Pair[KeptCheck]]:
    """Each check with the one it became: the same work on the same bottle, or on the same line."""
    pairs: list[Pair[KeptCheck]] = []
    for was, now in _alike(before, after, lambda check: (check.line or check.subject, check.what)):
        # of one bottle there is one check of a kind; of a line's makes one each, in order of day
        pairs += _greedy(list(zip(was, now, strict=False)), was, now)
    return pairs


def _alike(
    before: Iterable[Thing], after: Iterable[Thing], key: Callable[[Thing], Hashable]
) -> list[tuple[list[Thing], list[Thing]]]:
    """Both sides by key, in the order the keys first come up."""
    groups: dict[Hashable, tuple[list[Thing], list[Thing]]] = {}
    for side, things in enumerate((before, after)):
        for thing in things:
            groups.setdefault(key(thing), ([], []))[side].append(thing)
    return list(groups.values())


def _greedy(
    hits: Iterable[tuple[Thing, Thing]], was: Iterable[Thing], now: Iterable[Thing]
) -> list[Pair[Thing]]:
    """The best pairs first, each thing once; then what is left over on either side."""
    # by identity: two makes may be alike to the last figure
    left, right = {id(each) for each in was}, {id(each) for each in now}
    pairs: list[Pair[Thing]] = []
    for a, b in hits:
        if id(a) in left and id(b) in right:
            left.remove(id(a))
            right.remove(id(b))
            pairs.append((a, b))
    pairs += [(each, None) for each in was if id(each) in left]
    pairs += [(None, each) for each in now if id(each) in right]
    return pairs
