"""What things give where they meet, if that is more dangerous than they are.

No line of a recipe names it, so the list of cautions would not know of it otherwise.
"""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.safety.cautions import Goes

_FORMED = ((("silver nitrate", "silver sulfate"), ("ammonia",), "ammoniacal silver"),)
"""One of the first with one of the second. Source: the letter behind caution 6."""


def formed_of(things: Iterable[Goes]) -> tuple[Goes, ...]:
    """What they give together, as the list of cautions asks of it; none for nothing of note.

    >>> [each.substance for each in formed_of([Goes("silver nitrate"), Goes("ammonia")])]
    ['ammoniacal silver']
    """
    names = {each.substance for each in things}
    return tuple(
        Goes(gives)
        for first, second, gives in _FORMED
        if names & set(first) and names & set(second) and gives not in names
    )
