"""How old the last good backup is, for the foot of a sheet. Light: reading commands ask this."""

from __future__ import annotations

from dataclasses import replace
from datetime import date

from stockroom.planning.decisions import LastBackup, Plan
from stockroom.settings import Server, StoreAt
from stockroom.store.reading import reading


def with_backup(path: StoreAt, plan: Plan) -> Plan:
    """The plan with the last good backup its store knows of by its day.

    Without, for a practice store, which nobody would miss, and one a server keeps.
    """
    if plan.house.practice or isinstance(path, Server):
        return plan
    with reading(path) as reader:
        made = reader.rows(
            "backup_made",
            "WHERE entered_on <= ? ORDER BY entered_on DESC, id DESC LIMIT 1",
            plan.as_at.isoformat(),
        )
    on = date.fromisoformat(made[0]["entered_on"]) if made else None
    return replace(plan, backup=LastBackup(on, made[0]["place"] if made else ""))
