"""A short form as a value: what it asks for, who may send it, and what it does."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING

from stockroom.service.answers import Done
from stockroom.web.door.roles import Role

if TYPE_CHECKING:
    from stockroom.web.forms.typed import Typed

LONGEST = 500
"""Signs a field takes; a longer note belongs on paper. Our choice."""

NAMES = ("bottle", "line", "place", "booking", "recipe", "department", "reaction")
"""Kinds of field for which names are offered while somebody types."""


@dataclass(frozen=True, slots=True)
class Field:
    """One thing asked for. `name` is its key in the form and in the API, `label` what people read.

    `kind` is text, long (several lines), date, time, amount, strength, number, choice, yes (a box
    to tick), or one of `NAMES`. `hint` shows the way to write it; `choices` are (value, words).
    `usual` stands in the field until somebody writes otherwise. A `late` box to tick is shown
    only once a refusal asks whether it is meant.
    """

    name: str
    label: str
    kind: str = "text"
    needed: bool = False
    hint: str = ""
    choices: tuple[tuple[str, str], ...] = ()
    usual: str = ""
    late: bool = False

    @property
    def offers(self) -> str:
        """The kind of names to offer; "" for none."""
        return self.kind if self.kind in NAMES else ""


@dataclass(frozen=True, slots=True)
class Form:
    """One event as a form: its address is /do/NAME and /api/do/NAME.

    `title` is what its button says, `promise` one sentence on what will be saved. `subject` is
    the heading it stands under where all forms are listed. `caution` is shown above the fields.
    """

    name: str
    title: str
    promise: str
    fields: tuple[Field, ...]
    do: Callable[[Typed], Done]
    subject: str = "At the shelf"
    role: Role = Role.RECORD
    caution: str = ""

    def field(self, name: str) -> Field | None:
        """The field of that name; None where there is none."""
        return next((each for each in self.fields if each.name == name), None)

    def usual(self) -> dict[str, str]:
        """What stands in the fields before anybody writes."""
        return {each.name: each.usual for each in self.fields if each.usual}


ON = Field("on", "Happened on", "date", hint="today, if left empty")
"""The day it happened: every event has it."""

BOTTLE = Field("bottle", "Bottle", "bottle", needed=True, hint="the number on its label, as S13")
"""The bottle it happened to."""

AMOUNT = Field("amount", "Amount", "amount", needed=True, hint="with its unit, as 2 g")
"""How much of it."""

LINE = Field("line", "What it is", "line", needed=True, hint="by any of its names")
"""The stock line it is of."""

WHY = Field("why", "Why", needed=True, hint="one word is enough")
"""The reason, where one is asked for."""


def sure(label: str) -> Field:
    """The box to tick where a first answer asks whether it is meant."""
    return Field("sure", label, "yes", late=True)


def by_name(forms: tuple[Form, ...]) -> Mapping[str, Form]:
    """The forms by their names. Raises: ValueError where two share one."""
    found = {form.name: form for form in forms}
    if len(found) != len(forms):
        raise ValueError(f"two forms share a name among {[form.name for form in forms]}")
    return found
