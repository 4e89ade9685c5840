"""Limits are read from the shipped table and the house's own rows, which come first."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest
from limits_held import SEEDS
from sqlmodel import select

from stockroom.errors import BadInput
from stockroom.safety.limits import Basis
from stockroom.service.database import add_row
from stockroom.service.hazards import hazards_of, hazards_of_makes
from stockroom.service.plan import to_make
from stockroom.store.engine import writing
from stockroom.store.hazards import limit_book, limit_from
from stockroom.store.reading import reading
from stockroom.store.tables import Hazard, Substance

FIRST_DAY = date(2027, 1, 4)


def enter(path: Path, substance: str, hazard_class: str, code: str) -> None:
    """One row of the house's own, past whatever would look at it on the way in."""
    with writing(path) as session:
        found = session.exec(select(Substance).where(Substance.substance == substance)).one()
        assert found.id is not None
        row = Hazard(
            substance_id=found.id, hazard_class=hazard_class, h_code=code, basis="harmonised"
        )
        session.add(row)


def test_a_name_is_found_in_any_spelling_of_its_capitals() -> None:
    book = limit_book(SEEDS)
    assert book.of("Sodium Hydroxide") == book.of("sodium hydroxide") != ()


def test_the_first_name_that_has_any_counts_and_a_stranger_has_none() -> None:
    book = limit_book(SEEDS)
    assert book.of("lye", "sodium hydroxide") == book.of("sodium hydroxide")
    assert book.of("", "mystery") == ()


def test_the_houses_own_rows_take_the_place_of_all_the_shipped(own: Path) -> None:
    enter(own, "sodium hydroxide", "Eye Irrit. 2", "H319")
    with reading(own) as reader:
        (row,) = limit_book(SEEDS, reader).of("sodium hydroxide")
    assert (row.h_code, row.basis) == ("H319", Basis.HARMONISED)


@pytest.mark.parametrize(
    ("hazard_class", "code"),
    [("Skin Corr. 9", "H314"), ("Skin Corr. 1B", "H399"), ("Skin Corr. 1B", "H315")],
)
def test_a_row_that_makes_no_sense_is_quoted(own: Path, hazard_class: str, code: str) -> None:
    enter(own, "sodium hydroxide", hazard_class, code)
    with pytest.raises(BadInput, match=r"Skin Corr\. "):
        hazards_of(own, "S06")


@pytest.mark.parametrize(
    ("cells", "told"),
    [
        ({"percent_of": "Zz9"}, '"Zz" is no element'),
        ({"m_factor": "0"}, "m_factor 0 is none"),
        ({"ate": "0"}, "ate 0 is none"),
    ],
)
def test_a_figure_that_would_spoil_every_answer_is_not_taken(
    own: Path, cells: dict[str, str], told: str
) -> None:
    row = {"substance": "sodium hydroxide", "hazard_class": "Skin Corr. 1B", "h_code": "H314"}
    with pytest.raises(BadInput, match=told):
        add_row(own, "hazards", row | {"basis": "harmonised"} | cells, by="T1")


def test_it_spoils_no_other_answer_and_no_list_of_makes(own: Path) -> None:
    enter(own, "sodium hydroxide", "Skin Corr. 9", "H314")
    assert hazards_of(own, "S05").worked_out.entered
    found = hazards_of_makes(own, to_make(own, as_at=FIRST_DAY))
    assert not found["sodium hydroxide 2.00 mol/dm3"].worked_out.entered
    assert found["silver nitrate 0.0500 mol/dm3"].worked_out.entered


def test_a_number_that_is_none_is_quoted() -> None:
    row = dict.fromkeys(
        "hazard_class h_code basis from_percent below_percent route ate m_factor percent_of how"
        " source".split(),
        "",
    )
    with pytest.raises(BadInput, match="half"):
        limit_from(row | {"h_code": "EUH031", "basis": "specific", "from_percent": "half"})
