"""Labels: the name biggest, hazards by strength, codes that read, and nothing cut off."""

from __future__ import annotations

import ctypes
import itertools
import re
from collections.abc import Callable
from dataclasses import replace
from datetime import date
from functools import cache
from pathlib import Path
from typing import Any

import paper_reading as reading
import pytest

from stockroom.errors import BadInput, NotAllowed
from stockroom.keeping.unnamed import UNKNOWN
from stockroom.reports.paper.head import head_for
from stockroom.reports.paper.label import LABEL, HazardText, Label, Labels, Sort
from stockroom.reports.paper.label_grid import (
    FULL,
    SHORT,
    STRIP,
    Grid,
    check_fits,
    grid_of,
    size_of,
)
from stockroom.reports.paper.label_of import check_name
from stockroom.reports.paper.label_set import Wish, labels_of
from stockroom.reports.paper.label_short import RELAXED
from stockroom.reports.paper.label_text import SMALL, small_words
from stockroom.reports.shipped import symbol
from stockroom.reports.typesetting import carried, typeset
from stockroom.safety.statements import statement
from stockroom.service.labels import labelled

MM = reading.POINTS_TO_MM
TODAY = date(2027, 1, 4)
LONG = (
    "Keep away from heat and from whatever it must not meet, and never return any of it to the"
    " bottle once it was poured; ask whoever made it, and read the sheet of the supplier to its end"
    " before it is opened"
)
DATES = (
    ("received", "14 Sep 2026"),
    ("opened", ""),
    ("good until", "31 Mar 2027"),
    ("recheck by", "8 Mar 2027"),
)
NAMES = (
    "tin",
    "W" * 200,
    "2,6-dichlorophenolindophenolsodiumsaltdihydrate " * 3,
    LONG,
)
SUPPLIERS = HazardText("Danger", ("GHS05", "GHS08"), (("", LONG),), "from the sheet", "ask")
MUCH = HazardText(
    "Danger",
    tuple(f"GHS0{n}" for n in range(1, 10)),
    tuple((f"H{n}", LONG[:70]) for n in range(300, 312)),
    "worked out",
    "stockroom hazards S1234f",
)


def hideous(sort: Sort) -> tuple[Label, ...]:
    usual = [
        Label(sort, "S1234f", name, "0.0987 mol/dm³", "found 10 Dec 2026", DATES, "cool, dark")
        for name in NAMES
    ]
    worst = [
        replace(
            each,
            known=LONG,
            keep=LONG,
            vented="VENTED CAP (it has a tight one)",
            warning="○ past: do not open or move it; ask",
            hazards=MUCH,
        )
        for each in usual
    ]
    return (*(replace(each, hazards=SUPPLIERS) for each in usual), *worst)


@cache
def printed(
    labels: tuple[Label, ...],
    size: tuple[float, float] = FULL,
    grid: Grid | None = None,
    practice: bool = True,
) -> bytes:
    head = head_for("Quillmere College", "Labels", TODAY, practice=practice)
    return typeset("label", LABEL.data(Labels(head, size, grid, labels)))[0]


def largest(pdf: bytes, page: int = 0) -> list[tuple[float, str]]:
    """Upright texts with the size of their type in points, the largest first."""
    import pypdfium2
    import pypdfium2.raw

    raw: Any = pypdfium2.raw
    opened: Any = pypdfium2.PdfDocument
    found = []
    with opened(pdf) as document:
        sheet = document[page]
        text = sheet.get_textpage()
        for each in sheet.get_objects(filter=[raw.FPDF_PAGEOBJ_TEXT]):
            size = ctypes.c_float()
            raw.FPDFTextObj_GetFontSize(each, size)
            matrix = each.get_matrix()
            said = reading._said(raw, each, text)
            if said and abs(matrix.b) < reading.TURNED:
                found.append((round(size.value * abs(matrix.d), 1), said))
    return sorted(found, reverse=True)


@pytest.fixture(scope="module")
def college(practice: Path) -> Callable[..., Labels]:
    """The labels of bottles or makes of the practice store."""

    def of(*what: str, sort: Sort = Sort.FULL, size: tuple[float, float] = FULL) -> Labels:
        found = labelled(practice, what, as_at=TODAY)
        house = (found.house, found.practice)
        wish = Wish(sort, size)
        return labels_of(house, TODAY, found.bottles, found.batches, found.places, wish)

    return of


