"""A rule of the house in the place of a starter value; both stay, with who, when and why."""

from __future__ import annotations

import math
from dataclasses import dataclass

from sqlmodel import col, select

from stockroom.errors import BadInput, NotAllowed, UnknownName
from stockroom.keeping.rules import Rule, RuleKind
from stockroom.store.changing import record_change
from stockroom.store.desk import Desk
from stockroom.store.engine import reader_in
from stockroom.store.faults import told_with_place
from stockroom.store.fields import Fields
from stockroom.store.layout import check_columns
from stockroom.store.rows_rules import cells_of, check_room, rule_from
from stockroom.store.rule_changes import TABLE
from stockroom.store.snapshot_lines import rule_of
from stockroom.store.tables import KeepingRule, Line

SOURCE = "house rule"
# these say which rule is meant, where a line has several of a kind
_WHICH = (
    "purpose", "stronger_than", "up_to_strength", "colder_than_c", "warmer_than_c"
)  # fmt: skip
_BOUNDS = ("stronger_than", "up_to_strength")
# as near as `Rule.holds_for` tells two strengths apart
_CLOSE = 1e-6
# giving the first takes the others away: they say the same thing in another way
_INSTEAD = {
    "ea_kj_mol": ("factor_per_10c",),
    "factor_per_10c": ("ea_kj_mol",),
    "named_law": ("order", "rate", "rate_of", "rate_per", "factor_per_10c", "ea_kj_mol"),
    "rate": ("named_law",),
}


@dataclass(frozen=True, slots=True)
class Replaced:
    """What a rule of the house took the place of: None where it is the first of its kind."""

    line: Line
    before: Rule | None
    after: Rule | None


def set_rule(desk: Desk, line_text: str, kind: str, cells: dict[str, str]) -> Replaced:
    """Put a rule of the house in the place of the one it speaks instead of.

    `cells` are columns of the keeping table; what they do not say stays as it was.
    Raises: UnknownName, BadInput, BadAmount, BadDate, each naming the column; NotAllowed
    for what is never kept.
    """
    line = desk.line(line_text)
    check_columns(TABLE, cells)
    old = _meant(desk, line, _kind(kind), cells)
    _check_never(line, old)
    kept = cells_of(old, line) if old else {}
    # a bound typed again is the one that is there, to its last figure
    again = [column for column in _BOUNDS if old and cells.get(column)]
    cells = {column: cell for column, cell in cells.items() if column not in again}
    _check_rate(kept, cells)
    # a new word for a rate ends the old one, whichever way that was written
    for column, others in _INSTEAD.items():
        if cells.get(column):
            kept |= {other: "" for other in others if other not in cells}
    fields = Fields({"line": line.key, "rule": kind} | kept | cells | {"source": SOURCE})
    with told_with_place(TABLE, fields):
        row = rule_from(desk, fields)
        check_room(fields, row)
    row.house = True
    _out_of_use(desk, old)
    desk.save(row)
    return Replaced(line, _rule(desk, old), _rule(desk, row))


def withdraw_rule(desk: Desk, line_text: str, kind: str, cells: dict[str, str]) -> Replaced:
    """Take a rule out of use with nothing in its place.

    Raises: UnknownName when there is none; NotAllowed for what is never kept.
    """
    line = desk.line(line_text)
    check_columns(TABLE, cells)
    old = _meant(desk, line, _kind(kind), cells)
    _check_never(line, old)
    if old is None:
        raise UnknownName(
            f"{line.key} has no rule {kind!r} to withdraw.", f'Look: stockroom rule "{line.key}".'
        )
    _out_of_use(desk, old)
    return Replaced(line, _rule(desk, old), None)


def note_change(desk: Desk, line: Line, kind: str, words: tuple[str, str], why: str) -> None:
    """Keep who changed a rule, when, why, and both wordings. Raises: BadInput without a reason."""
    if not why.strip():
        raise BadInput(f"Why is {kind} of {line.key} changed?", "One word is enough: --why …")
    record_change(desk, TABLE, line.key, kind, words, why.strip())


def _kind(text: str) -> RuleKind:
    return Fields({"rule": text}).choice("rule", RuleKind)


def _meant(desk: Desk, line: Line, kind: RuleKind, cells: dict[str, str]) -> KeepingRule | None:
    """The rule in use that is to be replaced; None when there is none of its kind."""
    asked = select(KeepingRule).where(
        KeepingRule.line_id == line.id, KeepingRule.rule == kind, col(KeepingRule.in_use)
    )
    found = list(desk.session.exec(asked.order_by(col(KeepingRule.id))))
    which = {column: cells[column] for column in _WHICH if cells.get(column)}
    if which:
        found = [row for row in found if _speaks_of(desk, line, row, which)]
    if len(found) > 1:
        raise BadInput(
            f"{line.key} has {len(found)} {kind} rules: which one?",
            f"Say {' or '.join(_WHICH)} of the one you mean.",
        )
    return found[0] if found else None


def _check_rate(kept: dict[str, str], cells: dict[str, str]) -> None:
    order, before = cells.get("order", ""), kept.get("order", "")
    # 0.01 a day of order 1 and 0.01 mol/dm3 a day of order 0 have nothing but the figure in common
    if order and before and order != before and not cells.get("rate"):
        raise BadInput(
            f"order {order}: at what rate? {float(kept['rate']):.3g} is one of order {before}.",
            "Give rate, rate_of and rate_per as well.",
        )


def _speaks_of(desk: Desk, line: Line, row: KeepingRule, which: dict[str, str]) -> bool:
    # read as a rule would be, so that 0.5 M and 0.500 mol/dm3 are the same bound
    wanted = rule_from(
        desk, Fields(cells_of(row, line) | {"line": line.key, "rule": row.rule} | which)
    )
    own = ("purpose", "above", "upto", "colder_than", "warmer_than")
    return all(_same(getattr(wanted, name), getattr(row, name)) for name in own)


def _same(one: str | float | None, two: str | float | None) -> bool:
    """Alike, numbers to what a rule itself tells apart: a printed bound has fewer figures."""
    if isinstance(one, float) and isinstance(two, float):
        return math.isclose(one, two, rel_tol=_CLOSE)
    return one == two


def _check_never(line: Line, old: KeepingRule | None) -> None:
    # the line itself says so too, and no house value makes it safe to stand
    if old is not None and old.rule == RuleKind.NEVER and line.never_kept:
        raise NotAllowed(
            f"{line.key}: this is never kept. There is no test that extends it.",
            "Mix it just before use, and destroy what is left the same hour.",
        )


def _out_of_use(desk: Desk, row: KeepingRule | None) -> None:
    if row is not None:
        row.in_use = False
        desk.save(row)


def _rule(desk: Desk, row: KeepingRule | None) -> Rule | None:
    if row is None:
        return None
    found = reader_in(desk.session).rows("keeping_rule", "WHERE id = ?", row.id)
    return rule_of(found[0])
