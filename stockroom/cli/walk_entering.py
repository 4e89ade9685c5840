"""Counts typed in: from a file, from standard input, or asked for bottle by bottle."""

from __future__ import annotations

import re
import sys
from collections.abc import Iterable
from contextlib import nullcontext, suppress
from dataclasses import dataclass, field
from pathlib import Path
from typing import TYPE_CHECKING

from stockroom.cli.printing import show, suggest, tell, width
from stockroom.cli.shared import Shared
from stockroom.cli.stock import When, when
from stockroom.errors import StockroomError, StoreTrouble
from stockroom.settings import StoreAt

if TYPE_CHECKING:
    from stockroom.service.walk import Sheet
    from stockroom.service.walk_told import Told

_STOP = ("stop", "q", "quit", "end")
_OTHER = re.compile(r"\+|[A-Za-z]+[0-9]+[a-z]?(?![\w.])")


@dataclass(frozen=True, slots=True)
class _Skipped:
    """A line that could not be saved: its number, what it is about, and what is wrong with it."""

    number: int
    about: str
    trouble: StockroomError


@dataclass
class _Sitting:
    """One sitting of entering: where to, and what came of its lines so far."""

    path: StoreAt
    name: str
    who: When
    again: bool
    quiet: bool
    told: list[Told] = field(default_factory=list)
    skipped: list[_Skipped] = field(default_factory=list)

    def enter(self, number: int, line: str) -> bool:
        """Save one line and say what came of it; False for one that was told and skipped."""
        from stockroom.service.walk_entering import enter_line

        try:
            told = enter_line(self.path, self.name, line, again=self.again, **self.who)
        except StoreTrouble:
            tell(f"line {number}: not saved, nor anything after it. Enter the same lines again.")
            raise
        except StockroomError as trouble:
            self.skipped.append(_Skipped(number, _about(line), trouble))
            tell(f'line {number} "{line.strip()}": {trouble.message}')
            if trouble.hint:
                tell(f"  {trouble.hint}")
            return False
        if told is not None:
            self.told.append(told)
            self._say(told)
        return True

    def mend(self, line: str) -> None:
        """Let go of what was skipped of the same bottle, now that it was asked for again."""
        self.skipped = [each for each in self.skipped if each.about != _about(line)]

    def _say(self, told: Told) -> None:
        from stockroom.reports.words import raised

        if not self.quiet:
            lines = [told.text, *(f"  {detail}" for detail in told.details)]
            # at once: whoever is cut off has seen all that was saved
            print(*map(raised, lines), sep="\n", flush=True)


def _about(line: str) -> str:
    """What a line is about: the number of its bottle, or of one on no list how it looks."""
    numbered = _OTHER.match(line)
    if line.startswith("+") or numbered is None:
        return line.partition(",")[0].strip().upper()
    return numbered.group().upper()


def enter_counts(
    shared: Shared, name: str, file: str, *, again: bool, ending: bool, on: str | None
) -> bool:
    """Enter counts until the lines end or somebody stops; True when none had to be skipped.

    Only then is a walk ended that is to be (`ending`): an ended one takes no line any more.
    Raises: as `take_up`; StoreTrouble in the middle, with what was entered before it saved.
    """
    from stockroom.reports.sheet import PRACTICE
    from stockroom.service.walk import open_sheet
    from stockroom.service.walk_entering import end, take_up

    who = when(shared, on)
    take_up(shared.path, name, **who)
    sheet = open_sheet(shared.path, name, on=shared.today, again=again)
    sitting = _Sitting(shared.path, sheet.walk.name, who, again, shared.json)
    # opened first: where there is no such file, no sitting was held
    with (
        Path(file).open(encoding="utf-8-sig", errors="replace") if file else nullcontext() as lines
    ):
        if sheet.practice and not shared.json:
            print(PRACTICE)
        try:
            if lines is None and sys.stdin.isatty():
                _ask(sitting, sheet)
            else:
                _read(sitting, lines or sys.stdin)
        except BaseException:
            # whatever stopped it, what was saved is told; and what stopped it is told once
            with suppress(StockroomError):
                _sum_up(shared, sitting)
            raise
    if ending and not sitting.skipped:
        end(shared.path, name, **who)
    _sum_up(shared, sitting)
    return not sitting.skipped


def _read(sitting: _Sitting, lines: Iterable[str]) -> None:
    for number, line in enumerate(lines, 1):
        sitting.enter(number, line)


def _ask(sitting: _Sitting, sheet: Sheet) -> None:
    """Each bottle still to be counted in turn, until all were asked for or somebody stops."""
    from stockroom.reports.walk_text import asked

    tell("640 g, same, about half, missing, here; Enter for not yet; stop.")
    number = 0
    for row in sheet.again or sheet.to_count:
        while row.bottle.number not in {told.bottle for told in sitting.told}:
            try:
                reply = input(asked(row)).strip()
            except EOFError:
                print()
                return
            if reply.lower() in _STOP:
                return
            number += 1
            # another bottle may be met on the way; then this one is asked for again
            other = bool(_OTHER.match(reply))
            line = reply if other else f"{row.bottle.number} {reply}"
            if sitting.enter(number, line):
                sitting.mend(line)
                if not other:
                    break


def _sum_up(shared: Shared, sitting: _Sitting) -> None:
    from stockroom.reports.json_walk import sitting_json
    from stockroom.reports.walk_text import sitting_text
    from stockroom.service.walk import sheet
    from stockroom.service.walk_missing import missed_for
    from stockroom.service.walk_told import Came

    # somebody else may have ended it meanwhile, which loses nothing of what was entered
    found = sheet(sitting.path, sitting.name, on=shared.today)
    assert found is not None
    missing = [told.bottle for told in sitting.told if told.came is Came.MISSING]
    missed = missed_for(sitting.path, missing, today=shared.today)
    came = [told.came.value for told in sitting.told]
    skipped = [(each.number, each.trouble.message, each.trouble.hint) for each in sitting.skipped]
    lines = [(told.bottle, told.came.value, told.entry, told.text) for told in sitting.told]
    show(
        shared,
        lambda: sitting_text(found, came, len(skipped), missed, width()),
        lambda: sitting_json(found, lines, skipped, missed),
    )
    suggest(shared, f'stockroom walk "{sitting.name}"')
