"""What to order by when, what is on its way, whose money it is, and what falls below its level."""

from __future__ import annotations

from datetime import date

from stockroom.planning.decisions import Budget, Coming, Instead, Level, Order, Plan
from stockroom.reports.sheet import columns, foot, head, page, section, spanning, wrap
from stockroom.reports.words import TIED, amount, counted, day, listed, money, raised


def buying_text(plan: Plan, width: int) -> str:
    """The term's orders, order-by first, with every reason; what comes; levels; the money."""
    about = f"What to order {spanning(plan)}: {counted(len(plan.orders), 'order')}"
    ordered = section("ORDER BY", order_lines(plan, width, reasons=5, ways=True))
    following = ["stockroom order --help" if plan.orders else "stockroom arrive --help"]
    following += [f"stockroom why {plan.orders[0].id}"] if plan.orders else []
    parts = [head(plan, width, about), ordered or "Nothing to order in this period."]
    parts += [on_order_section(plan, width), level_section(plan, width)]
    parts.append(section("WHOSE MONEY, THE WHOLE TERM", _money(plan, width)))
    return page([*parts, foot(width, *following)])


def on_order_text(plan: Plan, width: int) -> str:
    """What was ordered and has not all come, the soonest first; overdue ones counted on top."""
    late = [one for one in plan.on_order if one.overdue]
    overdue = f", {len(late)} overdue" if late else ""
    count = counted(len(plan.on_order), "order")
    about = f"On order as at {day(plan.as_at)}: {count} to come{overdue}"
    following = ["stockroom arrive --help"] if plan.on_order else ["stockroom buying"]
    return page([head(plan, width, about), on_order_section(plan, width), foot(width, *following)])


def order_lines(plan: Plan, width: int, *, reasons: int = 1, ways: bool = False) -> list[str]:
    """Orders by order-by day; each with what, cost, shares, and up to so many reasons.

    With `ways`, what to do where one is late, and how it may be split.
    """
    # by item within a day, so that one supplier's things can be ticked off by name
    ordered = sorted(plan.orders, key=lambda order: (order.order_by, order.item, order.id))
    today = plan.as_at
    return [line for order in ordered for line in _order(order, today, width, reasons, ways=ways)]


def on_order_section(plan: Plan, width: int) -> str:
    """What is on its way, apart from the stock: each with the day it counts from."""
    rows = [(one.number, _coming(one)) for one in plan.on_order]
    # after each its ways round, where somebody waits for it in vain
    lines = []
    for row, one in zip(columns(rows, width), plan.on_order, strict=True):
        lines += [row, *(wrap(text, width, indent=8, hang=8) for text in _ways(one.instead))]
    return section("ON ITS WAY (not yet counted as stock)", lines)


def level_section(plan: Plan, width: int) -> str:
    """The day each line falls below its level, earliest first."""
    rows = [
        (
            day(level.on),
            f"{raised(level.line)}: {amount(level.left, level.kind)} left, "
            f"level {amount(level.level, level.kind)}"
            + (f", runs out {day(level.runs_out)}" if level.runs_out else "")
            + (f"; {not_counted(level)}" if level.not_counted else ""),
        )
        for level in sorted(plan.levels, key=lambda level: (level.on, level.item))
    ]
    return section("FALLS BELOW THE LINE ON", columns(rows, width))


def not_counted(level: Level) -> str:
    """What stands there and is not counted, in words: "not counted: B35 no date"."""
    return f"not counted: {', '.join(level.not_counted)}"


def lateness(order: Order) -> str:
    """How late an order already is, in words; empty when there is still time."""
    if order.late <= 0:
        return ""
    return f"late by {counted(order.late, 'open day')}".replace(" ", TIED)


def _order(order: Order, today: date, width: int, reasons: int, *, ways: bool) -> list[str]:
    late = f", {lateness(order)}" if order.late > 0 else ""
    bought = f"{order.packs}{TIED}×{TIED}{order.pack.replace(' ', TIED)}"
    first = f"{day(order.order_by)}  {order.item}, {bought}, {money(order.pence)}{late}"
    when = "now" if order.late else "by then"
    comes = f"comes {day(order.arrives)} if ordered {when}"
    needed = f"{order.id}: needed {day(order.need_by)}, {comes}"
    served = f"; for {listed(order.for_bookings)}" if order.for_bookings else ""
    paid = ", ".join(f"{department}{TIED}{money(pence)}" for department, pence in order.shares)
    details = [f"{needed}{served}{'; paid by ' + paid if paid else ''}"]
    if ways:
        details += [text for text in (falling(order, today),) if text]
    details += order.reasons[:reasons]
    details += [*split_in_words(order), *_ways(order.instead)] if ways else []
    return [
        wrap(first, width, indent=2, hang=18),
        *(wrap(detail, width, indent=18, hang=18) for detail in details),
    ]


def falling(order: Order, today: date) -> str:
    """The days the usable stock is below its level, and does not suffice; "" for neither."""
    told = (("falls below its level", order.falls_below), ("runs out", order.runs_out))
    return ", ".join(f"{what} {'now' if on <= today else day(on)}" for what, on in told if on)


def split_in_words(order: Order) -> list[str]:
    """How an order that would be thrown away in part may come in several deliveries."""
    return [
        f"delivery {number}: {each.packs}{TIED}×{TIED}{each.pack.replace(' ', TIED)}, "
        f"{money(each.pence)}, order by {day(each.order_by)}, wanted {day(each.need_by)}"
        for number, each in enumerate(order.deliveries, 1)
    ]


def _ways(instead: tuple[Instead, ...]) -> list[str]:
    return [f"or {one.text}" for one in instead]


def _coming(one: Coming) -> str:
    part = f" of {amount(one.ordered, one.kind)}" if one.amount != one.ordered else ""
    since = f"ordered {day(one.placed_on)}" + (f" by {one.by}" if one.by else "")
    seller = f", {one.supplier}" if one.supplier else ""
    when = f"expected {day(one.expected)}"
    if one.expected != one.counts:
        overdue = f", {counted(one.overdue, 'open day')} overdue" if one.overdue else ""
        when += f"{overdue}; counted from {day(one.counts)}"
    served = f"; for {listed(one.bookings)}" if one.bookings else ""
    much = f"{one.item}, {amount(one.amount, one.kind)}{part} to come"
    return f"{much}; {since}{seller}; {when}{served}"


def _money(plan: Plan, width: int) -> list[str]:
    rows = [_budget(one) for one in plan.budgets]
    # the whole term's, whatever part of it is shown: money left is left for all of it
    placed = sum(one.spent for one in plan.budgets)
    planned = sum(one.promised for one in plan.budgets) or sum(o.pence for o in plan.orders)
    after = f", {money(placed)} ordered already" if placed else ""
    rows += [("all", f"{money(planned)} to be ordered{after}")] if rows or plan.orders else []
    return columns(rows, width)


def _budget(one: Budget) -> tuple[str, str]:
    spent = f"{money(one.spent)} ordered, " if one.spent else ""
    words = f"{spent}{money(one.promised)} to be ordered"
    if one.left is None or one.had is None:
        return one.department, words
    left = f"{money(one.left)} left" if one.left >= 0 else f"{money(-one.left)} over"
    return one.department, f"{words}, of {money(one.had)}: {left}"
