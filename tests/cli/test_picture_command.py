"""Pictures: in words, as data, alone and on a page; black and greys only, the same bytes twice."""

from __future__ import annotations

import io
import re
import xml.etree.ElementTree as ET
from pathlib import Path
from typing import TYPE_CHECKING, Any

import paper_reading as paper
import pytest

if TYPE_CHECKING:
    from conftest import Stockroom

EACH = [["fade", "B01"], ["load"], ["level", "potassium iodide"]]


def colours(svg: str) -> set[str]:
    """Every colour written in it that is no grey."""
    found = {one.lower() for one in re.findall(r"(?:fill|stroke)[:=]\s*\"?(#\w{3,6})", svg)}
    return {one for one in found if len({one[1:3], one[3:5], one[5:7]}) > 1}


def test_a_planted_colour_is_told() -> None:
    assert colours('<path style="fill: #ff0000; stroke: #111111"/>') == {"#ff0000"}


@pytest.mark.parametrize("words", EACH, ids=" ".join)
def test_alone_it_is_grey_and_the_same_twice(
    words: list[str], practice: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    made = []
    for name in ("one.svg", "two.svg"):
        told = stockroom("picture", *words, "--print", str(tmp_path / name), store=practice)
        assert told.code == 0, told.err
        made.append((tmp_path / name).read_text(encoding="utf-8"))
    assert made[0] == made[1]
    assert ET.fromstring(made[0]).tag.endswith("svg")
    assert colours(made[0]) == set()
    assert "<dc:date>" not in made[0]


def test_a_png_is_grey(practice: Path, stockroom: Stockroom, tmp_path: Path) -> None:
    from PIL import Image

    target = tmp_path / "load.png"
    assert stockroom("picture", "load", "--print", str(target), store=practice).code == 0
    with Image.open(io.BytesIO(target.read_bytes())) as picture:
        assert "Software" not in picture.info
        found: list[Any] = picture.convert("RGB").getcolors(maxcolors=1 << 24) or []
    assert all(red == green == blue for _, (red, green, blue) in found)
    assert len(found) > 2


def test_on_a_page_it_has_head_foot_and_number(
    own: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    target = tmp_path / "fade.pdf"
    told = stockroom("picture", "fade", "B01", "--print", str(target), store=own)
    assert "copy 0001" in told.said
    pdf = target.read_bytes()
    assert paper.sizes_mm(pdf) == [(297.0, 210.0)]
    assert "Strength of B01 hydrogen peroxide" in paper.words(pdf)
    assert paper.outside(pdf) == []
    assert paper.greys_only(pdf)


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (["pie"], '"pie" is no picture'),
        (["fade"], "which bottle?"),
        (["level"], "which stock line?"),
        (["load", "B01"], '"B01" was named'),
        (["load", "--below", "80 vol"], "80 vol"),
        (["load", "--print", "load.gif"], "load.gif"),
        (["fade", "B999"], "B999"),
    ],
    ids=lambda part: " ".join(part) if isinstance(part, list) else "",
)
def test_what_cannot_be_drawn_is_refused_by_name(
    words: list[str], said: str, practice: Path, stockroom: Stockroom
) -> None:
    told = stockroom("picture", *words, store=practice)
    assert told.code in (1, 2)
    assert said in told.err


def test_the_points_of_a_load_are_the_plan_s(practice: Path, stockroom: Stockroom) -> None:
    days = stockroom("picture", "load", "--json", store=practice).json["days"]
    about = stockroom("picture", "load", "--json", store=practice).json["head"]["about"]
    total = sum(day["makes"] + day["checks"] for day in days)
    assert about.startswith(f"{total} minutes planned on {len(days)} days")
