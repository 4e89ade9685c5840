"""Every row of one file in its turn: what it says, and what the rows before it show of it."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import replace

from stockroom.bringing.answers import LEAVE_OUT, SECOND, YES, Answers
from stockroom.bringing.doubts import Doubt, Doubts, Weight
from stockroom.bringing.fields import DATES
from stockroom.bringing.fingerprint import fingerprint
from stockroom.bringing.headings import Table
from stockroom.bringing.here import Here, reading_mark
from stockroom.bringing.outcome import RowRead, Status, status_of
from stockroom.bringing.row import Beside, Incoming, read_row
from stockroom.measure.reading import tidy

# what rows say alike is asked once: each field with the cells that make two rows alike
_ALIKE = {
    "name": ("name", "strength", "unit"),
    "place": ("place",),
    "strength": ("name", "strength"),
    "unit": ("name", "amount", "unit"),
}
# an answer to one of these may settle what is asked of another
_TOGETHER = (
    {"name", "strength", "assay", "formula", "cas"},
    {"amount", "unit", "size", "count"},
    {"opened", "received", "made"},
)
_TOTAL_ALONE = re.compile(r"(?:grand |sub-?)?(?:totals?|sum) ?[:=]?", re.IGNORECASE)
_TOTAL_OF = re.compile(r"(?:grand |sub-?)?(?:totals?|sum)\b.*", re.IGNORECASE)
_BARE = re.compile(r"[0-9][0-9.,]*")
_UNIT_SIGN = re.compile(r"[0-9] ?[A-Za-zµ]")


def leaders_of(cells: Mapping[int, Mapping[str, str]]) -> dict[tuple[str, ...], int]:
    """The first row of those that say the same of a field: its number stands for them all."""
    first: dict[tuple[str, ...], int] = {}
    for row, each in cells.items():
        for what in _ALIKE:
            first.setdefault(_sign(what, each), row)
    return first


def _sign(what: str, cells: Mapping[str, str]) -> tuple[str, ...]:
    return (what, *(tidy(cells.get(each, "")).casefold() for each in _ALIKE[what]))


def cells_said(
    row: int,
    cells: Mapping[str, str],
    answers: Answers,
    table: Table,
    leaders: Mapping[str, int],
) -> dict[str, str]:
    """The cells of a row as they count: headings' units lent, answers put in their place."""
    found = dict(cells)
    for column in table.columns:
        text = found.get(column.field, "")
        if column.unit and _BARE.fullmatch(tidy(text)) and not found.get("unit"):
            found[column.field] = f"{text} {column.unit}"
    for what, value in answers.blanks.items():
        found[what] = found.get(what) or value
    leading = [(leader, what) for what, leader in leaders.items()]
    for place in (*leading, *(key for key in answers.cells if key[0] == row)):
        value = answers.cells.get(place, "")
        if value and not (value.casefold() == YES and place[1] in _ALIKE):
            found[place[1]] = value
    return found


