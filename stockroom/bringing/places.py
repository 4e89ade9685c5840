"""Which place a cell means, by its short name, its long one, or one word of it."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from stockroom.bringing.known import House, KnownPlace
from stockroom.bringing.name_words import spelt

NOT_FOUND = "not found"
NO_PLACE = "none"

_NOT_THERE = frozenset(
    "lost; missing; not found; cannot find; cant find; can't find; gone missing; ?; where; "
    "somewhere; not there".split("; ")
)
# what the cold place is called on a bench; common practice, no source
_COLD = ("fridge", "refrigerator", "cold store", "cold room")


@dataclass(frozen=True, slots=True)
class PlaceMatch:
    """The place a cell means, or what is offered; `missing` where it says nobody can find it."""

    place: KnownPlace | None = None
    offered: tuple[str, ...] = ()
    missing: bool = False


@dataclass(frozen=True)
class Places:
    """The places of a house, looked up by what a list calls them."""

    house: House

    @cached_property
    def _named(self) -> dict[str, KnownPlace]:
        known = {spelt(each.name): each for each in self.house.places if each.name}
        return known | {spelt(each.place): each for each in self.house.places}

    @cached_property
    def _seen(self) -> dict[str, PlaceMatch]:
        return {}

    def knows(self, text: str) -> bool:
        """Whether it is the name of a place in full."""
        return spelt(text) in self._named

    def find(self, text: str) -> PlaceMatch:
        """The place meant; the question is for the caller to put."""
        if text not in self._seen:
            self._seen[text] = self._find(text)
        return self._seen[text]

    def _find(self, text: str) -> PlaceMatch:
        plain = spelt(text.rstrip("?! ")) or "?"
        if plain in self._named:
            return PlaceMatch(self._named[plain])
        if plain in _NOT_THERE:
            return PlaceMatch(offered=(NOT_FOUND,), missing=True)
        fitting = [place for place in self.house.places if _fits(plain, place)]
        if len(fitting) == 1:
            return PlaceMatch(fitting[0])
        if fitting:
            return PlaceMatch(offered=tuple(place.place for place in fitting[:3]))
        shown = {spelt(name): place.place for name, place in self._named.items()}
        near = self.house.nearest(plain, shown)
        return PlaceMatch(offered=tuple(dict.fromkeys(shown[name] for name in near)))


def _fits(plain: str, place: KnownPlace) -> bool:
    words = spelt(place.name).split()
    if any(cold in plain for cold in _COLD):
        return any(cold in spelt(place.name) for cold in _COLD)
    # "acids" of "acids cupboard", "acid cupboard" too: each word begins one of the place's
    return bool(plain) and all(
        any(word.startswith(each) for word in words)
        or each in (spelt(place.place), "cupboard", "shelf", "cabinet")
        for each in plain.split()
    )
