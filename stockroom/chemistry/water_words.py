"""The words of a name that say how much water a salt holds: it decides the mass to weigh."""

from __future__ import annotations

import re

_TIMES = "hemi|mono|sesqui|di|tri|tetra|penta|hexa|hepta|octa|nona|deca|dodeca"

WATER_WORD = rf"(?:anhydrous|(?:{_TIMES})?hydrate)"
"""A pattern of such a word, in small letters. The prefixes are the trade's: common practice."""

_FORM = re.compile(rf"(?P<name>.+?),? (?P<form>{WATER_WORD})\b(?P<rest>.*)")


def parted(name: str) -> tuple[str, str, str]:
    """A name, its form and what follows: ("sodium carbonate", "anhydrous", "").

    The first such word counts. A name without one, or of nothing else, is given back whole.

    >>> parted("sodium carbonate, anhydrous 1 mol/dm3")
    ('sodium carbonate', 'anhydrous', ' 1 mol/dm3')
    """
    found = _FORM.fullmatch(name)
    return (found["name"], found["form"], found["rest"]) if found else (name, "", "")
