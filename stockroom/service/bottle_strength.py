"""What a bottle should hold on a day: for every bench sum and titration that starts from one."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from difflib import get_close_matches
from typing import TYPE_CHECKING

from stockroom.errors import MissingFigure, NotAllowed, UnknownName
from stockroom.findings import DO_NOT_TOUCH
from stockroom.measure.formats import format_strength
from stockroom.settings import StoreAt

if TYPE_CHECKING:
    from stockroom.planning.facts import Bottle, Facts, Line


@dataclass(frozen=True, slots=True)
class BottleStrength:
    """How a bottle stands on a day: its expected strength in `unit`, None where none is known.

    `uncertainty` is the standard one of its last result, in `unit`; `note` says how the
    strength is known, and `condition` what the bottle is by then.
    """

    number: str
    substance: str
    expected: float | None
    unit: str
    uncertainty: float | None
    note: str
    condition: str

    @property
    def words(self) -> str:
        """The strength in a sentence."""
        shown = format_strength(self.expected or 0.0, self.unit)
        return f"{self.number} is {shown}, {self.note}"


def standing(bottle: Bottle, line: Line, on: date) -> BottleStrength:
    """How a bottle stands on the day `on`. Raises: NotAllowed past its safety date."""
    from stockroom.keeping.record import CheckKind
    from stockroom.keeping.strength import last_check
    from stockroom.keeping.verdict import Condition, verdict

    judged = verdict(bottle.record, line.rules, on)
    if judged.safety and judged.condition is Condition.PAST:
        raise NotAllowed(
            f"{bottle.number} is past its safety date {judged.good_until} ({judged.decided_by}).",
            f"{DO_NOT_TOUCH.capitalize()}.",
        )
    last = last_check(bottle.record, on, CheckKind.FOUND)
    basis = f"expected on {on} from its {judged.strengths.basis} strength; {judged.condition}"
    return BottleStrength(
        number=bottle.number,
        substance=line.substance,
        expected=judged.strengths.expected,
        unit=line.unit,
        uncertainty=last.uncertainty if last else None,
        note=basis,
        condition=str(judged.condition),
    )


def bottle_among(known: Facts, number: str) -> Bottle:
    """The bottle of that number, in capitals or not. Raises: UnknownName with the nearest."""
    held = {bottle.number.casefold(): bottle for bottle in known.bottles}
    asked = number.strip().casefold()
    if asked in held:
        return held[asked]
    near = get_close_matches(asked, held, n=3, cutoff=0.3)
    named = ", ".join(held[each].number for each in near)
    raise UnknownName(
        f"No bottle {number.strip()!r} on {known.as_at}.",
        f"Nearest: {named}." if named else "None was here by that day: give another --as-at.",
    )


def strength_on(store: StoreAt, number: str, as_at: date | None) -> tuple[BottleStrength, bool]:
    """The strength a bottle is expected to have, and whether the store is the practice one.

    Raises: UnknownName; MissingFigure where none is known; NotAllowed past its safety date.
    """
    from stockroom.service.database import day_for
    from stockroom.store.snapshot import facts

    known = facts(store, day_for(store, as_at))
    bottle = bottle_among(known, number)
    found = standing(bottle, known.lines[bottle.line], known.as_at)
    if found.expected is None:
        raise MissingFigure(f"{found.number} has no strength to go by.", "Titrate it first.")
    return found, known.house.practice


def substance_in(store: StoreAt, number: str) -> str:
    """The substance a bottle holds, "" for a mixture. Raises: UnknownName."""
    from stockroom.store.reading import reading

    with reading(store) as reader:
        rows = reader.ask(
            "SELECT bottle.number, substance.substance FROM bottle"
            " JOIN line ON line.id = bottle.line_id"
            " LEFT JOIN substance ON substance.id = line.substance_id"
        )
    held = {str(each).casefold(): substance or "" for each, substance in rows}
    asked = number.strip().casefold()
    if asked not in held:
        near = ", ".join(each.upper() for each in get_close_matches(asked, held, n=3, cutoff=0.3))
        raise UnknownName(
            f"No bottle {number.strip()!r}.",
            f"Nearest: {near}." if near else "Look: stockroom past.",
        )
    return held[asked]
