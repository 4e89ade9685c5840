"""A form sent in: saved once, or refused beside the field it is about, with what was typed kept."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from windows import Window


def test_a_draw_is_saved_and_told_where_it_was_opened(window: Window) -> None:
    told = window.enter("draw", bottle="S13", amount="100 cm3", back="/enter")
    assert told.status == 200
    assert told.at.startswith("http://127.0.0.1/enter?said=")
    assert "30 cm³ left" in told.text


def test_sent_twice_a_draw_counts_once(window: Window) -> None:
    for _ in range(2):
        told = window.enter("draw", bottle="S13", amount="100 cm3", once="the same")
        assert "30 cm³ left" in told.text


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
