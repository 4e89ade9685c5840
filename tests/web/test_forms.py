"""Every event as a form: it saves what its command saves, and refuses beside its field."""

from __future__ import annotations

import itertools
import re
import sqlite3
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.web.forms.field import by_name
from stockroom.web.forms.table import BY_NAME, FORMS

if TYPE_CHECKING:
    from windows import Window

SAVED = [
    ("arrive", "line=lithium chloride; size=100 g; printed=2029-01; place=A2", "B46: lithium"),
    ("arrive", "line=lithium chloride; printed=none; place=A2; count=2; opened=2027-01-04", "B47"),
    ("draw", "bottle=S13; amount=100 cm3; booking=K16", "30 cm³ left"),
    ("draw", "bottle=S13; amount=a third left", "about"),
    ("spill", "bottle=B18; amount=2 g; note=fell", "Spilled 2 g"),
    ("lend", "bottle=B32; amount=10 g; to=the physics store", "to the physics store"),
    ("open", "bottle=B02", "Opened"),
    ("move", "bottle=S01; place=F1", "to F1"),
    ("count", "bottle=B06; amount=640 g", "640 g"),
    ("lost", "bottle=B06; note=not on D1", "Not found"),
    ("turned-up", "bottle=B28; place=A2", "turned up at A2"),
    ("spoil", "bottle=S05; why=yellow tinge", "Set aside"),
    ("discard", "bottle=S14; how=iron waste bottle; why=past", "Discarded"),
    ("unknown", "look=brown powder; size=100 g; place=X1", "UNKNOWN"),
    ("found", "bottle=S02; strength=0.0987 mol/dm3; uncertainty=0.0002 mol/dm3", "0.0002"),
    ("look", "bottle=S03; passed=good; note=clear", "passed"),
    ("look", "bottle=S03; passed=bad; note=brown", "did not pass"),
    ("tested", "bottle=B29; peroxide=12 mg/kg", "below 25"),
    ("tested", "bottle=B29; passed=failed", "did not pass"),
    ("printed", "bottle=B21; reading=2027-05-04", "4 May 2027"),
    ("make", "line=potassium permanganate 0.0200 mol/dm3; volume=1 dm3; sources=B10", "B10"),
    ("decant", "bottle=B14; amount=250 cm3; place=A1", "Decanted 250 cm³"),
    ("order", "line=silver nitrate; packs=1; size=25 g; price=£46.00; expected=18/1/27", "£46.00"),
    ("order-planned", "order=O02", "Ordered P01"),
    ("book", "recipe=R04; on=2027-01-21; time=09:15; groups=12; department=CH", "Booked K30"),
    ("shift", "booking=K06; groups=13", "groups 11 → 13"),
    ("cancel", "booking=K06; why=class on a trip", "Dropped K06"),
    ("put-right", "entry=3; why=meant another", "Put right entry 3"),
]
"""A form, what is filled in, and what the answer says."""

REFUSED = [
    ("draw", "bottle=S13", "amount", 422),
    ("draw", "bottle=S13; tare=172 g", "amount", 422),
    ("draw", "bottle=S13; gross=heavy", "gross", 422),
    ("draw", "bottle=S99; amount=1 cm3", "bottle", 404),
    ("draw", "bottle=S13; amount=1 cm3; booking=K99", "booking", 404),
    ("draw", "bottle=S13; amount=1 cm3; on=2027-02-30", "on", 422),
    ("draw", "bottle=S13; amount=1 cm3; on=2027-01-05", "on", 422),
    ("draw", "bottle=S13; amount=1 cm3; by=TOOLONGBY", "by", 422),
    ("draw", "bottle=S13; amount=1 cm3; by=T\t1", "by", 422),
    ("count", "bottle=B06; amount=1200 g", "amount", 409),
    ("lend", "bottle=B32; amount=10 g", "to", 422),
    ("move", "bottle=S01; place=F9", "place", 404),
    ("found", "bottle=S02; strength=0.5 mol/dm3", "strength", 409),
    ("found", "bottle=S02; strength=0.1 mol/dm3; uncertainty=some", "uncertainty", 422),
    ("look", "bottle=S03", "passed", 422),
    ("look", "bottle=S03; passed=perhaps", "passed", 422),
    ("tested", "bottle=B29", "peroxide", 422),
    ("arrive", "line=hypo; printed=none", "line", 422),
    ("arrive", "line=lithium chloride", "printed", 422),
    ("arrive", "line=lithium chloride; printed=none; assay=120", "assay", 422),
    ("make", "line=potassium permanganate 0.0200 mol/dm3; volume=lots", "volume", 422),
    ("order", "line=silver nitrate; packs=1; size=26 g", "price", 422),
    ("order", "line=silver nitrate; packs=1; size=25 g; price=46.005", "price", 422),
    ("order-put-off", "order=P77; expected=2027-02-01", "order", 404),
    ("book", "recipe=R04; on=2027-01-24; time=9:15; groups=2; department=CH", "on", 409),
    ("book", "recipe=R04; on=2027-01-21; time=25:15; groups=2; department=CH", "time", 422),
    ("book", "recipe=R04; on=2027-01-21; time=9:15; groups=two; department=CH", "groups", 422),
    ("shift", "booking=K06", "on", 422),
    ("put-right", "entry=K06; why=slip", "entry", 422),
    ("put-right", "entry=3", "why", 422),
]
"""A form, what is filled in, and the field the refusal stands beside."""


