"""The term's report for whoever answers for the room: five sentences, then the tables."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from stockroom.measure.amounts import Kind as Measure
from stockroom.planning.decisions import Plan, Use
from stockroom.planning.facts import Facts, Firmness
from stockroom.reports.paper.buying_sheet import Purse, left_of, purse_rows, purses_of
from stockroom.reports.paper.head import Head, foot_lines, head_lines, head_of, mark
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.paper.term_report_misses import Miss, misses_in_words, misses_of
from stockroom.reports.paper.term_report_waste import (
    POURED,
    SURPLUS,
    Left,
    Waste,
    poured_in_words,
    reason_of,
    total_of,
    wasted,
)
from stockroom.reports.pictures.load import Load, load_of, load_picture
from stockroom.reports.sheet import columns, page, section, wrap
from stockroom.reports.usage_text import KNOWN_BY
from stockroom.reports.words import amount, counted, listed, money, named

BOUGHT = "bought"
_PICTURE = (180.0, 62.0)


@dataclass(frozen=True, slots=True)
class Used:
    """One line in bought form: this term's amount and the year before's, "" where unknown."""

    item: str
    amount: str
    before: str
    by_group: str


@dataclass(frozen=True, slots=True)
class TermReport:
    """`sentences` are five. `compared` says whether anything is known of the year before."""

    head: Head
    sentences: tuple[str, ...]
    purses: tuple[Purse, ...]
    waste: tuple[Waste, ...]
    misses: tuple[Miss, ...]
    differences: tuple[str, ...]
    compared: bool
    used_heading: str
    used: tuple[Used, ...]
    load: Load


def term_report_of(
    known: Facts, plan: Plan, left: Sequence[Left], *, entered: bool = True
) -> TermReport:
    """The report of a term as at the plan's day; `left` is what went unused up to it.

    `entered` is False where there is no term, and the plan's own days are taken for one.
    """
    uses = [use for use in plan.usage if use.form == BOUGHT]
    misses = misses_of(plan)
    held = [b for b in known.bookings if b.firmness is not Firmness.DROPPED]
    held = [b for b in held if known.start <= b.on <= known.end]
    about = f"{known.start} to {known.end}; what is still to come is planned, and so an estimate"
    about = about if entered else f"No term is entered: stockroom add terms. {about}"
    return TermReport(
        head=head_of(plan, "The term's report", about),
        sentences=(
            _use_in_words(len(held), uses, plan.differences),
            poured_in_words(left),
            _surplus_in_words(plan, left),
            _money_in_words(plan),
            misses_in_words(misses),
        ),
        purses=purses_of(plan.budgets),
        waste=wasted(left),
        misses=misses,
        differences=plan.differences,
        compared=any(use.before is not None for use in uses),
        used_heading=_heading(uses),
        used=tuple(used_of(use) for use in uses),
        load=load_of(known, plan),
    )


def _use_in_words(bookings: int, uses: Sequence[Use], differences: Sequence[str]) -> str:
    if not bookings:
        return "Nothing is booked this term, and so nothing is used."
    verb = "uses" if bookings == 1 else "use"
    told = (
        f"{counted(bookings, 'booking')} this term {verb} {counted(len(uses), 'thing')} as bought"
    )
    if not differences:
        return f"{told}; of the same term a year before nothing is known to differ."
    return f"{told}; against the year before, most changed is {differences[0]}."


def _surplus_in_words(plan: Plan, left: Sequence[Left]) -> str:
    made = sum(make.volume for make in plan.makes)
    over = sum(make.heel for make in plan.makes if not make.heel_kept)
    gone = [one for one in left if one.how == POURED and reason_of(one.why) == SURPLUS]
    really = f"surplus poured away so far: {total_of(gone)}."
    if not made:
        return f"Nothing is still to be made; {really}"
    share = f"{100 * over / made:.0f} %"
    return (
        f"Of {amount(made, Measure.VOLUME)} still to be made, {amount(over, Measure.VOLUME)} "
        f"({share}) is over and not worth keeping; {really}"
    )


def _money_in_words(plan: Plan) -> str:
    spent = sum(one.spent for one in plan.budgets)
    promised = sum(one.promised for one in plan.budgets)
    over = [f"{one.department} {left_of(one)}" for one in plan.budgets if (one.left or 0) < 0]
    limits = [one.left for one in plan.budgets if one.left is not None]
    later = f" and {money(promised)} still to be ordered" if promised else ""
    told = f"{money(spent)} is ordered and {money(promised)} still to be ordered"
    if over:
        return f"{told}, which puts {' and '.join(over)}."
    if not limits:
        return f"{money(spent)} is ordered{later}; no department has a limit."
    return f"{told}, and no department goes over: {money(sum(limits))} is left in all."


def _heading(uses: Sequence[Use]) -> str:
    known = dict.fromkeys(KNOWN_BY.get(use.basis, use.basis) for use in uses if use.basis)
    beside = f"; the year before {listed(known)}" if known else ""
    return f"Used in bought form, as the bookings work out{beside}"


def used_of(use: Use) -> Used:
    """One use in words, by the group too where both years' groups are known."""
    before = "" if use.before is None else amount(use.before, use.kind)
    by_group = ""
    if use.before is not None and use.groups and use.groups_before:
        now, then = round(use.amount / use.groups), round(use.before / use.groups_before)
        by_group = f"{amount(now, use.kind)} a group, {amount(then, use.kind)} the year before"
    return Used(named(use.item, use.strength), amount(use.amount, use.kind), before, by_group)


