"""What was changed of a line's ageing rules, for the reading side: light, as reading is."""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.store.reading import Reader

TABLE = "keeping"
"""The table the changes are recorded under."""


@dataclass(frozen=True, slots=True)
class RuleChange:
    """One change of a line's rules, as it was recorded."""

    rule: str
    before: str
    after: str
    why: str
    by: str
    on: str


def changes_of(reader: Reader, line: str) -> tuple[RuleChange, ...]:
    """The changes recorded of a line's rules, oldest first."""
    rows = reader.rows(
        "row_change", "WHERE table_name = ? AND row_key = ? ORDER BY id", TABLE, line
    )
    return tuple(
        RuleChange(
            row["column_name"], row["before"], row["after"], row["why"], row["by"],
            row["entered_on"],
        )
        for row in rows
    )  # fmt: skip
