"""The walk sheet: forms told apart, blanks for all that is asked, whole on the smallest paper."""

from __future__ import annotations

from dataclasses import replace
from datetime import date

import paper_reading as read
import pytest
from houses import bought_bottle, g, solid

from stockroom.findings import Finding
from stockroom.planning.facts import Line, Place
from stockroom.planning.on_shelf import OnShelf, on_shelf
from stockroom.planning.walking import Met, Sheet, Visit, Walk
from stockroom.reports.paper.head import Since, since
from stockroom.reports.paper.walk_sheet import (
    WALK,
    WalkSheet,
    walk_sheet_lines,
    walk_sheet_of,
    walk_sheet_text,
)
from stockroom.reports.typesetting import typeset

ON = date(2027, 1, 4)
PLACES = (Place("A1", "upper shelf"), Place("A2", "lower shelf"))
LONG = ("a trade name with all that anybody ever wrote upon its label, " * 4)[:200]
UNBROKEN = "x" * 90


def standing(number: str, line: Line, place: str = "A2", remark: str = "") -> OnShelf:
    one = replace(bought_bottle(number, line, g(500)), place=place, remark=remark)
    return on_shelf((one,), {line.key: line}, PLACES, ON)[0]


def walk_of(*rows: OnShelf, again: bool = False, practice: bool = False) -> Sheet:
    walk = Walk("Jan", (), ON, "T1")
    asked = () if again else rows
    return Sheet(walk, (), asked, (), PLACES, "A school", practice, rows if again else ())


DRY, WET = solid("sodium thiosulfate, anhydrous"), solid("sodium thiosulfate pentahydrate")


def test_two_forms_at_one_place_are_told_apart() -> None:
    sheet = walk_sheet_of(walk_of(standing("B06", WET), standing("B07", DRY)), ON)
    (shelf,) = sheet.shelves
    assert [(row.name, row.form) for row in shelf.rows] == [
        ("sodium thiosulfate", "pentahydrate"),
        ("sodium thiosulfate", "ANHYDROUS"),
    ]


def test_two_forms_a_walk_apart_are_told_apart_too_and_one_alone_keeps_its_name() -> None:
    wet, dry = standing("B06", WET, "A1"), standing("B07", DRY, "A2")
    sheet = walk_sheet_of(walk_of(wet, dry), ON)
    assert [row.form for shelf in sheet.shelves for row in shelf.rows] == [
        "pentahydrate",
        "ANHYDROUS",
    ]
    alone = walk_sheet_of(walk_of(dry, standing("B08", DRY, "A2")), ON)
    names = [(row.name, row.form) for shelf in alone.shelves for row in shelf.rows]
    assert names == [(DRY.key, ""), (DRY.key, "")]


def test_a_form_is_told_apart_still_once_the_other_is_counted() -> None:
    met = Visit("B06", WET.key, WET.kind, Met.COUNTED, g(1), g(1), False, "T1", ON, 7)
    half = walk_sheet_of(replace(walk_of(standing("B07", DRY)), visits=(met,)), ON)
    assert [row.form for shelf in half.shelves for row in shelf.rows] == ["ANHYDROUS"]


@pytest.mark.parametrize(
    ("one", "other", "told"),
    [
        ("copper(II) sulfate pentahydrate", "copper(II) sulfate, anhydrous", True),
        ("glucose monohydrate", "glucose, anhydrous", True),
        ("calcium sulfate hemihydrate", "calcium sulfate dihydrate", True),
        ("sodium carbonate, anhydrous", "sodium hydrogencarbonate", False),
        ("starch, soluble", "starch 1 % w/v", False),
        ("chloral hydrate", "chloral", True),
    ],
)
def test_a_form_is_known_by_its_word(one: str, other: str, told: bool) -> None:
    rows = standing("B01", solid(one)), standing("B02", solid(other))
    (shelf,) = walk_sheet_of(walk_of(*rows), ON).shelves
    assert any(row.form for row in shelf.rows) == told


def test_a_vented_cap_and_a_warning_stand_in_their_row() -> None:
    (shelf,) = walk_sheet_of(walk_of(standing("B01", solid("x", vented_cap=True))), ON).shelves
    assert shelf.rows[0].cap == "vented cap"
    told = read.words(typeset("walk", WALK.data(walk_sheet_of(shelf_of_one(warned=True), ON)))[0])
    assert "! do not open or move it; ask: write here" in told


def shelf_of_one(*, warned: bool) -> Sheet:
    row = standing("B01", solid("x"))
    verdict = replace(row.verdict, safety=warned, condition=type(row.verdict.condition).PAST)
    return walk_of(replace(row, verdict=verdict))


