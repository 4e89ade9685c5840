"""The order of the numbers on labels: K99 before K100, B05a before B05b."""

from __future__ import annotations

import re
from functools import lru_cache

Natural = tuple[str, int, str]

_NUMBERED = re.compile(r"(\D*)(\d*)(.*)", re.DOTALL)


@lru_cache(maxsize=65536)
def natural(number: str) -> Natural:
    """A key that sorts label numbers as a person does: letters, then the number, then the rest."""
    # a label may carry anything; only its first number counts as one
    match = _NUMBERED.fullmatch(number)
    assert match is not None, number
    return match[1], int(match[2] or 0), match[3]
