"""What a bottle held on days gone by: the least of them, and those below nothing."""

from __future__ import annotations

import sqlite3
from contextlib import closing
from datetime import date
from pathlib import Path

import pytest

from stockroom.store.days_held import least_held
from stockroom.store.reading import reading
from stockroom.store.verify import verify


def december(day: int) -> date:
    return date(2026, 12, day)


def write(path: Path, *told: tuple[str, int, int]) -> None:
    """Entries of S13 past the ledger's own questions: its kind, what changed in cm³, the day."""
    with closing(sqlite3.connect(path)) as raw:
        for kind, change, day in told:
            raw.execute(
                "INSERT INTO entry (bottle_id, kind, happened_on, entered_on, entered_at, by,"
                " change, strength_text, reason, note, booking) SELECT id, ?, ?, '2027-01-04',"
                " '2099-01-01', 'T1', ?, '', '', '', '' FROM bottle WHERE number = 'S13'",
                (kind, december(day).isoformat(), 1000 * change),
            )
        raw.commit()


# 130 cm³ were counted on 18 December; then, in the order they were entered
STORY = (("drawn", -120, 28), ("counted", 60, 30), ("drawn", -30, 21), ("counted", 30, 30))


@pytest.mark.file
@pytest.mark.parametrize(
    ("since", "until", "least"),
    [
        (19, 21, (19, 130)),
        (19, 22, (21, 100)),
        (21, 28, (21, 100)),
        (25, 31, (28, -20)),
        (29, 30, (29, -20)),
        (30, 31, (30, 70)),
        (30, 30, None),
    ],
)
def test_the_least_is_of_the_days_between(
    own: Path, since: int, until: int, least: tuple[int, int] | None
) -> None:
    write(own, *STORY)
    with reading(own) as reader:
        bottle = reader.ask("SELECT id FROM bottle WHERE number = 'S13'")[0][0]
        found = least_held(reader, bottle, december(since), december(until))
    assert found == (least and (december(least[0]), 1000 * least[1]))


@pytest.mark.file
def test_a_day_below_nothing_is_found_though_no_entry_ever_was(own: Path) -> None:
    """Each balance in the order of entering is above nothing, and so is what there is now."""
    write(own, *STORY)
    (fault,) = verify(own).faults
    assert (fault.subject, fault.check) == ("S13", "balance")
    assert fault.text == "held -20 cm³ at the end of 2026-12-28, by the entries up to it"
    assert "count S13 --on 2026-12-28" in fault.mend
    write(own, ("counted", 20, 28))
    assert not verify(own).faults
