"""The keys every answer shares, and what a refusal holds, as OpenAPI tells them.

These describe what `reports/json_*.py` makes and are never filled: an answer is sent as those
functions gave it. Keys are a contract, added to and never renamed; a test holds the two
against each other. What is marked as not required is there only where it applies.
"""

from __future__ import annotations

from datetime import date
from typing import Any

from pydantic import BaseModel, ConfigDict, Field

ABSENT: Any = Field(default_factory=dict)
"""The mark of a key that is there only where it applies."""


class Keys(BaseModel):
    """Some keys of an answer, by the names they are sent under."""

    model_config = ConfigDict(populate_by_name=True)


class Measured(Keys):
    """An amount: a number to six figures, in `unit` (g, cm3 or items)."""

    amount: float
    unit: str


class Practice(Keys):
    """Whose answer: `practice` is true for the invented college."""

    practice: bool


class Period(Keys):
    """The first and the last day planned."""

    first: date = Field(alias="from")
    last: date = Field(alias="to")


class ChangedSince(Keys):
    """The plan kept last, and how many changes there are since."""

    plan: str
    changes: int


class Backup(Keys):
    """The last good backup: `on` is null while there is none."""

    on: date | None
    days: int | None
    place: str | None


class LowerLimits(Keys):
    """By what the bottles of a cautious plan are doubted: a count of each."""

    own_checks: int
    line_checks: int
    uncertainty: int
    nothing: int


class Top(Practice):
    """The top of every answer that is made from a plan."""

    as_at: date
    cautious: bool
    period: Period
    kept_as: str | None
    changed_since: ChangedSince | None
    kept_unread: str | None
    backup: Backup | None
    lower_limits: LowerLimits = ABSENT


class DoneAnswer(Practice):
    """What was saved: `next` is the command that usually follows, `undo` what takes it back."""

    text: str
    bottle: str | None
    entry: int | None
    details: list[str]
    next: str | None
    undo: str | None


PROBLEM: dict[str, Any] = {
    "type": "object",
    "title": "Problem",
    "description": "What was refused and why, after RFC 9457; `hint` says what to do.",
    "properties": {
        "title": {"type": "string"},
        "status": {"type": "integer"},
        "detail": {"type": "string"},
        "hint": {"type": "string"},
        "field": {"type": "string", "description": "The field it is about, of a form."},
    },
    "required": ["title", "status", "detail", "hint"],
}
