"""A list of bottles as a page: its columns, its questions with their answers, what rows become."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass

from stockroom.bringing.answers import LEAVE_OUT, WHOLE_FILE
from stockroom.bringing.doubts import Doubt, Weight
from stockroom.bringing.fields import FIELDS, LEFT_OUT
from stockroom.bringing.headings import Column
from stockroom.bringing.outcome import ListRead, RowRead, Status
from stockroom.bringing.questions import Question
from stockroom.measure.formats import format_number
from stockroom.reports.bring_in_text import in_words, span
from stockroom.reports.words import counted, raised

Done = tuple[tuple[str, tuple[str, ...]], ...]
"""Rows that were brought in: what each was, and the numbers of its bottles."""

MOST_ASKED, MOST_COLUMNS, MOST_ROWS = 40, 60, 500
"""Questions, columns and rows of a kind on one page: what a form may hold, and a person read."""

_SAMPLE = 60

_TITLES = {
    Status.REFUSED: "Refused",
    Status.ASKED: "Accepted with a question",
    Status.ACCEPTED: "Accepted",
    Status.HELD: "Here already",
    Status.LEFT_OUT: "Left out",
}


@dataclass(frozen=True, slots=True)
class Heading:
    """One column of the list: what it is taken for, how that is known, and some of its values.

    `called` names it in an answer; `asked` says that it must be named before anything goes in.
    """

    heading: str
    called: str
    taken: str
    samples: str
    asked: bool


@dataclass(frozen=True, slots=True)
class Asked:
    """One question: the rows it is open in, what it is about, and the answers it may have.

    Each answer is KEY=VALUE with its words; `typed` says that another may be written. `waits`
    says what becomes of its rows meanwhile.
    """

    key: str
    rows: str
    about: str
    text: str
    answers: tuple[tuple[str, str], ...]
    typed: bool
    waits: str


@dataclass(frozen=True, slots=True)
class Told:
    """One row: its number, the line it stands in, what it would become, and what is to be said."""

    row: int
    line: int
    becomes: str
    notes: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Kind:
    """The rows of which the same becomes, and how many more there are than are shown."""

    title: str
    rows: tuple[Told, ...]
    more: int


@dataclass(frozen=True, slots=True)
class BringIn:
    """A list as it is read. `going` is how many bottles would be written now.

    `unnamed` is how many columns must be named first, `like` how many rows going in may be
    bottles that stand here already. `done` has each row that was brought in, in words, with
    its bottles.
    """

    file: str
    told: str
    counts: str
    columns: tuple[Heading, ...]
    fields: tuple[str, ...]
    unnamed: int
    questions: tuple[Asked, ...]
    more_questions: int
    kinds: tuple[Kind, ...]
    going: int
    like: int
    brought: str
    done: Done


def done_of(read: ListRead, written: Mapping[int, tuple[str, ...]]) -> Done:
    """The rows of a list that were written just now; `written` are their bottles, by row."""
    return tuple(
        (f"row {row.row}, {raised(in_words(row))}", written[row.row])
        for row in read.rows
        if row.row in written
    )


def bring_in_page(read: ListRead, done: Done) -> BringIn:
    """The page of a list; `done` is what it brought in before, empty for a new list."""
    numbers = [number for _, each in done for number in each]
    counts = [(read.count(status), str(status)) for status in _TITLES]
    return BringIn(
        file=read.file,
        told=f"{read.told}; {counted(len(read.rows), 'row')}, row 1 is line {read.table.line + 1}",
        counts=", ".join(f"{format_number(n)} {word}" for n, word in counts if n),
        columns=tuple(_heading(each, read) for each in _columns(read)),
        fields=(*FIELDS, LEFT_OUT),
        unnamed=sum(column.asked for column in read.table.columns),
        questions=tuple(_question(each, read) for each in read.questions[:MOST_ASKED]),
        more_questions=max(0, len(read.questions) - MOST_ASKED),
        kinds=tuple(_kinds(read)),
        going=sum(row.incoming.count for row in read.going_in if row.incoming),
        like=sum(bool(row.like) and row.goes_in for row in read.rows),
        brought=f"{counted(len(numbers), 'bottle')}: {span(numbers)}" if numbers else "",
        done=done,
    )


def _columns(read: ListRead) -> list[Column]:
    """Those with something in them, the ones that must be named first."""
    held = [column for column in read.table.columns if column.samples]
    return sorted(held, key=lambda column: not column.asked)[:MOST_COLUMNS]


def _heading(column: Column, read: ListRead) -> Heading:
    how = {"content": ", by what stands in it", "said": ", as said"}.get(column.how, "")
    what = "left out" if column.field == LEFT_OUT else column.field or "not understood"
    unit = f" in {column.unit}" if column.unit else ""
    samples = ", ".join(f'"{_short(each)}"' for each in column.samples)
    called = read.table.called(column)
    return Heading(column.heading, called, f"{what}{unit}{how}", samples, column.asked)


def _question(question: Question, read: ListRead) -> Asked:
    rows, key = question.rows, question.key
    answers = [(f"{key}={option}", raised(option)) for option in question.options]
    if question.weight is Weight.REFUSED and len(rows) == 1:
        answers.append((f"{rows[0]}={LEAVE_OUT}", f"leave row {rows[0]} out"))
    return Asked(
        key=key,
        rows=_rows(rows),
        about=_about(question.field, question.value, read),
        text=raised(question.text),
        answers=tuple(answers),
        # a row as a whole, and the whole file, are answered by one of a few words
        typed=key not in WHOLE_FILE and not key.isdigit(),
        waits=_waits(question.weight),
    )


def _rows(rows: tuple[int, ...]) -> str:
    shown = ", ".join(map(str, rows[:8]))
    more = f" and {len(rows) - 8} more" if len(rows) > 8 else ""
    return f"{'row' if len(rows) == 1 else 'rows'} {shown}{more}"


def _about(field: str, value: str, read: ListRead) -> str:
    if not field:
        return ""
    return f'{read.table.column(field)} "{_short(value)}"' if value else read.table.column(field)


def _waits(weight: Weight) -> str:
    told = {
        Weight.CAREFUL: "Goes in as it is read, if nobody says otherwise.",
        Weight.ASKED: "Waits for the answer.",
        Weight.REFUSED: "Refused until it is put right.",
    }
    return told.get(weight, "")


def _kinds(read: ListRead) -> Iterator[Kind]:
    for status, title in _TITLES.items():
        rows = [row for row in read.rows if row.status is status]
        if rows:
            shown = tuple(_told(row, read) for row in rows[:MOST_ROWS])
            yield Kind(f"{title}: {counted(len(rows), 'row')}", shown, len(rows) - len(shown))


def _told(row: RowRead, read: ListRead) -> Told:
    notes = tuple(raised(each) for each in _notes(row.doubts, read))
    return Told(row.row, row.line, raised(row.why or in_words(row)), notes)


def _notes(doubts: Iterable[Doubt], read: ListRead) -> Iterator[str]:
    for doubt in doubts:
        if doubt.weight is Weight.NOTE:
            yield doubt.text
            continue
        about = _about(doubt.field, doubt.value, read)
        yield f"{about}{': ' if about else ''}{doubt.text}"


def _short(text: str) -> str:
    return text if len(text) <= _SAMPLE else f"{text[: _SAMPLE - 1]}…"
