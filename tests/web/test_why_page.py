"""Why as a page: the reasons of the command, each name in them a link."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom
    from windows import Window


def together(text: str) -> str:
    """Without its spaces: a link in the middle of a line parts it from a full stop."""
    return "".join(text.split())


@pytest.mark.parametrize("ref", ["K15", "K15.2", "M01", "2027-01-25", "hypo"])
def test_the_page_gives_the_reasons_of_the_command(
    onlooker: Window, stockroom: Stockroom, ref: str
) -> None:
    told = stockroom("why", ref, store=onlooker.house.path)  # type: ignore[arg-type]
    page = onlooker.get("/why", ref=ref)
    lines = told.out.splitlines()[1:]
    assert page.status == 200
    assert [line for line in lines if together(line) not in together(page.text)] == []
    assert page.html.count("<li>") >= len(lines)


def test_names_in_the_reasons_are_links(onlooker: Window) -> None:
    page = onlooker.get("/why", ref="K15").html
    assert '<a href="/why?ref=K15.2">K15.2</a>' in page
    assert '<a href="/bottle/B02">B02</a>' in page
    assert '<a href="/day/2027-02-10">2027-02-10</a>' in page


def test_why_not_another_is_asked_beside_it(onlooker: Window) -> None:
    page = onlooker.get("/why", ref="K11", instead="S10")
    assert "Why not S10, for K11?" in page.text
    assert page.field("instead") == "S10"


@pytest.mark.parametrize(
    ("ref", "instead", "status", "field"),
    [
        ("K99", "", 404, "ref"),
        ("K11", "S99", 404, "instead"),
        ("2027-02-31", "", 404, "ref"),
    ],
)
def test_what_nobody_knows_is_refused_beside_its_field(
    onlooker: Window, ref: str, instead: str, status: int, field: str
) -> None:
    page = onlooker.get("/why", ref=ref, instead=instead)
    assert (page.status, f'id="why-{field}-wrong"' in page.html) == (status, True)
    assert page.field("ref") == ref


def test_a_name_mistyped_gets_the_nearest_as_links(onlooker: Window) -> None:
    assert '<a href="/day/K09">K09</a>' in onlooker.get("/why", ref="K99").html


def test_with_nothing_asked_it_only_asks(onlooker: Window) -> None:
    page = onlooker.get("/why")
    assert (page.status, "wrong" in page.html) == (200, False)


def test_a_name_is_never_markup(onlooker: Window) -> None:
    page = onlooker.get("/why", ref="<script>alert(1)</script>")
    assert page.status == 404
    assert "<script>alert" not in page.html
