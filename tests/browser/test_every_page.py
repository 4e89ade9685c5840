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


@pytest.fixture(params=list(WIDTHS))
def page(request: pytest.FixtureRequest, chromium: Browser) -> Iterator[Page]:
    """A page at one of the widths, which fails the test on any error the browser reports."""
    wide, high = WIDTHS[request.param]
    opened = chromium.new_page(viewport={"width": wide, "height": high})
    wrong: list[str] = []
    opened.on("pageerror", lambda error: wrong.append(str(error)))
    opened.on("console", lambda said: wrong.append(said.text) if said.type == "error" else None)
    yield opened
    opened.close()
    assert not wrong


@pytest.mark.parametrize("path", PAGES)
def test_a_page_can_be_used_by_everybody_at_every_width(
    page: Page, address: str, path: str
) -> None:
    came = page.goto(address + path)
    assert came is not None
    assert came.status == 200
    assert page.locator("h1").count() == 1
    assert too_wide(page) <= 0
    assert faults(page) == []
