"""Names offered while somebody types: any of a thing's names finds it, the likest first."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import pytest

if TYPE_CHECKING:
    from windows import Window


def _names(window: Window, kind: str, of: str) -> list[str]:
    found: Any = window.api("/names", kind=kind, of=of)
    return [each["value"] for each in found]


@pytest.mark.parametrize(
    ("kind", "of", "first"),
    [
        ("line", "hypo", "sodium thiosulfate pentahydrate"),
        ("line", "Na2S2O3", "sodium thiosulfate"),
        ("line", "pottasium iodide", "potassium iodide"),
        ("bottle", "S1", "S10"),
        ("bottle", "hypo", "B06"),
        ("place", "acid", "A1"),
        ("place", "a1", "A1"),
        ("booking", "k1", "K10"),
        ("recipe", "cross", "R04"),
        ("department", "chem", "CH"),
        ("all", "s13", "S13"),
        ("all", "hyp", "sodium thiosulfate pentahydrate"),
        ("all", "iodine clock", "K08"),
    ],
)
def test_any_name_of_a_thing_finds_it(onlooker: Window, kind: str, of: str, first: str) -> None:
    assert _names(onlooker, kind, of)[0].startswith(first)


def test_at_most_twelve_are_offered_each_told_from_the_others(onlooker: Window) -> None:
    found: Any = onlooker.api("/names", kind="bottle", of="b")
    assert len(found) == 12
    assert found[0] == {"value": "B01", "words": "B01 hydrogen peroxide 100 vol"}
    assert len({each["words"] for each in found}) == 12


def test_the_name_that_was_typed_stands_in_the_words(onlooker: Window) -> None:
    # a browser leaves out of its list what does not hold the signs typed
    found: Any = onlooker.api("/names", kind="line", of="hypo")
    assert all("hypo" in each["words"] for each in found)


def test_what_was_thrown_away_is_not_offered(window: Window) -> None:
    assert "S14" in _names(window, "bottle", "S14")
    window.enter("discard", bottle="S14", how="iron waste", why="past", back="/enter")
    assert "S14" not in _names(window, "bottle", "S14")
    window.enter("put-right", entry="179", why="slip", back="/enter")
    assert "S14" in _names(window, "bottle", "S14")


@pytest.mark.parametrize("of", ["", "  ", "zzzzqq", "'; DROP TABLE bottle; --"])
def test_nothing_like_it_is_an_empty_answer(onlooker: Window, of: str) -> None:
    assert _names(onlooker, "bottle", of) == []


@pytest.mark.parametrize(
    "query", [{"kind": "cats", "of": "x"}, {"kind": "x" * 99, "of": "x"}, {"of": "x" * 101}]
)
def test_a_question_nobody_may_ask_is_refused(onlooker: Window, query: dict[str, str]) -> None:
    assert onlooker.get("/names", **query).status == 422
