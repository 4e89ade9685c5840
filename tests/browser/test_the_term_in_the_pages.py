"""The college's term as it goes, entered in a real browser: the same plan as by the commands."""

from __future__ import annotations

import json
import shutil
import time
import urllib.request
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest
from browsing import served
from playwright.sync_api import Browser, Locator, Page
from windows import KEY

from stockroom.web.house import House

if TYPE_CHECKING:
    from conftest import Stockroom


@dataclass(frozen=True)
class Event:
    """What happens on a day: the form and what is typed into it, and the command that says it.

    `seen` is a page and what must follow on it; `gone` what stands there before and no more.
    """

    day: str
    form: str
    typed: dict[str, str]
    command: tuple[str, ...]
    by: str = "T1"
    seen: tuple[str, str] = ("", "")
    gone: str = ""


PERMANGANATE = "potassium permanganate 0.0200 mol/dm3"

TERM = (
    Event(
        "2027-01-11",
        "look",
        {"bottle": "S03", "passed": "good", "note": "starch blank clear"},
        ("look", "S03", "--good", "--note", "starch blank clear"),
        # T08: nothing but this look hung between the shelf and an order of iodide
        seen=("/buying", "silver nitrate"),
        gone="potassium iodide",
    ),
    Event(
        "2027-01-12",
        "look",
        {"bottle": "S12", "passed": "bad", "note": "stays clear"},
        ("look", "S12", "--bad", "--note", "stays clear"),
        seen=("/bottle/S12", "did not pass; stays clear"),
    ),
    Event(
        "2027-01-15",
        "spoil",
        {"bottle": "S05", "why": "yellow tinge, iron suspected"},
        ("spoil", "S05", "--why", "yellow tinge, iron suspected"),
        by="T2",
        seen=("/bottle/S05", "set aside: decided by: yellow tinge, iron suspected"),
    ),
    Event(
        "2027-01-18",
        "shift",
        {"booking": "K06", "groups": "13"},
        ("shift", "K06", "--groups", "13"),
        seen=("/week", "4 400 cm³"),
        gone="4 048 cm³",
    ),
    Event(
        "2027-01-18",
        "arrive",
        {"line": "lithium chloride", "size": "100 g", "printed": "none", "place": "A2"},
        ("arrive", "lithium chloride", "100 g", "--printed", "none", "--place", "A2"),
        seen=("/buying", "3 orders, £40.60 in all"),
        gone="lithium chloride",
    ),
    Event(
        "2027-01-29",
        "make",
        {"line": PERMANGANATE, "volume": "4620 cm3", "sources": "B10", "place": "D1"},
        ("make", PERMANGANATE, "4620 cm3", "--from", "B10", "--place", "D1"),
        seen=("/bottle/S25", "4 620 of 4 620 cm³ left, in D1"),
    ),
    Event(
        "2027-02-01",
        "found",
        {"bottle": "S25", "strength": "0.0201 mol/dm3"},
        ("found", "S25", "0.0201 mol/dm3"),
        seen=("/day/K11", "stronger by 0.5 %: 0.0201 mol/dm³"),
    ),
    Event(
        "2027-02-02",
        "shift",
        {"booking": "K13", "on": "2027-02-09"},
        ("shift", "K13", "--on", "2027-02-09"),
        seen=("/day/K13", "K13, Tue 9 Feb 2027, 14:00"),
        gone="Thu 4 Feb 2027, 14:00",
    ),
    Event(
        "2027-02-22",
        "found",
        {"bottle": "B27", "strength": "0.11 mol/dm3", "sure": "yes"},
        ("found", "B27", "0.11 mol/dm3", "--sure"),
        seen=("/week", "from 20 cm³ of B27"),
        gone="from 11 cm³ of B27",
    ),
    Event(
        "2027-03-03",
        "found",
        {"bottle": "S02", "strength": "0.0979 mol/dm3"},
        ("found", "S02", "0.0979 mol/dm3"),
        seen=("/day/K21", "weaker by 2.1 %: 0.0979 mol/dm³"),
    ),
    Event(
        "2027-03-22",
        "spill",
        {"bottle": "B18", "amount": "2 g", "note": "knocked over"},
        ("spill", "B18", "2 g", "--note", "knocked over"),
        seen=("/use", "spilled 1 2 g silver nitrate"),
    ),
)
"""Section by section as it happens in the college, in the order of the days."""


@contextmanager
def pages_on(store: Path, day: str) -> Iterator[str]:
    """The pages of a store as at a day."""
    with served(House(store, KEY, date.fromisoformat(day))) as address:
        yield address


