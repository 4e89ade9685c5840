"""Is everything good on the day, and why: the answers a demonstrator reads on a phone."""

from __future__ import annotations

from typing import TYPE_CHECKING

from stockroom.planning.decisions import Answer, Outcome
from stockroom.reports.checks_text import check_lines
from stockroom.reports.makes_text import makes_by_day
from stockroom.reports.sheet import CAUTIOUS, PRACTICE, columns, foot, page, section, wrap
from stockroom.reports.words import amount, by_bottle, counted, named, raised, source

if TYPE_CHECKING:
    from stockroom.planning.ready import Readiness


def ready_text(
    readiness: Readiness, width: int, *, practice: bool = False, cautious: bool = False
) -> str:
    """First line YES or NO with the count of things to do; then what they are.

    The answer comes first even in the practice college, which says PRACTICE on
    the same line.
    """
    about = wrap(readiness.title, width) + (f"\n{CAUTIOUS}" if cautious else "")
    parts = [
        f"{_verdict(readiness)}{f'   {PRACTICE}' if practice else ''}\n{about}",
        section(
            "TO DO", [wrap(f"[ ] {each}", width, hang=6, indent=2) for each in readiness.to_do]
        ),
        section("MAKE", makes_by_day(readiness.makes, width)),
        section("CHECK", check_lines(readiness.checks, width)),
        section("NEEDS", need_lines(readiness.needs, width)),
        section(
            "STRENGTHS ON THE DAY", [wrap(each, width, indent=2) for each in readiness.strengths]
        ),
        section("CAUTIONS", [wrap(each, width, indent=2) for each in readiness.cautions]),
        foot(width, f"stockroom why {_puzzling(readiness)}", "stockroom plan"),
    ]
    return page(parts)


def why_text(reasons: tuple[str, ...], *, practice: bool = False, cautious: bool = False) -> str:
    """The reasons, a line each and never broken: five lines stay five lines."""
    # not wrapped: the promise is five lines, and a terminal folds them itself
    lines = [raised(reason) for reason in reasons]
    top = [PRACTICE] * practice + [CAUTIOUS] * cautious
    return "\n".join([*top, *lines])


def need_lines(needs: tuple[Answer, ...], width: int) -> list[str]:
    """One need a row: reference, outcome, and what of, from where."""
    return columns([(need.ref, need.outcome.value, served(need)) for need in needs], width)


def served(need: Answer) -> str:
    """A need and how it is served: "starch 0.5 % w/v 88 cm³ from M03"."""
    wanted = f"{named(need.item, need.strength)} {amount(need.amount, need.kind)}"
    # nothing serves it, so "from" would promise something
    if need.outcome in (Outcome.SHORT, Outcome.REFUSED):
        return f"{wanted} (see {need.order})" if need.order else wanted
    origin = [*_bottles(need), need.make, need.order]
    shown = " + ".join(each for each in origin if each)
    return f"{wanted} from {shown}" if shown else wanted


def _bottles(need: Answer) -> list[str]:
    drawn = [draw for draw in by_bottle(need.draws) if draw.bottle]
    if len(drawn) == 1 and drawn[0].amount == need.amount:
        return [drawn[0].bottle]  # the amount has just been said
    return [source(draw) for draw in drawn]


def _verdict(readiness: Readiness) -> str:
    if readiness.ready:
        return "YES"
    return f"NO: {counted(len(readiness.to_do), 'thing')} to do"


def _puzzling(readiness: Readiness) -> str:
    open_needs = [need.ref for need in readiness.needs if need.outcome is not Outcome.HAVE]
    return next(iter([*open_needs, *(need.ref for need in readiness.needs)]), "REF")