def _fields(text: str) -> dict[str, str]:
    # back to a page that is quickly made
    return {"back": "/enter"} | dict(part.split("=", 1) for part in text.split("; "))


@pytest.mark.parametrize(("form", "filled", "said"), SAVED, ids=lambda each: each.split(";")[0])
def test_an_event_entered_on_a_page_is_saved_and_told(
    window: Window, form: str, filled: str, said: str
) -> None:
    told = window.enter(form, **_fields(filled))
    assert told.status == 200, told.text
    assert "said=" in told.at
    assert said.replace(" ", "") in told.text.replace(" ", "")


def test_what_was_lent_named_put_off_or_dropped_can_be_taken_back(window: Window) -> None:
    for form, filled, said in (
        ("lend", "bottle=B32; amount=10 g; to=the physics store", "54 g left"),
        ("lend-back", "bottle=B32; amount=10 g; whom=the physics store", "64 g left"),
        ("unknown", "look=white powder; size=50 g; place=X1", "at X1"),
        ("name-unknown", "bottle=B46; line=lithium chloride; evidence=its label", "lithium"),
        ("order", "line=silver nitrate; packs=2; size=25 g; price=46", "Ordered P01"),
        ("order-put-off", "order=P01; expected=2027-02-01; why=none left", "1 February 2027"),
        ("order-cancel", "order=P01; why=not wanted", "will not come"),
        ("cancel", "booking=K06", "Dropped K06"),
        ("cancel-undo", "booking=K06; why=no trip", "K06 is back"),
        ("decant", "bottle=B14; amount=250 cm3; place=A1", "B47"),
        ("mix", "first=B47; second=B14; amount=100 cm3; place=A1; size=1 dm3", "B48"),
    ):
        told = window.enter(form, **_fields(filled))
        assert (told.status, said in told.text) == (200, True), (form, told.text)


def test_a_refusal_stands_beside_the_field_it_is_about(window: Window) -> None:
    for form, filled, field, status in REFUSED:
        told = window.enter(form, **_fields(filled))
        assert f'id="f-{field}-wrong"' in told.html, (form, filled, told.text)
        assert told.status == status, (form, filled, told.text)
        assert f'href="#f-{field}"' in told.html, (form, filled)


def test_the_box_to_say_that_it_is_meant_comes_with_the_question(window: Window) -> None:
    assert "Keep it though it is odd" not in window.get("/do/count", bottle="B06").text
    asked = window.enter("count", bottle="B06", amount="1200 g")
    assert 'name="sure" value="yes"' in asked.html
    assert "--sure" not in asked.text
    told = window.enter("count", bottle="B06", amount="1200 g", sure="yes")
    assert (told.status, "1 200 g" in told.text) == (200, True)


def test_a_refused_form_keeps_every_value_choice_and_tick(window: Window) -> None:
    sent = {"bottle": "S03", "passed": "bad", "note": "a <b>bold</b> note", "on": "2029-01-01"}
    told = window.enter("look", **sent, by="ZZ", back="/shelf?what=A2")
    assert 'value="bad" checked' in told.html
    assert "a &lt;b&gt;bold&lt;/b&gt; note</textarea>" in told.html
    assert [told.field(each) for each in ("bottle", "on", "by")] == ["S03", "2029-01-01", "ZZ"]
    assert 'name="back" value="/shelf?what=A2"' in told.html
    told = window.enter("found", bottle="S02", strength="tea", sure="yes")
    assert 'name="sure" value="yes" checked' in told.html


def test_initials_once_given_stay_for_the_visit(window: Window) -> None:
    assert window.get("/do/draw").field("by") == ""
    window.enter("draw", bottle="S13", amount="1 cm3", by="T7")
    assert window.get("/do/draw").field("by") == "T7"
    told = window.post("/do/draw", bottle="S13", amount="1 cm3")
    assert (told.status, "Drew 1 cm³" in told.text) == (200, True)


