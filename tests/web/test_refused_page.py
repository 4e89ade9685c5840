"""What cannot be shown is refused on a page one can go on from, where whoever asks is known."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

from stockroom.errors import StoreTrouble
from stockroom.web import visit

if TYPE_CHECKING:
    from doors import Room
    from windows import Window

REFUSED = {
    "/bottle/S99": 404,
    "/day/K99": 404,
    "/recipe/R77": 404,
    "/no-such-page": 404,
    "/paper/no-such": 404,
    "/do/nothing": 404,
    "/bottle/S13?page=none": 422,
    "/shelf?condition=tired": 422,
}
"""Addresses nothing is shown at, and the status they are answered with."""


def test_what_cannot_be_shown_keeps_the_line_and_the_pages_at_its_top(onlooker: Window) -> None:
    for address, status in REFUSED.items():
        told = onlooker.get(address)
        assert (told.status, "This cannot be shown" in told.text) == (status, True), address
        assert ('name="line"' in told.html, ">Recipes</a>" in told.html) == (True, True), address
        # what is entered from here comes back to a page there is
        assert told.field("back") == "/week", address


@pytest.mark.file
def test_a_stranger_is_told_nothing_of_the_house(room: Room) -> None:
    told = room.client.get("/no-such-page")
    assert (told.status_code, "Quillmere" in told.text) == (404, False)
    assert 'name="line"' not in told.text


def test_where_the_store_is_the_trouble_the_page_is_plain(
    onlooker: Window, monkeypatch: pytest.MonkeyPatch
) -> None:
    def shut(*given: object) -> None:
        raise StoreTrouble("The store cannot be read.", "Look at its disc.")

    monkeypatch.setattr(visit, "front", shut)
    for address, status in (("/week", 503), ("/no-such-page", 404)):
        told = onlooker.get(address)
        assert (told.status, 'name="line"' in told.html) == (status, False)
