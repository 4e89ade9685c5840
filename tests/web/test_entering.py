"""A form sent in: saved once, or refused beside the field it is about, with what was typed kept."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from stockroom.store.reading import reading

if TYPE_CHECKING:
    from windows import Window


def entries(window: Window) -> int:
    with reading(window.house.path) as reader:
        [[count]] = reader.ask("SELECT COUNT(*) FROM entry")
    return int(count)


def test_a_draw_is_saved_and_told_where_it_was_opened(window: Window) -> None:
    told = window.enter("draw", bottle="S13", amount="100 cm3", back="/enter")
    assert told.status == 200
    assert told.at.startswith("http://127.0.0.1/enter?said=")
    assert "30 cm³ left" in told.text


def test_sent_twice_a_draw_counts_once(window: Window) -> None:
    for _ in range(2):
        told = window.enter("draw", bottle="S13", amount="100 cm3", once="the same")
        assert "30 cm³ left" in told.text


def test_something_else_under_the_token_of_a_page_is_refused_and_told(window: Window) -> None:
    window.post("/initials", initials="T1", back="/enter")
    window.post("/line", line="S13 1 cm3", once="the same", back="/enter")
    before = entries(window)
    for told in (
        window.post("/line", line="S10 20 cm3", once="the same", back="/enter"),
        window.enter("lost", bottle="S10", once="the same"),
        window.enter("draw", bottle="S13", amount="2 cm3", once="the same"),
    ):
        assert (told.status, "sent already with something else" in told.text) == (409, True)
        # the page that says so can be sent
        assert told.field("once") != "the same"
    assert entries(window) == before
    assert "129 cm³ left" in window.post("/line", line="S13 1 cm3", once="the same").text


def test_what_was_mended_can_be_sent_from_the_page_that_refused_it(window: Window) -> None:
    window.enter("draw", bottle="S13", amount="1 cm3", once="the same")
    again = window.enter("draw", bottle="S13", amount="2 cm3", once="the same")
    mended = {name: again.field(name) for name in ("bottle", "amount", "once")}
    assert "127 cm³ left" in window.enter("draw", **mended).text


def test_a_day_chosen_meanwhile_makes_the_same_words_another_event(window: Window) -> None:
    window.enter("draw", bottle="S13", amount="1 cm3", once="the same")
    window.post("/as-at", as_at="2027-01-05", back="/enter")
    assert window.enter("draw", bottle="S13", amount="1 cm3", once="the same").status == 409


def test_a_refusal_stands_beside_its_field_and_keeps_what_was_typed(window: Window) -> None:
    refused = window.enter("draw", bottle="S13", amount="300 cm3")
    assert refused.status == 409
    assert refused.field("amount") == "300 cm3"
    assert 'id="f-amount-wrong"' in refused.html
    assert "130 cm³" in refused.text


def test_an_amount_nobody_can_read_is_refused_beside_it(window: Window) -> None:
    refused = window.enter("draw", bottle="S13", amount="a drop")
    assert (refused.status, 'id="f-amount-wrong"' in refused.html) == (422, True)


def test_a_form_that_is_not_ours_is_turned_away(window: Window) -> None:
    sent = {"bottle": "S13", "amount": "100 cm3", "by": "T1", "form_token": "guessed"}
    assert window.client.post("/do/draw", data=sent).status_code == 403


def test_a_make_put_right_on_its_own_page_is_told_where_there_still_is_a_page(
    window: Window,
) -> None:
    made = window.enter("make", line="starch 0.5 % w/v", volume="200 cm3", place="F1")
    found = re.search(r"entry=(\d+)&amp;back", made.html)
    assert found
    right = window.enter("put-right", entry=found[1], why="a slip", back="/bottle/S25")
    assert (right.status, "/week?said=" in right.at) == (200, True)
    assert "S25" in right.text


def test_what_an_address_tells_is_not_looked_for_where_it_is_longer_than_any_of_ours(
    window: Window,
) -> None:
    for length, told in ((200, True), (201, False)):
        token = "x" * length
        window.enter("draw", bottle="S13", amount="10 cm3", once=token)
        assert ("Drew 10 cm³" in window.get("/week", said=token).text) is told


def test_of_several_arrivals_each_can_be_put_right(window: Window) -> None:
    came = {"line": "lithium chloride", "printed": "none", "place": "A2", "count": "3"}
    told = window.enter("arrive", **came, back="/enter")
    assert len(set(re.findall(r"Put entry (\d+) right", told.text))) == 3


def test_a_make_sent_from_a_second_window_asks_first_and_is_kept_when_meant(window: Window) -> None:
    made = {"line": "potassium permanganate 0.0200 mol/dm3", "volume": "1 dm3", "sources": "B10"}
    window.enter("make", **made)
    before = entries(window)
    asked = window.enter("make", **made)
    assert (asked.status, entries(window)) == (409, before)
    assert "Again?" in asked.text
    assert window.enter("make", **made, sure="yes").status == 200
    assert entries(window) > before


def test_a_form_says_why_initials_are_asked_where_nobody_gave_any(window: Window) -> None:
    assert "Initials are asked once" in window.get("/do/make").text
    window.post("/initials", initials="T1", back="/enter")
    assert "Initials are asked once" not in window.get("/do/make").text
