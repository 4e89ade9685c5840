"""The ledger of a bottle is shown as it was written."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from stockroom.errors import UnknownName
from stockroom.measure.amounts import Amount
from stockroom.store.diary import diary


def test_a_slip_and_its_putting_right_both_stay_to_be_seen(practice: Path) -> None:
    told = {entry.entry: entry for entry in diary(practice, "B06")}
    slip = next(entry for entry in told.values() if entry.undone_by)
    assert slip.change == Amount.grams(-500)
    assert told[slip.undone_by or 0].puts_right == slip.entry
    assert told[slip.undone_by or 0].change == Amount.grams(500)


def test_a_late_entry_has_both_its_days(practice: Path) -> None:
    late = [entry for entry in diary(practice, "s05") if entry.happened != entry.entered]
    assert (late[-1].happened, late[-1].entered) == (date(2026, 12, 18), date(2027, 1, 4))
    assert late[-1].by == "T1"


def test_an_unknown_bottle_shows_the_nearest(practice: Path) -> None:
    with pytest.raises(UnknownName, match='"B60"') as caught:
        diary(practice, "B60")
    assert "B06" in caught.value.hint


def test_what_is_left_after_each_entry_leaves_the_slip_out(practice: Path) -> None:
    left = [entry.left.number for entry in diary(practice, "B06")]
    assert left == [1000, 1000, 690, 690, 690, 640]