def test_what_stands_wrong_is_told_at_its_place_only() -> None:
    rows = standing("B01", DRY, "A1"), standing("B02", WET, "A2")
    wrong = [Finding("B01", "tight cap"), Finding("B09", "elsewhere"), Finding("B02, B09", "both")]
    first, second = walk_sheet_of(walk_of(*rows), ON, wrong).shelves
    assert [each.text for each in first.wrong] == ["tight cap"]
    assert [each.text for each in second.wrong] == ["both"]


def test_counting_again_says_so_in_what_is_typed_back() -> None:
    sheet = walk_sheet_of(walk_of(standing("B01", DRY), again=True), ON)
    assert sheet.typed == "stockroom walk Jan --enter --again"


def hideous() -> WalkSheet:
    """Forty bottles with texts as long as the store takes them, and sixty changes."""
    rows = [
        standing(f"B{n:03}a", solid(f"{LONG if n % 2 else UNBROKEN}{n}"), "A1", LONG * (n % 5 == 0))
        for n in range(40)
    ]
    sheet = walk_of(*rows, practice=True)
    walk = replace(sheet.walk, name="Jan " * 30, places=("A1",) * 40)
    found = replace(sheet, walk=walk, look_out=tuple(rows[:2]), house=LONG)
    made = walk_sheet_of(found, ON, [Finding("B001a", LONG)])
    told = Since("0122", ("B001a",), tuple(f"new: {LONG}" for _ in range(60)))
    return replace(made, head=replace(made.head, copy="0123", since=told))


@pytest.mark.parametrize("paper", ["A4", "A5", "Letter"])
def test_long_texts_wrap_and_nothing_overlaps(paper: str) -> None:
    sheet = hideous()
    pdf = typeset("walk", WALK.data(sheet), paper=paper)[0]
    assert read.outside(pdf, margin=8) == []
    assert read.overlapping(pdf) == []
    assert read.greys_only(pdf, dpi=20)
    told = read.page_words(pdf)
    assert all(row.number in " ".join(told) for shelf in sheet.shelves for row in shelf.rows)
    # whatever page is found alone says of what it is
    assert all("copy 0123" in page and 'Walk "Jan' in page for page in told)
    assert all(page.count("PRACTICE") >= 1 for page in told)


def test_a_shelf_of_eighteen_is_one_side_of_a4() -> None:
    rows = [standing(f"B{n:02}", solid(f"salt {n}")) for n in range(18)]
    data = WALK.data(walk_sheet_of(walk_of(*rows), ON))
    pdf = typeset("walk", data)[0]
    assert read.sizes_mm(pdf) == [(210.0, 297.0)]
    told = read.words(pdf)
    for asked in ("should be", "is", "cap", "look", "Pencil only", "640 g, same", "Turned up"):
        assert asked.lower() in told.lower()
    assert set(read.sizes_mm(typeset("walk", data, paper="A5")[0])) == {(148.0, 210.0)}


def test_the_text_says_what_the_paper_says() -> None:
    rows = standing("B06", WET, remark="brown crust"), standing("B07", DRY)
    sheet = walk_sheet_of(walk_of(*rows, practice=True), ON, [Finding("B07", "tight cap")])
    text = walk_sheet_text(sheet, 80)
    told = read.words(typeset("walk", WALK.data(sheet))[0])
    for said in ("ANHYDROUS", "500 g", "brown crust", "tight cap", "A2", "sound", "same"):
        assert said in text
        assert said in told
    # a word longer than its column stands whole on a screen; every other line keeps the width
    wide = [line for line in walk_sheet_text(hideous(), 100).splitlines() if len(line) > 100]
    assert all(UNBROKEN in line for line in wide)


def test_each_bottle_is_held_against_the_last_copy() -> None:
    sheet = walk_sheet_of(walk_of(standing("B06", WET), standing("B07", DRY)), ON)
    assert walk_sheet_lines(sheet)["B07"] == (
        "B07 sodium thiosulfate, ANHYDROUS, at A2, should be 500 g, ● sound"
    )


def test_a_bottle_counted_meanwhile_is_not_told_as_gone() -> None:
    rows = standing("B06", WET), standing("B07", WET)
    before = walk_sheet_lines(walk_sheet_of(walk_of(*rows), ON))
    met = Visit("B06", WET.key, WET.kind, Met.COUNTED, g(1), g(1), False, "T1", ON, 7)
    half = walk_sheet_of(replace(walk_of(rows[1]), visits=(met,)), ON)
    now = walk_sheet_lines(half)
    assert now["B06"] == ""
    assert since("0001", before, now, ON) == Since("0001", (), ())
    # and with all of them once more, the one that was not on it is no change
    assert since("0002", now, before, ON) == Since("0002", (), ())
