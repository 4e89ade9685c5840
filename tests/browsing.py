"""Real Chromium on real pages: a server on this machine, a browser, and a judge of access.

`STOCKROOM_TEST_BROWSER` names the browser, `STOCKROOM_TEST_AXE` the file axe.min.js of the
npm package axe-core; where one is named and not there, that is an error. Where none is named, a
browser is looked for on the path, and without one these tests are passed over.
"""

from __future__ import annotations

import os
import shutil
import threading
import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any

import pytest
import uvicorn
from playwright.sync_api import Browser, Page, sync_playwright

from stockroom.web.app import house_app
from stockroom.web.house import House

NAMES = ("chromium", "chromium-browser", "google-chrome", "google-chrome-stable")
# in a container there is no sandbox to be had; the rest keeps it from asking the network
FLAGS = (
    "--no-sandbox --disable-gpu --disable-quic --no-first-run --disable-background-networking "
    "--disable-component-update --disable-sync"
).split()
WIDTHS = {"desk": (1280, 900), "tablet": (800, 1100), "phone": (360, 740)}
"""The windows a page is looked at in."""

STANDARD = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa", "best-practice"]
"""The rules a page is held to: WCAG 2.2 at level AA, by axe-core's names for them."""


def browser_path() -> str:
    """The browser named, else one on the path; "" for none. Raises: where the one named is not."""
    named = os.environ.get("STOCKROOM_TEST_BROWSER", "")
    if named and not Path(named).is_file():
        raise FileNotFoundError(f"STOCKROOM_TEST_BROWSER names {named}, and there is none")
    return named or next(filter(None, map(shutil.which, NAMES)), "")


@contextmanager
def chromium_open() -> Iterator[Browser]:
    """A browser without a window, for as long as the block. Skips where there is none."""
    path = browser_path()
    if not path:
        pytest.skip("no Chromium: install Debian's package, or name one in STOCKROOM_TEST_BROWSER")
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=path, args=FLAGS)
        yield browser
        browser.close()


@contextmanager
def served(house: House) -> Iterator[str]:
    """The address of a server on this machine with the pages of a house, for the block.

    Answers are kept while it runs, as they are where the pages are really served.
    """
    config = uvicorn.Config(house_app(house), port=0, log_level="warning", lifespan="on")
    server = uvicorn.Server(config)
    thread = threading.Thread(target=server.run, daemon=True)
    thread.start()
    while not server.started:
        if not thread.is_alive():
            raise RuntimeError("the server ended before it listened")
        time.sleep(0.01)
    port = server.servers[0].sockets[0].getsockname()[1]
    try:
        yield f"http://127.0.0.1:{port}"
    finally:
        server.should_exit = True
        thread.join(10)


def faults(page: Page) -> list[str]:
    """What axe-core finds wrong with the page as it stands, a line each: none is what is wanted."""
    named = os.environ.get("STOCKROOM_TEST_AXE", "")
    if not named:
        pytest.skip("no axe-core: name its axe.min.js in STOCKROOM_TEST_AXE")
    if page.evaluate("typeof axe === 'undefined'"):
        # evaluated by the browser itself, so the page's own strict content policy stays in force
        page.evaluate(Path(named).read_text(encoding="utf-8"))
    found: Any = page.evaluate(_RUN, STANDARD)
    return [
        f"{one['id']} ({one['impact']}): {node['html'][:160]} – {node['failureSummary']}"
        for one in found["violations"]
        for node in one["nodes"]
    ]


def too_wide(page: Page) -> int:
    """By how many points the page is wider than its window: 0 where nothing scrolls sideways."""
    return int(page.evaluate("document.documentElement.scrollWidth - window.innerWidth"))


# only what is wrong is wanted, and nothing is fetched to look at it
_RUN = "tags => axe.run({runOnly: tags, resultTypes: ['violations'], preload: false})"
