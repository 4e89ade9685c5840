"""How strong a bottle is found, and expected, for whoever chooses among several."""

from __future__ import annotations

from datetime import date
from typing import TYPE_CHECKING

from stockroom.keeping.record import CheckKind
from stockroom.planning.amounts import per_gram
from stockroom.planning.facts import Bottle, Form, Line

if TYPE_CHECKING:
    from stockroom.planning.choosing.shelf import Shelf


def last_found(bottle: Bottle) -> int:
    """The day, as a number, of the last strength found of it; 0 when never."""
    found = [c.on for c in bottle.record.checks if c.kind is CheckKind.FOUND and c.passed]
    return max(found).toordinal() if found else 0


def solute_held(shelf: Shelf, line: Line, number: str, on: date) -> float | None:
    """The strength a bottle is expected to hold on a day, in the line's unit.

    Of a solid what a gram holds, by the bottle's own assay; None where it has none.
    """
    if line.form is Form.SOLID:
        return per_gram(line, shelf.bottle[number])
    opened = shelf.opening(number) or on
    return shelf.verdict(number, on, opened=opened).strengths.expected
