"""Whatever somebody calls it: a place, a bottle's number, or any name of a thing.

From the exact to the vague, so that a whole name never loses to a part of another.
Nothing is created, and what nobody knows is answered with the three nearest.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

from stockroom.errors import BadInput
from stockroom.measure.parsing import parse_strength
from stockroom.planning.facts import Bottle, Place
from stockroom.store.likeness import plain, unknown
from stockroom.store.line_names import LineNames, spelt


@dataclass(frozen=True, slots=True)
class Known:
    """What may be asked for by name, on one day."""

    places: Sequence[Place]
    bottles: Sequence[Bottle]
    names: Sequence[LineNames]
    gone: Sequence[Bottle]
    """Found by their numbers only: nobody looks for the rest of them."""
    numbers: Sequence[str]
    """Of every bottle there ever was, also of those not there yet that day."""
    substance: Callable[[str], str]
    """What the tables that travel along call it; asked only when the house knows nothing."""


@dataclass(frozen=True, slots=True)
class Meant:
    """What was meant: whole places, or bottles by number or by what they hold.

    `words` say it in the words of the store.
    """

    words: str
    bottles: tuple[Bottle, ...]
    places: tuple[str, ...] = ()


def meant(known: Known, asked: str) -> Meant:
    """What somebody asked for. Raises: UnknownName with the nearest three."""
    for look in (_place, _number, _name, _name_and_strength, _part_of_place, _part, _shipped):
        found = look(known, asked)
        if found is not None:
            return found
    choices = [
        *known.numbers,
        *(each for place in known.places for each in (place.name, place.title) if each),
        *(word for names in known.names for word in names.words),
    ]
    raise unknown("place, bottle or thing", asked, choices)


def _place(known: Known, asked: str) -> Meant | None:
    named = [
        place for place in known.places if plain(asked) in (plain(place.name), plain(place.title))
    ]
    return _in_places(known, named[:1])


def _in_places(known: Known, named: Sequence[Place]) -> Meant | None:
    if not named:
        return None
    short = tuple(place.name for place in named)
    words = ", ".join(f"{place.name} {place.title}".strip() for place in named)
    return Meant(words, tuple(one for one in known.bottles if one.place in short), short)


def _number(known: Known, asked: str) -> Meant | None:
    every = (*known.bottles, *known.gone)
    found = [one for one in every if plain(one.number) == plain(asked)]
    if found:
        return Meant(found[0].number, tuple(found))
    later = (one for one in known.numbers if plain(one) == plain(asked))
    return next((Meant(f"{one}, not there yet", ()) for one in later), None)


def _name(known: Known, asked: str) -> Meant | None:
    wanted = spelt(asked)
    return _held(known, asked, [x for x in known.names if wanted in (*x.words, *x.signs)])


def _name_and_strength(known: Known, asked: str) -> Meant | None:
    """ "hypo 0.2 M": the longest name first, and what is left is the strength."""
    words = asked.split()
    for end in range(len(words) - 1, 0, -1):
        named, rest = spelt(" ".join(words[:end])), " ".join(words[end:])
        alike = [
            each
            for each in known.names
            if named in (*each.words, *each.signs) and _same_strength(each.strength, rest)
        ]
        if alike:
            return _held(known, asked, alike)
    return None


def _same_strength(held: str, asked: str) -> bool:
    if not held or plain(held) == plain(asked):
        return bool(held)
    try:
        # on this bench a bare number after a name is mol/dm³
        bare = asked.replace(",", ".").replace(".", "").isdigit()
        one, other = parse_strength(held), parse_strength(f"{asked} mol/dm3" if bare else asked)
    except BadInput:
        return False
    # labels are written to three figures, so half a part in a thousand is the same strength
    return one.unit is other.unit and abs(one.value - other.value) <= 5e-4 * one.value


def _part_of_place(known: Known, asked: str) -> Meant | None:
    """ "acid cupboard" for the acids cupboard: each word begins one of the place's, in order."""
    words = plain(asked).split()
    # a single word may as well be part of what a bottle holds: that is looked at first
    return _in_places(known, _beginning(known, words)) if len(words) > 1 else None


def _beginning(known: Known, words: list[str]) -> list[Place]:
    return [place for place in known.places if words and _begins(plain(place.title), words)]


def _begins(name: str, words: list[str]) -> bool:
    rest = iter(name.split())
    return all(any(one.startswith(word) for one in rest) for word in words)


def _part(known: Known, asked: str) -> Meant | None:
    """Part of a name or of a remark; failing that, a word of a place's name."""
    part = plain(asked)
    if not part:
        return None
    keys = {each.key for each in known.names if any(part in word for word in each.words)}
    held = [one for one in known.bottles if one.line in keys or part in plain(one.remark)]
    if held or keys:
        return Meant(asked.strip(), tuple(held))
    return _in_places(known, _beginning(known, [part]))


def _shipped(known: Known, asked: str) -> Meant | None:
    substance = known.substance(asked)
    named = [x for x in known.names if substance and plain(x.substance) == plain(substance)]
    return _held(known, asked, named)


def _held(known: Known, asked: str, named: Sequence[LineNames]) -> Meant | None:
    if not named:
        return None
    keys = {each.key for each in named}
    return Meant(asked.strip(), tuple(one for one in known.bottles if one.line in keys))
