"""Checks, loads and watches of a plan as data; keys as in `json_plan.py`, added to, never renamed.

Minutes are whole numbers; a time is ISO text with its day, since some fall on the day after.
"""

from __future__ import annotations

from datetime import date, datetime, time, timedelta
from typing import Any

from stockroom.planning.decisions import CheckToDo, DayLoad, Watch, Worth
from stockroom.reports.sheet import is_bottle

Data = dict[str, Any]


def check_data(check: CheckToDo) -> Data:
    """A titration or a look; `worth` is there for a look that only saves work."""
    data: Data = {
        "bottle" if is_bottle(check.subject) else "subject": check.subject,
        "item": check.item,
        "what": check.what,
        "not_before": check.not_before.isoformat(),
        "by": check.by.isoformat(),
        "best": check.best.isoformat(),
        "minutes": check.minutes,
        "for": list(check.bookings),
        "reason": check.reason,
        "optional": check.optional,
    }
    return data | ({"worth": _worth(check.worth)} if check.worth else {})


def _worth(worth: Worth) -> Data:
    # pounds as a number, as every cost of the plan
    return {
        "makes": list(worth.makes),
        "minutes": worth.minutes,
        "orders": {order: pence / 100 for order, pence in worth.orders},
        "shares": {department: pence / 100 for department, pence in worth.shares},
        "serves": list(worth.serves),
        "estimated": worth.estimated,
    }


def load_data(load: DayLoad) -> Data:
    """One day of hands-on work; `movable` names earlier days with room."""
    return {
        "day": load.day.isoformat(),
        "minutes": load.minutes,
        "limit": load.limit or None,
        "over": load.over,
        "makes": list(load.makes),
        "checks": list(load.checks),
        "movable": [{"make": name, "to": to.isoformat()} for name, to in load.movable],
    }


def watch_data(watch: Watch) -> Data:
    """A mixture that is never kept; `ticked_by` is null while nobody has destroyed it."""
    return {
        "booking": watch.booking,
        "on": watch.on.isoformat(),
        "title": watch.title,
        "not_before": _moment(watch.on, watch.not_before),
        "destroy_by": _moment(watch.on, watch.destroy_by),
        "how": watch.how,
        "dangers": list(watch.dangers),
        "ticked_by": watch.ticked_by or None,
    }


def _moment(on: date, minute: int) -> str:
    at = datetime.combine(on, time()) + timedelta(minutes=minute)
    return at.isoformat(timespec="minutes")
