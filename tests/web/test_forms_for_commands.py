"""Nothing that a command enters is missing from the forms, and no option from their fields."""

from __future__ import annotations

import inspect
import typing
from collections.abc import Iterable, Mapping
from dataclasses import replace

import pytest

from stockroom.cli.commands import COMMANDS
from stockroom.web.forms.field import Field, Form
from stockroom.web.forms.options import field_of
from stockroom.web.forms.table import BY_NAME

NO_FORM = {
    "walk": "a round is walked on paper; what was found is entered bottle by bottle",
    "learn": "only its --use writes: a rule, which has a form",
    "hazards": "only its --text writes: a supplier's text, typed off a sheet once in years",
    "plan": "only its --keep writes: a printed plan",
    "logger": "brings in a file of a logger",
    "demo": "makes a store, and pages open one",
    "new": "makes a store, and pages open one",
    "bring-in": "has a page of its own",
    "move-house": "moves the store the pages stand on",
    "serve": "is what shows the pages",
    "verify": "only its --afresh writes, where the store itself is damaged",
    "hand-out": "writes a folder on the machine",
    "backup": "writes a file on the machine",
    "restore": "takes the place of the store the pages stand on",
}
"""Commands that can write and have no form, with the reason."""

SHOWN = frozenset(
    "fresh past usage buying on-order ready shelf why changed what-if fades diary week day slip"
    " phone card strip label report calendar workbook morning handover picture strength weigh"
    " dilute".split()
)
"""Commands that enter nothing; a copy of a sheet may be numbered, which pages do themselves."""


def _without_a_form(commands: Iterable[str], forms: Mapping[str, Form]) -> set[str]:
    return {name for name in commands if name not in forms and name not in NO_FORM} - SHOWN


def test_every_command_that_enters_something_has_its_form() -> None:
    commands = [name for under in COMMANDS.values() for name in under]
    assert _without_a_form(commands, BY_NAME) == set()
    assert (set(NO_FORM) | SHOWN) <= set(commands)
    assert not SHOWN & set(BY_NAME)


def test_a_command_without_a_form_would_be_found() -> None:
    assert _without_a_form(["draw", "blend"], BY_NAME) == {"blend"}


LEFT_OUT = {
    "arrive": set[str](),
    "count": {"--walk"},
    "book": {"--number"},
    # lent, or back: two forms; an unknown logged, or named; an order placed, or changed
    "lend": {"--back", "--from"},
    "unknown": {"--is", "--evidence"},
    "order": {"--cancel", "--put-off", "--why"},
    "cancel": {"--undo"},
    "destroyed": {"--undo", "--why"},
}
"""Options that the form of a command has no field for."""


def _options(command: object) -> set[str]:
    hints = typing.get_type_hints(command, include_extras=True)
    found = set()
    for name in inspect.signature(typing.cast("typing.Any", command)).parameters:
        for told in getattr(hints[name], "__metadata__", ()):
            if type(told).__name__ == "OptionInfo":
                # beside a type, the first name given stands where a default would
                given = [told.default, *(told.param_decls or ())]
                given = [one for one in given if isinstance(one, str) and one]
                found |= set("/".join(given or [_spelt(name)]).split("/"))
    return {each for each in found if each.startswith("--")}


def _spelt(name: str) -> str:
    return f"--{name.rstrip('_').replace('_', '-')}"


def _lacking(form: Form, command: object) -> set[str]:
    return {one for one in _options(command) if field_of(form, one) is None}


_ENTERING = {
    name: command
    for under in COMMANDS.values()
    for name, command in under.items()
    # the forms of whoever keeps the house take a table's columns instead
    if name in BY_NAME and name not in ("rule", "add", "change")
}


@pytest.mark.parametrize("name", _ENTERING)
def test_every_option_of_a_command_has_its_field(name: str) -> None:
    assert _lacking(BY_NAME[name], _ENTERING[name]) == LEFT_OUT.get(name, set())


def test_an_option_without_a_field_would_be_found() -> None:
    command = COMMANDS["At the shelf"]["draw"]
    less = replace(BY_NAME["draw"], fields=(Field("bottle", "Bottle"), Field("on", "On")))
    assert _lacking(less, command) == {"--gross", "--tare", "--for"}
