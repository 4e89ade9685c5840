"""`stockroom label`: what is asked for, what is refused, what is printed."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import paper_reading as reading
import pytest

if TYPE_CHECKING:
    from conftest import Stockroom

EDGE = (
    "the outer labels lie within 4 mm of the paper's edge, which many printers leave blank:"
    " print one sheet on plain paper first\n"
)


def test_labels_are_printed_and_their_codes_read(
    own: Path, tmp_path: Path, stockroom: Stockroom
) -> None:
    target = tmp_path / "labels.pdf"
    told = stockroom("label", "S02", "B14", "--print", str(target), store=own)
    assert told.code == 0, told.err
    assert "copy 0001" in told.out
    # nobody sits at a terminal here, so no bar is drawn
    assert told.err == "symbols on B14 are smaller than 1 cm²: --size 105x74\n"
    assert reading.codes(target.read_bytes()) == ["S02", "B14"]


@pytest.mark.parametrize(
    ("words", "said"),
    [
        # thiosulfate has no symbol, and 105 x 74 mm is room enough for one of 1 cm²
        (("S02",), ""),
        (("B14", "--size", "105x74"), ""),
        (("S02", "--sheet", "2x7", "--margin", "4,4"), ""),
        (("S02", "--sheet", "2x7", "--margin", "4,3.9"), EDGE),
        (("S02", "--sheet", "2x7", "--margin", "66.5,10"), EDGE),
        (("S02", "--sheet", "2x7", "--margin", "10,35"), EDGE),
    ],
)
def test_what_a_printer_or_the_law_would_mind_is_said_once_printed(
    own: Path, stockroom: Stockroom, tmp_path: Path, words: tuple[str, ...], said: str
) -> None:
    told = stockroom("label", *words, "--print", str(tmp_path / "labels.pdf"), store=own)
    assert (told.code, told.err) == (0, said)


def test_nothing_is_said_of_a_print_that_was_not_made(practice: Path, stockroom: Stockroom) -> None:
    assert stockroom("label", "B14", "--sheet", "3x8", store=practice).err == ""


def test_data_are_the_same_as_the_words(practice: Path, stockroom: Stockroom) -> None:
    data = stockroom("label", "S02", "--json", store=practice).json
    (label,) = data["labels"]
    assert label["name"] == "sodium thiosulfate"
    assert label["known"] == "found 10 Dec 2026"
    assert data["size"] == [70.0, 37.0]


def test_a_place_gives_all_that_stand_there(practice: Path, stockroom: Stockroom) -> None:
    labels = stockroom("label", "--place", "F1", "--json", store=practice).json["labels"]
    assert len(labels) > 1
    assert all("F1 refrigerator" in label["keep"] for label in labels)


def test_a_stronger_make_has_another_hazard_text(own: Path, stockroom: Stockroom) -> None:
    """0.40 and 0.55 mol/dm³ of sodium hydroxide: H315 and H319, and H314."""
    weak = stockroom("label", "S07", "--json", store=own).json["labels"][0]
    sure = ("--on", "2027-01-04", "--by", "T1", "--sure")
    told = stockroom("found", "S07", "0.55 mol/dm3", *sure, store=own)
    assert told.code == 0, told.err
    strong = stockroom("label", "S07", "--json", store=own).json["labels"][0]
    # as many figures as its line has: 0.400
    assert strong["strength"] == "0.550 mol/dm³"
    assert strong["known"] == "found 4 Jan 2027"
    assert [code for code, _ in weak["hazards"]["statements"]] == ["H315", "H319"]
    assert [code for code, _ in strong["hazards"]["statements"]] == ["H314"]


def test_text_typed_from_the_sheet_takes_its_place(own: Path, stockroom: Stockroom) -> None:
    words = ("--text", "H290 May be corrosive to metals", "--sheet", "Brackley, 2026-05-01")
    why = ("--signal", "warning", "--why", "new sheet", "--by", "T1")
    told = stockroom("hazards", "S05", *words, *why, store=own)
    assert told.code == 0, told.err
    said = stockroom("label", "S05", store=own).said
    assert "WARNING GHS05 H290 May be corrosive to metals from Brackley, 2026-05-01" in said


def test_a_made_batch_keeps_its_day(practice: Path, stockroom: Stockroom) -> None:
    said = stockroom("label", "M01", "--made-on", "2027-01-15", store=practice).said
    assert "made 15 Jan 2027 ready from 16 Jan 2027" in said


@pytest.mark.parametrize(
    ("words", "code", "said"),
    [
        (("S06", "--short"), 1, "H314. Not on the relaxed list. Use the full text."),
        (("S02", "--short"), 1, "a short label is for 125 cm³ or less"),
        (("S11", "--short"), 1, "hazard text not entered"),
        (("B08", "--short"), 1, "H372. Not on the relaxed list"),
        (("B40", "--short"), 1, "how many cm³ it holds is not known"),
        (("S23", "--short"), 1, "add --confirm"),
        ((), 2, "Labels of what?"),
        (("S999",), 2, 'S999"'),
        (("M99999",), 2, 'M99999"'),
        (("S02", "--opened", "--short"), 2, "one or the other"),
        (("S02", "--confirm"), 2, "It goes with --short"),
        (("S02", "--made-on", "2027-01-15"), 2, "of which make?"),
        (("S02", "--sheet", "4x9"), 2, "A4 has 210 x 297 mm"),
        (("S02", "--size", "20x10"), 2, "too small"),
        (("--place", "Z9"), 2, 'Z9"'),
    ],
)
def test_what_cannot_be_is_refused_with_a_way_on(
    practice: Path, stockroom: Stockroom, words: tuple[str, ...], code: int, said: str
) -> None:
    told = stockroom("label", *words, store=practice)
    assert said in " ".join(told.err.split())
    assert (told.code, told.out) == (code, "")


def test_a_short_label_is_there_once_the_list_is_confirmed(
    practice: Path, stockroom: Stockroom
) -> None:
    (label,) = stockroom("label", "S23", "--short", "--confirm", "--json", store=practice).json[
        "labels"
    ]
    assert label["sort"] == "short"
    assert label["hazards"]["statements"] == []


def test_a_doubt_inherited_stands_on_the_label(practice: Path, stockroom: Stockroom) -> None:
    told = stockroom("label", "S20", "S04", store=practice).said
    ammonia, _, acid = told.partition("S04")
    assert "made from B16 6 d after its recheck fell due: in doubt with it" in ammonia
    assert "in doubt" not in acid


def test_what_is_still_to_be_titrated_has_its_recheck_left_blank(
    practice: Path, stockroom: Stockroom
) -> None:
    (label,) = stockroom("label", "M19", "--json", store=practice).json["labels"]
    assert ["recheck by", ""] in label["dates"]
    # known from the titration on Monday 1 February, and not from Friday's weighing
    card = stockroom("card", "M19", store=practice).said
    assert "recheck by Wed 2027-03-03" in card
