"""What changed as a value: nothing of a kept plan's numbering leads to another thing's page."""

from __future__ import annotations

from datetime import date
from typing import TYPE_CHECKING

import pytest

from stockroom.reports.pages.changed import ChangedPage, changed_page_of
from stockroom.service.ordering import order_planned
from stockroom.service.printed_plans import changed, keep_told

if TYPE_CHECKING:
    from pathlib import Path

DAY = date(2027, 1, 4)


@pytest.fixture
def told(own: Path) -> ChangedPage:
    keep_told(own, as_at=DAY, by="T1")
    order_planned(own, "O01", expected=None, on=None, today=DAY, by="P1")
    since = changed(own, as_at=DAY)
    return changed_page_of(since.comparison, against=since.against, by=since.by)


def test_what_was_ordered_is_done_and_its_old_number_no_link(told: ChangedPage) -> None:
    done = next(section for section in told.sections if section.heading == "Done")
    number, words = done.rows[0]
    assert [piece.href for piece in number] == [""]
    assert "ordered 2027-01-04 by P1" in "".join(piece.text for piece in words)


def test_the_first_line_and_who_kept_it_are_as_the_command_says(told: ChangedPage) -> None:
    assert "since plan 0001" in told.first
    assert told.about == "kept as at Mon 4 Jan 2027 by T1, held against Mon 4 Jan 2027"
