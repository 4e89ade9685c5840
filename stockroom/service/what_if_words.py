"""What is supposed in a what-if, as somebody types it: one word for each thing.

`where` is the name of the option, or of the parameter, that it was typed after.
"""

from __future__ import annotations

from stockroom.errors import BadInput
from stockroom.measure.days import parse_day, parse_time
from stockroom.service.typed import whole
from stockroom.service.what_if import Extra, Shift


def resized(word: str, where: str) -> tuple[str, int]:
    """A booking and its groups, from "K08=11". Raises: BadInput."""
    number, groups = _halves(word, where, "K08=11")
    return number, whole(groups, where)


def shifted(word: str, where: str) -> Shift:
    """A booking and its day or time, from "K08=2027-01-27,14:00". Raises: BadInput, BadDate."""
    number, rest = _halves(word, where, "K08=2027-01-27")
    parts = [part.strip() for part in rest.split(",")]
    times = [part for part in parts if ":" in part]
    days = [part for part in parts if ":" not in part]
    if len(times) > 1 or len(days) > 1:
        raise BadInput(
            f"{where} {word!r} has more than a day and a time.", "As K08=2027-01-27,14:00."
        )
    on = parse_day(days[0], where=where) if days else None
    return Shift(number, on, parse_time(times[0], where=where) if times else None)


def booked(word: str, where: str) -> Extra:
    """One class more, from "R01,2027-02-11,12,09:15,CH". Raises: BadInput, BadDate."""
    # by spaces as well, as it is said aloud; a title with spaces wants the commas
    parts = [part.strip() for part in (word.split(",") if "," in word else word.split())]
    parts = [part for part in parts if part and part not in ("group", "groups")]
    if not 3 <= len(parts) <= 5:
        raise BadInput(
            f"{where} {word!r} is not a recipe, a day and groups.",
            f"Write it as {where} R01,2027-02-11,12, or with 09:15,CH behind it.",
        )
    recipe, day, count, *rest = parts
    times = [part for part in rest if ":" in part]
    payers = [part for part in rest if ":" not in part]
    if len(times) > 1 or len(payers) > 1:
        raise BadInput(f"{where} {word!r} ends with {rest}.", "One time and one department may.")
    number = whole(count.removesuffix("groups").strip(), where)
    minute = parse_time(times[0], where=where) if times else None
    return Extra(recipe, parse_day(day, where=where), number, minute, "".join(payers))


def _halves(word: str, where: str, pattern: str) -> tuple[str, str]:
    number, equals, rest = word.partition("=")
    if not equals or not number.strip() or not rest.strip():
        raise BadInput(f"{where} {word!r} is not {pattern}.", f"Write it as {where} {pattern}.")
    return number.strip(), rest.strip()
