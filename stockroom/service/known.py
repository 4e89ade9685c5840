"""What the planner is told, as the store stands, or on the safe side."""

from __future__ import annotations

from datetime import date

from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Facts
from stockroom.service.kept import kept
from stockroom.settings import StoreAt
from stockroom.store.reading import Reader, reading
from stockroom.store.snapshot import facts_from
from stockroom.store.snapshot_bottles import bottles_of


def known_of(
    path: StoreAt,
    as_at: date,
    start: date | None = None,
    end: date | None = None,
    *,
    cautious: bool = False,
) -> Facts:
    """The facts of the store at `path`, as `known_from`; a server reads them once while they hold.

    Raises: BadDate when the period runs backwards; StoreTrouble.
    """

    def read() -> Facts:
        with reading(path) as reader:
            return known_from(reader, as_at, start, end, cautious=cautious)

    return kept(path, "facts", (as_at, start, end, cautious), read)


def known_from(
    reader: Reader,
    as_at: date,
    start: date | None = None,
    end: date | None = None,
    *,
    cautious: bool = False,
) -> Facts:
    """The facts of a store already open, for the term or for the period given, methods worked out.

    Raises: BadDate when the period runs backwards.
    """
    known = with_derived(facts_from(reader, as_at, start, end))
    return on_the_safe_side(reader, known) if cautious else known


def on_the_safe_side(reader: Reader, known: Facts) -> Facts:
    """The same facts with every strength at its lower 95 % limit, where there is one."""
    # loaded here: only a plan on the safe side fits anything
    from stockroom.planning.cautious import with_caution
    from stockroom.store.refills import refills_of

    every = bottles_of(reader, known.as_at, gone=True)
    return with_caution(known, every, refills_of(reader, known.as_at))
