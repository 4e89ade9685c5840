"""The page a successor reads first: what nobody wrote down, with its reasons."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.reports.files.handover_danger import dangers
from stockroom.reports.files.handover_house import (
    never,
    places,
    recipes,
    rules,
    suppliers,
)
from stockroom.reports.files.handover_open import leans_on, open_questions
from stockroom.reports.files.handover_parts import Beside, Job, Part, Point, together
from stockroom.reports.files.handover_week import first_week
from stockroom.reports.paper.head import Head, foot_lines, head_lines, head_of, mark
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.sheet import page, wrap
from stockroom.reports.words import raised


@dataclass(frozen=True, slots=True)
class Handover:
    """The pages; `files` are the others in the folder, each with what it is."""

    head: Head
    files: tuple[tuple[str, str], ...]
    parts: tuple[Part, ...]


def handover_of(
    known: Facts, plan: Plan, beside: Beside, monday: date, files: tuple[tuple[str, str], ...]
) -> Handover:
    """The handover as at the plan's day, its first week the one from `monday`."""
    about = "For whoever comes after: the first week, then everything else, with its reasons"
    parts = (
        first_week(known, plan, monday, beside),
        never(known, plan),
        open_questions(known, plan),
        noticed(plan),
        leans_on(plan),
        backups(beside, practice=plan.house.practice),
        places(known),
        rules(known, beside),
        recipes(known),
        suppliers(known),
        hands(beside),
    )
    return Handover(head_of(plan, "Start here", about), files, parts)


def noticed(plan: Plan) -> Part:
    """What the plan noticed on the way: wrong neighbours, hours nobody is here, money, remarks."""
    first = dangers(plan)
    points = [Point(n.subject, (raised(n.text),)) for n in plan.notes if n not in first]
    intro = "Noticed on the way, as at today." if points else "Nothing was noticed."
    return Part("What the plan noticed", intro, together(points))


def backups(beside: Beside, *, practice: bool) -> Part:
    """Where the store and its last copy are, and how it is put back."""
    told = "No copy of this store was ever made: make one today."
    if beside.backup is not None:
        on, place = beside.backup
        told = f"The last good copy is of {on}, and was put at {place}."
    elif practice:
        told = "This is the practice store, which nobody would miss: stockroom demo makes it anew."
    put_back = ("stockroom restore FILE", "stockroom verify")
    jobs = (
        Job(
            "Make a copy, on a stick or another machine; it is proved as it is made.",
            ("stockroom backup FOLDER",),
        ),
        Job("Put a copy back, when it must be; what stands there is kept beside it.", put_back),
    )
    where = () if practice else (Point("Where the store is", (beside.store,)),)
    points = (*where, Point("Copies", jobs=jobs))
    return Part("Where the backup is", told, points)


def hands(beside: Beside) -> Part:
    """Whose initials stand in the ledger, so that it is known whom to ask."""
    points = tuple(
        Point(one.initials, (f"{_entries(one.entries)}, {one.first} to {one.last}",))
        for one in beside.hands
    )
    intro = "Who these are is written nowhere: ask, and keep it."
    return Part("Initials in the ledger", intro if points else "No entry was made yet.", points)


def _entries(count: int) -> str:
    return "1 entry" if count == 1 else f"{count} entries"


# -- as text ------------------------------------------------------------------------


def handover_text(sheet: Handover, width: int) -> str:
    """The pages as plain text; commands stand alone on their lines, to be copied."""
    files = [wrap(f"{name}: {what}", width, indent=2) for name, what in sheet.files]
    parts = [head_lines(sheet.head, width), "\n".join(["IN THIS FOLDER", *files])]
    for number, part in enumerate(sheet.parts, 1):
        lines = [f"{number}  {part.title.upper()}", wrap(part.intro, width, indent=3, hang=3)]
        for point in part.points:
            changed = mark(sheet.head, _key(part, point))
            name = f"!! {point.name.upper()} !!" if point.boxed else point.name
            lines.append(wrap(f"{changed}  {name}", width, hang=5))
            lines += [wrap(text, width, indent=5, hang=7) for text in point.told]
            lines += [line for job in point.jobs for line in _job_lines(job, width)]
        parts.append("\n".join(lines))
    return page([*parts, foot_lines(sheet.head, width)])


def _job_lines(job: Job, width: int) -> list[str]:
    # never wrapped: a command broken in two cannot be typed
    commands = [f"         $ {command}" for command in job.commands]
    return [wrap(f"[ ] {job.text}", width, indent=5, hang=9), *commands]


def handover_lines(sheet: Handover) -> dict[str, str]:
    """Every point by its part and its name, but for what is to be done: that is of its own week."""
    return {
        _key(part, point): f"{point.name}: {'; '.join(point.told)}"
        for part in sheet.parts
        for point in part.points
        if point.told
    }


def _key(part: Part, point: Point) -> str:
    return f"{part.title}: {point.name}"


HANDOVER = Kind("handover", handover_text, handover_lines)
"""The pages to be read first."""
