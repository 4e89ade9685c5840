"""A list of bottles tried or brought in: its columns, its questions, what became of each row."""

from __future__ import annotations

import shlex
from collections.abc import Iterable, Mapping

from stockroom.bringing.doubts import Doubt, Weight
from stockroom.bringing.fields import FIELDS, LEFT_OUT
from stockroom.bringing.headings import Column
from stockroom.bringing.name_words import spelt
from stockroom.bringing.outcome import ListRead, RowRead, Status
from stockroom.bringing.row import Incoming
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount, format_number
from stockroom.reports.bring_in_questions import questions_text, typed
from stockroom.reports.sheet import PRACTICE, page, section, wrap
from stockroom.reports.words import counted

# a person reads so many rows of one kind; --json has them all
_MOST_ROWS, _MOST_NAMED = 200, 8
_SAMPLE_LENGTH = 24

Written = Mapping[int, tuple[str, ...]]


def bring_in_text(
    read: ListRead, written: Written, width: int, *, agreed: bool, practice: bool
) -> str:
    """A trial in full: counts, columns, questions, and the rows by what becomes of them.

    Once agreed, only what was written and what still waits: the rest was read before.
    """
    top = [PRACTICE] if practice else []
    top += [wrap(line, width) for line in _summary(read, written, agreed=agreed)]
    if agreed:
        return page(["\n".join(top), *_after(read, written, width)])
    return page(
        [
            "\n".join(top),
            section("COLUMNS", [_column(each, read, width) for each in read.table.columns]),
            section("QUESTIONS", questions_text(read, width)),
            *_rows(read, width),
        ]
    )


def _after(read: ListRead, written: Written, width: int) -> Iterable[str]:
    """Each bottle written with what it was in the list, and each row that waits with why."""
    done = [
        wrap(f"{span(list(written[row.row]))}: {in_words(row)} (row {row.row})", width, indent=2)
        for row in read.rows
        if row.row in written
    ]
    yield section("BROUGHT IN", _most(done))
    waiting = [row for row in read.rows if not row.settled and row.row not in written]
    lines = [wrap(_waits(row), width, indent=2) for row in waiting]
    if lines:
        lines.append("  Without --agree each question is told in full, with its answers.")
    yield section("STILL WAITING", _most(lines))


def _waits(row: RowRead) -> str:
    keys = dict.fromkeys(doubt.key for doubt in row.doubts if doubt.weight >= Weight.ASKED)
    name = row.written or "no name"
    return f'row {row.row}, line {row.line}, "{_short(name)}": waits for {", ".join(keys)}'


def _most(lines: list[str]) -> list[str]:
    if len(lines) <= _MOST_ROWS:
        return lines
    left = format_number(len(lines) - _MOST_ROWS)
    return [*lines[:_MOST_ROWS], f"  and {left} more: --json lists them all"]


def _summary(read: ListRead, written: Written, *, agreed: bool) -> list[str]:
    counts = [(read.count(status), status) for status in Status]
    told = ", ".join(f"{format_number(n)} {status}" for n, status in counts if n)
    first = read.table.line + 1
    lines = [
        f"{read.file}: {read.told}; {counted(len(read.rows), 'row')}, row 1 is line {first}",
        f"{told or 'no row with anything in it'}",
    ]
    if agreed:
        numbers = [number for each in written.values() for number in each]
        which = f": {span(numbers)}" if numbers else ""
        lines.append(f"Brought in {counted(len(numbers), 'bottle')}{which}.")
        if numbers:
            lines.append(
                f"To take one back: stockroom diary {numbers[0]}, then put-right each of"
                " its entries, the last one first."
            )
        held = [number for row in read.rows for number in row.bottles]
        lines += [f"Here already: {span(held)}."] if held else []
    else:
        going = sum(row.incoming.count for row in read.going_in if row.incoming)
        asked = sum(column.asked for column in read.table.columns)
        if asked:
            lines.append(f"{counted(asked, 'column')} must be named first: see COLUMNS.")
        lines.append(f"Nothing is written yet; --agree would bring in {counted(going, 'bottle')}.")
        like = sum(bool(row.like) and row.goes_in for row in read.rows)
        if like:
            lines.append(
                f"{counted(like, 'row')} may be a bottle that stands here already: look before"
                " you agree, or give --answer changed=leave-out."
            )
    return lines


def span(numbers: list[str]) -> str:
    """Bottle numbers in a row, shortened where there are many: "B40 to B52"."""
    if len(numbers) <= _MOST_NAMED:
        return ", ".join(numbers)
    # each letter counts by itself, so each has its own first and last
    runs = [[number for number in numbers if number[0] == letter] for letter in "BS"]
    return ", ".join(
        run[0] if len(run) == 1 else f"{run[0]} to {run[-1]}" for run in filter(None, runs)
    )


def _column(column: Column, read: ListRead, width: int) -> str:
    samples = ", ".join(f'"{_short(each)}"' for each in column.samples) or "empty"
    if column.asked:
        named = read.table.called(column)
        choice = f'--column "{named}=note", =leave-out, or ={", =".join(FIELDS)}'
        return wrap(f"{column.heading} → not understood: {samples}. {choice}", width, indent=2)
    if not column.field:
        return wrap(f"{column.heading} → empty", width, indent=2)
    how = {"content": ", by what stands in it", "said": ", as said"}.get(column.how, "")
    what = "left out" if column.field == LEFT_OUT else column.field
    unit = f" in {column.unit}" if column.unit else ""
    return wrap(f"{column.heading} → {what}{unit}{how}: {samples}", width, indent=2)


