"""The buying list: what to order of each supplier, order-by first, the reason last."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date

from stockroom.planning.decisions import Budget, Coming, Order, Plan
from stockroom.reports.paper.head import Head, foot_lines, head_lines, head_of, mark
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.sheet import columns, page, section, wrap
from stockroom.reports.words import TIED, amount, counted, day, listed, money, raised

NO_SUPPLIER = "Supplier not entered"
NOTHING = "Nothing to order in this period."
SHOWN = 3
"""How many ways round stand on the sheet. Our choice."""


@dataclass(frozen=True, slots=True)
class Row:
    """One order: `late` in words, "" while there is time; `paid` by which department.

    `instead` is the first ways round where it comes too late; `stockroom buying` tells them all.
    """

    key: str
    id: str
    order_by: date
    late: str
    item: str
    bought: str
    cost: str
    need_by: date
    arrives: date
    paid: str
    served: str
    ask: str
    instead: str
    why: str


@dataclass(frozen=True, slots=True)
class Group:
    """What is ordered of one supplier, the most pressing first, and what it comes to."""

    supplier: str
    total: str
    rows: tuple[Row, ...]


@dataclass(frozen=True, slots=True)
class Awaited:
    """What is on its way: expected when, and how late it is in words."""

    number: str
    text: str
    expected: date
    overdue: str


@dataclass(frozen=True, slots=True)
class Purse:
    """A department's money; `left` says "over" where it goes over, "no limit kept" for none."""

    code: str
    name: str
    spent: str
    promised: str
    had: str
    left: str


@dataclass(frozen=True, slots=True)
class BuyingSheet:
    """The list of the whole term; `told` is said where there is nothing to order."""

    head: Head
    told: str
    groups: tuple[Group, ...]
    coming: tuple[Awaited, ...]
    purses: tuple[Purse, ...]
    total: str


def buying_sheet_of(plan: Plan) -> BuyingSheet:
    """The buying list of a plan."""
    late = sum(order.late > 0 for order in plan.orders)
    about = f"{counted(len(plan.orders), 'order')}, {plan.start} to {plan.end}"
    about += f"; {late} late already" if late else ""
    keys = _keys(plan.orders)
    return BuyingSheet(
        head=head_of(plan, "Buying", about),
        told="" if plan.orders else NOTHING,
        groups=tuple(_group(name, orders, keys) for name, orders in by_supplier(plan)),
        coming=tuple(_awaited(one) for one in plan.on_order),
        purses=purses_of(plan.budgets),
        total=money(sum(order.pence for order in plan.orders)),
    )


def by_supplier(plan: Plan) -> list[tuple[str, list[Order]]]:
    """Orders by supplier, the one with the most pressing first; those without one last."""
    found: dict[str, list[Order]] = {}
    for order in sorted(plan.orders, key=lambda o: (o.order_by, o.item, o.id)):
        found.setdefault(order.supplier, []).append(order)
    return sorted(found.items(), key=lambda each: (not each[0], each[1][0].order_by, each[0]))


def purses_of(budgets: Iterable[Budget]) -> tuple[Purse, ...]:
    """Each department's money in words, to the penny."""
    return tuple(
        Purse(
            one.department,
            one.name,
            money(one.spent),
            money(one.promised),
            "" if one.had is None else money(one.had),
            left_of(one),
        )
        for one in budgets
    )


def left_of(one: Budget) -> str:
    """What a department has left, in words: "£74.40", "£1.80 over", "no limit kept"."""
    if one.left is None:
        return "no limit kept"
    return money(one.left) if one.left >= 0 else f"{money(-one.left)} over"


def bought(order: Order) -> str:
    """So many of what: "1 × 250 g"."""
    return f"{order.packs}{TIED}×{TIED}{order.pack.replace(' ', TIED)}"


def shared_by(order: Order, sign: str = "£") -> str:
    """Who pays what of it: "CH £18.09, OU £6.81"; without the sign for a file."""
    return ", ".join(
        f"{code}{TIED}{sign}{pence // 100}.{pence % 100:02d}" for code, pence in order.shares
    )


def why(order: Order) -> str:
    """All the reasons in one line."""
    return raised("; ".join(order.reasons))


def _keys(orders: Iterable[Order]) -> dict[str, str]:
    """A key for each order that stays while its number moves: its line, and which of that line."""
    seen: dict[str, int] = {}
    keys = {}
    for order in sorted(orders, key=lambda o: (o.order_by, o.id)):
        seen[order.line] = seen.get(order.line, 0) + 1
        keys[order.id] = f"{order.line} #{seen[order.line]}"
    return keys


