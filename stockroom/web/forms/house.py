"""Forms of whoever keeps the house: a rule, a row corrected, a row added, each with its reason."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Iterator, Mapping
from contextlib import contextmanager
from dataclasses import replace

from stockroom.errors import BadInput, NotAllowed, StockroomError
from stockroom.reports.pages.rules_parts import column_label
from stockroom.service import database, house_rules
from stockroom.service.answers import Done
from stockroom.service.typed import column_and_value
from stockroom.web.door.roles import Role
from stockroom.web.forms.field import LINE, WHY, Field, Form
from stockroom.web.forms.typed import AtField, Typed

_SUBJECT = "The house"

ADDED = (
    "house", "terms", "closures", "places", "departments", "balances", "vessels", "glassware",
    "substances", "hazards", "lines", "methods", "ingredients", "packs", "former_use", "recipes",
    "recipe_lines", "recipe_bars", "recipe_swaps",
)  # fmt: skip
"""Tables whose rows are added here; bottles, bookings and rules have forms of their own."""

CHANGED = ("places", "departments", "lines", "packs")
"""Tables whose rows are corrected here."""

_NAMES = {
    ("ingredients", "line"): "line", ("ingredients", "ingredient"): "line",
    ("methods", "line"): "line", ("packs", "line"): "line", ("former_use", "line"): "line",
    ("recipe_lines", "line"): "line", ("recipe_lines", "recipe"): "recipe",
    ("recipe_bars", "recipe"): "recipe", ("recipe_swaps", "recipe"): "recipe",
    ("recipe_swaps", "line"): "line", ("recipe_swaps", "instead"): "line",
}  # fmt: skip
"""Columns that name something there is already, and the kind of names to offer."""

_DAYS = ("from", "to", "away_from", "away_to")
_LONG = ("steps", "cautions", "handling", "waste", "never_kept", "note", "other_names")
_HINTS = {
    "lasts": "14 d, 6 months, same day",
    "stronger_than": "0.5 mol/dm3",
    "up_to_strength": "0.5 mol/dm3",
    "rate_of": "the unit of the rate: mol/dm3",
    "strength": "with its unit, as 0.100 mol/dm3",
    "other_names": "one after the other, parted by ;",
    "source": "where it is from; empty for the house's own",
    "temperature_c": "19",
    "value": "8:00, 2 or yes, as the setting wants it",
}


def _label_choices(words: Iterable[str], blank: str) -> tuple[tuple[str, str], ...]:
    return (("", blank), *((word, word) for word in words))


def column_field(
    table: str, column: str, *, needed: bool = False, blank: str = "as usual"
) -> Field:
    """A column of a table as a field, with its fixed words as choices where it has some."""
    words = database.column_words(table).get(column)
    label, hint = column_label(column), _HINTS.get(column, "")
    if words is not None:
        choices = tuple((word, word) for word in words)
        choices = choices if needed else _label_choices(words, blank)
        return Field(column, label, "choice", needed, hint, choices)
    kind = _NAMES.get((table, column), "")
    if not kind:
        kind = "date" if column in _DAYS else "long" if column in _LONG else "text"
    return Field(column, label, kind, needed, hint)


def add_form(table: str) -> Form:
    """A row added to a table, a field for each of its columns.

    Raises: UnknownName for no table of ours; NotAllowed for one that has other forms.
    """
    columns = database.table_columns(table)
    if table not in ADDED:
        raise NotAllowed(
            f"Rows of {table} are not added here.",
            "Bottles, bookings and rules each have a form of their own: see Enter.",
        )
    first = columns[0]
    fields = tuple(column_field(table, each, needed=each == first) for each in columns)
    what = table.replace("_", " ")
    title = "Settle it for the house" if table == "house" else f"Add to {what}"
    promise = f"A row is added to {what}; it stays on record who added it, when and why."
    if table == "house":
        promise = "A setting is replaced; what it was stays on record, with who, when and why."
    return Form(
        "add", title, promise, (*fields, WHY), _adds(table, columns), _SUBJECT, Role.KEEP_HOUSE
    )


def change_form(table: str, key: str, cells: Mapping[str, str]) -> Form:
    """A row corrected, a field for each column in `cells`, which holds what they are now."""
    fields = tuple(replace(column_field(table, each), usual=now) for each, now in cells.items())
    return Form(
        "change",
        f"Change {key}",
        "It counts from now on; what stood there before stays on record.",
        (*fields, WHY),
        _changes(table, key, cells),
        _SUBJECT,
        Role.KEEP_HOUSE,
    )


def rule_form(columns: Iterable[str] | None = None) -> Form:
    """A rule of the house for a line, asking for these of its columns beside the reason."""
    asked = (
        _RULE.fields
        if columns is None
        else tuple(each for each in _RULE.fields if each.name in (*columns, "why"))
    )
    return replace(_RULE, fields=asked)


def _adds(table: str, columns: Iterable[str]) -> Callable[[Typed], Done]:
    def add(typed: Typed) -> Done:
        return _added(typed, table, {each: typed.text(each) for each in columns})

    return add


def _changes(table: str, key: str, cells: Iterable[str]) -> Callable[[Typed], Done]:
    def change(typed: Typed) -> Done:
        return _changed(typed, table, key, {each: typed.text(each) for each in cells})

    return change


def _added(typed: Typed, table: str, cells: Mapping[str, str]) -> Done:
    why, by = typed.needed("why"), typed.signed()
    with _beside_its_column(typed):
        return _add_row(typed, table, cells, why=why, by=by)


def _add_row(typed: Typed, table: str, cells: Mapping[str, str], *, why: str, by: str) -> Done:
    filled = {column: cell for column, cell in cells.items() if cell}
    return database.add_row(typed.path, table, filled, by=by, why=why, today=typed.today)


def _changed(typed: Typed, table: str, key: str, cells: Mapping[str, str]) -> Done:
    why, by = typed.needed("why"), typed.signed()
    with _beside_its_column(typed):
        return database.change_row(
            typed.path, table, key, dict(cells), why=why, today=typed.today, by=by
        )


def column_in(message: str, form: Form) -> str:
    """The field whose column a refusal names first, "" for none.

    A column of one word is a word like any other, unless it stands where columns stand.
    """
    places = {}
    for each in form.fields:
        name = re.escape(each.name)
        whole = rf"\b{name}\b" if "_" in each.name else rf'(?:^|[:,] ){name}(?= (?:"|is\b|of\b))'
        found = re.search(whole, message)
        if found:
            places[each.name] = found.start()
    return min(places, key=places.__getitem__) if places else ""


@contextmanager
def _beside_its_column(typed: Typed) -> Iterator[None]:
    try:
        yield
    except StockroomError as error:
        column = column_in(error.message, typed.form)
        if not column:
            raise
        raise AtField(column, error) from error


def _rule(typed: Typed) -> Done:
    line, kind = typed.needed("line"), typed.choice("rule")
    why, by = typed.needed("why"), typed.signed()
    columns = [each for each in _KEEPING if typed.text(each)]
    with _beside_its_column(typed):
        return house_rules.set_rule(
            typed.path,
            line,
            kind,
            {each: typed.text(each) for each in columns},
            withdraw=typed.yes("withdraw"),
            why=why,
            today=typed.today,
            by=by,
        )


def _any_change(typed: Typed) -> Done:
    table, key, column = typed.choice("table"), typed.needed("key"), typed.needed("column")
    known = database.changeable_columns(table)
    if column not in known:
        told = f'{table} has no column "{column}" that may be changed.'
        raise AtField("column", BadInput(told, f"May be changed: {', '.join(known)}."))
    return _changed(typed, table, key, {column: typed.text("value")})


def _any_add(typed: Typed) -> Done:
    table, rows = typed.choice("table"), typed.needed("cells").splitlines()
    with typed.about("cells"):
        cells = dict(column_and_value(line) for line in rows if line.strip())
        # whose why or initials are missing is told beside those
        why, by = typed.needed("why"), typed.signed()
        return _add_row(typed, table, cells, why=why, by=by)


_KEEPING = tuple(
    column
    for column in database.table_columns("keeping")
    if column not in ("line", "rule", "source")
)
_KEEPS = {
    column: column_field("keeping", column, blank="as it was, or as usual") for column in _KEEPING
}

_RULE = Form(
    "rule",
    "Rule of the house",
    "How a line keeps from now on; the rule it takes the place of stays on record.",
    (
        LINE,
        column_field("keeping", "rule", needed=True),
        *_KEEPS.values(),
        Field("withdraw", "Withdraw the rule, with nothing in its place", "yes"),
        WHY,
    ),
    _rule,
    _SUBJECT,
    Role.KEEP_HOUSE,
)

FORMS = (
    _RULE,
    Form(
        "change",
        "Correct a table of the house",
        "One cell is corrected; what stood there before stays on record.",
        (
            Field("table", "Table", "choice", True, choices=tuple((t, t) for t in CHANGED)),
            Field("key", "Row", needed=True, hint="its name or code, as A2"),
            Field("column", "Column", needed=True, hint="temperature_c"),
            Field("value", "Is now", hint="empty for nothing"),
            WHY,
        ),
        _any_change,
        _SUBJECT,
        Role.KEEP_HOUSE,
    ),
    Form(
        "add",
        "Add to a table of the house",
        "A row is added; it stays on record who added it, when and why.",
        (
            Field("table", "Table", "choice", True, choices=tuple((t, t) for t in ADDED)),
            Field("cells", "The row", "long", True, hint="a line for each column: place=A5"),
            WHY,
        ),
        _any_add,
        _SUBJECT,
        Role.KEEP_HOUSE,
    ),
)
"""The forms of this file; the pages of the house rules show them in parts."""
