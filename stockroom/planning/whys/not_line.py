"""May another line stand in for a need? By the recipe's own bars and allowed swaps."""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.planning.decisions import Answer, Plan
from stockroom.planning.facts import Facts, Line
from stockroom.planning.whys.in_short import folded
from stockroom.safety.bars import offer


def instead(facts: Facts, plan: Plan, ref: str, other: str) -> tuple[str, ...]:
    """May `other` (a line's key) stand in for a need, or for any need of a booking?

    One line per need it is allowed for; where it is allowed for none, the refusal.
    """
    wanted = ref.strip().lower()
    answers = [a for a in plan.needs if wanted in (a.ref.lower(), a.booking.number.lower())]
    return folded(rulings(facts, answers, facts.lines[other])) if answers else ()


def rulings(facts: Facts, answers: list[Answer], other: Line) -> Iterable[str]:
    """One line per need a swap is allowed for; else the refusals, one where all are alike."""
    ruled = [ruling(facts, answer, other) for answer in answers]
    # a booking may want a line twice: a swap allowed for one of them is the news
    allowed = [words for good, words in ruled if good]
    refused = dict.fromkeys(words for _, words in ruled)
    if allowed or len(refused) < 2:
        return allowed or refused
    booking = answers[0].booking
    return [
        f"{other.item} for anything in {booking.number} in {booking.recipe}: refused: "
        "not written in the recipe as an allowed swap"
    ]


def ruling(facts: Facts, answer: Answer, offered: Line) -> tuple[bool, str]:
    """May a line stand in for a need, by its recipe's bars and swaps? And the ruling in words."""
    recipe = facts.recipes[answer.booking.recipe, answer.booking.version]
    line = facts.lines[answer.line]
    good, reason = offer(recipe, line.key, offered.key, (line.substance, offered.substance))
    barred = reason.startswith("barred")
    what = "" if barred else f" for {line.item} in {answer.ref}"
    verb = "allowed" if good else "refused"
    return good, f"{offered.item}{what} in {recipe.code}: {verb}: {reason}".replace(
        f"{verb}: {verb}", verb
    )


def same_substance(facts: Facts, needs: list[Answer], other: Line) -> Iterable[str]:
    """Another strength or form of what is asked for: no swap, but something to make it from."""
    for answer in needs:
        line, method = facts.lines[answer.line], facts.methods.get(answer.line)
        if line.substance != other.substance:
            continue
        named = any(other.key in part.lines for part in (method.ingredients if method else ()))
        made = "is made from" if named else "is not made from"
        yield f"{answer.ref} asks for {line.key}, which {made} {other.key}"
