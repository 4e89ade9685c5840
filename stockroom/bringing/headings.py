"""Which column is what: by its heading, by what stands in it, or as somebody said."""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from functools import lru_cache

from stockroom.bringing.fields import FIELDS, LEFT_OUT, MEASURED
from stockroom.bringing.name_words import name_words
from stockroom.errors import BadAmount, BadInput
from stockroom.measure.parsing import parse_amount
from stockroom.measure.reading import quote, tidy

_BY_HEADING = {
    heading.strip(): field for field, listed in FIELDS.items() for heading in listed.split(";")
}
# where no heading is known whole: a word in it that only one field has
_BY_WORD = (
    (re.compile(r"\bopen"), "opened"),
    (re.compile(r"receiv|deliver|arriv|purchas"), "received"),
    (re.compile(r"expir|\bexp\b|use by|best before"), "printed"),
    (re.compile(r"\bprepar|\bmade\b"), "made"),
    (re.compile(r"locat|cupboard|cabinet|\bshelf\b|where|\bplace\b"), "place"),
    (re.compile(r"strength|concentr|\bconc\b|molar"), "strength"),
    (re.compile(r"\bcas\b"), "cas"),
    (re.compile(r"pack size|bottle size|container size"), "size"),
    (re.compile(r"quantity|amount|remain"), "amount"),
    (re.compile(r"\bname\b|chemical|reagent|substance"), "name"),
    (re.compile(r"\bnotes?\b|comment|remark"), "note"),
)
_UNIT_IN = re.compile(r"(?P<name>.+?) ?(?:[(\[](?P<in>[^)\]]+)[)\]]|[/_,] ?(?P<after>[^/_,]+))")
_LOOKED_AT, _HEADINGS_WITHIN, _SAMPLES = 60, 40, 3
_MOSTLY, _NAMES = 0.8, 0.5
"""The part of a column's cells that must look like a thing; lists have odd ones. Our choice.

Names are misspelt more than anything else, and half of them known is no accident.
"""
_LONGEST_HEADING = 40
"""Signs; what is longer is a sentence in a cell. Our choice."""
_RUNNING = frozenset("no; no.; nr; number; #".split("; "))
_CONTENT: dict[str, re.Pattern[str]] = {
    "unit": re.compile(r"m?g|kg|m?l|cm3|dm3|litres?|grams?|mL|L", re.IGNORECASE),
    "amount": re.compile(r"[0-9][0-9.,]* ?(?:m?g|kg|m?l|cm3|dm3|litres?|grams?)", re.IGNORECASE),
    "cas": re.compile(r"[0-9]{2,7}-[0-9]{2}-[0-9]"),
}
_DATED = re.compile(r"[0-9]{1,4}[-/.][0-9A-Za-z]{1,9}[-/.][0-9]{1,4}")


@dataclass(frozen=True, slots=True)
class Column:
    """One column: its heading, the field it is taken for ("" for none), and how that is known.

    `how` is heading, content, said or unknown; `unit` stands in the heading; `samples`
    are up to three values of it.
    """

    at: int
    heading: str
    field: str
    how: str
    samples: tuple[str, ...] = ()
    unit: str = ""

    @property
    def asked(self) -> bool:
        """Whether somebody must say what it is before anything is brought in."""
        return not self.field and bool(self.samples)


