"""A printed date with two readings, and the entry that says which of them is right."""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadDate, NotAllowed
from stockroom.measure.days import spell_day
from stockroom.store.tables import Bottle


def readings_of(bottle: Bottle) -> tuple[date, ...]:
    """Every day the date printed on a bottle can mean, the earliest first."""
    days = bottle.printed_readings.split(";")
    return tuple(date.fromisoformat(day) for day in days if day)


def check_reading(bottle: Bottle, chosen: date) -> str:
    """The day chosen as the ledger keeps it, when the printed date can mean it.

    Raises: BadDate listing the readings; NotAllowed when there was nothing to choose.
    """
    readings = readings_of(bottle)
    if not readings:
        raise BadDate(
            f"{bottle.number} has no printed date to read as {spell_day(chosen)}.",
            "Look at it instead: a good look starts its life.",
        )
    listed = " or ".join(spell_day(day) for day in readings)
    if chosen not in readings:
        raise BadDate(
            f'{bottle.number} is printed "{bottle.printed_text}": {listed},'
            f" and not {spell_day(chosen)}.",
            f"Choose one of them: stockroom printed {bottle.number} {readings[-1]}.",
        )
    # an entry that settles nothing would only make the diary longer
    if len(readings) == 1:
        raise NotAllowed(
            f'{bottle.number} is printed "{bottle.printed_text}", which can only be {listed}.',
            "There is nothing to settle.",
        )
    return chosen.isoformat()
