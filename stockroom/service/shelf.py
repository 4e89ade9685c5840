"""What stands where, on a day: one place, one bottle, or every bottle of a thing."""

from __future__ import annotations

from datetime import date

from stockroom.planning.on_shelf import Shelf, on_shelf
from stockroom.planning.standing import where_things_stand
from stockroom.service.shelf_finding import Known, Meant, meant
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain
from stockroom.store.line_names import line_names
from stockroom.store.reading import reading
from stockroom.store.snapshot import places_of
from stockroom.store.snapshot_bottles import bottles_of
from stockroom.store.snapshot_lines import lines_of


def shelf(
    path: StoreAt, what: str, *, on: date, known_on: date | None = None, today: date | None = None
) -> Shelf:
    """The bottles meant by `what`, every one for "", as they stood on a day, in shelf order.

    As it was, by all that is known now; with `known_on`, as it was known by the end of that day.
    A day after `today` is a forecast. An emptied bottle is listed until it is discarded, a
    discarded one by its number only.
    Raises: UnknownName with the nearest three; StoreTrouble.
    """
    with reading(path) as reader:
        every = bottles_of(reader, on, known_on, gone=True)
        here = tuple(one for one in every if one.left or not one.record.gone)
        found = Meant("", here)
        places, lines = places_of(reader), lines_of(reader)
        if what.strip():
            gone = [one for one in every if one not in here]
            numbers = [row[0] for row in reader.ask("SELECT number FROM bottle ORDER BY number")]
            known = Known(places, here, line_names(reader), gone, numbers, _shipped)
            found = meant(known, what)
        settings = reader.pairs("SELECT setting, value FROM house")
        stands = found.bottles if found.places else ()
        return Shelf(
            found.words,
            on,
            on_shelf(found.bottles, lines, places, on, every),
            settings.get("name", ""),
            settings.get("practice") == "yes",
            known_on,
            tuple(where_things_stand(stands, lines, places)),
            today is not None and on > today,
        )


def _shipped(name: str) -> str:
    # loaded here: only a name the house does not know reads the tables that travel along
    from stockroom.service.bench_tables import other_names

    return other_names().get(plain(name), "")
