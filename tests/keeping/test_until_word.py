"""The day a bottle is good until has one word everywhere: a recheck is not the end of it."""

from __future__ import annotations

from datetime import date

import pytest

from stockroom.keeping.strength import Strengths
from stockroom.keeping.verdict import Condition, Verdict

SOON, LATE = date(2027, 2, 1), date(2027, 8, 1)
NOTHING = Strengths(None, None, None, None)


@pytest.mark.parametrize(
    ("until", "recheck", "usable", "word"),
    [
        (SOON, SOON, LATE, "recheck by"),
        (SOON, SOON, None, "recheck by"),
        (SOON, LATE, SOON, "good until"),
        (SOON, None, SOON, "good until"),
        (SOON, SOON, SOON, "good until"),
    ],
)
def test_only_a_recheck_is_called_one(
    until: date, recheck: date | None, usable: date | None, word: str
) -> None:
    found = Verdict(Condition.SOUND, until, "", NOTHING, recheck, usable)
    assert found.until_word == word
