"""Use over the term as a page: planned beside really drawn beside a year before, with bars.

Frozen values for `web/templates/use.html`. A bar's lengths are hundredths of the longest one of
its table measured alike: grams and cm³ stand apart. What went unused stands apart as well.
"""

from __future__ import annotations

from collections.abc import Collection, Mapping, Sequence
from dataclasses import dataclass, replace

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Plan, Use
from stockroom.planning.facts import Facts
from stockroom.reports.paper.term_report import used_of
from stockroom.reports.paper.term_report_waste import Left, Waste, wasted
from stockroom.reports.usage_text import FORMS, differences_heading
from stockroom.reports.words import amount, counted, day_heading, named


@dataclass(frozen=True, slots=True)
class Filter:
    """What is asked for: a department's code, "" for all; keys of lines, None for all."""

    department: str = ""
    lines: Collection[str] | None = None


@dataclass(frozen=True, slots=True)
class Bar:
    """Lengths in hundredths; `spare` is the last part of `planned`. None: not known."""

    planned: float
    spare: float
    drawn: float | None
    before: float | None


@dataclass(frozen=True, slots=True)
class Row:
    """One line of stock. Texts are "" where nothing is known; `parts` are booking and amount."""

    what: str
    planned: str
    spare: str
    drawn: str
    before: str
    by_group: str
    groups: str
    bar: Bar
    parts: tuple[tuple[str, str], ...]


@dataclass(frozen=True, slots=True)
class Table:
    """The rows of one form. `compared` and `drawn` say whether any row has such a figure."""

    key: str
    heading: str
    rows: tuple[Row, ...]
    compared: bool
    drawn: bool


@dataclass(frozen=True, slots=True)
class UsePage:
    """The whole page. `other` is what was drawn of lines that stand in no table.

    `departments` are (code, name); `for_one` says what is not told apart by department.
    """

    about: str
    tables: tuple[Table, ...]
    other: tuple[tuple[str, str], ...]
    waste: tuple[Waste, ...]
    differences_heading: str
    differences: tuple[str, ...]
    departments: tuple[tuple[str, str], ...]
    for_one: str


NOTHING = "Nothing is used in this period."
FOR_ONE = (
    "For one department alone: spare, what was drawn and the year before are known for all "
    "together, and are left off."
)


def use_page_of(known: Facts, plan: Plan, left: Sequence[Left], asked: Filter) -> UsePage:
    """The use of a term's plan; `left` is what went unused."""
    uses = _asked(known, plan.usage, asked)
    drawn = {} if asked.department else _drawn(plan, asked)
    tables = tuple(_table(key, head, uses, drawn) for key, head in FORMS.items())
    shown = {(use.line, use.strength) for use in uses}
    other = [use for key, use in sorted(drawn.items()) if key not in shown]
    about = f"{day_heading(plan.start)} to {day_heading(plan.end)}, as at {day_heading(plan.as_at)}"
    whole = asked == Filter()
    return UsePage(
        about=about if uses or drawn else f"{about}. {NOTHING}",
        tables=tuple(table for table in tables if table.rows),
        other=tuple((named(use.item, use.strength), _much(use.amount, use)) for use in other),
        waste=wasted(left) if whole else (),
        differences_heading=differences_heading(plan) if whole and plan.differences else "",
        differences=plan.differences if whole else (),
        departments=tuple((one.code, one.name) for one in known.departments),
        for_one=FOR_ONE if asked.department else "",
    )


def _asked(known: Facts, uses: Sequence[Use], asked: Filter) -> list[Use]:
    found = [use for use in uses if asked.lines is None or use.line in asked.lines]
    if not asked.department:
        return found
    whose = {booking.number: booking.department for booking in known.bookings}
    theirs = [
        tuple(each for each in use.by_booking if whose.get(each[0]) == asked.department)
        for use in found
    ]
    return [
        # what is not told apart by booking would be somebody else's too
        replace(
            use,
            amount=sum(much for _, much in parts),
            by_booking=parts,
            spare=0,
            groups=0,
            before=None,
        )
        for use, parts in zip(found, theirs, strict=True)
        if parts
    ]


def _drawn(plan: Plan, asked: Filter) -> dict[tuple[str, str], Use]:
    return {
        (use.line, use.strength): use
        for use in plan.drawn
        if asked.lines is None or use.line in asked.lines
    }


def _table(
    key: str, heading: str, uses: Sequence[Use], drawn: Mapping[tuple[str, str], Use]
) -> Table:
    rows = [(use, drawn.get((use.line, use.strength))) for use in uses if use.form == key]
    longest: dict[Kind, int] = {}
    for use, really in rows:
        most = max(use.amount, use.before or 0, really.amount if really else 0)
        longest[use.kind] = max(longest.get(use.kind, 1), most)
    return Table(
        key=key,
        heading=heading.capitalize(),
        rows=tuple(_row(use, really, longest[use.kind]) for use, really in rows),
        compared=any(use.before is not None for use, _ in rows),
        drawn=any(really for _, really in rows),
    )


def _row(use: Use, really: Use | None, longest: int) -> Row:
    told = used_of(use)
    return Row(
        what=told.item,
        planned=told.amount,
        spare=_much(use.spare, use) if use.spare > 0 else "",
        drawn=_much(really.amount, use) if really else "",
        before=told.before,
        by_group=told.by_group,
        groups=counted(use.groups, "group") if use.groups else "",
        bar=Bar(
            planned=_length(use.amount, longest),
            spare=_length(max(0, use.spare), longest),
            drawn=_length(really.amount, longest) if really else None,
            before=None if use.before is None else _length(use.before, longest),
        ),
        parts=tuple((number, _much(part, use)) for number, part in use.by_booking),
    )


def _much(micro: int, use: Use) -> str:
    return amount(micro, use.kind)


def _length(micro: int, longest: int) -> float:
    return round(max(0, 100 * micro / longest), 2)
