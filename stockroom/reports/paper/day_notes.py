"""What a page for the day says under its list: other than the card, guessed, waste, covered by."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date

from stockroom.planning.decisions import Answer, Make, Outcome, Plan
from stockroom.planning.facts import Booking, Facts, Recipe
from stockroom.planning.leaned_on import leaned_on
from stockroom.reports.paper.day_strengths import Known, differs, percent_off
from stockroom.reports.words import TIED, amount, named, raised

NO_REFERENCE = "no assessment reference entered"
OVERDUE = "its review is overdue"

_DAY = re.compile(r"\b\d{4}-\d{2}-\d{2}\b")
_PASSED_OVER = " not used: "


@dataclass(frozen=True, slots=True)
class Cover:
    """The local risk assessment of a recipe: its reference in words, "" where none is entered.

    `review` is the day that stands in the reference, if one does; `said` what is wrong, else "".
    """

    recipe: str
    title: str
    bookings: tuple[str, ...]
    reference: str
    review: str = ""
    said: str = ""


def different_of(
    known: Facts, plan: Plan, needs: tuple[Answer, ...], strengths: tuple[Known, ...]
) -> tuple[str, ...]:
    """What a class gets otherwise than its card says, a sentence each; none for nothing."""
    makes = {make.id: make for make in plan.makes}
    row: list[str] = []
    for need in needs:
        row += _missing(known, plan, need)
        mine = [told for told in strengths if told.ref == need.ref]
        row += [_strength_words(told) for told in mine if differs(told)]
        row += _other_bottle(need)
        row += _other_form(known, makes.get(need.make), need.booking.number)
    return tuple(amounts_tied(each) for each in dict.fromkeys(row))


def amounts_tied(text: str) -> str:
    """Words of the plan as they are printed, no amount parted from its unit or in two."""
    whole = re.sub(r"(?<=\d) (?=\d{3}\b)", TIED, raised(text))
    return re.sub(r"(?<=\d) (?=(?:cm³|dm³|mol/dm³|g|vol|%|min|h|°C)(?![a-z]))", TIED, whole)


def _missing(known: Facts, plan: Plan, need: Answer) -> Iterator[str]:
    if need.outcome not in (Outcome.SHORT, Outcome.REFUSED):
        return
    short = next((each for each in plan.short if each.ref == need.ref), None)
    why = f": {short.reason}" if short else ""
    size = short.amount if short else need.amount
    without = f"{amount(size, need.kind)} of {named(need.item, need.strength)}"
    yield f"{need.booking.number} goes without {without}{why}"
    recipe = known.recipes[need.booking.recipe, need.booking.version]
    for swap in sorted(recipe.swaps, key=lambda each: each.instead):
        if swap.line == need.line:
            yield f"{need.booking.number} may take {swap.instead} instead: {swap.note}"


def _strength_words(told: Known) -> str:
    about = "" if told.basis == "found" else "about "
    words = percent_off(told.off or 0.0).replace("by ", f"by {about}")
    return f"{told.booking} {told.item} {words}: {told.today} ({told.basis}), card {told.card}"


def _other_bottle(need: Answer) -> Iterator[str]:
    """The bottles a hand might reach for, and why it is not that one."""
    passed = [each for each in need.reasons if _PASSED_OVER in each]
    taken = ", ".join(draw.bottle for draw in need.draws if draw.bottle) or need.make or need.order
    if not passed or not taken:
        return
    words = "; ".join(each.replace(_PASSED_OVER, ", ", 1) for each in passed[:2])
    more = f"; and {len(passed) - 2} more" if len(passed) > 2 else ""
    yield f"{need.booking.number} {named(need.item, need.strength)} from {taken}, not {words}{more}"


def _other_form(known: Facts, make: Make | None, booking: str) -> Iterator[str]:
    """A make that takes something else than its method asks for first."""
    method = known.methods.get(make.line) if make else None
    if make is None or method is None:
        return
    for part in method.ingredients:
        # what is taken only while it stands there is a usual way of making it too
        usual = [line for line in part.lines if line not in part.only_if_held]
        for draw in make.sources:
            if draw.line in usual[1:]:
                made = f"{booking} {named(make.item, make.strength)} made from {draw.line}"
                yield f"{made} ({draw.bottle or draw.make or 'to come'}), not {usual[0]}"


def guessed_of(plan: Plan, needs: tuple[Answer, ...], known: Facts) -> tuple[str, ...]:
    """The guesses that these needs lean on, as the week sheet has them, a sentence each."""
    items = {bottle.number: known.lines[bottle.line].key for bottle in known.bottles}
    row = []
    for guess in leaned_on(known, plan, needs):
        whose = " ".join(filter(None, (guess.subject, items.get(guess.subject))))
        row.append(amounts_tied(f"{whose}: {guess.text}"))
    return tuple(row)


def waste_of(known: Facts, bookings: tuple[Booking, ...]) -> tuple[str, ...]:
    """What each class leaves and what becomes of it: "K27: Collect silver residues"."""
    row = []
    for booking in bookings:
        waste = known.recipes[booking.recipe, booking.version].waste
        row.append(
            amounts_tied(f"{booking.number}: {waste or 'none named: ask before it goes anywhere'}")
        )
    return tuple(row)


def cover_of(known: Facts, bookings: tuple[Booking, ...]) -> tuple[Cover, ...]:
    """The local risk assessment of each recipe of the day, once each."""
    recipes: dict[tuple[str, int], list[Booking]] = {}
    for booking in bookings:
        recipes.setdefault((booking.recipe, booking.version), []).append(booking)
    return tuple(_cover(known.recipes[key], mine) for key, mine in recipes.items())


def _cover(recipe: Recipe, bookings: list[Booking]) -> Cover:
    reference = recipe.assessment.strip()
    review = _review(reference)
    on = bookings[0].on
    said = NO_REFERENCE if not reference else OVERDUE if review and review < on else ""
    return Cover(
        recipe=recipe.code,
        title=recipe.title,
        bookings=tuple(booking.number for booking in bookings),
        reference=reference,
        review=review.isoformat() if review else "",
        said=said,
    )


def _review(reference: str) -> date | None:
    """The last day named in a reference, if there is one."""
    days = []
    for text in _DAY.findall(reference):
        try:
            days.append(date.fromisoformat(text))
        except ValueError:
            continue
    return max(days, default=None)
