"""The questions of a list of bottles, with the answers they may have, word for word."""

from __future__ import annotations

import shlex
from collections.abc import Iterable

from stockroom.bringing.doubts import Weight
from stockroom.bringing.outcome import ListRead
from stockroom.bringing.questions import Question
from stockroom.reports.sheet import wrap

# a page of them is enough for one sitting, and three show what a kind is like; our choice
_MOST_ASKED, _OF_A_KIND, _MOST_NAMED = 20, 3, 8
_SAMPLE_LENGTH = 24


def questions_text(read: ListRead, width: int) -> list[str]:
    """Each question once, in lines: of one kind three in full, and of the others the rows.

    What is refused is told with its row, and not here.
    """
    lines: list[str] = []
    kinds: dict[tuple[str, Weight], list[Question]] = {}
    for question in read.questions:
        if question.weight < Weight.REFUSED:
            # those of the whole file are each of their own kind
            kind = question.field if "." in question.key else question.key
            kinds.setdefault((kind, question.weight), []).append(question)
    shown = 0
    for questions in kinds.values():
        here = questions[: max(0, min(_OF_A_KIND, _MOST_ASKED - shown))]
        shown += len(here)
        for question in here:
            lines += _question(question, read, width)
        rest = questions[len(here) :]
        if rest:
            column = read.table.column(rest[0].field) if rest[0].field else "a row repeated"
            more = f"and {len(rest)} more {'like it' if here else 'questions'}"
            rows = _of_rows(tuple(row for each in rest for row in each.rows))
            lines.append(wrap(f"{more}, {column}: {rows}", width, indent=2))
    quoted = next((each for each in read.questions if "." in each.key and each.value), None)
    if lines and quoted is not None:
        text = (
            "In a file (--answers) an answer may quote its cell, and is refused once the list says"
            f' something else: {quoted.key}("{quoted.value}")=…'
        )
        lines.append(wrap(text, width, indent=2))
    return lines


def _question(question: Question, read: ListRead, width: int) -> Iterable[str]:
    value = f' "{_short(question.value)}"' if question.value else ""
    what = f"{read.table.column(question.field)}{value}: " if question.field else ""
    yield wrap(f"{_of_rows(question.rows)}: {what}{question.text}", width, indent=2)
    yield wrap(_options(question), width, indent=4)


def _short(text: str) -> str:
    return text if len(text) <= _SAMPLE_LENGTH else f"{text[: _SAMPLE_LENGTH - 1]}…"


def _of_rows(rows: tuple[int, ...]) -> str:
    shown = ", ".join(map(str, rows[:_MOST_NAMED]))
    more = f" and {len(rows) - _MOST_NAMED} more" if len(rows) > _MOST_NAMED else ""
    return f"row{'s' if len(rows) > 1 else ''} {shown}{more}"


def _options(question: Question) -> str:
    options = question.options or ("…",)
    return " or ".join(f"--answer {typed(f'{question.key}={option}')}" for option in options)


def typed(words: str) -> str:
    """Words as a shell takes them, and as most people would quote them."""
    quoted = shlex.quote(words)
    return f'"{words}"' if quoted != words and '"' not in words and "$" not in words else quoted
