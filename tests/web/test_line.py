"""The one line at the top of a page: a number is gone to, an amount behind it is a draw."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

from stockroom.web.door.roles import Role
from stockroom.web.door.session import Session, cookie_name, moment, written

if TYPE_CHECKING:
    from windows import Window

LEADS = {
    "S13": "/bottle/S13",
    "  s13 ": "/bottle/S13",
    "b05A": "/bottle/B05a",
    "K15": "/day/K15",
    "r04": "/recipe/R04",
    "M14": "/why?ref=M14",
    "o03": "/why?ref=O03",
    "P01": "/why?ref=P01",
    "K15.1": "/why?ref=K15.1",
    "2027-01-25": "/day/2027-01-25",
    "hypo": "/shelf?what=hypo",
    "acids cupboard": "/shelf?what=acids%20cupboard",
    "sodium thiosulfate 0.1 M": "/shelf?what=sodium%20thiosulfate%200.1%20M",
    "K15 and more": "/shelf?what=K15%20and%20more",
    "2,4-DNP & <b>": "/shelf?what=2%2C4-DNP%20%26%20%3Cb%3E",
    "../../etc": "/shelf?what=..%2F..%2Fetc",
    "": "/week",
}
"""What is typed, and where it leads."""

DRAWN = {
    "S13 10 cm3": ("10 cm³", ""),
    "s13 10cm3 K16": ("10 cm³", "K16"),
    "S13  10 cm3  for k16": ("10 cm³", "K16"),
    "S13 about 10 cm3 K16": ("about 10 cm³", "K16"),
    "S13 nearly empty for K16": ("about", "K16"),
}
"""What is typed, and the amount and the booking of the draw it is."""


def _sent(window: Window, line: str) -> tuple[int, str]:
    token = window.get("/enter").field("form_token")
    fields = {"form_token": token, "once": "one", "back": "/week", "line": line}
    came = window.client.post("/line", data=fields, follow_redirects=False)
    return came.status_code, came.headers.get("location", "")


def test_a_number_or_a_name_leads_to_its_page(window: Window) -> None:
    assert {typed: _sent(window, typed) for typed in LEADS} == {
        typed: (303, where) for typed, where in LEADS.items()
    }


def test_a_link_leads_where_the_line_would_and_enters_nothing(onlooker: Window) -> None:
    came = onlooker.client.get("/go", params={"what": "K15"}, follow_redirects=False)
    assert came.headers["location"] == "/day/K15"
    shown = onlooker.get("/go", what="S13 100 cm3 K16")
    assert [shown.field(each) for each in ("bottle", "amount", "booking")] == [
        "S13", "100 cm3", "K16",
    ]  # fmt: skip
    assert "Entry 179" not in onlooker.get("/do/put-right", entry="179").text


@pytest.mark.parametrize("typed", DRAWN)
def test_a_number_and_an_amount_are_a_draw(window: Window, typed: str) -> None:
    window.post("/initials", initials="T1", back="/enter")
    told = window.post("/line", line=typed, back="/enter")
    amount, booking = DRAWN[typed]
    assert "said=" in told.at
    assert f"Drew {amount}" in told.text
    entry = window.get("/do/put-right", entry="179").text
    assert (f"for {booking}" in entry.replace("for  ", "for ")) == bool(booking)


def test_sent_twice_the_line_draws_once(window: Window) -> None:
    window.post("/initials", initials="T1", back="/enter")
    for _ in range(2):
        told = window.post("/line", line="S13 100 cm3", once="the same", back="/enter")
        assert "30 cm³ left" in told.text


def test_without_initials_they_are_asked_for_and_what_was_typed_is_kept(window: Window) -> None:
    asked = window.post("/line", line="S13 100 cm3 K16", back="/enter")
    assert (asked.status, 'id="f-by-wrong"' in asked.html) == (422, True)
    kept = {each: asked.field(each) for each in ("bottle", "amount", "booking")}
    assert kept == {"bottle": "S13", "amount": "100 cm3", "booking": "K16"}
    told = window.enter("draw", **kept, back="/enter")
    assert "30 cm³ left" in told.text
    # from the refused page the way back is a page too
    assert window.get("/line", said="x").status == 200


@pytest.mark.parametrize(
    ("typed", "field", "said"),
    [
        ("S13 900 cm3", "amount", "130 cm³"),
        ("S13 tea", "amount", "Write a number and a unit"),
        ("S13 100", "amount", "S13"),
        ("S99 10 cm3", "bottle", "Nearest: S09"),
        ("S13 10 cm3 for K99", "booking", "Nearest: K09"),
        ("S13 10 cm3 K99", "booking", "K99"),
        ("S13 for K16", "amount", "how much was drawn?"),
    ],
)
def test_a_draw_that_is_refused_is_the_form_filled_in(
    window: Window, typed: str, field: str, said: str
) -> None:
    window.post("/initials", initials="T1", back="/enter")
    told = window.post("/line", line=typed)
    assert 400 <= told.status < 500
    assert f'id="f-{field}-wrong"' in told.html
    assert said in told.text
    assert told.field("bottle") == typed.split()[0]


@pytest.mark.parametrize(
    ("typed", "nearest"),
    [("S99", "S09; S19; B09"), ("K99", "K09"), ("R77", "R07"), ("b600", "B01")],
)
def test_a_number_nobody_gave_is_told_with_the_nearest(
    window: Window, typed: str, nearest: str
) -> None:
    told = window.post("/line", line=typed)
    assert told.status == 404
    assert f"Nearest: {nearest}" in told.text.replace(" ;", ";")


@pytest.mark.parametrize("typed", ["K99", "r77", "x" * 201, '"><b>' * 41])
def test_what_leads_nowhere_stands_in_the_line_again_with_why_beside_it(
    window: Window, typed: str
) -> None:
    told = window.post("/line", line=typed, back="/enter?a=b")
    assert (told.status in (404, 422), told.field("line")) == (True, typed)
    assert 'aria-invalid="true" aria-describedby="line-wrong"' in told.html
    assert 'id="line-wrong"' in told.html
    assert "<b>" not in told.html
    assert told.field("back") == "/enter?a=b"


def test_the_nearest_numbers_are_links_and_a_link_that_leads_nowhere_says_the_same(
    window: Window,
) -> None:
    for told in (window.post("/line", line="K99"), window.get("/go", what="K99")):
        assert (told.status, '<a href="/day/K09">K09</a>' in told.html) == (404, True)
        assert told.field("line") == "K99"


def test_a_draw_mended_in_the_line_comes_back_to_where_it_was_typed(window: Window) -> None:
    window.post("/initials", initials="T1", back="/enter")
    wrong = window.post("/line", line="S99", back="/enter")
    told = window.post("/line", line="S13 100 cm3", back=wrong.field("back"))
    assert ("/enter?said=" in told.at, "30 cm³ left" in told.text) == (True, True)


def test_a_way_back_that_leads_elsewhere_is_not_followed_from_the_line(window: Window) -> None:
    wrong = window.post("/line", line="S99", back="//elsewhere.example/x")
    assert "elsewhere.example" not in wrong.html


def test_whoever_only_reads_goes_where_the_line_says_and_draws_nothing(window: Window) -> None:
    reader = Session("drawn by lot", Role.READ, born=moment())
    window.client.cookies.set(cookie_name(window.house), written(window.house, reader))
    assert window.post("/line", line="S13").at.endswith("/bottle/S13")
    told = window.post("/line", line="S13 100 cm3")
    assert (told.status, "needs the role record" in told.text) == (403, True)
    assert window.get("/go", what="S13 100 cm3").at.endswith("/bottle/S13")
    assert window.get("/do/draw").status == 403
    assert "/do/draw" not in window.get("/enter").html


@pytest.mark.parametrize("typed", ["x" * 201, "S13\0", "S13\x07 10 cm3", "S13 10 cm3\n\x1b"])
def test_what_no_line_holds_is_refused(window: Window, typed: str) -> None:
    assert window.post("/line", line=typed).status in (400, 422)
