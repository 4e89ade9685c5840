"""What a repeat arrival need not say again: where it was put away and how big a bottle was.

Never the printed date, the lot, the assay or the cap: those are read off each bottle anew.
"""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.errors import BadInput
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.service.work import Work
from stockroom.store.arrivals import last_size, put_away_at
from stockroom.store.tables import Line


@dataclass(frozen=True, slots=True)
class Usual:
    """The size and the place of an arrival, and what of the two was taken from last time."""

    size: Amount
    place: str
    told: tuple[str, ...] = ()


def as_usual(work: Work, line: Line, size: Amount | None, place: str | None) -> Usual:
    """The size and the place as given, else as they were when the line arrived last.

    Raises: BadInput for either where it never arrived, or was put nowhere.
    """
    place = place.strip() if place else ""
    if size is not None and place:
        return Usual(size, place)
    held = size
    if held is None and (last := last_size(work.session, line)):
        held = Amount(Kind(line.kind), last)
    if held is None:
        raise BadInput(
            f"How much {line.key} is in one bottle? None has come before to go by.",
            f'Say the size: stockroom arrive "{line.key}" AMOUNT --place PLACE.',
        )
    if not place:
        place = put_away_at(work.session, line)
        if not place:
            raise BadInput(
                f"Where is {line.key} put away? None has come before to go by.",
                "Add --place A2.",
            )
        same = place if size is not None else f"{place}, {format_amount(held)}"
    else:
        same = format_amount(held)
    return Usual(held, place, (f"As last time: {same}.",))