class Reader:
    """Reads the rows of one file, and remembers what it saw before.

    `known` for all rows first, then `judged`, then `compared`: which bottle a row is, by its
    text or by what it is read as, is settled before another row is thought to be that bottle
    with something changed.
    """

    def __init__(
        self, table: Table, beside: Beside, here: Here, leaders: Mapping[tuple[str, ...], int]
    ) -> None:
        self._table, self._beside, self._here, self._leaders = table, beside, here, leaders
        self._times: dict[str, int] = {}
        self._seen: dict[str, int] = {}
        self._first_of: dict[int, int] = {}
        self._claimed: set[str] = set()
        self._answered: dict[int, list[str]] = {}
        for row, what in beside.answers.cells:
            self._answered.setdefault(row, []).append(what)
        self.unasked: list[tuple[int, str, str]] = []
        """Answers to cells that ask nothing: the row, the field, and what the cell says."""

    def known(self, row: int, values: tuple[str, ...], cells: dict[str, str]) -> RowRead:
        """One row by its text alone: left out, here already, or still to be judged."""
        written = cells.get("name", "")
        bare = RowRead(row, row + self._table.line, Status.LEFT_OUT, cells, written=written)
        answers = self._beside.answers
        why = self._no_bottle(values, cells)
        if why or answers.rows.get(row) == LEAVE_OUT:
            return replace(bare, why=why or "as answered")
        mark = fingerprint(self._table.said(values))
        self._times[mark] = self._times.get(mark, 0) + 1
        first = self._first_of[row] = self._seen.setdefault(mark, row)
        bare = replace(bare, mark=f"{mark}/{self._times[mark]}")
        bottles = self._here.marks.get(bare.mark)
        if bottles:
            return self._held(bare, bottles)
        repeats = answers.whole.get("duplicates") == LEAVE_OUT and row not in answers.rows
        if first != row and repeats:
            return replace(bare, why=f"exactly as row {first}")
        return replace(bare, status=Status.ACCEPTED)

    def _held(self, bare: RowRead, bottles: tuple[str, ...], how: str = "") -> RowRead:
        self._claimed.update(bottles)
        why = f"brought in before as {', '.join(bottles)}{how}"
        return replace(bare, status=Status.HELD, bottles=bottles, why=why)

    def _no_bottle(self, values: tuple[str, ...], cells: Mapping[str, str]) -> str:
        """Why a row is none of a bottle, "" when it may be one."""
        name = cells.get("name", "")
        filled = [value for value in values if value]
        if self._total(tidy(name or filled[0]), cells):
            return "a total, and no bottle"
        if len(filled) == 1 and name and not self._beside.matcher.knows(name):
            return "nothing but a heading"
        headings = {column.heading for column in self._table.columns}
        return "the headings once more" if len(filled) > 1 and set(filled) <= headings else ""

    def _total(self, name: str, cells: Mapping[str, str]) -> bool:
        if any(cells.get(each) for each in DATES):
            return False
        if _TOTAL_ALONE.fullmatch(name):
            return True
        # "Total hardness indicator, 20 g" is a bottle, in a house that never heard of it too
        own = any(_UNIT_SIGN.search(cells.get(each, "")) for each in ("amount", "size"))
        bottle = own or cells.get("unit") or cells.get("place")
        known = self._beside.matcher.knows
        return bool(_TOTAL_OF.fullmatch(name)) and not bottle and not known(name)

    def judged(self, bare: RowRead) -> RowRead:
        """A row read: its bottles, its doubts, and whether it was read so before."""
        if bare.settled:
            return bare
        answers, row = self._beside.answers, bare.row
        said, incoming, doubts = self._read(row, bare.cells, answers)
        reading = reading_mark(incoming)
        bottles = self._here.read_so(reading, self._claimed)
        if bottles and not any(doubt.weight > Weight.CAREFUL for doubt in doubts.all):
            return self._held(replace(bare, cells=said), bottles, ", written otherwise")
        self._check_asked(bare)
        first = self._first_of[row]
        second = answers.rows.get(row) or answers.whole.get("duplicates")
        if first != row and second != SECOND:
            text = f"exactly as row {first}: a second bottle, or the same one twice?"
            doubts.of_row(text, (SECOND, LEAVE_OUT))
        found = tuple(doubts.all)
        return replace(
            bare, status=status_of(found), cells=said, incoming=incoming, doubts=found,
            reading=reading,
        )  # fmt: skip

    def compared(self, judged: RowRead) -> RowRead:
        """A row beside the bottles no other row is: the same one with something changed?"""
        like = None
        if judged.incoming is not None and not judged.settled:
            like = self._here.like(judged.incoming, self._claimed)
        if like is None:
            return judged
        answers = self._beside.answers
        answer = answers.rows.get(judged.row) or answers.whole.get("changed")
        note = f"{like.number} here{', brought in before,' if like.listed else ''} is like it"
        if answer == LEAVE_OUT:
            why = f"{note}: the same bottle, as answered"
            return replace(judged, status=Status.LEFT_OUT, why=why, doubts=())
        doubts = (*judged.doubts, Doubt(Weight.NOTE, "name", judged.written, note))
        # a list that is brought in for the first time tells of what nobody wrote here before
        if answer != SECOND and like.listed:
            text = "much like a bottle here: the same one, with something changed, or a second one?"
            asked = Doubt(Weight.ASKED, "", "", text, "changed", (LEAVE_OUT, SECOND))
            doubts = (*doubts, asked)
        return replace(judged, status=status_of(doubts), doubts=doubts, like=like.number)

    def _read(
        self, row: int, cells: Mapping[str, str], answers: Answers
    ) -> tuple[dict[str, str], Incoming, Doubts]:
        leaders = {what: self._leaders[_sign(what, cells)] for what in _ALIKE}
        said = cells_said(row, cells, answers, self._table, leaders)
        doubts = Doubts(row, said, leaders)
        accepted = _accepted(row, answers, leaders)
        return said, read_row(row, said, self._beside, doubts, accepted), doubts

    def _check_asked(self, bare: RowRead) -> None:
        """Note the answers to cells of a row that would ask nothing without them."""
        answers, row = self._beside.answers, bare.row
        for what in self._answered.get(row, ()):
            # who quotes the cell means that cell, asked about or not
            if (row, what) in answers.texts:
                continue
            cells = {key: value for key, value in answers.cells.items() if key != (row, what)}
            _, _, doubts = self._read(row, bare.cells, replace(answers, cells=cells))
            near = {what}.union(*(group for group in _TOGETHER if what in group))
            if not any(doubt.field in near for doubt in doubts.all):
                self.unasked.append((row, what, bare.cells.get(what, "")))


def _accepted(row: int, answers: Answers, leaders: Mapping[str, int]) -> frozenset[str]:
    found = {"name"} if answers.whole.get("names") == YES else set()
    for what, leader in leaders.items():
        value = answers.cells.get((row, what)) or answers.cells.get((leader, what), "")
        if value.casefold() == YES:
            found.add(what)
    return frozenset(found)