def _group(supplier: str, orders: list[Order], keys: dict[str, str]) -> Group:
    rows = tuple(_row(order, keys[order.id]) for order in orders)
    return Group(supplier or NO_SUPPLIER, money(sum(o.pence for o in orders)), rows)


def _row(order: Order, key: str) -> Row:
    late = f"late by {counted(order.late, 'open day')}" if order.late > 0 else ""
    ask = f"ask {order.ask_first} first" if order.ask_first else ""
    ask += f", {counted(order.ask_days, 'open day')}" if ask and order.ask_days else ""
    return Row(
        key=key,
        id=order.id,
        order_by=order.order_by,
        late=late,
        item=raised(order.item),
        bought=bought(order),
        cost=money(order.pence),
        need_by=order.need_by,
        arrives=order.arrives,
        paid=shared_by(order),
        served=listed(order.for_bookings),
        ask=ask,
        instead=ways_round(order),
        why=why(order),
    )


def ways_round(order: Order) -> str:
    """The first way of each sort where it comes too late, three at most, and how many more."""
    sorts = {one.what: one.text for one in reversed(order.instead)}
    first = [sorts[what] for what in dict.fromkeys(one.what for one in order.instead)][:SHOWN]
    more = len(order.instead) - len(first)
    told = "; ".join(f"or {raised(text)}" for text in first)
    return f"{told}; and {more} more: stockroom buying" if more else told


def _awaited(one: Coming) -> Awaited:
    overdue = f"{counted(one.overdue, 'open day')} overdue" if one.overdue else ""
    seller = f", {one.supplier}" if one.supplier else ""
    text = raised(f"{one.item}, {amount(one.amount, one.kind)} to come{seller}")
    return Awaited(one.number, text, one.expected, overdue)


# -- as text ------------------------------------------------------------------------


def buying_sheet_text(sheet: BuyingSheet, width: int) -> str:
    """The list as text: a supplier a section, then what comes and the money."""
    parts = [head_lines(sheet.head, width), sheet.told]
    for group in sheet.groups:
        lines = [line for row in group.rows for line in _row_text(sheet.head, row, width)]
        heading = wrap(f"{group.supplier.upper()}, {group.total}", width)
        parts.append(section(heading, lines))
    rows = [
        (one.number, day(one.expected), f"{one.text}{', ' + one.overdue if one.overdue else ''}")
        for one in sheet.coming
    ]
    parts.append(section("ON ITS WAY", columns(rows, width)))
    parts.append(section("WHOSE MONEY", columns(purse_rows(sheet.purses), width)))
    return page([*parts, foot_lines(sheet.head, width)])


def purse_rows(purses: Iterable[Purse]) -> list[tuple[str, str]]:
    """Each department in a row of text."""
    return [
        (
            one.code,
            f"{one.spent} ordered, {one.promised} to be ordered"
            + (f", of {one.had}: {one.left}" if one.had else f", {one.left}")
            + (" left" if one.had and "over" not in one.left else ""),
        )
        for one in purses
    ]


def _row_text(head: Head, row: Row, width: int) -> list[str]:
    told = [row.late, row.ask]
    first = "; ".join([f"{row.item}, {row.bought}, {row.cost}", *(text for text in told if text)])
    second = f"{row.id}: needed {day(row.need_by)}, comes {day(row.arrives)}"
    second += f"; for {row.served}" if row.served else ""
    second += f"; paid by {row.paid}" if row.paid else ""
    front = f"{mark(head, row.key)} [ ] {day(row.order_by)}  "
    lines = [wrap(f"{front}{first}", width, hang=len(front))]
    return [
        *lines,
        *(wrap(text, width, indent=8, hang=8) for text in (second, row.why, row.instead) if text),
    ]


def buying_sheet_lines(sheet: BuyingSheet) -> dict[str, str]:
    """Each order by what it is of, each thing on its way, each department's money."""
    rows = [(group, row) for group in sheet.groups for row in group.rows]
    told = {
        row.key: f"order {row.item}, {row.bought}, {row.cost} of {group.supplier} by "
        f"{row.order_by}, needed {row.need_by}"
        for group, row in rows
    }
    told |= {
        one.number: f"{one.number}: {one.text}, expected {one.expected}" for one in sheet.coming
    }
    return told | {
        f"money {one.code}": f"{one.code}: {one.promised} to be ordered, {one.left}"
        for one in sheet.purses
    }


BUYING = Kind("buying", buying_sheet_text, buying_sheet_lines)
"""The buying list, for the desk and for whoever sends the orders."""
