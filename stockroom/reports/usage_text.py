"""What the term uses, by solution and in bought form, and what was drawn so far."""

from __future__ import annotations

from stockroom.planning.decisions import Plan, Use
from stockroom.reports.sheet import columns, foot, head, page, section, spanning
from stockroom.reports.words import TIED, amount, named

FORMS = {
    "solution": "SOLUTIONS",
    "stock": "STOCK SOLUTIONS THEY ARE MADE FROM",
    "bought": "IN BOUGHT FORM",
}
"""Each `Use.form` with its heading, in the order they are printed."""


def usage_text(plan: Plan, width: int) -> str:
    """Totals by solution and in bought form, with spare shown apart, and by booking.

    A dilution is counted once: as itself among the solutions, and in the bought
    form it is made from.
    """
    parts = [
        head(plan, width, f"What is used {spanning(plan)}"),
        *(
            section(heading, _lines([use for use in plan.usage if use.form == form], width))
            for form, heading in FORMS.items()
        ),
        section("DRAWN SO FAR (from the entries)", _lines(list(plan.drawn), width)),
        "" if plan.usage or plan.drawn else "Nothing is used in this period.",
        foot(width, "stockroom buying", "stockroom plan"),
    ]
    return page(parts)


def _lines(uses: list[Use], width: int) -> list[str]:
    return columns([(amount(use.amount, use.kind), _about(use)) for use in uses], width)


def _about(use: Use) -> str:
    # of it, not besides: the total has it in already
    spare = f", {amount(use.spare, use.kind)} of it spare" if use.spare > 0 else ""
    each = ", ".join(f"{number}{TIED}{amount(part, use.kind)}" for number, part in use.by_booking)
    return f"{named(use.item, use.strength)}{spare}{': ' + each if each else ''}"
