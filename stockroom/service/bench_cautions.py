"""The cautions of a bench sum: what the house's list says of the bottle that is opened.

The words are those of `safety/cautions.py`, so that a sum and the plan say the same.
"""

from __future__ import annotations

from collections.abc import Callable

from stockroom.safety.cautions import MAKING, Goes, cautions_about
from stockroom.service.bench_names import Stuff

STRONG_PERCENT = 20.0
"""% w/w from which an acid or an alkali is concentrated here: ours, no source."""

_HEATS = frozenset({2, 3})  # of the list: acid into water, alkali into water
_STRONG_ALKALI = "Into water in portions, stirring: it heats."
_COOL = "Let it cool before making up to the mark."
_INTO_WEAK = "The stronger into the weaker, never the reverse."


def cautions_of(
    stuff: Stuff,
    *,
    solid: bool,
    strong: Callable[[], bool],
    percent: Callable[[], float | None] = lambda: None,
    mixed: bool = False,
    to_mark: bool = True,
) -> tuple[str, ...]:
    """What to say when this is weighed or poured.

    `strong` tells whether it is concentrated, `percent` its % w/w where that is known:
    both are asked only where they matter;
    `mixed` with another solution and not with water; `to_mark`: it is made up to one.
    """
    mild = _said(stuff, solid=solid, strong=False)
    strict = _said(stuff, solid=solid, strong=True)
    found = mild
    if strict != mild and strong():
        found = _said(stuff, solid=solid, strong=True, percent=percent())
    words = [text for _, text in found]
    heats = any(number in _HEATS for number, _ in found)
    if heats and mixed:
        words.append(_INTO_WEAK)
    if heats and to_mark and not any("cool" in text for text in words):
        words.append(_COOL)
    return tuple(words)


def _said(
    stuff: Stuff, *, solid: bool, strong: bool, percent: float | None = None
) -> list[tuple[int, str]]:
    thing = Goes(stuff.substance, stuff.storage_group, solid, strong, percent)
    found = [(each.number, each.text) for each in cautions_about([thing], steps=MAKING)]
    # the list speaks of alkali pellets and of ammonia; strong lye heats as pellets do
    lye = stuff.storage_group == "alkali" and stuff.substance != "ammonia"
    return [*found, (3, _STRONG_ALKALI)] if lye and strong and not solid else found
