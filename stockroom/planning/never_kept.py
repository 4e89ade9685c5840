"""What is never kept: why it is dangerous, and how long it stands at the most."""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.measure.days import format_time
from stockroom.planning.decisions import Watch
from stockroom.planning.facts import Line, Recipe
from stockroom.planning.making.make_card import goes_of
from stockroom.safety.cautions import Step, cautions_about
from stockroom.safety.formed import formed_of


def dangers_of(how: str, recipe: Recipe, lines: Iterable[Line]) -> tuple[str, ...]:
    """Why what is mixed from these lines is never kept; none where it is said already.

    `how` is what is said of mixing and destroying it. In the words of the line itself, and of
    the list of cautions: also of what the lines give where they meet, which no line names.
    """
    known = list(lines)
    said = (recipe.handling, recipe.waste, how)
    never = [line for line in known if line.never_kept]
    own = [f"{line.item}: {line.never_kept}" for line in never if line.never_kept != how]
    things = [*map(goes_of, never), *formed_of(map(goes_of, known))]
    listed = cautions_about(things, said=(*said, *own), steps=(Step.MIX,))
    return tuple(dict.fromkeys([*own, *(each.text for each in listed)]))


def standing_of(watch: Watch) -> str:
    """How long it will have stood by the latest time, counted from the earliest mixing.

    The latest time is counted from the end of the class; the mixture ages from its mixing.
    """
    hours, minutes = divmod(watch.destroy_by - watch.not_before, 60)
    span = " ".join([f"{hours} h"] * bool(hours) + [f"{minutes} min"] * bool(minutes))
    mixed = format_time(watch.not_before % 1440)
    return f"Mixed at {mixed} it has stood {span} by then: sooner is better."
