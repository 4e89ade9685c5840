"""What a bottle should hold on a day, for a bench sum that starts from it."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from difflib import get_close_matches
from pathlib import Path

from stockroom.errors import MissingFigure, UnknownName


@dataclass(frozen=True, slots=True)
class BottleStrength:
    """The expected strength of a bottle, in words too, and how well its last result was known."""

    number: str
    line: str
    substance: str
    value: float
    unit: str
    uncertainty: float | None
    words: str
    practice: bool


def bottle_strength(store: Path, number: str, as_at: date | None) -> BottleStrength:
    """The strength a bottle is expected to have. Raises: UnknownName, MissingFigure."""
    from stockroom.keeping.record import CheckKind
    from stockroom.keeping.strength import last_check
    from stockroom.keeping.verdict import verdict
    from stockroom.measure.formats import format_strength
    from stockroom.service.database import day_for
    from stockroom.store.snapshot import facts

    on = day_for(store, as_at)
    known = facts(store, on)
    held = {bottle.number.upper(): bottle for bottle in known.bottles}
    bottle = held.get(number.upper())
    if bottle is None:
        near = ", ".join(get_close_matches(number.upper(), held, n=3, cutoff=0.3))
        raise UnknownName(f"No bottle {number!r} on {on}.", f"Nearest: {near}." if near else "")
    line = known.lines[bottle.line]
    judged = verdict(bottle.record, line.rules, on)
    expected = judged.strengths.expected
    if expected is None:
        raise MissingFigure(f"{bottle.number} has no strength to go by.", "Titrate it first.")
    last = last_check(bottle.record, on, CheckKind.FOUND)
    basis = f"expected on {on} from its {judged.strengths.basis} strength; {judged.condition}"
    return BottleStrength(
        number=bottle.number,
        line=line.key,
        substance=line.substance,
        value=expected,
        unit=line.unit,
        uncertainty=last.uncertainty if last else None,
        words=f"{bottle.number} is {format_strength(expected, line.unit)}, {basis}",
        practice=known.house.practice,
    )


def substance_in(store: Path, number: str) -> str:
    """The substance a bottle holds, "" for a mixture. Raises: UnknownName."""
    from stockroom.store.reading import reading

    with reading(store) as reader:
        found = reader.ask(
            "SELECT substance.substance FROM bottle JOIN line ON line.id = bottle.line_id"
            " LEFT JOIN substance ON substance.id = line.substance_id"
            " WHERE upper(bottle.number) = ?",
            number.strip().upper(),
        )
    if not found:
        raise UnknownName(f"No bottle {number!r}.", "Look: stockroom past.")
    return found[0][0] or ""
