"""What the term uses, by solution and in bought form, and what was drawn so far."""

from __future__ import annotations

from stockroom.planning.decisions import Plan, Use
from stockroom.reports.sheet import columns, foot, head, page, section, spanning, wrap
from stockroom.reports.words import TIED, amount, counted, named

FORMS = {
    "solution": "SOLUTIONS",
    "stock": "STOCK SOLUTIONS THEY ARE MADE FROM",
    "bought": "IN BOUGHT FORM",
}
"""Each `Use.form` with its heading, in the order they are printed."""

_APART = {
    "spilled": "SPILLED (no part of what is used)",
    "lent": "LENT, AND NOT COME BACK (no part of what is used)",
}
_BESIDE = " (this term, the same term a year before)"
KNOWN_BY = {
    "entries": "as the entries say",
    "bookings": "as its bookings work out",
    "table": "as written down",
}
"""By what the use of an earlier term is known, in words."""


def usage_text(plan: Plan, width: int) -> str:
    """Totals by solution and in bought form, with spare shown apart, and by booking.

    A dilution is counted once: as itself among the solutions, and in the bought
    form it is made from. The year before stands beside it where anything is known of it.
    """
    parts = [head(plan, width, f"What is used {spanning(plan)}")]
    for form, heading in FORMS.items():
        uses = [use for use in plan.usage if use.form == form]
        beside = _BESIDE if _compared(uses) else ""
        title = wrap(f"{heading}{beside}", width)
        parts.append(section(title, _lines(uses, width)))
    parts += [
        _differences(plan, width),
        section("DRAWN SO FAR (from the entries)", _lines(list(plan.drawn), width)),
        *(_apart(plan, how, heading, width) for how, heading in _APART.items()),
        "" if plan.usage or plan.drawn or plan.written_off else "Nothing is used in this period.",
        foot(width, "stockroom buying", "stockroom plan"),
    ]
    return page(parts)


def _apart(plan: Plan, how: str, heading: str, width: int) -> str:
    uses = [use for use in plan.written_off if use.form == how]
    return section(heading, _lines(uses, width))


def differences_heading(plan: Plan) -> str:
    """How many differences from the year before are told, and by what that year is known."""
    basis = dict.fromkeys(use.basis for use in plan.usage if use.basis)
    known = ", ".join(KNOWN_BY.get(each, each) for each in basis)
    count = counted(len(plan.differences), "difference")
    return f"{count} from the year before, the biggest first ({known})"


def _differences(plan: Plan, width: int) -> str:
    title, _, known = differences_heading(plan).partition(" (")
    heading = f"{title.upper()} ({known}"
    return section(wrap(heading, width), [wrap(text, width, indent=2) for text in plan.differences])


def _compared(uses: list[Use]) -> bool:
    return any(use.before is not None for use in uses)


def _lines(uses: list[Use], width: int) -> list[str]:
    if not _compared(uses):
        return columns([(amount(use.amount, use.kind), _about(use)) for use in uses], width)
    return columns(
        [(amount(use.amount, use.kind), _before(use), _about(use)) for use in uses], width
    )


def _before(use: Use) -> str:
    return "–" if use.before is None else amount(use.before, use.kind)


def _about(use: Use) -> str:
    # of it, not besides: the total has it in already
    spare = f", {amount(use.spare, use.kind)} of it spare" if use.spare > 0 else ""
    each = ", ".join(f"{number}{TIED}{amount(part, use.kind)}" for number, part in use.by_booking)
    return f"{named(use.item, use.strength)}{spare}{_by_group(use)}{': ' + each if each else ''}"


def _by_group(use: Use) -> str:
    """What each group takes, this year and the year before, where both are known."""
    if use.before is None or not use.groups or not use.groups_before:
        return ""
    now, then = round(use.amount / use.groups), round(use.before / use.groups_before)
    return f", {amount(now, use.kind)} a group beside {amount(then, use.kind)}"
