"""Names in a text become links, and nothing else does."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.reports.pages.links import Piece, href_of, linked


@pytest.mark.parametrize(
    ("name", "page"),
    [
        ("S13", "/bottle/S13"),
        ("S24f", "/bottle/S24f"),
        ("B02", "/bottle/B02"),
        ("K15", "/day/K15"),
        ("K15.2", "/why?ref=K15.2"),
        ("M14", "/why?ref=M14"),
        ("O03", "/why?ref=O03"),
        ("P01", "/why?ref=P01"),
        ("R04", "/recipe/R04"),
        ("2027-02-10", "/day/2027-02-10"),
    ],
)
def test_each_name_leads_to_its_page(name: str, page: str) -> None:
    assert linked(f"for {name}.") == (Piece("for "), Piece(name, page), Piece("."))
    assert href_of(name) == page


@pytest.mark.parametrize(
    "text",
    ["O2 at 0 °C", "M/50", "P280", "H302", "LAB2 in D1", "2027-13-01", "a/S13/b", "xK15", "0.100"],
)
def test_what_is_no_name_of_ours_stays_plain(text: str) -> None:
    assert linked(text) == (Piece(text),)


def test_several_names_each_lead_somewhere() -> None:
    hrefs = [piece.href for piece in linked("K16.1 48 cm³ from S13, good until 2027-09-21")]
    assert hrefs == ["/why?ref=K16.1", "", "/bottle/S13", "", "/day/2027-09-21"]


def test_two_names_are_no_one_name() -> None:
    assert href_of("S13 S14") == ""


@given(st.text(alphabet="KSBMOR0123456789.-/ abc", max_size=60))
def test_the_pieces_join_to_the_text(text: str) -> None:
    assert "".join(piece.text for piece in linked(text)) == text
