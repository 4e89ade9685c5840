"""How a line keeps: its rules shown, one replaced by a rule of the house, one withdrawn."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from stockroom import clock
from stockroom.errors import BadInput
from stockroom.keeping.bands import band_faults, overlapping
from stockroom.keeping.rule_words import rule_in_words
from stockroom.keeping.rules import Rule, RuleKind
from stockroom.measure.periods import Period, add
from stockroom.service.answers import Done
from stockroom.service.finding import line_in
from stockroom.settings import StoreAt

if TYPE_CHECKING:
    from stockroom.planning.facts import Line
    from stockroom.store.house_rules import Replaced
    from stockroom.store.reading import Reader
    from stockroom.store.rule_changes import RuleChange


# these say all there is to say by their names
_BARE = (RuleKind.SAME_DAY, RuleKind.NEVER)
_WAS_SAFETY = (
    "It was a safety date: see that the supplier's sheet and your employer's risk assessment"
    " allow this."
)


@dataclass(frozen=True, slots=True)
class Keeping:
    """A line's rules in use, the unit their strengths are in, and what was changed of them.

    `shown` is the unit of the line's label, and how many of it one `unit` makes.
    """

    line: str
    unit: str
    rules: tuple[Rule, ...]
    changes: tuple[RuleChange, ...]
    sources: dict[str, str]
    shown: tuple[str, float]
    practice: bool = False


def keeping_of(path: StoreAt, line: str) -> Keeping:
    """How a line keeps. Raises: UnknownName with the nearest names; BadInput when it is several."""
    from stockroom.service.database import is_practice, seeds_folder
    from stockroom.service.fades import label_unit
    from stockroom.store.reading import reading
    from stockroom.store.rule_changes import changes_of
    from stockroom.store.snapshot_lines import lines_of
    from stockroom.store.sources import citations

    with reading(path) as reader:
        found = line_in(lines_of(reader), _named(reader, line))
        changes = changes_of(reader, found.key)
    cited = citations(seeds_folder())
    shown = label_unit(found)
    return Keeping(found.key, found.unit, found.rules, changes, cited, shown, is_practice(path))


def _named(reader: Reader, text: str) -> str:
    """A line as named, or the one a bottle of that number is of. Raises: BadInput for no name."""
    if not text.strip():
        raise BadInput(f'Of which line? "{text}" names none.', 'stockroom rule "starch 0.5 % w/v"')
    asked = "SELECT key FROM line JOIN bottle ON line_id = line.id WHERE lower(number) = ?"
    rows = reader.ask(asked, text.strip().lower())
    return str(rows[0][0]) if rows else text


def set_rule(
    path: StoreAt,
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
    initials, for a life of nothing, and for bands that overlap or leave a strength out;
    NotAllowed for what is never kept.
    """
    from stockroom.service.database import is_practice
    from stockroom.service.work import initials
    from stockroom.store import house_rules
    from stockroom.store.desk import Desk
    from stockroom.store.engine import reader_in, writing
    from stockroom.store.snapshot_lines import lines_of

    if not withdraw and not cells and rule.strip().lower() not in _BARE:
        raise BadInput(f"What does {rule} of {line} say now?", 'Write it as lasts="14 d".')
    with writing(path) as session:
        desk = Desk(session, by=initials(by), today=today, at=clock.now())
        change = house_rules.withdraw_rule if withdraw else house_rules.set_rule
        replaced = change(desk, line, rule, cells)
        before, after = _words(replaced)
        if before == after:
            raise BadInput(f"{replaced.line.key} keeps so already: {after}.", "Say what changes.")
        house_rules.note_change(desk, replaced.line, rule, (before, after), why)
        now = lines_of(reader_in(session))[replaced.line.key]
        _check_bands(now)
        details = tuple(_cautions(now, replaced))
    text = f"{now.key}: {before or 'no such rule'} → {after or 'withdrawn'}."
    return Done(
        text, next=f'stockroom rule "{now.key}"', practice=is_practice(path), details=details
    )


def _words(replaced: Replaced) -> tuple[str, str]:
    unit = replaced.line.unit
    before, after = replaced.before, replaced.after
    return (
        rule_in_words(before, unit) if before else "",
        rule_in_words(after, unit) if after else "",
    )


def _check_bands(line: Line) -> None:
    faults = band_faults(line.rules, line.unit)
    if faults:
        raise BadInput(
            f"{line.key}: {' '.join(faults)} Nothing was saved.",
            "Give stronger_than and up_to_strength so that the bands meet.",
        )


def _cautions(line: Line, replaced: Replaced) -> Iterator[str]:
    """What somebody should know of a change that is allowed all the same."""
    before, after = replaced.before, replaced.after
    if before and before.safety and _looser(before, after):
        yield _WAS_SAFETY
    counts = "the one entered first" if after and after.law else "the earlier day"
    for other in overlapping(after, line.rules) if after else ():
        yield f"{rule_in_words(other, line.unit)}: holds there too, and {counts} counts."


def _looser(before: Rule, after: Rule | None) -> bool:
    if after is None or not after.safety or after.kind is not before.kind:
        return True
    return _days(after.lasts) > _days(before.lasts)


def _days(lasts: Period | None) -> int:
    # a period without an end is no period; months are set against days from one fixed day
    start = date(2000, 1, 1)
    return (add(start, lasts) - start).days if lasts else 0
