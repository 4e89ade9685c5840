"""Needs by period netted down a bill of parts: what to start when, so that nothing runs out.

The usual time-phased way: each thing after everything it goes into, backwards from the
period of need by its lead time, parts needed when the work starts.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from graphlib import CycleError, TopologicalSorter
from math import ceil

from stockroom.errors import BadInput, UnknownName


@dataclass(frozen=True, slots=True)
class Item:
    """A thing that is made or bought; periods are whole numbers from 1.

    `parts` says how much of each part goes into one unit. `receipts` arrive at the start of
    their period. A release takes `lead` periods, is `at_least` so much and goes in steps of
    `multiple`; both 0: exactly what is needed.
    """

    name: str
    lead: int = 0
    on_hand: float = 0
    receipts: Mapping[int, float] = field(default_factory=dict)
    parts: Mapping[str, float] = field(default_factory=dict)
    at_least: float = 0
    multiple: float = 0


@dataclass(frozen=True, slots=True)
class Release:
    """`amount` of an item to start in period `start`, for period `due`.

    `late` is how many periods before period 1 it should have started: then it starts in
    period 1 and is there so much after `due`; 0: in time.
    """

    item: str
    amount: float
    start: int
    due: int
    late: int = 0


def releases(
    items: Sequence[Item], needs: Mapping[str, Mapping[int, float]]
) -> dict[str, list[Release]]:
    """What to start of each item, by period; items that need none have an empty list.

    `needs` are those from outside, by item and period; parts of what is started add to them
    in the period it starts. A part of something late is needed in period 1. `UnknownName`
    for a name that is no item, `BadInput` for a period before 1, an item given twice, or
    one that goes into itself, however many steps away.
    """
    known = {each.name: each for each in items}
    gross = _checked(items, known, needs)
    planned: dict[str, list[Release]] = {}
    for name in _takers_first(items):
        item = known[name]
        planned[name] = list(_netted(item, gross[name]))
        for release in planned[name]:
            for part, each in item.parts.items():
                row = gross[part]
                row[release.start] = row.get(release.start, 0) + each * release.amount
    return {each.name: planned[each.name] for each in items}


def _netted(item: Item, gross: Mapping[int, float]) -> Iterator[Release]:
    """The releases of one item; a receipt counts from its period on."""
    left = item.on_hand
    for period in sorted({*gross, *item.receipts}):
        left += item.receipts.get(period, 0) - gross.get(period, 0)
        if left < -1e-9:
            amount = _lot(item, -left)
            left += amount
            start = period - item.lead
            yield Release(item.name, amount, max(start, 1), period, max(1 - start, 0))


def _lot(item: Item, lacking: float) -> float:
    amount = max(lacking, item.at_least)
    if item.multiple:
        amount = ceil(amount / item.multiple - 1e-9) * item.multiple
    return amount


def _checked(
    items: Sequence[Item], known: Mapping[str, Item], needs: Mapping[str, Mapping[int, float]]
) -> dict[str, dict[int, float]]:
    """The needs from outside, one row for each item, once every name and period is known."""
    if len(known) < len(items):
        names = [each.name for each in items]
        twice = next(name for name in names if names.count(name) > 1)
        raise BadInput(f"'{twice}' is given twice.", "Put its figures into one item.")
    rows: list[tuple[str, Iterable[str]]] = [("needs", needs)]
    rows += [(f"'{each.name}'", each.parts) for each in items]
    for owner, named in rows:
        for name in named:
            if name not in known:
                raise UnknownName(f"{owner}: there is no item '{name}'.", "Add it, or correct it.")
    for name, row in [*needs.items(), *((each.name, each.receipts) for each in items)]:
        for period in row:
            if period < 1:
                raise BadInput(f"'{name}' has period {period}; the first is 1.", "Count from 1.")
    return {each.name: dict(needs.get(each.name, {})) for each in items}


def _takers_first(items: Sequence[Item]) -> list[str]:
    """Each item after everything it goes into."""
    takers: dict[str, list[str]] = {each.name: [] for each in items}
    for each in items:
        for part in each.parts:
            takers[part].append(each.name)
    try:
        return list(TopologicalSorter(takers).static_order())
    except CycleError as circle:
        chain = " goes into ".join(f"'{name}'" for name in circle.args[1])
        raise BadInput(f"{chain}: nothing can be made first.", "Take one of them out.") from None
