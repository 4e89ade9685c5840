"""A bench sum as it is printed: nothing parts a number from itself or from its unit."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.reports.bench_text import bench_text, sum_json
from stockroom.service.bench import Named, Sum

ANSWER = "58.04 cm³ of 18 M sulfuric acid and 455.3 cm³ of 1 M acid, which come to 1 000 cm³"


@given(st.integers(20, 120))
def test_no_line_breaks_in_a_number_or_before_its_unit(width: int) -> None:
    lines = bench_text(ANSWER, ["within ±0.47 %, 1 995 cm³ over"], width=width).splitlines()
    assert not any(line.split()[-1].rstrip(",").replace(".", "").isdigit() for line in lines)
    assert not any(line.split()[0].strip(",;") in ("000", "995", "cm³", "%") for line in lines)


def test_a_caution_stands_beside_the_answer_and_brings_the_house_line() -> None:
    lines = bench_text("1 g", ["molar mass 2 g/mol"], ["Hot."]).splitlines()
    assert lines[:3] == ["1 g", "  ! Hot.", "  molar mass 2 g/mol"]
    assert lines[3].strip().startswith("Local rules")


@pytest.mark.parametrize("cautions", [(), []])
def test_without_a_caution_there_is_no_house_line(cautions: tuple[str, ...]) -> None:
    assert bench_text("1 g", ["so"], cautions) == "1 g\n  so"


def test_a_bench_sum_gives_its_answer_first() -> None:
    assert bench_text("6.16 cm3 of B01", ("density 1.1",)) == "6.16 cm³ of B01\n  density 1.1"


def test_a_bench_sum_is_numbers_with_their_units() -> None:
    amounts = (Named("B01", 6.1579123, "cm3"), Named("made up to", 500.0, "cm3"))
    data = sum_json(Sum("6.16 cm3", 6.1579123, "cm3", amounts=amounts, ways=(amounts,)))
    assert (data["value"], data["unit"], data["text"]) == (6.15791, "cm3", "6.16 cm³")
    assert data["amounts"][1] == {"what": "made up to", "value": 500.0, "unit": "cm3"}
    assert data["ways"] == [data["amounts"]]
