"""Rows into facts: what was ordered and is still to come, and what an earlier term used."""

from __future__ import annotations

from datetime import date, timedelta

from stockroom.planning.facts import FormerUse, Placed
from stockroom.store.kinds import CANCELLED, EXPECTED, STANDING
from stockroom.store.reading import Reader, Row

_A_YEAR = timedelta(weeks=52)
# a term begins and ends within so much of the same weekdays a year before: common practice
_ABOUT = timedelta(days=21)


def placed_of(reader: Reader, as_at: date, since: date = date.min) -> tuple[Placed, ...]:
    """Orders placed from `since` up to a day, and older ones still to come then, by number.

    What has come is summed from the ledger, so an arrival put right is to come again.
    """
    rows = reader.rows("placed", "WHERE ordered_on <= ? ORDER BY id", as_at.isoformat())
    if not rows:
        return ()
    keys = reader.pairs("SELECT id, key FROM line")
    came = reader.pairs(
        "SELECT placed_id, SUM(entry.change) FROM placed_came"
        " JOIN entry ON entry.id = placed_came.entry_id"
        f" WHERE entry.happened_on <= ? AND {STANDING} GROUP BY placed_id",
        as_at.isoformat(),
    )
    shares: dict[int, list[tuple[str, int]]] = {}
    for row in reader.ask(
        "SELECT placed_id, department, pence FROM placed_share"
        " JOIN department ON department.id = department_id ORDER BY department"
    ):
        shares.setdefault(row[0], []).append((row[1], row[2]))
    changes: dict[int, list[Row]] = {}
    told = "WHERE happened_on <= ? ORDER BY id"
    for row in reader.rows("placed_change", told, as_at.isoformat()):
        changes.setdefault(row["placed_id"], []).append(row)
    orders = (
        _placed(row, keys[row["line_id"]], came.get(row["id"], 0), shares, changes) for row in rows
    )
    return tuple(one for one in orders if one.ordered >= since or one.outstanding)


def _placed(
    row: Row,
    line: str,
    came: int,
    shares: dict[int, list[tuple[str, int]]],
    changes: dict[int, list[Row]],
) -> Placed:
    expected, cancelled = row["expected_on"], None
    for change in changes.get(row["id"], ()):
        if change["what"] == EXPECTED:
            expected = change["after"]
        elif change["what"] == CANCELLED:
            cancelled = date.fromisoformat(change["happened_on"])
    return Placed(
        number=row["number"],
        line=line,
        size=row["size"],
        pack=row["pack"],
        packs=row["packs"],
        pence=row["pence"],
        ordered=date.fromisoformat(row["ordered_on"]),
        expected=date.fromisoformat(expected),
        came=came,
        cancelled=cancelled,
        supplier=row["supplier"],
        by=row["by"],
        shares=tuple(shares.get(row["id"], ())),
    )


def year_before_of(reader: Reader, start: date, end: date) -> tuple[date, date]:
    """The same days a year before: the term written down for about then, else 52 weeks earlier."""
    first, last = start - _A_YEAR, end - _A_YEAR
    rows = reader.rows(
        "term",
        "WHERE starts_on BETWEEN ? AND ? AND ends_on BETWEEN ? AND ? ORDER BY starts_on LIMIT 1",
        *(day.isoformat() for each in (first, last) for day in (each - _ABOUT, each + _ABOUT)),
    )
    # weeks and not a calendar year, so that Tuesday's class is set beside a Tuesday's
    if not rows:
        return first, last
    return date.fromisoformat(rows[0]["starts_on"]), date.fromisoformat(rows[0]["ends_on"])


def former_of(reader: Reader, span: tuple[date, date]) -> tuple[FormerUse, ...]:
    """What was written down of a term that lies about within these days, by line."""
    first, last = span
    rows = reader.rows(
        "former_use",
        "WHERE starts_on BETWEEN ? AND ? AND ends_on BETWEEN ? AND ? ORDER BY id",
        *(day.isoformat() for each in (first, last) for day in (each - _ABOUT, each + _ABOUT)),
    )
    keys = reader.pairs("SELECT id, key FROM line") if rows else {}
    return tuple(
        FormerUse(
            keys[row["line_id"]],
            date.fromisoformat(row["starts_on"]),
            date.fromisoformat(row["ends_on"]),
            row["amount"],
            row["groups"],
        )
        for row in rows
    )
