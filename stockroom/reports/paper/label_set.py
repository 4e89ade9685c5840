"""The labels asked for, as one set: bottles first, then the batches still to be made."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date

from stockroom.errors import NotAllowed
from stockroom.keeping.unnamed import is_unnamed
from stockroom.planning.decisions import Make
from stockroom.planning.facts import Line, Place
from stockroom.planning.on_shelf import OnShelf
from stockroom.reports.paper.head import head_for
from stockroom.reports.paper.label import Label, Labels, Sort
from stockroom.reports.paper.label_grid import FULL, Grid
from stockroom.reports.paper.label_of import (
    batch_label,
    full_label,
    opened_strip,
    short_label,
    unknown_label,
)
from stockroom.reports.paper.label_short import check_short, must_confirm
from stockroom.safety.hazards import Hazards


@dataclass(frozen=True, slots=True)
class Wish:
    """How the labels are wanted: of which sort, what size in mm, on what sheet.

    `confirmed` is said of the list of relaxed classes, for the short sort only.
    """

    sort: Sort
    size: tuple[float, float]
    grid: Grid | None = None
    made_on: date | None = None
    confirmed: bool = False


def labels_of(
    house: tuple[str, bool],
    as_at: date,
    bottles: Iterable[tuple[OnShelf, Hazards, str]],
    batches: Iterable[tuple[Make, Line, Hazards]],
    places: tuple[Place, ...],
    wish: Wish,
) -> Labels:
    """The labels; `house` is its name and whether it is the invented one.

    Raises: NotAllowed for a formula instead of a name, or a short label that may not be.
    """
    labels = [_of_bottle(row, found, doubt, places, wish) for row, found, doubt in bottles]
    batches = list(batches)
    if batches and wish.sort is not Sort.FULL:
        raise NotAllowed(
            f"{batches[0][0].id} is a batch to be made: --{wish.sort} is for bottles.",
            "Leave the option out, or name its bottle once it has a number.",
        )
    labels += [batch_label(make, line, found, wish.made_on) for make, line, found in batches]
    if wish.sort is Sort.SHORT and not wish.confirmed:
        raise must_confirm()
    head = head_for(house[0], "Labels", as_at, practice=house[1])
    return Labels(head, wish.size, wish.grid, tuple(labels))


def _of_bottle(
    row: OnShelf, found: Hazards, doubt: str, places: tuple[Place, ...], wish: Wish
) -> Label:
    if is_unnamed(row.line.key):
        if wish.size[0] < FULL[0] or wish.size[1] < FULL[1]:
            raise NotAllowed(
                f"{row.bottle.number} is unknown, and its warning needs a full label.",
                f"Leave out --{wish.sort} for it: stockroom label {row.bottle.number}.",
            )
        return unknown_label(row.bottle)
    if wish.sort is Sort.OPENED:
        return opened_strip(row.bottle, row.line, row.verdict)
    if wish.sort is Sort.SHORT:
        check_short(row.bottle, row.line, found)
        return short_label(row.bottle, row.line, row.verdict, found)
    return full_label(row.bottle, row.line, row.verdict, found, places, doubt)
