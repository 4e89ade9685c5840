"""The keys of what changed and of what would change, as OpenAPI tells them: see `contract.py`."""

from __future__ import annotations

from datetime import date

from pydantic import Field

from stockroom.web.api.contract import Keys, Practice


class Change(Keys):
    """One change with its cause; `ref` is the number it had, `now` the one it has."""

    about: str
    ref: str | None
    now: str | None
    item: str
    what: list[str]
    text: str
    cause: str


class BeforeAfter(Keys):
    """A number in the plan before, and in the one after."""

    before: float
    after: float


class Changes(Practice):
    """The changes between two plans; `count` leaves out what is `done`."""

    as_at: date
    count: int
    changes: list[Change]
    done: list[Change]
    minutes: BeforeAfter
    cost: BeforeAfter
    short: BeforeAfter


class KeptWhen(Keys):
    """When a plan was kept, and by whom."""

    as_at: date
    by: str
    cautious: bool


class ChangedAnswer(Changes):
    """What changed since the plan of the number `plan` was kept."""

    plan: str
    kept: KeptWhen


class WhatIfAnswer(Changes):
    """What would change; `if` is what was asked, in words."""

    if_: list[str] = Field(alias="if")
