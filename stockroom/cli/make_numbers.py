"""A make named by a number that was another's on paper: said, since the paper still hangs."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from stockroom.cli.shared import Shared


def numbers_before(shared: Shared, things: Mapping[str, str]) -> list[str]:
    """What there is to say of makes by number, each with what it is: a line for each it is not.

    Asked before the sheet is printed: by then its own copy would be the newest.
    """
    from stockroom.reports.paper.make_number import another_words, number_start
    from stockroom.service.cards import copy_numbering

    told = []
    for number, thing in things.items():
        before = copy_numbering(shared.path, number_start(number))
        if before is not None:
            copy, key = before
            told.append(another_words(number, thing, key, copy))
    return [line for line in told if line]
