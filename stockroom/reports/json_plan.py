"""The same answers as data. The keys are a contract: added to, never renamed.

Amounts are numbers beside a unit (g, cm3, items), to six figures and never
short of a whole one; days are ISO text; money is a number of pounds.
"""

from __future__ import annotations

from collections.abc import Iterable
from datetime import date
from typing import TYPE_CHECKING, Any

from stockroom.findings import Finding
from stockroom.keeping.caution import LowerLimits
from stockroom.measure.amounts import BASE_UNIT, PER_UNIT, Kind
from stockroom.planning.decisions import (
    Answer,
    Draw,
    Level,
    Make,
    Order,
    PastBottle,
    Plan,
    Short,
    Use,
)
from stockroom.reports.json_buying import bought_json, more_of_order, year_before
from stockroom.reports.json_people import check_data, load_data, watch_data
from stockroom.reports.sheet import is_bottle
from stockroom.reports.words import rounded

if TYPE_CHECKING:
    from stockroom.planning.ready import Readiness

Data = dict[str, Any]


def plan_json(plan: Plan) -> Data:
    """The whole plan. Lists keep the planner's order, which is by day, then number."""
    return (
        _top(plan)
        | {
            "needs": [_need(need) for need in plan.needs],
            "makes": [_make(make) for make in plan.makes],
            "past": [_past(bottle) for bottle in plan.past],
            "usage": [_use(use) for use in plan.usage],
            "drawn": [_use(use) for use in plan.drawn],
            "written_off": [_use(use) for use in plan.written_off],
            "orders": [_order(order) for order in plan.orders],
            "short": [_short(short) for short in plan.short],
            "checks": [check_data(check) for check in plan.checks],
            "levels": [_level(level) for level in plan.levels],
            "guesses": [_finding(finding) for finding in plan.guesses],
            "notes": [_finding(finding) for finding in plan.notes],
            "loads": [load_data(load) for load in plan.loads],
            "watch": [watch_data(watch) for watch in plan.watch],
        }
        | bought_json(plan)
    )


def fresh_json(plan: Plan) -> Data:
    """What to make up, as in the plan's `makes`."""
    return _top(plan) | {"makes": [_make(make) for make in plan.makes]}


def past_json(plan: Plan, on: date) -> Data:
    """What is past, weak, undated or unchecked on a day, as in the plan's `past`."""
    return _top(plan) | {"on": on.isoformat(), "past": [_past(bottle) for bottle in plan.past]}


def usage_json(plan: Plan) -> Data:
    """What the term uses (`usage`), what was drawn so far, and what was spilled or lent."""
    return _top(plan) | {
        "usage": [_use(use) for use in plan.usage],
        "drawn": [_use(use) for use in plan.drawn],
        "written_off": [_use(use) for use in plan.written_off],
        "differences": list(plan.differences),
    }


def buying_json(plan: Plan) -> Data:
    """What to order (`orders`), what is on its way, the money, and lines below their level."""
    return (
        _top(plan)
        | bought_json(plan)
        | {
            "orders": [_order(order) for order in plan.orders],
            "levels": [_level(level) for level in plan.levels],
        }
    )


def on_order_json(plan: Plan) -> Data:
    """What was ordered and has not all come, as in the plan's `on_order`."""
    return _top(plan) | {"on_order": bought_json(plan)["on_order"]}


def ready_json(
    readiness: Readiness, *, as_at: date, practice: bool, cautious: bool = False
) -> Data:
    """Whether a booking or a day is ready, and what there is still to do."""
    return {
        "as_at": as_at.isoformat(),
        "practice": practice,
        "cautious": cautious,
        "ready": readiness.ready,
        "title": readiness.title,
        "on": readiness.on.isoformat(),
        "to_do": list(readiness.to_do),
        "needs": [_need(need) for need in readiness.needs],
        "makes": [_make(make) for make in readiness.makes],
        "checks": [check_data(check) for check in readiness.checks],
        "strengths": list(readiness.strengths),
        "cautions": list(readiness.cautions),
    }


def why_json(
    ref: str, reasons: Iterable[str], *, as_at: date, practice: bool, cautious: bool = False
) -> Data:
    """The reasons behind one line of the plan."""
    top = {"as_at": as_at.isoformat(), "practice": practice, "cautious": cautious}
    return top | {"ref": ref, "reasons": list(reasons)}


def _top(plan: Plan) -> Data:
    return {
        "as_at": plan.as_at.isoformat(),
        "practice": plan.house.practice,
        "cautious": plan.lower_limits is not None,
        "period": {"from": plan.start.isoformat(), "to": plan.end.isoformat()},
        "kept_as": plan.kept_as or None,
        "changed_since": _changed_since(plan),
        "kept_unread": plan.kept_unread or None,
        "backup": _backup(plan),
    } | _lower_limits(plan.lower_limits)


def _changed_since(plan: Plan) -> Data | None:
    """The plan kept last and how many changes there are since; None where there are none."""
    if plan.changed_since is None:
        return None
    number, count = plan.changed_since
    return {"plan": number, "changes": count}


