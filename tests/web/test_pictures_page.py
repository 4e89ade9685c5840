"""Pictures in the browser: drawn on asking, never kept, and 404 where there is nothing to draw."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from windows import Window


@pytest.mark.parametrize(
    ("path", "kind", "begins"),
    [
        ("/picture/fade/b01.svg", "image/svg+xml", b"<?xml"),
        ("/picture/fade/B01.png", "image/png", b"\x89PNG"),
        ("/picture/load.svg", "image/svg+xml", b"<?xml"),
        ("/picture/level.svg?of=potassium+iodide", "image/svg+xml", b"<?xml"),
    ],
)
def test_each_picture_is_what_its_name_says(
    onlooker: Window, path: str, kind: str, begins: bytes
) -> None:
    came = onlooker.client.get(path)
    assert (came.status_code, came.headers["content-type"]) == (200, kind)
    assert came.content.startswith(begins)
    assert came.headers["cache-control"] == "no-store"


@pytest.mark.parametrize(
    ("path", "said"),
    [
        ("/picture/fade/B36.svg", "B36"),
        ("/picture/fade/S12.svg", "nothing to draw"),
        ("/picture/fade/S99.svg", 'No bottle "S99"'),
        ("/picture/level.svg?of=xyzzy", "xyzzy"),
    ],
)
def test_where_there_is_nothing_to_draw_it_is_404_in_words(
    onlooker: Window, path: str, said: str
) -> None:
    page = onlooker.get(path)
    assert (page.status, said in page.text) == (404, True)


@pytest.mark.parametrize(
    "path", ["/picture/fade/B01.exe", "/picture/load.pdf", "/picture/level.svg", "/picture/x.svg"]
)
def test_what_is_no_picture_is_refused(onlooker: Window, path: str) -> None:
    assert onlooker.get(path).status in (404, 422)
