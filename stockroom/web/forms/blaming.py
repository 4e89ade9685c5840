"""Which field of a form a refusal is about, so that it can stand beside it."""

from __future__ import annotations

import re
from collections.abc import Mapping

from stockroom.errors import BadAmount, BadDate, NotEnough, StockroomError
from stockroom.web.forms.field import Field, Form
from stockroom.web.forms.options import field_of
from stockroom.web.forms.typed import AtField

_KINDS: dict[type[StockroomError], tuple[str, ...]] = {
    BadDate: ("date", "time"),
    BadAmount: ("amount", "strength"),
    NotEnough: ("amount",),
}
_MEASURED = ("amount", "strength", "date")
_OF_TABLES = ("rule", "change", "add")
# where a row stood is of use to whoever keeps the tables, and not beside the field itself
_TABLE = re.compile(r"^(?P<table>[a-z]+(?:_[a-z]+)*)(?:: |, (?=[a-z_]+ \"))")
_OPTION = re.compile(r"--[a-z][a-z-]*")


def blamed(form: Form, values: Mapping[str, str], error: StockroomError) -> str:
    """The field a refusal of the use case is about, "" for the form as a whole.

    One of its kind, else an empty one its hint asks for, else one its message quotes.
    """
    if isinstance(error, AtField):
        return error.field
    filled = [each for each in form.fields if values.get(each.name, "").strip()]
    said = {each.name: values[each.name].strip().lower() for each in filled}
    message, tick = error.message.lower(), to_tick(form, error)
    # the longest says most, and one sign stands in any sentence
    by_length = sorted(filled, key=lambda each: -len(said[each.name]))
    quoted = [each for each in by_length if len(said[each.name]) > 1 and said[each.name] in message]
    fitting = [each for each in filled if _fits(each, error)]
    for found in (
        [each for each in filled if tick and each.kind in _MEASURED],
        [each for each in quoted if each in fitting],
        fitting,
        _asked_for(form, filled, error.hint),
        # a figure is refused by the name of its option
        [each for each in _named_in(form, error.message) if each in filled],
        # what a message begins with, it is about
        [each for each in quoted if message.startswith(said[each.name])],
        quoted,
    ):
        if found:
            return found[0].name
    return ""


def in_labels(form: Form, message: str) -> str:
    """A refusal's message with the options of a command as the labels of their fields."""

    def label(option: re.Match[str]) -> str:
        field = field_of(form, option[0])
        return f"“{field.label}”" if field else option[0]

    return in_columns(form, _OPTION.sub(label, message))


def in_columns(form: Form, text: str) -> str:
    """A refusal or its hint with the columns of a table as the labels of their fields.

    A column of one word is a word like any other, unless it stands at the beginning.
    """
    told = _TABLE.sub("", text, count=1) if form.name in _OF_TABLES else text
    for field in form.fields:
        # no label holds a backslash, which would mean something here
        name, label = re.escape(field.name), f"“{field.label}”"
        if "_" in field.name:
            told = re.sub(rf"\b{name}\b", label, told)
        elif form.name in _OF_TABLES:
            told = re.sub(rf'^{name}(?= (?:"|is\b|of\b))', label, told)
    return told


def _named_in(form: Form, message: str) -> list[Field]:
    named = (field_of(form, option) for option in _OPTION.findall(message))
    return [each for each in named if each]


def to_tick(form: Form, error: StockroomError) -> str:
    """The box that says it is meant all the same, where the refusal asks for it; else ""."""
    asked = (field_of(form, option) for option in _OPTION.findall(error.hint))
    return next((each.name for each in asked if each and each.kind == "yes"), "")


def _asked_for(form: Form, filled: list[Field], hint: str) -> list[Field]:
    asked = (field_of(form, option) for option in _OPTION.findall(hint))
    # a box to tick is shown beside what it is about
    return [each for each in asked if each and each not in filled and each.kind != "yes"]


def _fits(field: Field, error: StockroomError) -> bool:
    return any(isinstance(error, each) and field.kind in of for each, of in _KINDS.items())