@dataclass(frozen=True, slots=True)
class Table:
    """The columns of a sheet, and the line its headings stand in (0 for none)."""

    columns: tuple[Column, ...]
    line: int

    def cells(self, row: tuple[str, ...]) -> dict[str, str]:
        """A row's cells by field; those of columns kept as a note are joined to the note."""
        found: dict[str, str] = {}
        for column in self.columns:
            text = row[column.at] if column.at < len(row) else ""
            if column.field == "note":
                named = text if column.how == "heading" else f"{column.heading}: {text}"
                found["note"] = "; ".join(filter(None, (found.get("note", ""), text and named)))
            elif column.field and column.field != LEFT_OUT:
                found[column.field] = text
        return found

    def said(self, row: tuple[str, ...]) -> list[tuple[str, str]]:
        """What a row says, each cell with its field; "" for notes and what is left out.

        A column may be called a note this time and left out the next: the row is the same.
        """
        plain = {"note": "", LEFT_OUT: ""}
        return [
            (plain.get(column.field, column.field), row[column.at])
            for column in self.columns
            if column.at < len(row) and row[column.at]
        ]

    def column(self, field: str) -> str:
        """The heading of a field's column, for messages; the field's own name where none is."""
        return next((each.heading for each in self.columns if each.field == field), field)

    def called(self, column: Column) -> str:
        """What --column calls a column: its heading, or its letter where two are headed so."""
        same = sum(_called(each.heading) == _called(column.heading) for each in self.columns)
        return column.heading if same == 1 else letters(column.at)


def table_of(
    rows: tuple[tuple[str, ...], ...],
    said: Mapping[str, str],
    *,
    knows_name: Callable[[str], bool],
    knows_place: Callable[[str], bool],
) -> Table:
    """The columns of a sheet. `said` is what somebody calls a heading: {"where": "place"}.

    Raises: BadInput for a heading or a field that is not there, for two columns said to be
    one thing, and where no column holds names.
    """
    line = _line_of_headings(rows, said)
    headings = rows[line - 1] if line else ()
    body = [row for row in rows[line:] if any(row)]
    width = max(map(len, [headings, *body]), default=0)
    columns = [_column(at, headings, body) for at in range(width)]
    columns = _as_said([each for each in columns if each.heading or each.samples], said)
    columns = _by_content(columns, body, knows_name, knows_place, guess_numbers=not line)
    if not any(column.field == "name" for column in columns):
        listed = ", ".join(quote(column.heading) for column in columns)
        raise BadInput(
            f"No column of names among {listed}.",
            f'Say which it is: --column "{columns[0].heading}=name".',
        )
    return Table(tuple(columns), line)