@pytest.fixture(scope="module")
def every(college: Callable[..., Labels]) -> tuple[Labels, bytes, list[reading.Piece]]:
    """Labels of all bottles of the practice store: values, PDF, what stands on it."""
    sheet = college("all", "S24f")
    pdf = typeset("label", LABEL.data(sheet))[0]
    return sheet, pdf, reading.pieces(pdf)


@pytest.mark.parametrize("dpi", [200, 300])
def test_every_code_is_read_by_an_independent_reader(every: Any, dpi: int) -> None:
    sheet, pdf, _ = every
    assert reading.codes(pdf, dpi) == [label.number for label in sheet.labels]
    assert sheet.labels[-1].number == "S24f"


def test_no_label_of_the_college_is_cut_off_or_runs_together(every: Any) -> None:
    sheet, pdf, pieces = every
    assert reading.sizes_mm(pdf) == [(70.0, 37.0)] * len(sheet.labels)
    for page in range(len(sheet.labels)):
        here = [each for each in pieces if each.page == page]
        assert here
        assert [each for each in here if _over_the_edge(each)] == []
        assert [(a.text, b.text) for a, b in itertools.combinations(here, 2) if _over(a, b)] == []


# as `reading.outside` and `reading.overlapping`, page by page: all pairs of 76 pages take long
def _over_the_edge(each: reading.Piece) -> bool:
    wide, high = (side / reading.POINTS_TO_MM for side in FULL)
    return each.left < 0 or each.bottom < 0 or each.right > wide or each.top > high


def _over(one: reading.Piece, other: reading.Piece, slack: float = 0.8) -> bool:
    across = min(one.right, other.right) - max(one.left, other.left)
    return across > slack and min(one.top, other.top) - max(one.bottom, other.bottom) > slack


def test_every_name_is_whole_and_the_largest_thing_on_its_label(every: Any) -> None:
    sheet, pdf, pieces = every
    for page, label in enumerate(sheet.labels):
        said = "".join(each.text for each in pieces if each.page == page)
        assert label.name.replace(" ", "") in said.replace(" ", "")
        if page % 5:
            continue
        size, words = largest(pdf, page)[0]
        assert size >= 14.0
        assert words.split()[0] in label.name


def test_symbols_told_as_small_are_those_that_are(college: Callable[..., Labels]) -> None:
    """Held against what is drawn: the frame of each symbol, by its own measure."""
    # of a size at which some have room and others not
    sheet = college("all", size=(80.0, 40.0))
    pdf = typeset("label", LABEL.data(sheet))[0]
    told = carried("label", SMALL)
    frames = _largest_frames(pdf)
    marked = [i for i, label in enumerate(sheet.labels) if label.hazards.symbols]
    # half of the square on its corners, whose frame is drawn a little inside
    small = [sheet.labels[i].number for i in marked if frames[i] ** 2 / 2 < 0.94 * 100]
    assert told == small
    assert 0 < len(small) < len(marked)


def _largest_frames(pdf: bytes) -> list[float]:
    """On each page how wide the largest thing is that is as wide as high, the code aside, mm."""
    import pypdfium2
    import pypdfium2.raw

    opened: Any = pypdfium2.PdfDocument
    raw: Any = pypdfium2.raw
    found = []
    with opened(pdf) as document:
        for page in document:
            paths = page.get_objects(filter=[raw.FPDF_PAGEOBJ_PATH])
            boxes = [each.get_bounds() for each in paths]
            sides = [(box[2] - box[0], box[3] - box[1]) for box in boxes if box[0] < 62 / MM]
            square = [wide * MM for wide, high in sides if abs(wide - high) < 0.1]
            found.append(max(square, default=0.0))
    return found


@pytest.mark.parametrize(
    ("sort", "size", "said"),
    [
        (Sort.FULL, FULL, "--size 105x74"),
        (Sort.FULL, (120.0, 40.0), "--size 120x74"),
        (Sort.FULL, (150.0, 100.0), "give it more room with --size"),
        (Sort.SHORT, SHORT, "leave out --short for a full label"),
    ],
)
def test_small_symbols_say_what_gives_them_room(
    sort: Sort, size: tuple[float, float], said: str
) -> None:
    assert small_words([], sort, size) == ""
    assert small_words(["S06"], sort, size).endswith(f"on S06 are smaller than 1 cm²: {said}")
    many = small_words([f"S{n:02d}" for n in range(20)], sort, size)
    assert "S04, S05 and 14 more are smaller" in many