OPENED = (
    "form => { let over; while ((over = form.closest('details:not([open])'))) over.open = true }"
)


def reach(page: Page, event: Event) -> Locator:
    """From this week to the form of an event, as a person goes: by its number, or by Enter."""
    about = event.typed.get("bottle") or event.typed.get("booking")
    if about:
        page.fill("#line", about)
        page.keyboard.press("Enter")
        page.wait_for_url(f"**/{about}*")
    else:
        page.get_by_role("link", name="Enter", exact=True).click()
        page.locator(f'main a[href^="/do/{event.form}"]').first.click()
    form = page.locator(f'main form.event[data-form="{event.form}"]').first
    form.evaluate(OPENED)
    return form


def fill(form: Locator, typed: dict[str, str], by: str) -> None:
    """Type into a form what it shows of an event, and send it."""
    for name, value in typed.items():
        field = form.locator(f'[name="{name}"]:not([type=hidden])')
        kind = field.first.get_attribute("type") if field.count() else "none"
        if kind == "radio":
            form.locator(f'[name="{name}"][value="{value}"]').check()
        elif kind == "checkbox":
            field.check()
        elif kind != "none":
            field.fill(value)
    form.locator('[name="by"]').fill(by)
    form.locator("button").last.click()


def enter(page: Page, event: Event) -> None:
    """One event entered, and meant where the page asks whether it is."""
    fill(reach(page, event), event.typed, event.by)
    if "sure" in event.typed:
        # far from the label: the page asks, with what was typed kept
        fill(page.locator("main form.event").first, {"sure": "yes"}, event.by)
    page.locator(".said").first.wait_for()


def words_of(page: Page, address: str) -> str:
    """What a person reads on a page, on one line."""
    page.goto(address)
    told = page.locator("main").inner_text()
    return " ".join(told.replace("\u00a0", " ").split())


def plan_by_page(address: str) -> Any:
    with urllib.request.urlopen(f"{address}/api/plan") as came:
        return json.load(came)


@pytest.mark.file
def test_the_term_entered_in_the_pages_gives_the_plan_of_the_commands(
    chromium: Browser, stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    twin = Path(shutil.copy(own, tmp_path / "twin.sqlite"))
    page = chromium.new_page()
    for event in TERM:
        with pages_on(own, event.day) as address:
            if event.gone:
                assert event.gone in words_of(page, address + event.seen[0]), event
            page.goto(f"{address}/week")
            enter(page, event)
            told = plan_by_page(address)
            after = words_of(page, address + event.seen[0])
            assert event.seen[1] in after, (event, after)
            assert not event.gone or event.gone not in after, event
        done = stockroom(*event.command, "--as-at", event.day, "--by", event.by, store=twin)
        assert done.code == 0, done.err
        planned = stockroom("plan", "--as-at", event.day, "--json", store=twin)
        assert told == planned.json, event
    page.close()


AT_ONCE = """
(form, moment) => setTimeout(() => form.requestSubmit(), moment - Date.now())
"""
"""Sends a form at a moment, in milliseconds: each browser waits for it by itself."""


@pytest.mark.file
def test_of_two_browsers_drawing_from_one_bottle_at_once_one_is_told_what_is_left(
    chromium: Browser, own: Path
) -> None:
    """T1 and T2 both see 130 cm³ of S13 and draw 100: one is saved, 30 is left for the other."""
    with pages_on(own, "2027-01-20") as address:
        desks = [chromium.new_context() for _ in range(2)]
        pages = [desk.new_page() for desk in desks]
        forms = []
        for page, by in zip(pages, ("T1", "T2"), strict=True):
            page.goto(f"{address}/bottle/S13")
            forms.append(page.locator('main form.event[data-form="draw"]'))
            forms[-1].locator('[name="amount"]').fill("100 cm3")
            forms[-1].locator('[name="by"]').fill(by)
        moment = time.time() * 1000 + 300
        for form in forms:
            form.evaluate(AT_ONCE, moment)
        for page in pages:
            page.locator(".said, .field.wrong").first.wait_for()
        saved, refused = sorted(pages, key=lambda page: page.locator(".field.wrong").count())
        assert "30 cm³ left" in saved.locator(".said").inner_text()
        wrong = refused.locator(".field.wrong")
        assert "30 cm³" in wrong.inner_text()
        assert wrong.locator("input").input_value() == "100 cm3"
        told = words_of(saved, f"{address}/bottle/S13")
        assert told.count("drawn -100 cm³ 30 cm³") == 1
        assert "30 of " in told
        for desk in desks:
            desk.close()
