"""What the planner is told, from a store already open: as it stands, or on the safe side."""

from __future__ import annotations

from datetime import date

from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Facts
from stockroom.store.reading import Reader
from stockroom.store.snapshot import facts_from
from stockroom.store.snapshot_bottles import bottles_of


def known_from(
    reader: Reader,
    as_at: date,
    start: date | None = None,
    end: date | None = None,
    *,
    cautious: bool = False,
) -> Facts:
    """The facts as at a day, for the term or for the period given, methods worked out.

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