def test_the_short_label_and_one_that_is_too_full_tell_of_their_symbols() -> None:
    for sort, size in ((Sort.SHORT, SHORT), (Sort.FULL, FULL)):
        worst = replace(hideous(sort)[-1], name="tin")
        head = head_for("Quillmere College", "Labels", TODAY)
        typeset("label", LABEL.data(Labels(head, size, None, (worst,))))
        assert carried("label", SMALL) == ["S1234f"]


@pytest.mark.parametrize(
    ("sort", "size"),
    [(Sort.FULL, FULL), (Sort.OPENED, STRIP), (Sort.SHORT, SHORT)],
    ids=["full", "opened", "short"],
)
def test_hideous_words_wrap_and_step_down(sort: Sort, size: tuple[float, float]) -> None:
    labels = hideous(sort)
    pdf = printed(labels, size)
    assert len(reading.sizes_mm(pdf)) == len(labels)
    assert reading.outside(pdf) == []
    assert reading.overlapping(pdf) == []
    assert reading.codes(pdf) == ["S1234f"] * len(labels)
    for page, label in zip(reading.page_words(pdf), labels, strict=True):
        assert "".join(label.name.split()) in "".join(page.replace("\u200b", "").split())


def test_a_long_name_is_never_below_14_points() -> None:
    labels = hideous(Sort.FULL)
    pdf = printed(labels)
    for page in range(len(labels)):
        assert largest(pdf, page)[0][0] >= 14.0


def test_text_of_the_supplier_is_printed_whole() -> None:
    label = replace(hideous(Sort.FULL)[0], hazards=SUPPLIERS)
    assert LONG in reading.words(printed((label,)))


def test_more_statements_than_fit_become_codes_and_say_where_the_text_is() -> None:
    pdf = printed((replace(hideous(Sort.FULL)[0], hazards=MUCH, keep=LONG),))
    said = reading.words(pdf)
    assert "H300 H301 H302" in said
    assert reading.greys_only(pdf)
    assert "Full text: stockroom hazards S1234f" in said


def test_practice_is_printed_over_and_only_there() -> None:
    label = Label(Sort.FULL, "S1", "tin")
    assert "PRACTICE" in reading.words(printed((label,)))
    assert "PRACTICE" not in reading.words(printed((label,), practice=False))


def test_an_unknown_says_to_leave_it_alone(college: Callable[..., Labels]) -> None:
    sheet = college("B36")
    said = reading.words(typeset("label", LABEL.data(sheet))[0])
    assert UNKNOWN in said
    assert "B36" in said
    assert "Hazard" not in said


def test_hazards_go_with_the_highest_strength(college: Callable[..., Labels]) -> None:
    weak, strong = college("S07", "S06").labels
    assert [code for code, _ in weak.hazards.statements] == ["H315", "H319"]
    assert [code for code, _ in strong.hazards.statements] == ["H314"]
    assert (weak.hazards.signal, strong.hazards.signal) == ("Warning", "Danger")


def test_the_found_strength_is_printed_where_there_is_one(college: Callable[..., Labels]) -> None:
    found, nominal = college("S02", "S07").labels
    assert (found.strength, found.known) == ("0.0987 mol/dm³", "found 10 Dec 2026")
    assert (nominal.strength, nominal.known) == ("0.400 mol/dm³", "nominal, not found")


def test_nothing_held_is_said_and_never_guessed(college: Callable[..., Labels]) -> None:
    (label,) = college("S11").labels
    assert label.hazards.statements == (("", "Hazard text not entered: look it up."),)
    assert (label.hazards.symbols, label.hazards.signal) == ((), "")


@pytest.mark.parametrize("number", ["S05", "S12", "S07"])
def test_a_ph_that_is_not_held_is_said_on_the_label(
    college: Callable[..., Labels], number: str
) -> None:
    (label,) = college(number).labels
    said = label.hazards.basis + " ".join(words for _, words in label.hazards.statements)
    assert "pH not held: look it up" in said


def test_no_statement_does_not_read_as_harmless(college: Callable[..., Labels]) -> None:
    (label,) = college("S02").labels
    ((_, words),) = label.hazards.statements
    assert "not proof of none" in words
    assert "pH" not in words


@pytest.mark.parametrize("sort", [Sort.OPENED, Sort.SHORT])
@pytest.mark.parametrize("what", ["M03", "B36"])
def test_a_make_and_an_unknown_have_no_small_label(
    college: Callable[..., Labels], sort: Sort, what: str
) -> None:
    with pytest.raises(NotAllowed, match=what):
        college(what, sort=sort, size=STRIP if sort is Sort.OPENED else SHORT)


