"""What to order by when, whose money it is, and when a line falls below its level."""

from __future__ import annotations

from collections import Counter

from stockroom.planning.decisions import Order, Plan
from stockroom.reports.sheet import columns, foot, head, page, section, spanning, wrap
from stockroom.reports.words import TIED, amount, counted, day, listed, money, raised


def buying_text(plan: Plan, width: int) -> str:
    """The term's orders, order-by first, with every reason; levels; totals by department."""
    about = f"What to order {spanning(plan)}: {counted(len(plan.orders), 'order')}"
    ordered = section("ORDER BY", order_lines(plan, width, reasons=5))
    following = ["stockroom arrive --help"]
    following += [f"stockroom why {plan.orders[0].id}"] if plan.orders else []
    parts = [head(plan, width, about), ordered or "Nothing to order in this period."]
    parts += [level_section(plan, width), section("WHOSE MONEY", _shares(plan, width))]
    return page([*parts, foot(width, *following)])


def order_lines(plan: Plan, width: int, *, reasons: int = 1) -> list[str]:
    """Orders by order-by day; each with what, cost, shares, and up to so many reasons."""
    # by item within a day, so that one supplier's things can be ticked off by name
    ordered = sorted(plan.orders, key=lambda order: (order.order_by, order.item, order.id))
    return [line for order in ordered for line in _order(order, width, reasons)]


def level_section(plan: Plan, width: int) -> str:
    """The day each line falls below its level, earliest first."""
    rows = [
        (
            day(level.on),
            f"{raised(level.line)}: {amount(level.left, level.kind)} left, "
            f"level {amount(level.level, level.kind)}",
        )
        for level in sorted(plan.levels, key=lambda level: (level.on, level.item))
    ]
    return section("FALLS BELOW THE LINE ON", columns(rows, width))


def lateness(order: Order) -> str:
    """How late an order already is, in words; empty when there is still time."""
    if order.late <= 0:
        return ""
    return f"late by {counted(order.late, 'open day')}".replace(" ", TIED)


def _order(order: Order, width: int, reasons: int) -> list[str]:
    late = f", {lateness(order)}" if order.late > 0 else ""
    bought = f"{order.packs}{TIED}×{TIED}{order.pack.replace(' ', TIED)}"
    first = f"{day(order.order_by)}  {order.item}, {bought}, {money(order.pence)}{late}"
    when = "now" if order.late else "by then"
    comes = f"comes {day(order.arrives)} if ordered {when}"
    needed = f"{order.id}: needed {day(order.need_by)}, {comes}"
    served = f"; for {listed(order.for_bookings)}" if order.for_bookings else ""
    paid = ", ".join(f"{department}{TIED}{money(pence)}" for department, pence in order.shares)
    details = [f"{needed}{served}{'; paid by ' + paid if paid else ''}", *order.reasons[:reasons]]
    return [
        wrap(first, width, indent=2, hang=18),
        *(wrap(detail, width, indent=18, hang=18) for detail in details),
    ]


def _shares(plan: Plan, width: int) -> list[str]:
    pence: Counter[str] = Counter()
    for order in plan.orders:
        pence.update(dict(order.shares))
    rows = [(department, money(share)) for department, share in sorted(pence.items())]
    # from the orders and not the shares, so that a lost penny would show
    rows += [("all", money(sum(order.pence for order in plan.orders)))] if rows else []
    return columns(rows, width)
