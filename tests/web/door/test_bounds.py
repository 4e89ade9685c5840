"""Nothing too long is read: neither by what it says of itself nor by what comes."""

from __future__ import annotations

import asyncio
from collections.abc import Iterator
from concurrent.futures import Future, ThreadPoolExecutor
from typing import TYPE_CHECKING

import pytest

from stockroom.web.door.bounds import FIELDS, LARGEST, LARGEST_FILE, largest_at

if TYPE_CHECKING:
    from windows import Window

FORM = {"content-type": "application/x-www-form-urlencoded"}


def in_pieces(size: int) -> Iterator[bytes]:
    """A body of that many bytes which does not say how long it is."""
    yield b"form_token=x&bottle="
    for _ in range(size // 4096):
        yield b"a" * 4096


def test_what_says_it_is_too_large_is_refused_at_once(onlooker: Window) -> None:
    refused = onlooker.client.post("/do/draw", content=b"a" * (LARGEST + 1), headers=FORM)
    assert refused.status_code == 413
    assert "64 KiB" in refused.text


def test_what_does_not_say_so_is_refused_while_it_comes(onlooker: Window) -> None:
    refused = onlooker.client.post("/do/draw", content=in_pieces(2 * LARGEST), headers=FORM)
    assert refused.status_code == 413
    assert "64 KiB" in refused.text


def test_what_is_within_the_bound_is_read(onlooker: Window) -> None:
    assert (
        onlooker.client.post("/do/draw", content=in_pieces(4096), headers=FORM).status_code == 403
    )


def test_the_api_is_told_of_it_as_a_problem(onlooker: Window) -> None:
    kind = {"content-type": "application/json"}
    refused = onlooker.client.post("/api/do/draw", content=b"1" * (LARGEST + 1), headers=kind)
    assert (refused.status_code, refused.json()["status"]) == (413, 413)


def test_a_page_that_takes_a_file_takes_a_larger_one() -> None:
    assert largest_at("/bring-in") == LARGEST_FILE
    assert {largest_at(path) for path in ("/bring-inn", "/bring-in/x", "/do/draw")} == {LARGEST}


@pytest.mark.parametrize("path", ["/shelf?what=" + "a" * 9000, "/" + "a" * 3000])
def test_an_address_too_long_is_refused(onlooker: Window, path: str) -> None:
    refused = onlooker.client.get(path)
    assert refused.status_code == 414
    assert len(refused.text) < 2000


@pytest.mark.parametrize("path", ["/bottle/S13%00", "/shelf?what=%00", "/%00"])
def test_an_address_with_a_sign_that_cannot_be_read_is_refused(onlooker: Window, path: str) -> None:
    assert onlooker.client.get(path).status_code == 400


def test_a_form_with_too_many_fields_is_refused(onlooker: Window) -> None:
    body = "&".join(f"f{each}=1" for each in range(FIELDS + 1))
    assert onlooker.client.post("/do/draw", content=body, headers=FORM).status_code == 400


def test_a_form_with_a_sign_that_cannot_be_read_is_refused(onlooker: Window) -> None:
    refused = onlooker.enter("draw", bottle="S13\x00", amount="1 g")
    assert refused.status == 400


def test_what_takes_too_long_to_come_is_refused(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    from starlette.exceptions import HTTPException

    from stockroom.web.door import bounds

    async def never() -> None:
        await asyncio.sleep(60)

    monkeypatch.setattr(bounds, "SENT_WITHIN", 0.0)
    # in a thread of its own: where a browser's tests ran before, this one has a loop already
    receiving = bounds._counted(never, LARGEST)  # type: ignore[arg-type]
    with ThreadPoolExecutor() as threads:
        read: Future[object] = threads.submit(asyncio.run, receiving())  # type: ignore[arg-type]
        with pytest.raises(HTTPException) as refused:
            read.result()
    assert refused.value.status_code == 408