def test_a_peroxide_former_says_by_when_to_test_it(college: Callable[..., Labels]) -> None:
    (label,) = college("B29").labels
    (strip,) = college("B29", sort=Sort.OPENED, size=STRIP).labels
    told = ("test or discard by", "2 Mar 2027")
    assert told in label.dates
    assert told in strip.dates


def test_a_batch_has_a_blank_for_its_number_and_no_code(college: Callable[..., Labels]) -> None:
    sheet = college("M01")
    assert sheet.labels[0].number == ""
    assert ("ready from", "13 Jan 2027") in sheet.labels[0].dates
    assert reading.codes(typeset("label", LABEL.data(sheet))[0]) == []


@pytest.mark.parametrize("name", ["NaOH", "Na2S2O3.5H2O", "HCl", "Co"])
def test_a_formula_is_no_name(name: str) -> None:
    with pytest.raises(NotAllowed, match="Labels need the name in words"):
        check_name("S1", name)


@pytest.mark.parametrize("name", ["tin", "Iodine", "iodine", "DCPIP sodium salt", "Benedict's", ""])
def test_a_word_is_a_name(name: str) -> None:
    check_name("S1", name)


def test_every_relaxed_statement_is_one_and_the_grave_ones_are_not_there() -> None:
    codes = " ".join(RELAXED.values()).split()
    assert all(statement(code).text for code in codes)
    assert not {"H314", "H318", "H317", "H334", "H301", "H350", "H412"} & set(codes)


def test_the_symbols_have_a_black_frame() -> None:
    for number in range(1, 10):
        drawn = symbol(f"GHS0{number}").lower()
        assert drawn
        assert re.findall(r"#f00\b|#ff0000|\bred\b", drawn) == []


def test_a_used_sheet_begins_at_its_first_free_place() -> None:
    labels = tuple(Label(Sort.FULL, f"S{n}", "tin") for n in range(1, 6))
    grid = grid_of("2x3", "10,15", "5,4", 5)
    assert grid is not None
    pdf = printed(labels, grid=grid, practice=False)
    assert reading.sizes_mm(pdf) == [(210.0, 297.0)] * 2
    where = {p.text: (p.page, p.left, p.top) for p in reading.pieces(pdf) if p.text[0] == "S"}
    assert [where[f"S{n}"][0] for n in range(1, 6)] == [0, 0, 1, 1, 1]
    across, along = where["S2"][1] - where["S1"][1], where["S3"][2] - where["S5"][2]
    assert across * reading.POINTS_TO_MM == pytest.approx(75, abs=0.1)
    assert along * reading.POINTS_TO_MM == pytest.approx(41, abs=0.1)
    assert "Quillmere College, labels" in reading.words(pdf)
    assert reading.outside(pdf) == []


def test_a_sheet_without_room_has_no_line_between_the_labels() -> None:
    labels = tuple(Label(Sort.FULL, f"S{n}", "tin") for n in range(24))
    pdf = printed(labels, grid=Grid(3, 8, 0.0, 0.0), practice=False)
    assert len(reading.sizes_mm(pdf)) == 1
    assert "Quillmere" not in reading.words(pdf)


@pytest.mark.parametrize("text", ["70", "70x", "0x0", "10x10", "70x500", "x", "70 by 37"])
def test_a_size_that_cannot_be_is_refused_and_quoted(text: str) -> None:
    with pytest.raises(BadInput, match=text):
        size_of(text, FULL)


def test_the_side_that_is_too_long_is_named() -> None:
    with pytest.raises(BadInput, match="500 mm high is no label"):
        size_of("70x500", FULL)
    with pytest.raises(BadInput, match="201 mm wide is no label"):
        size_of("201x40", FULL)


@pytest.mark.parametrize(
    ("sheet", "margin", "gap", "start"),
    [
        ("3", None, None, 1),
        ("0x8", None, None, 1),
        ("3x8", "5", None, 1),
        ("3x8", None, "a,b", 1),
        ("3x8", None, None, 25),
        ("3x8", None, None, 0),
        (None, "5,5", None, 1),
        (None, None, None, 5),
    ],
)
def test_a_sheet_that_cannot_be_is_refused(
    sheet: str | None, margin: str | None, gap: str | None, start: int
) -> None:
    with pytest.raises(BadInput):
        grid_of(sheet, margin, gap, start)


def test_a_sheet_has_to_fit_on_its_paper() -> None:
    grid = Grid(3, 8, 0.0, 0.0)
    check_fits(grid, FULL, "A4")
    with pytest.raises(BadInput, match=r"Letter has 215\.9 x 279\.4 mm"):
        check_fits(grid, FULL, "Letter")