# -- as text ------------------------------------------------------------------------


def term_report_text(report: TermReport, width: int) -> str:
    """The report as text, in the order of the paper."""
    numbered = enumerate(report.sentences, 1)
    said = [wrap(f"{mark(report.head, f's{n}')}{n}  {each}", width, hang=4) for n, each in numbered]
    waste = [
        (row.what, counted(row.bottles, "bottle"), f"{row.total}: {row.of}") for row in report.waste
    ]
    parts = [head_lines(report.head, width), "\n".join(said)]
    parts.append(section("WHOSE MONEY", columns(purse_rows(report.purses), width)))
    parts.append(section("POURED AWAY, SPILLED, LENT, COUNTED OTHERWISE", columns(waste, width)))
    for miss in report.misses:
        heading = f"{miss.what.upper()}: {len(miss.told)}"
        parts.append(section(heading, [wrap(text, width, indent=2) for text in miss.told]))
    differences = [wrap(text, width, indent=2) for text in report.differences]
    parts.append(section("BIGGEST DIFFERENCES FROM THE YEAR BEFORE", differences))
    parts.append(section(wrap(report.used_heading.upper(), width), _used_text(report, width)))
    return page([*parts, foot_lines(report.head, width)])


def _used_text(report: TermReport, width: int) -> list[str]:
    if not report.compared:
        return columns([(one.amount, one.item) for one in report.used], width)
    rows = [
        (one.amount, one.before or "–", f"{one.item}{', ' + one.by_group if one.by_group else ''}")
        for one in report.used
    ]
    return columns(rows, width)


def term_report_lines(report: TermReport) -> dict[str, str]:
    """The sentences, the money and the waste: what a reader would notice to have changed."""
    told = {f"s{n}": each for n, each in enumerate(report.sentences, 1)}
    told |= {
        f"money {one.code}": f"{one.code}: {one.spent}, {one.promised}" for one in report.purses
    }
    return told | {f"waste {row.what}": f"{row.what}: {row.total}" for row in report.waste}


def _picture(report: TermReport) -> dict[str, str]:
    if not report.load.days:
        return {}
    return {"load_svg": load_picture(report.load, _PICTURE).decode("utf-8")}


REPORT = Kind("report", term_report_text, term_report_lines, _picture)
"""The term's report: "five sentences and two tables", and what they were worked out from."""
