"""What the pages of the handover are made of: parts with points, and what the store tells."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from typing import Protocol

from stockroom.reports.corrected import Corrected

WHO = "--by XX"
"""What stands for the reader's own initials in a command."""


@dataclass(frozen=True, slots=True)
class Job:
    """One thing to do, with a box to tick, and what to type when it is done."""

    text: str
    commands: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Point:
    """One thing told: its name, what there is to say of it, and what there is to do.

    `boxed` is for what must not be read past.
    """

    name: str
    told: tuple[str, ...] = ()
    jobs: tuple[Job, ...] = ()
    boxed: bool = False


@dataclass(frozen=True, slots=True)
class Part:
    """One part of the pages; `intro` says what it is for, or that there is nothing."""

    title: str
    intro: str
    points: tuple[Point, ...] = ()


def together(points: Sequence[Point]) -> tuple[Point, ...]:
    """Points of one name as one, so that all there is to say of a bottle stands together."""
    told: dict[str, Point] = {}
    for point in points:
        before = told.get(point.name, Point(point.name))
        told[point.name] = Point(
            point.name, (*before.told, *point.told), (*before.jobs, *point.jobs)
        )
    return tuple(told.values())


class Change(Corrected, Protocol):
    """What was corrected in a table of the house."""

    @property
    def table(self) -> str: ...
    @property
    def row(self) -> str: ...
    @property
    def column(self) -> str: ...


class HandIn(Protocol):
    """Initials in the ledger."""

    @property
    def initials(self) -> str: ...
    @property
    def entries(self) -> int: ...
    @property
    def first(self) -> date: ...
    @property
    def last(self) -> date: ...


class Beside(Protocol):
    """What the store tells beside the facts and the plan."""

    @property
    def store(self) -> str: ...
    @property
    def terms(self) -> int: ...
    @property
    def settings(self) -> Sequence[tuple[str, str]]: ...
    @property
    def closures(self) -> Sequence[tuple[date, date, str]]: ...
    @property
    def changes(self) -> Sequence[Change]: ...
    @property
    def hands(self) -> Sequence[HandIn]: ...
    @property
    def backup(self) -> tuple[date, str] | None: ...
