"""Buying as data: what more there is to say of an order, what is on its way, the money."""

from __future__ import annotations

from datetime import date
from typing import Any

from stockroom.measure.amounts import BASE_UNIT, PER_UNIT, Kind
from stockroom.planning.decisions import Budget, Coming, Delivery, Instead, Order, Plan, Use
from stockroom.reports.words import rounded

Data = dict[str, Any]


def more_of_order(order: Order) -> Data:
    """The parts of an order beside its contract keys; `mixture` where it is of several sizes."""
    return {
        **_measured(order.amount, order.kind),
        "supplier": order.supplier or None,
        "mixture": [
            {"pack": pack, "packs": count, "each": pence / 100}
            for pack, count, pence in order.mixture
        ],
        "falls_below": _iso(order.falls_below),
        "runs_out": _iso(order.runs_out),
        "ask_first": order.ask_first or None,
        "ask_open_days": order.ask_days,
        "keeps_until": _iso(order.keeps_until),
        "queried": order.queried,
        "deliveries": [_delivery(each, order.kind) for each in order.deliveries],
        "instead": [_instead(one) for one in order.instead],
    }


def bought_json(plan: Plan) -> Data:
    """What is on its way (`on_order`) and each department's money (`budgets`)."""
    return {
        "on_order": [_coming(one) for one in plan.on_order],
        "budgets": [_budget(one) for one in plan.budgets],
    }


def year_before(use: Use) -> Data:
    """The same term a year before; nothing at all where nobody knows."""
    if use.before is None:
        return {}
    told = {**_measured(use.before, use.kind), "groups": use.groups_before, "by": use.basis}
    return {"year_before": told}


def _delivery(each: Delivery, kind: Kind) -> Data:
    return {
        "pack": each.pack,
        "packs": each.packs,
        **_measured(each.amount, kind),
        "cost": each.pence / 100,
        "order_by": each.order_by.isoformat(),
        "need_by": each.need_by.isoformat(),
    }


def _instead(one: Instead) -> Data:
    return {
        "what": one.what,
        "on": one.on.isoformat(),
        "booking": one.booking or None,
        "text": one.text,
    }


def _coming(one: Coming) -> Data:
    return {
        "id": one.number,
        "item": one.item,
        "line": one.line,
        "pack": one.pack,
        "packs": one.packs,
        **_measured(one.amount, one.kind),
        "ordered": rounded(one.ordered / PER_UNIT[one.kind], 6),
        "placed_on": one.placed_on.isoformat(),
        "expected": one.expected.isoformat(),
        "counted_from": one.counts.isoformat(),
        "overdue_open_days": one.overdue,
        "supplier": one.supplier or None,
        "by": one.by,
        "for": list(one.bookings),
        "instead": [_instead(way) for way in one.instead],
    }


def _budget(one: Budget) -> Data:
    return {
        "dept": one.department,
        "name": one.name,
        "spent": one.spent / 100,
        "promised": one.promised / 100,
        "had": None if one.had is None else one.had / 100,
        "left": None if one.left is None else one.left / 100,
    }


def _measured(micro: int, kind: Kind) -> Data:
    # six figures: enough for any sum, and none of the float's tail
    return {"amount": rounded(micro / PER_UNIT[kind], 6), "unit": BASE_UNIT[kind]}


def _iso(when: date | None) -> str | None:
    return when.isoformat() if when else None
