"""The term's buying as a page: as on `paper/buying_sheet.py`, with every reason and way round.

Frozen values for `web/templates/buying.html`; whatever stands on paper too is said as there.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.planning.decisions import Coming, Level, Order, Plan
from stockroom.reports.buying_text import falling, not_counted, split_in_words
from stockroom.reports.paper.buying_sheet import (
    Awaited,
    BuyingSheet,
    Purse,
    Row,
    buying_sheet_of,
)
from stockroom.reports.words import amount, counted, day_heading, money, raised


@dataclass(frozen=True, slots=True)
class Wanted:
    """One order of the plan. `sheet` is its line on paper, `meant` what its number stands for.

    `comes` says when it would come, `notes` when the stock falls below its line and how it may
    be split, `ways` every way round where it is late.
    """

    sheet: Row
    meant: str
    comes: str
    notes: tuple[str, ...]
    reasons: tuple[str, ...]
    ways: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Seller:
    """What is ordered of one supplier, the most pressing first, and what it comes to."""

    name: str
    total: str
    wanted: tuple[Wanted, ...]


@dataclass(frozen=True, slots=True)
class OnItsWay:
    """One order that was placed. `line` and `pack` are what an arrival asks for.

    `counts` says from which day it is counted where that is not the day expected.
    """

    sheet: Awaited
    line: str
    pack: str
    placed: str
    counts: str
    served: tuple[str, ...]
    ways: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Falls:
    """A line that falls below its level: the day, what is left then, and when it runs out."""

    on: date
    item: str
    left: str
    level: str
    runs_out: date | None


@dataclass(frozen=True, slots=True)
class BuyingPage:
    """The whole page. `first` is the sentence at its top, `since` one on the plan kept last.

    `over` are the codes of departments whose money does not suffice; `all_spent` and
    `all_planned` the last row of their table.
    """

    first: str
    since: str
    sellers: tuple[Seller, ...]
    coming: tuple[OnItsWay, ...]
    falls: tuple[Falls, ...]
    purses: tuple[Purse, ...]
    over: frozenset[str]
    all_spent: str
    all_planned: str


def buying_page_of(plan: Plan) -> BuyingPage:
    """The term's buying of a plan."""
    sheet = buying_sheet_of(plan)
    orders = {order.id: order for order in plan.orders}
    awaited = zip(sheet.coming, plan.on_order, strict=True)
    budgets = plan.budgets
    # the whole term's, whatever part of it is shown: as the command adds it up
    planned = sum(one.promised for one in budgets) or sum(order.pence for order in plan.orders)
    return BuyingPage(
        first=_first(plan, sheet),
        since=_since(plan),
        sellers=tuple(
            Seller(
                group.supplier,
                group.total,
                tuple(_wanted(row, orders[row.id], plan.as_at) for row in group.rows),
            )
            for group in sheet.groups
        ),
        coming=tuple(_on_its_way(row, one) for row, one in awaited),
        falls=tuple(_falls(one) for one in sorted(plan.levels, key=lambda one: (one.on, one.item))),
        purses=sheet.purses,
        over=frozenset(one.department for one in budgets if one.left is not None and one.left < 0),
        all_spent=money(sum(one.spent for one in budgets)),
        all_planned=money(planned),
    )


def _first(plan: Plan, sheet: BuyingSheet) -> str:
    if not plan.orders:
        return sheet.told
    late = sum(order.late > 0 for order in plan.orders)
    told = f"{counted(len(plan.orders), 'order')}, {sheet.total} in all"
    return f"{told}; {late} late already." if late else f"{told}; none is late yet."


def _since(plan: Plan) -> str:
    if plan.changed_since is None:
        return ""
    number, count = plan.changed_since
    return f"{counted(count, 'change')} since plan {number} was kept"


def _wanted(row: Row, order: Order, today: date) -> Wanted:
    when = "now" if order.late > 0 else "by then"
    below = falling(order, today)
    return Wanted(
        sheet=row,
        meant=order.wanted,
        comes=f"comes {day_heading(order.arrives)} if ordered {when}",
        notes=tuple(text for text in (below, *split_in_words(order)) if text),
        reasons=tuple(raised(text) for text in order.reasons),
        ways=tuple(f"or {raised(one.text)}" for one in order.instead),
    )


def _on_its_way(row: Awaited, one: Coming) -> OnItsWay:
    placed = f"ordered {day_heading(one.placed_on)}" + (f" by {one.by}" if one.by else "")
    if one.amount != one.ordered:
        placed += f", {amount(one.ordered, one.kind)} then"
    counts = "" if one.counts == one.expected else f"counted from {day_heading(one.counts)}"
    return OnItsWay(
        sheet=row,
        line=one.line,
        pack=one.pack,
        placed=placed,
        counts=counts,
        served=one.bookings,
        ways=tuple(f"or {raised(each.text)}" for each in one.instead),
    )


def _falls(level: Level) -> Falls:
    left, line = amount(level.left, level.kind), amount(level.level, level.kind)
    left = f"{left}; {not_counted(level)}" if level.not_counted else left
    return Falls(level.on, raised(level.line), left, line, level.runs_out)
