"""Every page in a real browser: at three widths, held to WCAG 2.2 AA, by keyboard, on paper."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import date
from pathlib import Path

import pytest
from browsing import WIDTHS, faults, served, too_wide
from playwright.sync_api import Browser, Page
from windows import KEY

from stockroom.web.house import House

PAGES = (
    "/week?of=2027-01-25",
    "/term",
    "/day/2027-03-23",
    "/day/K15",
    "/shelf",
    "/shelf?what=hypo",
    "/bottle/B01",
    "/bottle/S02",
    "/bottle/B36",
    "/recipe",
    "/recipe/R04",
    "/buying",
    "/use",
    "/bring-in",
    "/rules",
    "/try",
    "/why?ref=K15.1",
    "/paper",
    "/enter",
    "/do/draw?bottle=S13",
    "/do/arrive",
    "/come-in",
)
"""Each kind of page, with something on it."""


@pytest.fixture(scope="module")
def address(practice: Path, tmp_path_factory: pytest.TempPathFactory) -> Iterator[str]:
    """The pages of the practice college on the Monday of a busy week."""
    with served(House(practice, KEY, date(2027, 1, 25))) as at:
        yield at


@pytest.fixture(scope="module")
def opened(chromium: Browser) -> Iterator[tuple[Page, list[str]]]:
    """One page that goes from address to address, and every error the browser reports of it."""
    page, wrong = chromium.new_page(), list[str]()
    page.on("pageerror", lambda error: wrong.append(str(error)))
    page.on("console", lambda said: wrong.append(said.text) if said.type == "error" else None)
    yield page, wrong
    page.close()


@pytest.mark.parametrize("path", PAGES)
def test_a_page_can_be_used_by_everybody_at_every_width(
    opened: tuple[Page, list[str]], address: str, path: str
) -> None:
    page, wrong = opened
    wrong.clear()
    came = page.goto(address + path)
    assert came is not None
    assert came.status == 200
    assert page.locator("h1").count() == 1
    for name, (wide, high) in WIDTHS.items():
        page.set_viewport_size({"width": wide, "height": high})
        assert too_wide(page) <= 0, name
        # between the two there is nothing that one of them has not
        assert name == "tablet" or faults(page) == [], name
    assert wrong == []
