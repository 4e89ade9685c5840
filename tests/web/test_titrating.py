"""A titration entered on a page: the same strength as the command writes, or why not."""

from __future__ import annotations

from datetime import date
from shutil import copyfile
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom
    from windows import Window

SOUGHT = {
    "reaction": "thiosulfate on iodate",
    "titres": "25.30 25.35",
    "standard": "25.00 cm3 of 0.01667 mol/dm3",
}
"""0.0987 mol/dm³ of thiosulfate: 6 × 25.00 × 0.01667 over the mean titre."""


def test_the_strength_is_worked_out_and_kept(window: Window) -> None:
    said = window.enter("titrate", bottle="S02", **SOUGHT)
    assert said.status == 200
    assert "mean titre 25.33 cm³ of 25.30, 25.35" in said.text
    assert "0.0987" in window.get("/bottle/S02").text


def test_it_is_the_entry_that_the_command_makes(
    window: Window, stockroom: Stockroom, tmp_path: Path
) -> None:
    twin = tmp_path / "twin.sqlite"
    copyfile(str(window.house.path), twin)
    known = ("--standard", SOUGHT["standard"], "--bottle", "S02", "--by", "T1")
    stockroom(
        "--as-at", "2027-01-04", "titrate", SOUGHT["reaction"], *known, "25.30", "25.35", store=twin
    )
    window.enter("titrate", bottle="S02", **SOUGHT)
    by_command = stockroom("diary", "S02", "--json", store=twin).json["entries"][-1]
    by_page = window.api("/api/diary/S02")["entries"][-1]
    assert by_page == by_command


@pytest.mark.parametrize(
    ("changed", "field", "told"),
    [
        ({"titres": ""}, "titres", "Titres, in cm³ is empty"),
        ({"titres": "25.30,25.35.1"}, "titres", "is more than one"),
        ({"titres": "25.30 minus"}, "titres", "is not a number above 0"),
        ({"titres": "25.30 26.90"}, "within", "Not concordant"),
        ({"reaction": "thiosulfate on cheese"}, "reaction", "cheese"),
        ({"standard": ""}, "", "which strength is known?"),
        ({"assay": "0.97"}, "assay", "0.97 % of it is the substance?"),
        ({"blank": "-1"}, "blank", "is not a number from 0 up"),
        ({"bottle": "S03"}, "", "S03"),
        ({"standard": "", "titrant": "S03"}, "sample", "was in the flask"),
    ],
)
def test_what_cannot_be_is_said_beside_its_field_in_the_words_of_the_page(
    window: Window, changed: dict[str, str], field: str, told: str
) -> None:
    before = window.api("/api/diary/S02")
    said = window.enter("titrate", **({"bottle": "S02"} | SOUGHT | changed))
    assert said.status in (400, 404, 409, 422)
    assert told in said.text
    assert not field or f'id="f-{field}-wrong"' in said.html
    assert "--" not in said.text
    assert window.api("/api/diary/S02") == before


def test_far_from_the_label_it_is_kept_once_somebody_is_sure(window: Window) -> None:
    far = {"bottle": "S02"} | SOUGHT | {"titres": "10.00"}
    assert "Unusual" in window.enter("titrate", **far).text
    assert window.enter("titrate", sure="yes", **far).status == 200


def test_the_week_offers_it_beside_the_strength_that_was_found(window: Window) -> None:
    week = window.on(date(2027, 2, 22)).get("/week")
    assert "/do/titrate?bottle=" in week.html


def test_reactions_are_offered_while_somebody_types(window: Window) -> None:
    found = window.api("/names", kind="reaction", of="iodate")
    assert "thiosulfate on iodate" in [each["value"] for each in found]