def letters(at: int) -> str:
    """The letters a spreadsheet gives a column: A for 0, Z for 25, AA for 26."""
    before = letters(at // 26 - 1) if at >= 26 else ""
    return before + chr(ord("A") + at % 26)


def _line_of_headings(rows: tuple[tuple[str, ...], ...], said: Mapping[str, str]) -> int:
    best, line = 1, 0
    for number, row in enumerate(rows[:_HEADINGS_WITHIN], start=1):
        asked = sum(2 for cell in row if tidy(cell).casefold() in said)
        known = len({field for cell in row if (field := field_of(cell)[0])}) + asked
        # one known word among others will do, where nothing in the row looks like a bottle's
        if known == 1 and not line and _all_words(row):
            line = number
        if known > best:
            best, line = known, number
    return line


def _all_words(row: tuple[str, ...]) -> bool:
    filled = [cell for cell in row if cell]
    return len(filled) > 1 and not any(sign.isdigit() for cell in filled for sign in cell)


@lru_cache(maxsize=1024)
def field_of(heading: str) -> tuple[str, str]:
    """The field a heading stands for and the unit in it: "Amount (g)" is amount, in g."""
    plain = re.sub(r"\s+", " ", tidy(heading).casefold().strip(" :*?"))
    if plain in _BY_HEADING:
        return _BY_HEADING[plain], ""
    parts = _UNIT_IN.fullmatch(tidy(heading).strip(" :*?"))
    if parts:
        field = _BY_HEADING.get(parts["name"].casefold().strip(), "")
        unit = (parts["in"] or parts["after"]).strip()
        if field in MEASURED and _is_unit(unit):
            return field, unit
        if field == "strength" or (field == "assay" and "%" in unit):
            return field, unit
        if field and parts["in"]:
            return field, ""
    if len(plain) > _LONGEST_HEADING or any(character.isdigit() for character in plain):
        return "", ""
    fields = {field for pattern, field in _BY_WORD if pattern.search(plain)}
    return (fields.pop(), "") if len(fields) == 1 else ("", "")


def _is_unit(text: str) -> bool:
    try:
        parse_amount(f"1 {text}")
    except BadAmount:
        return False
    return True


def _column(at: int, headings: tuple[str, ...], body: list[tuple[str, ...]]) -> Column:
    values = [row[at] for row in body if at < len(row) and row[at]]
    samples = tuple(dict.fromkeys(values))[:_SAMPLES]
    heading = headings[at] if at < len(headings) else ""
    field, unit = field_of(heading) if heading else ("", "")
    if _called(heading) in _RUNNING and values[:2] == ["1", "2"]:
        # the rows are numbered: no row stands for as many bottles
        field = ""
    named = re.sub(r"\s+", " ", heading) or f"column {letters(at)}"
    if not heading and not samples:
        named = ""
    return Column(at, named, field, "heading" if field else "unknown", samples, unit)


def _as_said(columns: list[Column], said: Mapping[str, str]) -> list[Column]:
    named = {_called(column.heading): column for column in columns}
    for column in columns:
        named.setdefault(f"column {letters(column.at)}".casefold(), column)
        named.setdefault(letters(column.at).casefold(), column)
    for heading, field in said.items():
        alike = [letters(column.at) for column in columns if _called(column.heading) == heading]
        if len(alike) > 1:
            raise BadInput(
                f"--column: columns {' and '.join(alike)} are both headed {quote(heading)}.",
                f"Name each by its letter: --column {alike[0]}={field}.",
            )
        if heading not in named:
            listed = ", ".join(quote(column.heading) for column in columns)
            raise BadInput(f"--column: no heading {quote(heading)}.", f"There are: {listed}.")
    chosen = {named[heading].at: field for heading, field in said.items()}
    taken = [field for field in chosen.values() if field not in (LEFT_OUT, "note")]
    if len(taken) != len(set(taken)):
        twice = next(field for field in taken if taken.count(field) > 1)
        raise BadInput(f"--column: two columns are said to be {twice}.", "Name one of them.")
    settled, seen = [], set(taken)
    for column in columns:
        if column.at in chosen:
            settled.append(replace(column, field=chosen[column.at], how="said"))
        elif column.field in seen:
            # the first of two columns of one kind counts, and the other is asked about
            settled.append(replace(column, field="", how="unknown"))
        else:
            seen |= {column.field} - {"", "note"}
            settled.append(column)
    return settled


def _called(heading: str) -> str:
    return tidy(heading).casefold()


def _by_content(
    columns: list[Column],
    body: list[tuple[str, ...]],
    knows_name: Callable[[str], bool],
    knows_place: Callable[[str], bool],
    *,
    guess_numbers: bool,
) -> list[Column]:
    tests: dict[str, Callable[[str], bool]] = {
        "name": knows_name,
        "place": knows_place,
        **{field: _fits(pattern) for field, pattern in _CONTENT.items()},
        "strength": lambda text: bool(name_words(f"x {text}").strength),
    }
    if guess_numbers:
        tests["amount"] = lambda text: bool(re.fullmatch(r"[0-9][0-9.,]*\D{0,6}", tidy(text)))
    taken = {column.field for column in columns}
    found = []
    for column in columns:
        values = [row[column.at] for row in body if column.at < len(row) and row[column.at]]
        field = "" if column.field else _field_within(values[:_LOOKED_AT], tests, taken)
        taken.add(field)
        found.append(replace(column, field=field, how="content") if field else column)
    return found


def _fits(pattern: re.Pattern[str]) -> Callable[[str], bool]:
    return lambda text: pattern.fullmatch(tidy(text)) is not None


def _field_within(
    values: list[str], tests: Mapping[str, Callable[[str], bool]], taken: set[str]
) -> str:
    # a date says nothing of what happened on that day, so it is asked about
    cas, dated = _fits(_CONTENT["cas"]), _fits(_DATED)
    if not values or sum(dated(each) and not cas(each) for each in values) > len(values) / 2:
        return ""
    for field, test in tests.items():
        needed = _NAMES if field == "name" else _MOSTLY
        if field not in taken and sum(map(test, values)) >= needed * len(values):
            return field
    return ""
