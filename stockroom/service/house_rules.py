"""How a line keeps: its rules shown, one replaced by a rule of the house, one withdrawn."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

from stockroom import clock
from stockroom.errors import BadInput
from stockroom.keeping.rule_words import rule_in_words
from stockroom.keeping.rules import Rule
from stockroom.service.answers import Done
from stockroom.service.finding import line_in

if TYPE_CHECKING:
    from stockroom.store.engine import Session
    from stockroom.store.house_rules import Replaced
    from stockroom.store.rule_changes import RuleChange


@dataclass(frozen=True, slots=True)
class Keeping:
    """A line's rules in use, the unit their strengths are in, and what was changed of them."""

    line: str
    unit: str
    rules: tuple[Rule, ...]
    changes: tuple[RuleChange, ...]
    sources: dict[str, str]
    practice: bool = False


def keeping_of(path: Path, line: str) -> Keeping:
    """How a line keeps. Raises: UnknownName with the nearest names; BadInput when it is several."""
    from stockroom.service.database import is_practice, seeds_folder
    from stockroom.store.reading import reading
    from stockroom.store.rule_changes import changes_of
    from stockroom.store.snapshot_lines import lines_of
    from stockroom.store.sources import citations

    with reading(path) as reader:
        found = line_in(lines_of(reader), line)
        changes = changes_of(reader, found.key)
    cited = citations(seeds_folder())
    return Keeping(found.key, found.unit, found.rules, changes, cited, is_practice(path))


def set_rule(
    path: Path,
    line: str,
    rule: str,
    cells: dict[str, str],
    *,
    withdraw: bool = False,
    why: str,
    today: date,
    by: str,
) -> Done:
    """Put a rule of the house in the place of the line's own, or take that out of use.

    The old rule stays in the store, out of use, with who, when and why.
    Raises: UnknownName for a line, rule or column; BadInput without a reason or
    initials, for a life of nothing, and for bands that overlap or leave a strength out.
    """
    from stockroom.service.database import is_practice
    from stockroom.service.work import initials
    from stockroom.store import house_rules
    from stockroom.store.desk import Desk
    from stockroom.store.engine import writing

    if not withdraw and not cells:
        raise BadInput(f"What does {rule} of {line} say now?", 'Write it as lasts="14 d".')
    with writing(path) as session:
        desk = Desk(session, by=initials(by), today=today, at=clock.now())
        change = house_rules.withdraw_rule if withdraw else house_rules.set_rule
        replaced = change(desk, line, rule, cells)
        before, after = _words(replaced)
        if before == after:
            raise BadInput(f"{replaced.line.key} keeps so already: {after}.", "Say what changes.")
        house_rules.note_change(desk, replaced.line, rule, (before, after), why)
        _check_bands(session, replaced)
        key = replaced.line.key
    text = f"{key}: {before or 'no such rule'} → {after or 'withdrawn'}."
    return Done(text, next=f'stockroom rule "{key}"', practice=is_practice(path))


def _words(replaced: Replaced) -> tuple[str, str]:
    unit = replaced.line.unit
    before, after = replaced.before, replaced.after
    return (
        rule_in_words(before, unit) if before else "",
        rule_in_words(after, unit) if after else "",
    )


def _check_bands(session: Session, replaced: Replaced) -> None:
    from stockroom.keeping.bands import band_faults
    from stockroom.store.engine import reader_in
    from stockroom.store.snapshot_lines import lines_of

    line = lines_of(reader_in(session))[replaced.line.key]
    faults = band_faults(line.rules, line.unit)
    if faults:
        raise BadInput(
            f"{line.key}: {' '.join(faults)} Nothing was saved.",
            "Give stronger_than and up_to_strength so that the bands meet.",
        )
