"""What stands at the top and foot of every sheet, and how a copy is held against the last one."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date
from typing import TYPE_CHECKING

from stockroom.reports.sheet import CAUTION, PRACTICE, safe_side, wrap
from stockroom.reports.words import counted, day

if TYPE_CHECKING:
    from stockroom.keeping.caution import LowerLimits
    from stockroom.planning.decisions import Plan


MOST_CHANGES = 12
"""Changes told in full at the foot of a sheet; of more there is a count. Also in `base.typ`."""


@dataclass(frozen=True, slots=True)
class Since:
    """What a sheet says otherwise than the copy printed last: `number` is that copy's.

    `marked` are the keys of lines that are new or say something else; `changes` all of it in
    words, what is gone from the sheet too.
    """

    number: str
    marked: tuple[str, ...] = ()
    changes: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Head:
    """The top and foot of a sheet. `copy` is its number, "" for one that was not printed.

    `about` is the line under the title. `since` is None where no copy was printed before.
    """

    house: str
    practice: bool
    title: str
    as_at: date
    about: str = ""
    safe_side: str = ""
    copy: str = ""
    since: Since | None = None
    caution: str = field(default=CAUTION)


def head_of(plan: Plan, title: str, about: str = "") -> Head:
    """The head of a sheet that is made from a plan."""
    return head_for(
        plan.house.name,
        title,
        plan.as_at,
        about=about,
        practice=plan.house.practice,
        limits=plan.lower_limits,
    )


def head_for(
    house: str,
    title: str,
    as_at: date,
    *,
    about: str = "",
    practice: bool = False,
    limits: LowerLimits | None = None,
) -> Head:
    """The head of a sheet that is made from something else than a plan."""
    return Head(
        house=house,
        practice=practice,
        title=title,
        as_at=as_at,
        about=about,
        safe_side=safe_side(limits) if limits else "",
    )


def since(number: str, before: Mapping[str, str], now: Mapping[str, str], today: date) -> Since:
    """The copy of that number, which said `before`, against what the sheet says now.

    Lines are told apart by their keys; their order does not count. A key that begins with a
    day before `today` is left out: what was done since is no change of the plan. So is one
    that says nothing, "", in either: it is there and was not to be held against anything.
    """
    marked = tuple(
        key
        for key, said in now.items()
        if said and before.get(key) not in (said, "") and not _over(key, today)
    )
    changes = [change_words(before.get(key), now[key]) for key in marked]
    gone = gone_since(before, now, today)
    return Since(number, marked, (*changes, *(f"gone: {before[key]}" for key in gone)))


def gone_since(before: Mapping[str, str], now: Mapping[str, str], today: date) -> tuple[str, ...]:
    """The keys of lines that the copy before had and the sheet has no more."""
    return tuple(k for k in before if before[k] and k not in now and not _over(k, today))


def _over(key: str, today: date) -> bool:
    try:
        return date.fromisoformat(key[:10]) < today
    except ValueError:
        return False


def change_words(before: str | None, now: str) -> str:
    """A line that is new, or what it says now and what it said.

    Of a line of several parts, "; " between them, the first is always told, and of the others
    those alone that changed.
    """
    if before is None:
        return f"new: {now}"
    first, *rest = now.split("; ")
    was, *others = before.split("; ")
    new = [each for each in rest if each not in others]
    old = [each for each in others if each not in rest]
    here = [was] if was != first else []
    return f"{'; '.join([first, *new])} (was: {'; '.join([*here, *old]) or 'without'})"


# -- as text ------------------------------------------------------------------------


def head_lines(head: Head, width: int) -> str:
    """The top of a sheet as text: PRACTICE if it is, the house, the title, the copy."""
    lines = [wrap(head.house, width, hang=0), wrap(head.title, width, hang=0)]
    lines += [wrap(head.about, width)] if head.about else []
    lines += [wrap(head.safe_side, width)] if head.safe_side else []
    lines.append(wrap(copy_line(head), width))
    return "\n".join([PRACTICE, *lines] if head.practice else lines)


def copy_line(head: Head) -> str:
    """ "as at ..., copy 0012; changed since copy 0009: 2 (marked >)"."""
    number = f"copy {head.copy}" if head.copy else "not printed"
    told = f"as at {day(head.as_at)}, {number}"
    if head.since is None:
        return told
    count = len(head.since.changes)
    if not count:
        return f"{told}; nothing changed since copy {head.since.number}"
    return f"{told}; {counted(count, 'change')} since copy {head.since.number} (marked >)"


def mark(head: Head, key: str) -> str:
    """The mark before a line: ">" where it says something else than the last copy did."""
    return ">" if head.since is not None and key in head.since.marked else " "


def foot_lines(head: Head, width: int) -> str:
    """The foot of a sheet as text: what changed since the last copy, and the house line."""
    lines: list[str] = []
    if head.since is not None and head.since.changes:
        lines = [f"CHANGED SINCE COPY {head.since.number}"]
        told, more = head.since.changes[:MOST_CHANGES], len(head.since.changes) - MOST_CHANGES
        lines += [wrap(change, width, indent=2) for change in told]
        lines += [f"  and {more} more"] if more > 0 else []
        lines.append("")
    return "\n".join([*lines, wrap(head.caution, width, hang=0)])
