"""The week sheet as text, and its lines to be held against the copy printed last."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date
from typing import TYPE_CHECKING

from stockroom.reports.paper.changes import since_by_booking
from stockroom.reports.paper.head import Head, Since, foot_lines, head_lines, mark
from stockroom.reports.paper.week_parts import Also, Class, Item, Job, Rung, without_figure
from stockroom.reports.sheet import wrap
from stockroom.reports.words import TIED

if TYPE_CHECKING:
    from stockroom.reports.paper.week import Week

SIGN = "ticked by ........"
_TICK = f"[{TIED}]"
_AT = 5


def week_text(week: Week, width: int) -> str:
    """The rungs from top to bottom, then what else belongs to the week, and the guesses."""
    parts = [head_lines(week.head, width), wrap(week.told, width) if week.told else ""]
    parts += [_rung(week.head, rung, width) for rung in week.rungs]
    parts += [_foot("ALSO", week.also, week.head, width)] if week.also else []
    parts.append(_foot(f"GUESSES: {week.guess_count}", week.guesses, week.head, width))
    return "\n\n".join([*(part for part in parts if part), foot_lines(week.head, width)])


def _rung(head: Head, rung: Rung, width: int) -> str:
    told = [each for each in (rung.told, rung.minutes) if each]
    first = "  ".join([rung.name.upper(), *told])
    lines = [wrap(first, width)]
    lines += [_class(head, each, width) for each in rung.classes]
    for shelf in rung.shelves:
        lines.append(f"  {shelf.name.upper()}")
        lines += [line for job in shelf.jobs for line in _job(head, job, width)]
    return "\n".join(lines)


def _class(head: Head, each: Class, width: int) -> str:
    return wrap(f"{mark(head, each.key)} {each.time} {each.what}, {each.about}", width, hang=8)


def _job(head: Head, job: Job, width: int) -> list[str]:
    if job.items:
        return [
            wrap(job.what, width, indent=4),
            *(_item(head, item, width) for item in job.items),
        ]
    ref = f" ({job.ref})" if job.ref else ""
    time = f" {job.time}" if job.time else ""
    front = f"  {mark(head, job.key)} {_TICK}{time} "
    lines = [_fronted(front, f"{job.what}{ref}", width)]
    signed = (*job.more, SIGN) if job.sign else job.more
    lines += [wrap("; ".join(signed), width, indent=8, hang=8)] if signed else []
    return [*lines, *(wrap(f"! {each}", width, indent=8, hang=10) for each in job.cautions)]


def _item(head: Head, item: Item, width: int) -> str:
    box = _TICK if item.tick else " – "
    return _fronted(f"  {mark(head, item.key)} {box} ", f"{item.what}: {item.whence}", width)


def _fronted(front: str, text: str, width: int) -> str:
    # the front keeps its blanks, which wrapping would take from it
    return wrap(front.replace(" ", TIED) + text, width, hang=8)


def _foot(title: str, row: tuple[Also, ...], head: Head, width: int) -> str:
    lines = [
        wrap(f"{mark(head, each.key)} {each.about}: {each.text}", width, hang=4) for each in row
    ]
    return "\n".join([title, *lines])


# -- held against the copy before ------------------------------------------------------------


def week_lines(week: Week) -> dict[str, str]:
    """What the sheet says, by what it is about: a day first, so that a past one drops out.

    Bookings stand before the work they give, so that a list of changes begins with its causes.
    Left out are the minutes of a day, and how strong a guess expects a bottle to be: it is
    another every day.
    """
    closed = [rung for rung in week.rungs if rung.state == "closed"]
    lines = {f"{rung.on} closed": f"{rung.name}: {rung.told}" for rung in closed}
    for rung in week.rungs:
        for each in rung.classes:
            lines[each.key] = f"{rung.name} {each.time} {each.what}, {each.about}"
    for rung in week.rungs:
        for shelf in rung.shelves:
            for job in shelf.jobs:
                lines |= _said(f"{rung.name} {shelf.name}", job)
    lines |= {each.key: f"{each.about}: {each.text}" for each in week.also}
    lines |= {each.key: "" for each in week.made}
    lines |= {
        guess.key: f"guess: {guess.about}: {without_figure(guess.text)}" for guess in week.guesses
    }
    return {key: said.replace(TIED, " ") for key, said in lines.items()}


def _said(when: str, job: Job) -> dict[str, str]:
    if job.items:
        return {item.key: f"{when}: {item.what}, {item.whence}" for item in job.items}
    timed = f"{job.time} " if job.time else ""
    # of a make, what it is made from: the rest follows from that and from its day
    more = job.more[:1] if job.ref else job.more
    warned = [f"! {each}" for each in job.cautions]
    return {job.key: f"{when}: {timed}{'; '.join([job.what, *more, *warned])}"}


def week_since(week: Week, number: str, before: Mapping[str, str], today: date) -> Since:
    """What changed since that copy, bookings first, and why a bottle is no longer taken."""
    jobs = (job for rung in week.rungs for shelf in rung.shelves for job in shelf.jobs)
    passed = {item.key: item.passed for job in jobs for item in job.items if item.passed}
    return since_by_booking(number, before, week_lines(week), today, passed, week.made)
