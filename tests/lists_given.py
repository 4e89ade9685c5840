"""Lists given to the pages to be brought in, for tests."""

from __future__ import annotations

from typing import TYPE_CHECKING

from windows import Answer

from stockroom.store.reading import reading

if TYPE_CHECKING:
    from windows import Window


def give(window: Window, data: bytes | str, name: str = "old.csv", **fields: str) -> Answer:
    """A list given, followed to where it is shown."""
    body = data.encode() if isinstance(data, str) else data
    sent = {"form_token": window.get("/bring-in").field("form_token"), **fields}
    came = window.client.post("/bring-in", data=sent, files={"file": (name, body)})
    return Answer(came.status_code, came.text, str(came.url))


def path_of(page: Answer) -> str:
    return page.at.removeprefix("http://127.0.0.1")


def bottles(store: object) -> list[tuple[object, ...]]:
    """All bottles as they are kept, but for when they were entered."""
    with reading(store) as reader:  # type: ignore[arg-type]
        asked = "SELECT number, line_id, size, printed_text, source, remark FROM bottle ORDER BY id"
        return [tuple(row) for row in reader.ask(asked)]
