"""Any name finds it; two things of one name are asked about; nothing is created by looking."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from sqlmodel import Session

from stockroom.errors import BadInput, UnknownName
from stockroom.store import names
from stockroom.store.engine import writing

pytestmark = pytest.mark.file


@pytest.fixture(scope="module")
def session(tmp_path_factory: pytest.TempPathFactory, practice: Path) -> Iterator[Session]:
    copy = tmp_path_factory.mktemp("names") / "copy.sqlite"
    copy.write_bytes(practice.read_bytes())
    with writing(copy) as opened:
        yield opened


@pytest.mark.parametrize(
    ("text", "key"),
    [
        ("sodium thiosulfate 0.100 mol/dm3", "sodium thiosulfate 0.100 mol/dm3"),
        ("Sodium Thiosulfate  0.100 mol/dm³", "sodium thiosulfate 0.100 mol/dm3"),
        ("hypo 0.1 M", "sodium thiosulfate 0.100 mol/dm3"),
        ("thio 100 mM", "sodium thiosulfate 0.100 mol/dm3"),
        ("Na2S2O3 0.1", "sodium thiosulfate 0.100 mol/dm3"),
        ("7772-98-7 M/20", "sodium thiosulfate 0.0500 mol/dm3"),
        ("KI 0.100", "potassium iodide 0.100 mol/dm3"),
        ("Na2S2O3.5H2O", "sodium thiosulfate pentahydrate"),
        ("hydrogen peroxide 20 vol", "hydrogen peroxide 20 vol"),
        ("potassium permanganate", "potassium permanganate"),
        ("limewater", "limewater saturated"),
        ("benedict", "Benedict's reagent"),
    ],
)
def test_any_name_finds_the_line(session: Session, text: str, key: str) -> None:
    assert names.find_line(session, text).key == key


def test_a_name_of_several_things_lists_them(session: Session) -> None:
    with pytest.raises(BadInput, match=r'"hypo" could be 7 things: .*pentahydrate'):
        names.find_line(session, "hypo")


def test_an_amount_in_grams_tells_the_solid_from_its_solution(session: Session) -> None:
    assert names.find_line(session, "LiCl", kind="mass").key == "lithium chloride"


def test_what_is_like_nothing_here_may_be_new(session: Session) -> None:
    with pytest.raises(UnknownName) as caught:
        names.find_line(session, "unobtainium")
    assert "If it is new here: stockroom add lines item='unobtainium'" in caught.value.hint
    with pytest.raises(UnknownName) as caught:
        names.find_line(session, "sodum chlorid")
    assert "new here" not in caught.value.hint


@pytest.mark.parametrize("text", ["hypo 0.3 M", "unobtainium", "", "sodium thiosulfate 5 % w/w"])
def test_no_match_shows_three_near_ones(session: Session, text: str) -> None:
    with pytest.raises((UnknownName, BadInput)) as caught:
        names.find_line(session, text)
    assert f'"{text}"' in caught.value.message
    assert caught.value.hint.count(";") == 2


def test_numbers_codes_and_places_are_found_in_any_case(session: Session) -> None:
    assert names.find_bottle(session, "b05A").number == "B05a"
    assert names.find_booking(session, "k06").number == "K06"
    assert names.find_place(session, "a2").place == "A2"
    assert names.find_department(session, "Chemistry").department == "CH"
    assert names.find_recipe(session, "r04").recipe == "R04"
    assert names.find_substance(session, "hypo").substance == "sodium thiosulfate"


def test_a_slip_in_a_code_shows_the_nearest(session: Session) -> None:
    with pytest.raises(UnknownName, match='No place "A22"') as caught:
        names.find_place(session, "A22")
    assert caught.value.hint.startswith("Nearest: A2;")


def test_a_version_that_is_not_there_is_told(session: Session) -> None:
    with pytest.raises(UnknownName, match="R04 has no version 3"):
        names.find_recipe(session, "R04", 3)
