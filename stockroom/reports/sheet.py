"""What every sheet shares: first line, headings, wrapping to the width, and foot."""

from __future__ import annotations

import re
import textwrap
from collections.abc import Iterable, Sequence

from stockroom.keeping.caution import LowerLimits
from stockroom.planning.decisions import Plan
from stockroom.reports.words import TIED, counted, day, raised
from stockroom.safety.cautions import ESTIMATE, HOUSE_LINE

PRACTICE = "PRACTICE"
"""The first line of every text that comes from the invented college."""

CAUTIOUS = "CAUTIOUS, strengths at their lower 95 % limit"
"""On every text of a plan made on the safe side."""

CAUTION = f"{HOUSE_LINE} {ESTIMATE}"
"""The foot of every sheet: cautions nos. 1 and 16 of `safety/cautions.py`."""

NARROWEST = 20


def wrap(text: str, width: int, *, indent: int = 0, hang: int | None = None) -> str:
    """`text` in lines no longer than `width`, later lines indented by `hang` columns.

    `hang` is `indent` + 2 when left out. A word longer than a line stands whole,
    and an amount is never parted from its unit.
    """
    later = indent + 2 if hang is None else hang
    filled = textwrap.fill(
        raised(text),
        # a window pulled to nothing would else give one letter a line, or an error
        max(width, NARROWEST),
        initial_indent=" " * indent,
        subsequent_indent=" " * later,
        break_long_words=False,
        break_on_hyphens=False,
    )
    return filled.replace(TIED, " ")


def section(title: str, lines: Sequence[str]) -> str:
    """A heading over its lines; empty text when there are none, so it is left off."""
    return "\n".join([title, *lines]) if lines else ""


def page(parts: Iterable[str]) -> str:
    """The parts that are not empty, a blank line between them."""
    return "\n\n".join(part for part in parts if part)


def head(plan: Plan, width: int, *about: str) -> str:
    """The top of a sheet: PRACTICE if it is, the house, what it is about, and how cautious."""
    lines = [plan.house.name, *(wrap(line, width) for line in about)]
    lines += [wrap(safe_side(plan.lower_limits), width)] if plan.lower_limits else []
    lines += [wrap(line, width) for line in printed_copy(plan)]
    return "\n".join([PRACTICE, *lines] if plan.house.practice else lines)


def printed_copy(plan: Plan) -> list[str]:
    """The number a plan was kept under, or how far it is from the one kept last; else nothing."""
    if plan.kept_as:
        return [f"Plan {plan.kept_as}, kept: what changes from now on is told by stockroom changed"]
    if plan.kept_unread:
        number = plan.kept_unread
        return [f"plan {number}, kept last, cannot be read: keep one anew, stockroom plan --keep"]
    if plan.changed_since is None:
        return []
    number, count = plan.changed_since
    return [f"{counted(count, 'change')} since plan {number} was kept: stockroom changed"]


def safe_side(limits: LowerLimits) -> str:
    """How a plan on the safe side doubts its bottles, and how many it cannot."""
    told = (
        (limits.own, "by their own checks"),
        (limits.line, "by the checks of their line"),
        (limits.doubt, "by the uncertainty of what was found"),
    )
    known = [f"{counted(count, 'bottle')} {how}" for count, how in told if count]
    nothing = f"nothing to be cautious with for {counted(limits.nothing, 'bottle')}"
    return f"{CAUTIOUS}: {'; '.join([*known, nothing])}, which count as usual."


def spanning(plan: Plan) -> str:
    """The day looked from and the days looked at: "as at ..., for ... to ..."."""
    return f"as at {day(plan.as_at)}, for {day(plan.start)} to {day(plan.end)}"


def foot(width: int, *commands: str) -> str:
    """The house caution and the commands to try next."""
    following = "Next: " + ", ".join(command.replace(" ", TIED) for command in commands)
    lines = [wrap(CAUTION, width, hang=0)]
    return "\n".join([*lines, wrap(following, width, hang=6)] if commands else lines)


OLD_BACKUP = 7
"""Days after which a backup is asked for. A house choice."""


def backup_age(plan: Plan, width: int) -> str:
    """One line on the last good backup; nothing where nobody asks for it."""
    if plan.backup is None:
        return ""
    on = plan.backup.on
    if on is None:
        return wrap(f"no backup of this store yet: {_MAKE_ONE}", width)
    age = (plan.as_at - on).days
    ago = f"{counted(age, 'day')} ago" if age else "today"
    asked = f": {_MAKE_ONE}" if age > OLD_BACKUP else ""
    return wrap(f"last good backup {day(on)}, {ago}{asked}", width)


_MAKE_ONE = f"stockroom{TIED}backup"


def columns(rows: Sequence[Sequence[str]], width: int, *, indent: int = 2) -> list[str]:
    """Rows whose last cell wraps under itself; the others take what their column needs.

    When less than a third of the width would be left for the last cell, it goes
    below the row instead, so that 80 columns stay readable.
    """
    if not rows:
        return []
    widths = [max(len(cell) for cell in column) for column in zip(*rows, strict=True)][:-1]
    start = indent + sum(widths) + 2 * len(widths)
    # a column of ten letters is no column
    below = start > 2 * width // 3
    return [_row(row, widths, width, indent, start, below=below) for row in rows]


def _row(
    row: Sequence[str], widths: list[int], width: int, indent: int, start: int, *, below: bool
) -> str:
    cells = [cell.ljust(size) for cell, size in zip(row, widths, strict=False)]
    front = "  ".join([" " * indent + cells[0], *cells[1:]]).replace(TIED, " ")
    if below:
        return "\n".join([front.rstrip(), wrap(row[-1], width, indent=indent + 2)])
    last = wrap(row[-1], max(width - start, NARROWEST), hang=0)
    return raised(f"{front}  " + last.replace("\n", "\n" + " " * start)).rstrip()


def guesses(plan: Plan, width: int) -> str:
    """The guesses leaned on, count first; "nothing guessed" when there are none."""
    # said also when there are none: silence would read as not looked for
    if not plan.guesses:
        return "GUESSES: nothing guessed"
    lines = [wrap(f"{each.subject}: {each.text}", width, indent=2) for each in plan.guesses]
    return section(f"GUESSES: {counted(len(lines), 'guess')}", lines)


def notes(plan: Plan, width: int) -> str:
    """What the planner noticed on the way, a line each."""
    return section(
        "NOTES", [wrap(f"{each.subject}: {each.text}", width, indent=2) for each in plan.notes]
    )


def is_bottle(subject: str) -> bool:
    """True when `subject` looks like a label number: B01, B05a, S24f."""
    return re.fullmatch(r"[BS]\d+[a-z]?", subject) is not None
