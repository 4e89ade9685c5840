"""What labels are made from: bottles with their verdicts and hazards, and batches of the plan."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from datetime import date

from stockroom.errors import BadInput, NotAllowed, StockroomError
from stockroom.measure.workdays import Calendar
from stockroom.planning.decisions import Make
from stockroom.planning.facts import Bottle, Facts, Line, Place
from stockroom.planning.on_shelf import OnShelf, on_shelf
from stockroom.planning.tell import inherited_doubt
from stockroom.safety.clp import Classification
from stockroom.safety.hazards import Hazards
from stockroom.service.hazard_names import House, house_of
from stockroom.service.hazards import of_kept_line
from stockroom.service.sheets import known_and_planned
from stockroom.service.shelf_finding import Known, meant
from stockroom.settings import StoreAt
from stockroom.store.likeness import unknown
from stockroom.store.line_names import line_names
from stockroom.store.reading import Reader, reading
from stockroom.store.snapshot import places_of
from stockroom.store.snapshot_bottles import bottles_of

ALL = "all"
_MAKE = re.compile(r"[Mm][0-9]+")

Step = Callable[[int, int], None]
"""Told after each label: how many are ready, of how many."""


@dataclass(frozen=True, slots=True)
class Labelled:
    """What was asked for, in that order and each once. `house` is its name."""

    house: str
    practice: bool
    places: tuple[Place, ...]
    bottles: tuple[tuple[OnShelf, Hazards, str], ...]
    """Each with its hazards and the doubt it has from what it was made from, "" for none."""
    batches: tuple[tuple[Make, Line, Hazards], ...]


def labelled(
    path: StoreAt, what: Sequence[str], place: str = "", *, as_at: date, step: Step | None = None
) -> Labelled:
    """The bottles and batches asked for: numbers, makes, names of things, `all`; or a place.

    A bottle that is gone has a label by its number only; `all` and a place leave out empty ones.
    Raises: BadInput for nothing asked, UnknownName with the nearest, NotAllowed where a name
    finds nothing on the shelf.
    """
    if not what and not place:
        raise BadInput("Labels of what?", "Name bottles: stockroom label S02 B14; or a make: M14.")
    ids = [word.strip().upper() for word in what if _MAKE.fullmatch(word.strip())]
    words = [word for word in what if not _MAKE.fullmatch(word.strip())]
    makes = _makes(path, ids, as_at)
    with reading(path) as reader:
        # its texts are looked up as they are asked for, so all of it is asked in here
        house = house_of(reader, as_at)
        lines, places = house.recipes.lines, places_of(reader)
        every = bottles_of(reader, as_at, gone=True)
        wanted = _bottles(reader, every, places, words, place)
        rows = {r.bottle.number: r for r in on_shelf(wanted, lines, places, as_at, every)}
        known = Facts(as_at, as_at, as_at, Calendar(), lines=dict(lines), bottles=every)
        bottles: list[tuple[OnShelf, Hazards, str]] = []
        for bottle in wanted:
            hazards = _hazards(house, lines[bottle.line], bottle)
            doubt = inherited_doubt(known, bottle)
            bottles.append((rows[bottle.number], hazards, doubt))
            if step:
                step(len(bottles), len(wanted))
        batches = tuple((m, lines[m.line], _hazards(house, lines[m.line])) for m in makes)
        settings = reader.pairs("SELECT setting, value FROM house")
    name, practice = settings.get("name", ""), settings.get("practice") == "yes"
    return Labelled(name, practice, tuple(places), tuple(bottles), batches)


def _bottles(
    reader: Reader,
    every: tuple[Bottle, ...],
    places: Sequence[Place],
    words: Sequence[str],
    place: str,
) -> tuple[Bottle, ...]:
    """Those asked for, in the order asked, each once."""
    if not words and not place:
        return ()
    standing = [each for each in every if each.left and not each.record.gone]
    others = [each for each in every if each not in standing]
    numbers = [each.number for each in every]
    known = Known(places, standing, line_names(reader), others, numbers, lambda _: "")
    found: dict[str, Bottle] = {}
    for word in (*words, *filter(None, [place])):
        if word.strip().lower() == ALL:
            here: Iterable[Bottle] = standing
        else:
            answer = meant(known, word)
            if word == place and not answer.places:
                raise unknown("place", place, [each.name for each in places])
            here = answer.bottles
        if not here:
            raise NotAllowed(f"{word}: nothing of it stands there.", "Ask: stockroom shelf")
        found |= {each.number: each for each in here}
    return tuple(found.values())


def _makes(path: StoreAt, ids: Sequence[str], as_at: date) -> list[Make]:
    """The batches of the plan by their numbers. Raises: UnknownName with the nearest."""
    if not ids:
        return []
    _, plan = known_and_planned(path, as_at=as_at)
    makes = {make.id: make for make in plan.makes}
    for each in ids:
        if each not in makes:
            raise unknown("make", each, makes)
    return [makes[each] for each in dict.fromkeys(ids)]


def _hazards(house: House, line: Line, bottle: Bottle | None = None) -> Hazards:
    """The hazards, or "not entered" with the reason where they cannot be worked out."""
    try:
        return of_kept_line(house, line, bottle)
    except StockroomError as trouble:
        lacking = Classification(notes=(trouble.message,), unknown=(line.key,), entered=False)
        return Hazards(line.key, "", lacking, line=line.key)
