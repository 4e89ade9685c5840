"""What stands where, for the page along the shelf: beside every place, and what the plan asks."""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import date

from stockroom.errors import UnknownName
from stockroom.findings import Danger, Finding
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Place
from stockroom.planning.on_shelf import Shelf
from stockroom.planning.standing import where_things_stand
from stockroom.service.sheets import known_and_planned
from stockroom.service.shelf import shelf
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain, unknown
from stockroom.store.reading import reading
from stockroom.store.snapshot import places_of
from stockroom.store.snapshot_bottles import bottles_of
from stockroom.store.snapshot_lines import lines_of


@dataclass(frozen=True, slots=True)
class ShelfPlanned:
    """The bottles of a place, of a thing or all of them; every place of the house; the plan.

    `place` is the one place asked about, None for all. `plan` is None for a day that is over,
    or is looked at as it was known: what was promised then nobody keeps.
    """

    shelf: Shelf
    place: Place | None
    places: tuple[Place, ...]
    plan: Plan | None = None


class NoneOfThatName(UnknownName):
    """Nothing on the shelf goes by that name; `places` are every place there is to choose from."""

    def __init__(self, error: UnknownName, places: tuple[Place, ...]) -> None:
        super().__init__(error.message, error.hint)
        self.places = places


def places(path: StoreAt) -> tuple[Place, ...]:
    """Every place of the house, in its order. Raises: StoreTrouble."""
    with reading(path) as reader:
        return tuple(places_of(reader))


def shelf_planned(
    path: StoreAt,
    what: str,
    place: str = "",
    *,
    today: date,
    on: date | None = None,
    known_on: date | None = None,
) -> ShelfPlanned:
    """The bottles meant by `what` ("" for all) that stand at `place` ("" for any), on a day.

    Raises: NoneOfThatName with the nearest three, for the place too; StoreTrouble.
    """
    every, day = places(path), on or today
    try:
        there = _place(every, place)
        asked = what or (there.name if there else "")
        found = shelf(path, asked, on=day, known_on=known_on, today=today)
    except UnknownName as error:
        raise NoneOfThatName(error, every) from error
    if not asked:
        found = replace(found, neighbours=_everywhere(found, every))
    elif there is not None:
        found = replace(found, rows=tuple(r for r in found.rows if r.bottle.place == there.name))
    if what and not found.neighbours:
        found = replace(found, neighbours=_of_those_shown(path, found, every))
    if day < today or known_on is not None:
        return ShelfPlanned(found, there, every)
    return ShelfPlanned(found, there, every, known_and_planned(path, as_at=today)[1])


def _place(every: tuple[Place, ...], asked: str) -> Place | None:
    if not asked.strip():
        return None
    for place in every:
        if plain(asked) in (plain(place.name), plain(place.title)):
            return place
    raise unknown("place", asked, [place.name for place in every])


def _of_those_shown(path: StoreAt, found: Shelf, every: tuple[Place, ...]) -> tuple[Finding, ...]:
    """What is wrong where the bottles found stand: with whatever stands beside them there."""
    shown = {row.bottle.number for row in found.rows}
    there = {row.bottle.place for row in found.rows} - {""}
    if not shown:
        return ()
    with reading(path) as reader:
        bottles = bottles_of(reader, found.on, found.known_on)
        lines = lines_of(reader)
    # a filter leaves out the other bottle, and the danger stays
    here = [one for one in bottles if one.place in there or one.number in shown]
    told = where_things_stand(here, lines, every)
    return tuple(one for one in told if shown.intersection(_all_in(one)))


def _all_in(finding: Finding) -> tuple[str, ...]:
    others = finding.others if isinstance(finding, Danger) else ()
    return (*finding.subject.split(", "), *others)


def _everywhere(found: Shelf, every: tuple[Place, ...]) -> tuple[Finding, ...]:
    # all of the house is every place as a whole
    lines = {row.line.key: row.line for row in found.rows}
    return tuple(where_things_stand((row.bottle for row in found.rows), lines, every))
