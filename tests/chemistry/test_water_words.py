"""Names with their water of crystallisation: what is taken apart, and what is left whole."""

from __future__ import annotations

import pytest

from stockroom.chemistry.water_words import parted


@pytest.mark.parametrize(
    ("name", "form", "rest"),
    [
        ("sodium carbonate", "anhydrous", ""),
        ("sodium carbonate", "decahydrate", ""),
        ("calcium sulfate", "hemihydrate", ""),
        ("sodium percarbonate", "sesquihydrate", ""),
        ("manganese(II) chloride", "tetrahydrate", ", old stock"),
        ("iron(III) nitrate", "nonahydrate", " 98 %"),
        ("hydrazine", "hydrate", ""),
    ],
)
@pytest.mark.parametrize("joint", [", ", " "])
def test_a_form_is_taken_apart(name: str, joint: str, form: str, rest: str) -> None:
    assert parted(f"{name}{joint}{form}{rest}") == (name, form, rest)


@pytest.mark.parametrize(
    "name", ["sodium carbonate", "carbohydrate", "hydrated lime", "decahydrates", "anhydrous", ""]
)
def test_a_name_without_one_is_left_whole(name: str) -> None:
    assert parted(name) == (name, "", "")
