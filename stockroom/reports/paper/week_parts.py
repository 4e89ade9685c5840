"""What the week sheet is made of: rungs (days), classes, shelves, jobs; and words they share."""

from __future__ import annotations

import re
from dataclasses import dataclass
from datetime import date

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Make
from stockroom.reports.words import TIED, amount, named, weekday_and_day

CHECK, START, MAKE, SET_OUT = "check", "start", "make", "set out"
DESTROY, TIDY = "destroy", "tidy"
SHELVES = (CHECK, START, MAKE, SET_OUT, DESTROY, TIDY)
"""The shelves of a day in the order they are worked: what a check finds decides the makes."""


@dataclass(frozen=True, slots=True)
class Item:
    """One thing to set out: how much of what, and where it comes from; `tick` False for a lack.

    `passed` tells the bottles that are passed over for it, and why: "S05: set aside".
    """

    key: str
    what: str
    whence: str
    tick: bool = True
    passed: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Job:
    """One line to tick: when, what, what goes with it, and the cautions of its step.

    `time` is "" where nothing fixes one. `ref` is the make's number, which changes from plan to
    plan and so is no part of what the line says. `sign` leaves a blank for initials.
    """

    key: str
    time: str
    what: str
    more: tuple[str, ...] = ()
    cautions: tuple[str, ...] = ()
    ref: str = ""
    sign: bool = False
    items: tuple[Item, ...] = ()


@dataclass(frozen=True, slots=True)
class Shelf:
    """The jobs of one kind of a day."""

    name: str
    jobs: tuple[Job, ...]


@dataclass(frozen=True, slots=True)
class Class:
    """One booking at the top of its day."""

    key: str
    time: str
    what: str
    about: str


@dataclass(frozen=True, slots=True)
class Rung:
    """One day: `state` is "", "over" or "closed"; `told` what is said in place of jobs."""

    on: date
    name: str
    state: str
    told: str
    minutes: str
    classes: tuple[Class, ...]
    shelves: tuple[Shelf, ...]


@dataclass(frozen=True, slots=True)
class Also:
    """One line at the foot of the week, told apart by its key."""

    key: str
    about: str
    text: str


def tied(text: str) -> str:
    """The same with no line broken inside it."""
    return text.replace(" ", TIED)


def made(make: Make) -> str:
    """What a make gives: "starch 0.5 % w/v"."""
    return named(make.item, make.strength)


def made_when(make: Make, as_at: date) -> str:
    """When a make is or was made, as seen on the day of the plan: "to be made Mon 25 Jan"."""
    return f"{'made' if make.on < as_at else 'to be made'} {weekday_and_day(make.on)}"


def volume(micro: int) -> str:
    """A volume as it is measured: "528 cm³"."""
    return amount(micro, Kind.VOLUME)


def without_figure(guess: str) -> str:
    """A guess less how strong it expects a bottle to be, which is another figure every day."""
    return _EXPECTED.sub("expected", guess)


_EXPECTED = re.compile(r"\bexpected [\d.]+\s\S+")
