"""Every error `stockroom` raises on purpose, and the exit code each one earns.

    StockroomError
    ├── BadInput            exit 2: what was typed cannot be read
    │   ├── BadAmount       an amount, strength or formula
    │   ├── BadDate         a day, a printed date or a period
    │   └── UnknownName     no bottle, booking, line, place or recipe of that name
    └── Refused             exit 1: understood, and not done
        ├── MissingFigure   a density, molar mass or strength is needed first
        ├── NotEnough       more asked for than there is
        ├── NotAllowed      barred, never kept, set aside, gone, out of order
        │   └── SentOtherwise   sent in before, with something else in it
        ├── StoreTrouble    the store is missing, busy, damaged, read-only or too new
        └── BrokenPlan      the plan made breaks a rule of the house, and is not shown

The message quotes the value that was wrong and names the bottle, row or column
it stood in; the hint says what to do next.
"""

from __future__ import annotations


class StockroomError(Exception):
    """The base of all of them: a message that quotes the value, and a hint.

    `message` is one sentence for a person; `hint` is an action, or empty.
    """

    exit_code = 1

    def __init__(self, message: str, hint: str = "") -> None:
        super().__init__(message)
        self.message = message
        self.hint = hint

    def __str__(self) -> str:
        return f"{self.message} {self.hint}".strip()


class BadInput(StockroomError):
    """What was typed cannot be read as what was wanted. Exit code 2."""

    exit_code = 2


class BadAmount(BadInput):
    """An amount, a strength, a unit or a formula that cannot be read."""


class BadDate(BadInput):
    """A day, a printed date, a time or a period that cannot be read."""


class UnknownName(BadInput):
    """No such bottle, booking, stock line, place, recipe or department."""


class Refused(StockroomError):
    """The request was understood and will not be carried out. Exit code 1."""


class MissingFigure(Refused):
    """A sum needs a figure nobody has given; the message says which to read off the label."""


class NotEnough(Refused):
    """More was asked for than the bottle holds."""


class NotAllowed(Refused):
    """Barred by the recipe, never kept, set aside, gone, or before its time."""


class SentOtherwise(NotAllowed):
    """What was sent in before comes again with something else in it."""


class StoreTrouble(Refused):
    """The store is missing, busy, damaged, read-only, or from a newer version."""


class BrokenPlan(Refused):
    """The plan breaks a rule it must keep: a fault of the planner, found before it is shown."""
