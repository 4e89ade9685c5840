"""What is done with what is left of a make: the same words on the make card and the week sheet."""

from __future__ import annotations

from collections.abc import Sequence

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Make
from stockroom.planning.facts import Line
from stockroom.planning.making.make_card import goes_of
from stockroom.reports.words import measured, raised
from stockroom.safety.cautions import Step, cautions_about

TOO_LITTLE = 5_000
"""What is left over below this, in µL, is not worth a word. Our choice."""

_COLLECT = "Collect"
"""How the house begins a caution that sends what is left into a container."""


def over_words(make: Make, line: Line) -> str:
    """How much is over and what is done with it: "324 cm³ over: pour away"; "" for too little."""
    if make.heel < TOO_LITTLE:
        return ""
    doing = "collect it" if collected(make.cautions, line) else "pour away"
    doing = "label it and keep it" if make.heel_kept else doing
    return f"{measured(make.heel, Kind.VOLUME)} over: {doing}"


def collected(cautions: Sequence[str], line: Line) -> bool:
    """Whether what is left goes into a container and not down the sink.

    `cautions` are those of making it, the house's own among them.
    """
    # a caution speaks of where it goes: a sheet must not send to the sink what is collected
    listed = cautions_about([goes_of(line)], steps=(Step.WASTE,))
    written = any(said.startswith(_COLLECT) for said in cautions)
    return written or any(each.collects for each in listed)


def clearing_words(cautions: Sequence[str], line: Line) -> tuple[str, ...]:
    """What is said of clearing it away: where it goes, and then what it must never meet."""
    said = [raised(each) for each in cautions]
    where = [each for each in said if each.startswith(_COLLECT)]
    never = [each for each in said if each.startswith("Never")]
    # the list of cautions adds what the house has not said of it
    added = cautions_about([goes_of(line)], said=said, steps=(Step.WASTE,))
    return (*where, *(raised(each.text) for each in added), *never)
