"""What a booking may ask for, whoever enters it; and the number it is given. Light."""

from __future__ import annotations

import re
from collections.abc import Iterable

from stockroom.errors import BadInput

MOST_GROUPS = 200
MOST_SPARE = 50


def checked_groups(groups: int) -> int:
    """The number of groups, when it can be meant. Raises: BadInput."""
    # 400 is likelier a slip of the keyboard than a class
    if not 1 <= groups <= MOST_GROUPS:
        raise BadInput(f"{groups} groups?", f"Give 1 to {MOST_GROUPS}.")
    return groups


def checked_spare(percent: float | None) -> int:
    """Spare in thousandths from a per cent; 10 % when not said. Raises: BadInput.

    Spare is usually 5-20 %: common practice, no source; ten unless said is a house choice.
    """
    found = 10.0 if percent is None else percent
    if not 0 <= found <= MOST_SPARE:
        raise BadInput(f"{found:g} %? Spare is usually 5-20.", f"Give 0 to {MOST_SPARE}.")
    return round(found * 10)


def next_number(letter: str, used: Iterable[str]) -> str:
    """The number after the highest ever given with this letter: K30 after K29, K01 for the first.

    Past the highest, so that a number on an old label or sheet never comes back.
    """
    numbers = [
        int(match[1]) for number in used if (match := re.fullmatch(rf"{letter}(\d+)[a-z]*", number))
    ]
    return f"{letter}{max(numbers, default=0) + 1:02d}"
