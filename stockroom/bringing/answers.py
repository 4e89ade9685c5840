"""What somebody answered: for the whole file, for blank cells of a column, for one row.

dates=day-first            how 04/05/27 is meant, in the whole file
decimal=comma              what the comma in 1,000 is; or point
epoch=1900                 how a spreadsheet's day numbers count; or 1904
names=yes                  every single name that is offered with "?" is right
duplicates=second          a row that repeats another is a second bottle; or leave-out
changed=leave-out          a row much like a bottle here is that bottle; or second
several=each               "2 kg" beside a count of 3 is in each bottle; or in-all
unit=g                     what stands in every blank cell of that column
7.amount=560 cm3           what the cell of row 7, and of rows that ask the same, should say
7.amount("3/4")=560 cm3    the same, refused when the cell says anything else by now
2.name=yes                 what is offered is right
13=second                  likewise for one row; or leave-out
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from difflib import get_close_matches

from stockroom.bringing.amounts import EACH, IN_ALL
from stockroom.bringing.dates import DAY_FIRST, MONTH_FIRST
from stockroom.bringing.decimals import COMMA, POINT
from stockroom.bringing.fields import FIELDS
from stockroom.errors import BadInput
from stockroom.measure.reading import tidy

YES = "yes"
SECOND, LEAVE_OUT = "second", "leave-out"
WHOLE_FILE: dict[str, tuple[str, ...]] = {
    "dates": (DAY_FIRST, MONTH_FIRST),
    "decimal": (COMMA, POINT),
    "epoch": ("1900", "1904"),
    "names": (YES,),
    "duplicates": (SECOND, LEAVE_OUT),
    "changed": (LEAVE_OUT, SECOND),
    "several": (EACH, IN_ALL),
}
"""The questions of a whole file, and what each may be answered with."""

_KEY = re.compile(r"""(?P<key>[^=(]*?)(?:\("(?P<cell>.*?)"\))?\s*=(?P<value>.*)""", re.DOTALL)
_ROW = re.compile(r"(?:row )?(?P<row>[1-9][0-9]{0,8})(?:[. ](?P<field>[a-z]+))?")


@dataclass(frozen=True, slots=True)
class Answers:
    """Every answer given: `whole` by question, `blanks` by field, `cells` by row and field.

    `rows` says of a row whether it is a second bottle or left out. `texts` is what somebody
    says stands in the cell that is answered for; for a row as a whole, in its name.
    """

    whole: dict[str, str] = field(default_factory=dict)
    blanks: dict[str, str] = field(default_factory=dict)
    cells: dict[tuple[int, str], str] = field(default_factory=dict)
    rows: dict[int, str] = field(default_factory=dict)
    texts: dict[tuple[int, str], str] = field(default_factory=dict)

    @property
    def day_first(self) -> bool | None:
        """What was said of the order of dates."""
        said = self.whole.get("dates")
        return None if said is None else said == DAY_FIRST

    @property
    def epoch(self) -> int | None:
        """What was said of day numbers."""
        said = self.whole.get("epoch")
        return int(said) if said else None


NONE_GIVEN = Answers()


def answers_of(written: Iterable[str]) -> Answers:
    """The answers in texts of the form KEY=VALUE.

    Raises: BadInput for a key nobody asks, a value that is no answer to it, and two answers
    to one question.
    """
    answers = Answers()
    given: dict[str, str] = {}
    for text in written:
        found = _KEY.fullmatch(text.strip())
        key = found["key"].strip().casefold() if found else ""
        value = found["value"].strip() if found else ""
        if not found or not key or not value:
            raise BadInput(
                f'Answer "{text.strip()}": to which question?',
                "Write it as KEY=VALUE: dates=day-first, or 7.amount=560cm3.",
            )
        if given.setdefault(key, value) != value:
            raise BadInput(
                f'{key} is answered twice: "{given[key]}" and "{value}".', "Give one of them."
            )
        _enter(answers, key, value, found["cell"])
    return answers


def lines_of_answers(text: str) -> list[str]:
    """The answers in a file: one a line; blank lines, and those that begin with #, say nothing."""
    lines = (line.strip() for line in text.lstrip("\ufeff").splitlines())
    return [line for line in lines if line and not line.startswith("#")]


def _enter(answers: Answers, key: str, value: str, cell: str | None) -> None:
    row = _ROW.fullmatch(key)
    if cell is not None and row:
        answers.texts[int(row["row"]), row["field"] or "name"] = cell
    if key in WHOLE_FILE:
        answers.whole[key] = _one_of(key, value, WHOLE_FILE[key])
    elif row and row["field"] is None:
        answers.rows[int(row["row"])] = _one_of(key, value, (SECOND, LEAVE_OUT))
    elif row and row["field"] in FIELDS:
        answers.cells[int(row["row"]), row["field"]] = value
    elif key in FIELDS:
        answers.blanks[key] = value
    else:
        asked = row["field"] if row else key
        known = [*FIELDS] if row else [*WHOLE_FILE, *FIELDS]
        near = get_close_matches(asked, known, n=3, cutoff=0.5)
        raise BadInput(
            f'Answer "{key}={value}": nothing is called {asked}.',
            f"Nearest: {'; '.join(near)}." if near else f"There are: {', '.join(known)}.",
        )


def _one_of(key: str, value: str, options: tuple[str, ...]) -> str:
    plain = value.casefold().replace(" ", "-").replace("_", "-")
    if plain not in options:
        raise BadInput(
            f'{key} is not answered by "{value}".',
            f"Write {' or '.join(f'{key}={option}' for option in options)}.",
        )
    return plain


def check_rows(answers: Answers, cells: Mapping[int, Mapping[str, str]]) -> None:
    """Refuse answers to rows that are not there, or that say something else by now.

    Raises: BadInput for a row after the last, and for a cell that is not as the answer has it.
    """
    last = max(cells, default=0)
    for row in (*answers.rows, *(row for row, _ in answers.cells)):
        if row > last:
            raise BadInput(f"There is no row {row}: the last is row {last}.", "Look it up again.")
    for (row, field_), text in answers.texts.items():
        written = cells.get(row, {}).get(field_, "")
        if tidy(written).casefold() != tidy(text).casefold():
            now = [at for at, each in cells.items() if each.get(field_, "") == text]
            raise BadInput(
                f'{field_} of row {row} says "{written}", and the answer to it "{text}".',
                f"Row {now[0]} says so now: number the answer anew."
                if now
                else "The list has changed: leave the answer out, and see what is asked now.",
            )
