"""A request is answered under the house's own names only."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from windows import KEY

from stockroom.web.door.hosts import is_ours
from stockroom.web.house import House

if TYPE_CHECKING:
    from windows import Window

ALONE = House(Path("house.sqlite"), KEY)
SHARED = replace(ALONE, door=Path("d"), names=("localhost", "prep", "prep.local"))


@pytest.mark.parametrize(
    "host",
    ["127.0.0.1", "127.0.0.1:8765", "localhost:9000", "LOCALHOST", "[::1]:8765", "localhost."],
)
def test_this_machine_answers_to_its_own_names(host: str) -> None:
    assert is_ours(ALONE, host)


@pytest.mark.parametrize(
    "host",
    [
        None,
        "",
        "elsewhere.example",
        "127.0.0.1.elsewhere.example",
        "localhost.elsewhere.example:8765",
        "192.168.1.20",
        "127.0.0.1:port",
        "127.0.0.1@elsewhere.example",
        "localhost:80:80",
        "[::1",
        "::1",
    ],
)
def test_this_machine_answers_to_no_other(host: str | None) -> None:
    assert not is_ours(ALONE, host)


@pytest.mark.parametrize("host", ["prep:8765", "prep.local", "192.168.1.20:8765", "[fe80::1]:8765"])
def test_a_shared_house_answers_to_its_names_and_to_addresses_in_figures(host: str) -> None:
    assert is_ours(SHARED, host)


@pytest.mark.parametrize("host", ["elsewhere.example", "prep.elsewhere.example", "1.2.3", "", None])
def test_a_shared_house_answers_to_no_other_name(host: str | None) -> None:
    assert not is_ours(SHARED, host)


def test_a_name_that_was_made_to_lead_here_gets_no_page(onlooker: Window) -> None:
    refused = onlooker.client.get("/week", headers={"host": "elsewhere.example"})
    assert refused.status_code == 421
    assert "Quillmere" not in refused.text
    assert "set-cookie" not in refused.headers