def _backup(plan: Plan) -> Data | None:
    """The last good backup: `on` None where there is none yet; None where nobody asks for it."""
    if plan.backup is None:
        return None
    on = plan.backup.on
    return {
        "on": on.isoformat() if on else None,
        "days": (plan.as_at - on).days if on else None,
        "place": plan.backup.place or None,
    }


def _lower_limits(limits: LowerLimits | None) -> Data:
    """By what the bottles of a cautious plan are doubted: a count of each."""
    if limits is None:
        return {}
    counts = {
        "own_checks": limits.own,
        "line_checks": limits.line,
        "uncertainty": limits.doubt,
        "nothing": limits.nothing,
    }
    return {"lower_limits": counts}


def _measured(micro: int, kind: Kind) -> Data:
    # six figures: enough for any sum, and none of the float's tail
    return {"amount": rounded(micro / PER_UNIT[kind], 6), "unit": BASE_UNIT[kind]}


def _number(micro: int, kind: Kind = Kind.VOLUME) -> float:
    return rounded(micro / PER_UNIT[kind], 6)


def _iso(when: date | None) -> str | None:
    return when.isoformat() if when else None


def _need(need: Answer) -> Data:
    return {
        "ref": need.ref,
        "booking": need.booking.number,
        "recipe": need.booking.recipe,
        "title": need.recipe_title,
        "dept": need.booking.department,
        "on": need.booking.on.isoformat(),
        "item": need.item,
        "strength": need.strength,
        **_measured(need.amount, need.kind),
        "closeness": need.closeness,
        "fresh": need.fresh,
        "outcome": need.outcome.value,
        # what is still to be made or bought has no bottle yet: `make` and `order` name it
        "from": [_from_bottle(draw) for draw in need.draws if draw.bottle],
        "make": need.make or None,
        "order": need.order or None,
        "reasons": list(need.reasons),
    }


def _from_bottle(draw: Draw) -> Data:
    return {"bottle": draw.bottle, **_measured(draw.amount, draw.kind)}


def _source(draw: Draw) -> Data:
    if draw.bottle:
        return _from_bottle(draw)
    origin = {"item": draw.item or draw.line} | ({"make": draw.make} if draw.make else {})
    return origin | _measured(draw.amount, draw.kind)


def _make(make: Make) -> Data:
    return {
        "id": make.id,
        "item": make.item,
        "strength": make.strength,
        "volume": _number(make.volume),
        "unit": BASE_UNIT[Kind.VOLUME],
        "needed": _number(make.needed),
        "earliest": make.earliest.isoformat(),
        "latest": make.latest.isoformat(),
        "on": make.on.isoformat(),
        "finish_on": _iso(make.finish_on),
        "ready": make.ready.isoformat(),
        "good_until": _iso(make.good_until),
        "fresh": make.fresh,
        "minutes": make.minutes,
        "vessels": make.vessels,
        "for": list(make.bookings),
        "sources": [_source(draw) for draw in make.sources],
        "heel": _number(make.heel),
        "heel_kept": make.heel_kept,
        "steps": make.steps,
        "cautions": list(make.cautions),
        "reasons": list(make.reasons),
    }


def _past(bottle: PastBottle) -> Data:
    return {
        "bottle": bottle.bottle,
        "item": bottle.item,
        "condition": bottle.condition.value,
        "good_until": _iso(bottle.good_until),
        "decided_by": bottle.decided_by,
        "matters_for": list(bottle.matters_for),
    }


def _use(use: Use) -> Data:
    return {
        "item": use.item,
        "strength": use.strength,
        "form": use.form,
        **_measured(use.amount, use.kind),
        "spare": _number(use.spare, use.kind),
        "by_booking": {number: _number(amount, use.kind) for number, amount in use.by_booking},
        "groups": use.groups,
    } | year_before(use)


def _order(order: Order) -> Data:
    return {
        "id": order.id,
        "item": order.item,
        "pack": order.pack,
        "packs": order.packs,
        "need_by": order.need_by.isoformat(),
        "order_by": order.order_by.isoformat(),
        "arrives": order.arrives.isoformat(),
        "late_by_open_days": order.late,
        # pounds as a number, as the contract has it; pence stay whole inside
        "cost": order.pence / 100,
        "shares": {department: pence / 100 for department, pence in order.shares},
        "for": list(order.for_bookings),
        "reasons": list(order.reasons),
    } | more_of_order(order)


def _short(short: Short) -> Data:
    return {
        "ref": short.ref,
        "booking": short.booking,
        "item": short.item,
        "strength": short.strength,
        **_measured(short.amount, short.kind),
        "reason": short.reason,
    }


def _level(level: Level) -> Data:
    return {
        "item": level.item,
        "line": level.line,
        "on": level.on.isoformat(),
        "left": _number(level.left, level.kind),
        "level": _number(level.level, level.kind),
        "runs_out": _iso(level.runs_out),
        "unit": BASE_UNIT[level.kind],
    }


def _finding(finding: Finding) -> Data:
    return _about(finding.subject, otherwise="item") | {"text": finding.text}


def _about(subject: str, *, otherwise: str) -> Data:
    # a finding carries no kind, so the label's shape has to tell
    return {"bottle" if is_bottle(subject) else otherwise: subject}