def test_what_a_booking_wants_ordered_is_told_at_once(window: Window) -> None:
    asked = {"recipe": "R04", "on": "2027-03-09", "time": "9:15", "groups": "200"}
    told = window.enter("book", department="CH", **asked)
    assert re.search(r"Order \d+ × .+ more of .+, by \d+ \w+ 2027", told.text)


def test_a_booking_or_an_order_is_taken_back_by_a_link_beside_what_was_done(
    window: Window,
) -> None:
    booked = window.enter("shift", booking="K06", groups="13")
    assert "/do/shift?booking=K06&amp;groups=11&amp;back=%2Fweek" in booked.html
    dropped = window.enter("cancel", booking="K06")
    assert "/do/cancel-undo?booking=K06" in dropped.html
    ordered = window.enter("order", line="silver nitrate", packs="1", size="25 g", price="46")
    assert "/do/order-cancel?order=P01" in ordered.html


def test_before_an_entry_is_put_right_the_page_tells_what_it_says(window: Window) -> None:
    window.enter("draw", bottle="S13", amount="100 cm3", booking="K16")
    shown = window.get("/do/put-right", entry="179")
    assert "Entry 179: S13 silver nitrate 0.100 mol/dm³" in shown.text
    assert "drawn -100 cm³" in shown.text
    window.enter("put-right", entry="179", why="another bottle")
    again = window.get("/do/put-right", entry="179")
    assert "yes, by entry 180" in again.text
    assert "Entry 180" in again.text


@pytest.mark.parametrize("entry", ["99999", "9" * 19, "9" * 40, "-3", "x", "\u0663"])
def test_an_entry_that_is_not_there_is_no_fault_of_the_page(onlooker: Window, entry: str) -> None:
    told = onlooker.get("/do/put-right", entry=entry)
    assert told.status in (200, 404)
    assert "What was meant" in told.text


def test_the_way_back_leads_nowhere_else(window: Window) -> None:
    for back in ("//elsewhere.example", "javascript:alert(1)", "/\\x.example"):
        shown = window.get("/do/draw", back=back)
        assert '<a href="/">Back without entering anything</a>' in shown.html, back
        told = window.enter("draw", bottle="S13", amount="1 cm3", back=back)
        assert told.at.startswith("http://127.0.0.1/"), back


def test_a_form_nobody_knows_is_told_in_words(window: Window) -> None:
    assert window.get("/do/explode").status == 404
    assert window.enter("explode").status == 404
    assert window.get("/do/" + "x" * 300).status == 404


# -- whatever is sent, nothing half done ----------------------------------------------------

WRONG = {
    "empty": "",
    "600 signs": "x" * 600,
    "a null byte": "S13\0",
    "a bell": "S13\x07",
    "another kind": "maybe at twelve, <i>or</i> 1=1 --",
    "beyond any": "1e400 kg",
    "below nothing": "-5 cm3",
    "a day far off": "9999-12-31",
    "a great number": "9" * 60,
}
"""What no field takes in every place at once."""


def _held(window: Window) -> bytes:
    """All of the store: what is refused is not even begun, so its file stays as it is."""
    assert isinstance(window.house.path, Path)
    return window.house.path.read_bytes()


@pytest.mark.file
def test_a_form_filled_in_wrongly_saves_nothing(window: Window) -> None:
    before = _held(window)
    for form, (kind, wrong) in itertools.product(FORMS, WRONG.items()):
        told = window.enter(form.name, **{each.name: wrong for each in form.fields})
        assert 400 <= told.status < 500, (form.name, kind, told.status, told.text)
        assert _held(window) == before, (form.name, kind)


def test_two_forms_of_one_name_are_not_taken() -> None:
    with pytest.raises(ValueError, match="share a name"):
        by_name((BY_NAME["draw"], BY_NAME["draw"]))


@pytest.mark.file
def test_looking_from_another_day_in_a_house_of_ones_own_nothing_is_entered(
    window: Window,
) -> None:
    # a house of one's own, which a practice college is not
    with sqlite3.connect(str(window.house.path)) as store:
        store.execute("UPDATE house SET value = 'no' WHERE setting = 'practice'")
    window.post("/as-at", as_at="2027-02-10")
    assert "Nothing can be entered while you look" in window.get("/do/draw").text
    told = window.enter("draw", bottle="S13", amount="1 cm3", back="/enter")
    assert (told.status, "go back to today" in told.text) == (409, True)
