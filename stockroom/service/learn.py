"""What the checks entered teach of a bottle or a line, and that rate made a rule of the house."""

from __future__ import annotations

import re
from datetime import date

from stockroom.errors import BadInput, NotAllowed
from stockroom.keeping.safe_side import Witness
from stockroom.planning.cautious import has_strength, witnesses
from stockroom.planning.facts import Bottle, Line
from stockroom.planning.learn import PART, Lesson, Question, fading_cells, in_short, lesson
from stockroom.service.answers import Done
from stockroom.service.finding import line_in
from stockroom.settings import StoreAt
from stockroom.store.likeness import unknown
from stockroom.store.reading import Reader, reading
from stockroom.store.refills import refills_of
from stockroom.store.snapshot_bottles import bottles_of
from stockroom.store.snapshot_lines import lines_of


def learn(
    path: StoreAt,
    name: str,
    *,
    order: int | None = None,
    to: float | None = None,
    since: date | None = None,
    as_at: date,
) -> Lesson:
    """How fast a bottle, or a line by all its bottles, has faded by what was found of it.

    `to` is the per cent of the label's strength that must be left; `since` a day before
    which nothing found of the bottle counts.

    Raises: UnknownName; BadInput; NotAllowed for what has no strength, or does not
    fall; MissingFigure where there are too few checks, with when to do the next.
    """
    with reading(path) as reader:
        if not name.strip():
            raise BadInput(f'Of which line or bottle? "{name}" names none.', "stockroom learn S02")
        bottles = bottles_of(reader, as_at, gone=True)
        bottle = next((b for b in bottles if b.number.lower() == name.strip().lower()), None)
        lines = lines_of(reader)
        if bottle is None and re.fullmatch(r"[bBsS]\d+[a-z]?", name.strip()):
            raise unknown("bottle", name, [each.number for each in bottles])
        line = lines[bottle.line] if bottle else line_in(lines, name)
        _check_asked(line, bottle, order, since)
        question = Question(as_at, bottle.number if bottle else "", order, _part(to), since)
        return lesson(line, _heard(reader, bottles, bottle, line, as_at), question)


def use(path: StoreAt, found: Lesson, *, why: str, today: date, by: str) -> Done:
    """Make the rate found the house's own rule of fading, with who, when and why.

    Raises: NotAllowed while the rate may be nothing at all; BadInput without a reason or
    initials.
    """
    # loaded here: only this writes
    from stockroom.service.house_rules import set_rule

    if not found.rate.clear:
        raise NotAllowed(
            f"{found.about}: its interval takes in no loss at all, too little for a rule.",
            "Titrate it again later in its life.",
        )
    cells = fading_cells(found)
    if why.strip():
        # what it rests on is kept with the reason, so that a later reader can judge it
        why = f"{why.strip()} ({in_short(found)})"
    return set_rule(path, found.line.key, "fades", cells, why=why, today=today, by=by)


def _heard(
    reader: Reader, bottles: tuple[Bottle, ...], bottle: Bottle | None, line: Line, as_at: date
) -> list[Witness]:
    topped_up = refills_of(reader, as_at)
    # a bottle asked about by its number is heard even where it stands apart
    if bottle:
        return [Witness(bottle.number, bottle.record, topped_up.get(bottle.number))]
    return witnesses(bottles, topped_up).get(line.key, [])


def _check_asked(line: Line, bottle: Bottle | None, order: int | None, since: date | None) -> None:
    if not has_strength(line):
        raise NotAllowed(
            f"{line.key} has no strength that can be found, so none that can be seen to fade.",
            "Ask about a solution or a liquid with a strength.",
        )
    if order not in (None, 0, 1, 2):
        raise BadInput(f"--order {order} is not a law we know.", "Give 0, 1 or 2.")
    if since and bottle is None:
        raise BadInput(
            f"--since {since} is a day in the life of one bottle, and {line.key} is a line.",
            "Ask by the bottle's number.",
        )


def _part(to: float | None) -> float:
    if to is None:
        return PART
    if not 0 < to < 100:
        raise BadInput(f"--to {to:g} is not between 0 and 100.", "Per cent of the label: --to 95.")
    return to / 100.0
