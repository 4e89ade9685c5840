"""What our script adds in a real browser: names, keys, a scanner, and a form sent once."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import date
from pathlib import Path

import pytest
from browsing import served
from playwright.sync_api import Browser, Page, Route, expect
from windows import KEY

from stockroom.web.house import House

FOCUSED = "document.activeElement.id"
SCANNED = """
for (const key of ["S", "1", "3", "Enter"]) {
  const pressed = { key, bubbles: true, cancelable: true };
  document.body.dispatchEvent(new KeyboardEvent("keydown", pressed));
}
"""


@pytest.fixture
def page(own: Path, chromium: Browser) -> Iterator[Page]:
    """The form of a draw, in a store of one's own."""
    with served(House(own, KEY, date(2027, 1, 4))) as address:
        context = chromium.new_context(base_url=address)
        opened = context.new_page()
        opened.goto("/do/draw")
        yield opened
        context.close()


def test_names_are_offered_while_somebody_types(page: Page) -> None:
    page.locator("#f-bottle").press_sequentially("hypo")
    page.locator("#f-bottle-names option").first.wait_for(state="attached")
    offered = page.locator("#f-bottle-names option")
    assert offered.first.get_attribute("value") == "B06"
    assert offered.first.get_attribute("label") == "B06 sodium thiosulfate pentahydrate"


def test_keys_lead_to_the_line_and_to_pages(page: Page) -> None:
    page.keyboard.press("/")
    expect(page.locator("#line")).to_be_focused()
    page.evaluate("document.activeElement.blur()")
    for key in "ge":
        # faster than a hand would be taken for a scanner
        page.wait_for_timeout(120)
        page.keyboard.press(key)
    page.wait_for_url("**/enter")
    page.wait_for_timeout(120)
    page.keyboard.press("?")
    page.wait_for_url("**/enter#keys")


def test_two_keys_typed_at_once_are_a_way_to_a_page_and_no_scan(page: Page) -> None:
    page.evaluate(SCANNED.replace('"S", "1", "3", "Enter"', '"g", "e"'))
    page.wait_for_url("**/enter")


def test_three_signs_are_too_few_for_a_scanner(page: Page) -> None:
    page.evaluate(SCANNED.replace('"S", "1", "3", "Enter"', '"S", "1", "Enter"'))
    assert page.locator("#line").input_value() == ""


def test_in_a_field_a_key_is_only_a_letter(page: Page) -> None:
    page.locator("#f-note, #f-booking").first.press_sequentially("g/e?", delay=80)
    assert page.locator("#f-booking").input_value() == "g/e?"
    assert page.url.endswith("/do/draw")


def test_keys_can_be_switched_off_and_stay_so(page: Page) -> None:
    page.goto("/enter")
    page.locator("#use-keys").uncheck()
    page.goto("/do/draw")
    page.keyboard.press("/")
    assert page.evaluate(FOCUSED) != "line"
    page.goto("/enter")
    assert not page.locator("#use-keys").is_checked()


def test_a_scanned_number_lands_in_the_line_wherever_one_is(page: Page) -> None:
    # all at once, as a scanner types: a busy machine would put pauses between
    page.evaluate(SCANNED)
    assert page.locator("#line").input_value() == "S13 "
    expect(page.locator("#line")).to_be_focused()


def test_what_a_hand_types_slowly_is_no_scan(page: Page) -> None:
    page.keyboard.type("S13", delay=120)
    page.wait_for_timeout(120)
    page.keyboard.press("Enter")
    assert page.locator("#line").input_value() == ""


def test_a_form_pressed_twice_is_sent_once(page: Page) -> None:
    sent: list[str] = []

    def hold(route: Route) -> None:
        sent.append(route.request.post_data or "")
        route.fulfill(status=204)

    page.route("**/do/draw", hold)
    for field, value in (("bottle", "S13"), ("amount", "1 cm3"), ("by", "T1")):
        page.fill(f"#f-{field}", value)
    page.locator(".alone .event > button").dblclick()
    page.keyboard.press("Enter")
    page.wait_for_timeout(200)
    assert len(sent) == 1


def test_after_a_refusal_the_wrong_field_has_the_focus(page: Page) -> None:
    page.fill("#line", "S13 900 cm3")
    page.press("#line", "Enter")
    page.locator("#f-by-wrong").wait_for()
    expect(page.locator("#f-by")).to_be_focused()
    page.fill("#f-by", "T1")
    page.press("#f-by", "Enter")
    page.locator("#f-amount-wrong").wait_for()
    expect(page.locator("#f-amount")).to_be_focused()
    page.fill("#f-amount", "100 cm3")
    page.press("#f-amount", "Enter")
    page.locator(".said").wait_for()
    assert "30 cm³ left" in page.locator(".said").inner_text()
