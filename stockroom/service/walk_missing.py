"""Which bookings lean on bottles a walk did not find: asked once, when the sitting is over."""

from __future__ import annotations

from collections.abc import Collection
from dataclasses import replace
from datetime import date

from stockroom.errors import StockroomError
from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Bottle
from stockroom.service.hit import bookings_drawn
from stockroom.service.replayed import replayed_plan
from stockroom.settings import StoreAt
from stockroom.store.reading import reading
from stockroom.store.snapshot import facts_from


def missed_for(path: StoreAt, numbers: Collection[str], *, today: date) -> tuple[str, ...]:
    """A line for each missing bottle that bookings would have been drawn from, as at today.

    One plan answers for all of them: as it would be, were they still there.
    """
    if not numbers:
        return ()
    try:
        with reading(path) as reader:
            known = with_derived(facts_from(reader, today))
        there = tuple(_back(one) if one.number in numbers else one for one in known.bottles)
        whole = replayed_plan(replace(known, bottles=there))
    except StockroomError as error:
        # what was counted stays counted, whatever else is wrong in the house
        return (
            f"Which bookings they were for is not known, as no plan can be made: {error.message}",
        )
    told = ((number, bookings_drawn(known, whole, number)) for number in sorted(numbers))
    return tuple(
        f"{number} was to be drawn on for {listed}: stockroom plan"
        for number, listed in told
        if listed
    )


def _back(bottle: Bottle) -> Bottle:
    return replace(bottle, record=replace(bottle.record, not_found=False))
