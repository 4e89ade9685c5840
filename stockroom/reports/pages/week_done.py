"""What was entered today, each with the way to put it right."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.planning.facts import Facts, Placed
from stockroom.reports.pages.parts import Act, Row
from stockroom.reports.words import day_seen_from, money, named, raised

MOST = 60
"""Entries of a day that are listed, the newest; of more there is a count. Our choice."""


# a row of its own, because the ledger's are the store's, and reports know no store
@dataclass(frozen=True, slots=True)
class Entered:
    """One entry: `change` in micro-units of `unit_kind`, signed; `undone_by` 0 for none."""

    entry: int
    bottle: str
    line: str
    kind: str
    change: int
    unit_kind: str
    happened: date
    by: str
    booking: str = ""
    said: str = ""
    puts_right: int = 0
    undone_by: int = 0


def done_rows(
    known: Facts, today: date, entered: tuple[Entered, ...]
) -> tuple[tuple[Row, ...], int]:
    """The newest entries of the day and the orders placed on it; how many older there are."""
    newest = sorted(entered, key=lambda each: -each.entry)
    placed = [each for each in known.placed if each.ordered == today and not each.cancelled]
    rows = [_entry(each, today) for each in newest[:MOST]]
    return (*map(_placed, placed), *rows), max(0, len(newest) - MOST)


def _entry(told: Entered, today: date) -> Row:
    much = ""
    if told.change:
        much = f" {format_amount(Amount(Kind(told.unit_kind), abs(told.change)))}"
    what = f"{told.bottle} {raised(told.line)}: {told.kind}{much}"
    on = day_seen_from(told.happened, today)
    more = (
        f"puts right entry {told.puts_right}" if told.puts_right else "",
        f"for {told.booking.replace(';', ', ')}" if told.booking else "",
        raised(told.said),
        f"happened {on}" if told.happened != today else "",
        f"by {told.by}",
        f"entry {told.entry}",
        f"put right by entry {told.undone_by}" if told.undone_by else "",
    )
    mend = Act("put-right", (("entry", str(told.entry)),), other="Put it right")
    acts = () if told.undone_by or told.puts_right else (mend,)
    return Row(what, more=tuple(each for each in more if each), acts=acts)


def _placed(placed: Placed) -> Row:
    item = named(placed.line, "")
    what = f"order {placed.number}, {item}: {placed.packs} × {placed.pack}"
    more = (money(placed.pence), f"by {placed.by}") if placed.by else (money(placed.pence),)
    cancel = Act("order-cancel", (("order", placed.number),), other="Cancel it")
    return Row(what, more=more, acts=(cancel,))