def _short(text: str) -> str:
    return text if len(text) <= _SAMPLE_LENGTH else f"{text[: _SAMPLE_LENGTH - 1]}…"


def _rows(read: ListRead, width: int) -> Iterable[str]:
    headings = {
        Status.ACCEPTED: "ACCEPTED",
        Status.ASKED: "ACCEPTED WITH A QUESTION",
        Status.REFUSED: "REFUSED",
        Status.HELD: "HERE ALREADY",
        Status.LEFT_OUT: "LEFT OUT",
    }
    for status, heading in headings.items():
        rows = [row for row in read.rows if row.status is status]
        lines = ["\n".join(_row(row, read, width)) for row in rows[:_MOST_ROWS]]
        more = format_number(len(rows) - _MOST_ROWS)
        lines += [f"  and {more} more: --json lists them all"] if len(rows) > _MOST_ROWS else []
        yield section(heading, lines)


def _row(row: RowRead, read: ListRead, width: int) -> list[str]:
    notes = [doubt.text for doubt in row.doubts if doubt.weight is Weight.NOTE]
    said = "; ".join([row.why or in_words(row), *notes])
    lines = [wrap(f"row {row.row}, line {row.line}: {said}", width, indent=2)]
    asked = [_doubt(doubt, read) for doubt in row.doubts if doubt.weight > Weight.NOTE]
    if row.status is Status.REFUSED:
        asked.append(f"or leave it out: --answer {row.row}={LEFT_OUT}")
    return lines + [wrap(each, width, indent=4) for each in asked]


def _doubt(doubt: Doubt, read: ListRead) -> str:
    how = {
        Weight.CAREFUL: f"goes in so; asked: {doubt.key}",
        Weight.ASKED: f"waits for {doubt.key}",
    }
    column = f"{read.table.column(doubt.field)} " if doubt.field else ""
    value = f'"{_short(doubt.value)}"' if doubt.value else "blank" if doubt.field else ""
    said = how.get(doubt.weight, f"refused; --answer {typed(f'{doubt.key}=…')}")
    return f"{column}{value}{': ' if column or value else ''}{doubt.text} ({said})"


def in_words(row: RowRead) -> str:
    """What will be written of a row: "lithium chloride, 38 g, opened 16 September 2024, in A2"."""
    said = row.incoming
    if said is None:
        return ", ".join(f'{field} "{_short(text)}"' for field, text in row.cells.items() if text)
    days = (("came", said.received), ("made", said.made), ("opened", said.opened))
    parts = [
        _what(row, said),
        _amount(said, row.cells.get("amount", "")),
        *(f"{how} {spell_day(day)}" for how, day in days if day),
    ]
    settled = not any(doubt.field == "opened" and doubt.key for doubt in row.doubts)
    parts += ["opened, day not known"] if said.opened_sometime else []
    settled = settled and not said.opened_sometime
    if settled and not (said.opened or said.made or (said.line and said.line.made)):
        parts.append("unopened")
    if said.printed is not None:
        parts.append(f"good until {' or '.join(map(spell_day, said.printed.readings))}")
    parts += [f"in {said.place}"] if said.place else []
    parts += ["not found"] if said.not_found else []
    return ", ".join(parts)


def _what(row: RowRead, said: Incoming) -> str:
    """The line, and what the list called it where that is another name."""
    if said.line is None:
        return _short(row.cells.get("name", "") or "no name")
    if spelt(row.written) in (spelt(said.line.key), spelt(said.line.item)):
        return said.line.key
    return f'{said.line.key} from "{_short(row.written)}"'


def _amount(said: Incoming, written: str) -> str:
    if said.left is None:
        return f'"{_short(written)}"'
    many = f"{said.count} × " if said.count > 1 else ""
    of = said.size is not None and said.size != said.left
    full = f" of {format_amount(said.size)}" if of and said.size is not None else ""
    return f"{many}{'about ' if said.about else ''}{format_amount(said.left)}{full}"


def next_command(read: ListRead, file: str, *, agreed: bool, more: bool) -> str:
    """What is likely typed next: the same line with one answer, or with --agree.

    `more` is whether the line held more than the file, which must stay in it. A name that
    nobody knows is never answered with what is only near it.
    """
    named = f"{shlex.quote(file)}{' …' if more else ''}"
    if agreed:
        return "stockroom past" if read.going_in else ""
    unnamed = next((column for column in read.table.columns if column.asked), None)
    if unnamed is not None:
        choice = typed(f"{read.table.called(unnamed)}=note")
        return f"stockroom bring-in {named} --column {choice}"
    asked = next(
        (each for each in read.questions if each.options and each.weight < Weight.REFUSED), None
    )
    if asked is not None:
        answer = typed(f"{asked.key}={asked.options[0]}")
        return f"stockroom bring-in {named} --answer {answer}"
    if read.going_in:
        return f"stockroom bring-in {named} --agree"
    nameless = any(each.field == "name" for each in read.questions)
    return 'stockroom unknown "how it looks" --size "100 g"' if nameless else ""
