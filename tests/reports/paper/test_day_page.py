"""The page for the day: what it says of the invented college, of small houses, and on paper."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import Any

import houses
import paper_reading
import pytest

from stockroom.keeping.rules import Law, Origin, Rule, RuleKind
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import (
    Booking,
    Closeness,
    Facts,
    Firmness,
    Ingredient,
    Recipe,
    Swap,
)
from stockroom.planning.leaned_on import leaned_on
from stockroom.planning.plan import plan
from stockroom.reports.paper.day import Day, day_of
from stockroom.reports.paper.day_class import Row, destroyed_how, handling_of, mixed_how
from stockroom.reports.paper.day_notes import NO_REFERENCE, OVERDUE
from stockroom.reports.paper.day_strengths import DILUTED, EXPECTED, FOUND, Known, two_figures
from stockroom.reports.paper.day_text import DAY
from stockroom.reports.typesetting import typeset
from stockroom.reports.words import raised
from stockroom.service.sheets import known_and_planned

OPEN_DAY, EVENING = date(2027, 3, 23), date(2027, 2, 10)
ON = houses.day("01-12")
PageOf = Callable[..., Day]


@pytest.fixture(scope="module")
def college(college_file: Path) -> tuple[Facts, Plan]:
    return known_and_planned(college_file, as_at=houses.MONDAY)


@pytest.fixture(scope="module")
def page_of(college: tuple[Facts, Plan]) -> PageOf:
    return lambda on, number="": day_of(*college, on, number)


def rows(sheet: Day) -> list[Row]:
    return [row for part in sheet.parts for row in part.rows]


def timed(sheet: Day) -> list[tuple[str, str]]:
    return [(row.at, row.what) for row in rows(sheet)]


def strength(sheet: Day, ref: str) -> Known:
    [told] = [each for part in sheet.parts for each in part.strengths if each.ref == ref]
    return told


# -- the invented college ------------------------------------------------------------------


def test_the_open_day_in_the_order_of_the_clock(page_of: PageOf) -> None:
    told = timed(page_of(OPEN_DAY))
    order = [
        ("day before", "Splints soak overnight"),
        ("11:55", "begin hydrogen peroxide"),
        ("12:05", "set out for K26"),
        ("12:25", "set out for K28"),
        ("12:50", "set out for K29"),
        ("13:00", "NOT BEFORE 13:00"),
        ("13:30", "START K26, K27, K28, K29"),
        ("15:10", "END K26, K27, K28, K29"),
        ("15:40", "DESTROYED BY 15:40"),
    ]
    places = [
        next(n for n, (at, what) in enumerate(told) if at == time and what.startswith(words))
        for time, words in order
    ]
    assert places == sorted(places)


def test_only_what_is_destroyed_must_be_ticked(page_of: PageOf) -> None:
    assert [row.key for row in rows(page_of(OPEN_DAY)) if row.must] == ["K27 destroy"]


def test_the_evening_wants_somebody_until_it_is_destroyed(page_of: PageOf) -> None:
    here = [row for row in rows(page_of(EVENING)) if row.key.startswith("here")]
    assert [row.what for row in here] == ["someone must be here from 18:00 to 20:40: not staffed"]
    alone = [row for row in rows(page_of(EVENING, "K15")) if row.key.startswith("here")]
    assert "18:00 to 20:10" in alone[0].what


def test_the_stronger_bottle_serves_the_evening(page_of: PageOf) -> None:
    """T07: B01 is at 89.1 vol by then, below the 90 asked for, so B02 is opened."""
    part = page_of(EVENING, "K15").parts[0]
    assert any("from B02, not B01, too weak: 89.1" in words for words in part.different)


def test_what_nobody_found_has_two_figures(page_of: PageOf) -> None:
    for on in (OPEN_DAY, EVENING, date(2027, 2, 2), date(2027, 1, 26)):
        for told in page_of(on).parts[0].strengths:
            if told.today and told.basis not in (FOUND, DILUTED):
                number = told.today.split("\N{NO-BREAK SPACE}")[0].split()[0]
                assert len(number.replace(".", "").lstrip("0").rstrip("0")) <= 2, told


def test_the_foam_peroxide_is_told_against_its_label(page_of: PageOf) -> None:
    told = strength(page_of(OPEN_DAY), "K26.1")
    assert (told.today, told.basis, told.label) == ("99 vol", EXPECTED, "100 vol")
    # ninety to a hundred is what the card asks for, so it is not otherwise
    assert told.off is None


def test_an_exact_line_has_no_figure_until_it_is_titrated(page_of: PageOf) -> None:
    assert strength(page_of(date(2027, 2, 2)), "K11.1").today == ""
    told = strength(page_of(date(2027, 3, 4)), "K21.4")
    assert (told.today, told.how) == ("", "found 10 Dec 2026, too long before")


def test_cautions_stand_beside_their_step(page_of: PageOf) -> None:
    by_key = {row.key: " ".join(row.cautions) for row in rows(page_of(OPEN_DAY))}
    assert "gloves" in by_key["make K28 hydrogen peroxide 0.100 mol/dm³"]
    assert "sulfur dioxide" in by_key["K28 set out"]
    assert "30 min before use" in by_key["K27 mix"]
    assert "excess sodium chloride" in by_key["K27 destroy"]
    # no container takes anything that is not destroyed yet
    assert "Oxidising" not in by_key["end 15:10"]
    # nor is what is destroyed oxidising waste any more: where it goes, the recipe says
    assert "Oxidising" not in by_key["K27 destroy"]
    for step in ("K27 mix", "K27 destroy"):
        assert "can turn explosive on standing" in by_key[step]
    assert "Mixed at 13:00 it has stood 2 h 40 min by then" in by_key["K27 destroy"]
    # what must never meet is said where clearing away begins
    assert "Ammonia never with bleach" in by_key["end 15:10"]
    assert "chloramines" not in by_key["K27 destroy"]
    [end] = [row.what for row in rows(page_of(OPEN_DAY)) if row.key == "end 15:10"]
    assert "first destroy what is never kept (K27), then clear away" in end


def test_a_short_line_is_not_there_and_its_swaps_are(page_of: PageOf) -> None:
    part = page_of(houses.day("01-12"), "K01").parts[0]
    [set_out] = [row for row in part.rows if row.key == "K01 set out"]
    assert [item.what for item in set_out.items if item.missing] == [
        "lithium chloride 0.500\N{NO-BREAK SPACE}mol/dm³ 55\N{NO-BREAK SPACE}cm³"
    ]
    assert any("may take lithium sulfate instead" in words for words in part.different)
    assert not any("sodium" in words for words in part.different)


def test_nothing_booked_says_so(page_of: PageOf) -> None:
    sheet = page_of(houses.day("01-05"))
    assert (sheet.verdict, sheet.parts) == ("Nothing booked", ())
    assert DAY.text(sheet, 100).startswith("Nothing booked   PRACTICE\n")


def test_no_line_of_the_text_is_too_wide(page_of: PageOf) -> None:
    for width in (60, 80, 100, 120):
        lines = DAY.text(page_of(OPEN_DAY), width).splitlines()
        assert max(map(len, lines)) <= width


# -- small houses ----------------------------------------------------------------------------

SALT = houses.solid()
STOCK = houses.solution(1.0)
WEAK = houses.solution(0.1)


def house_page(
    *requirements: Any, number: str = "", on: date = ON, as_at: date = houses.MONDAY, **more: Any
) -> Day:
    """The page of a house of salt and two strengths of it, one class on 12 January."""
    told = {"bookings": [houses.booking("K01", "01-12")], **more.pop("recipe", {})}
    known = houses.house(
        [SALT, STOCK, WEAK, *more.pop("lines", [])],
        methods=[houses.made_from(STOCK, SALT), houses.made_from(WEAK, STOCK)],
        recipes=[houses.recipe(*requirements, **more.pop("words", {}))],
        bookings=more.pop("bookings", told["bookings"]),
        as_at=as_at,
        **more,
    )
    return day_of(known, plan(known), on, number)


def stock_found(strength_found: float = 1.06) -> Any:
    checks = (houses.found("01-04", strength_found),)
    return houses.made_bottle("S01", STOCK, houses.cm3(900), checks=checks)


def test_a_dilution_of_what_was_found_says_so() -> None:
    sheet = house_page(houses.wants(WEAK, houses.cm3(100)), bottles=[stock_found()])
    told = strength(sheet, "K01.1")
    assert (told.basis, told.today) == (DILUTED, "0.1 mol/dm³")
    assert told.how == "of S01, found 4 Jan 2027"


def test_a_dilution_of_a_mere_label_is_expected() -> None:
    bottle = houses.made_bottle("S01", STOCK, houses.cm3(900))
    told = strength(house_page(houses.wants(WEAK, houses.cm3(100)), bottles=[bottle]), "K01.1")
    assert (told.basis, told.today) == (EXPECTED, "0.10 mol/dm³")


@pytest.mark.parametrize(("found", "words"), [(1.03, "stronger by 3 %"), (0.97, "weaker by 3 %")])
def test_other_than_the_card_by_how_much(found: float, words: str) -> None:
    sheet = house_page(houses.wants(STOCK, houses.cm3(100)), bottles=[stock_found(found)])
    assert f"salt solution {words}" in " ".join(sheet.parts[0].different).replace("\xa0", " ")


def test_as_the_card_says_is_nothing() -> None:
    sheet = house_page(houses.wants(STOCK, houses.cm3(100)), bottles=[stock_found(1.0)])
    assert sheet.parts[0].different == ()
    assert "DIFFERENT FROM THE CARD: nothing" in DAY.text(sheet, 80)
    assert "GUESSED: nothing guessed" in DAY.text(sheet, 80)
    assert (sheet.verdict, sheet.ready) == ("YES", True)


@pytest.mark.parametrize(
    ("reference", "said"),
    [("", NO_REFERENCE), ("Folder 3, CH-12", ""), ("CH-12, review 2027-01-11", OVERDUE)],
)
def test_the_local_assessment_in_words(reference: str, said: str) -> None:
    sheet = house_page(
        houses.wants(STOCK, houses.cm3(10)),
        bottles=[stock_found(1.0)],
        words={"assessment": reference},
    )
    [cover] = sheet.parts[0].covered
    assert (cover.reference, cover.said) == (reference, said)


def test_a_review_on_the_very_day_is_in_time() -> None:
    words = {"assessment": "CH-12, review 2027-01-12"}
    sheet = house_page(houses.wants(STOCK, 1000), bottles=[stock_found()], words=words)
    assert sheet.parts[0].covered[0].said == ""


@pytest.mark.parametrize(
    ("booking", "as_at", "said"),
    [
        ({"firmness": Firmness.DROPPED}, "01-04", "K01 dropped: not planned"),
        ({"firmness": Firmness.DONE}, "01-04", "K01 done: not planned"),
        ({}, "01-13", "K01 over as at 2027-01-13: not planned"),
    ],
)
def test_what_is_not_planned_says_what_it_is(
    booking: dict[str, Any], as_at: str, said: str
) -> None:
    bookings = [houses.booking("K01", "01-12", **booking)]
    sheet = house_page(
        houses.wants(STOCK, 1000), bookings=bookings, as_at=houses.day(as_at), number="K01"
    )
    assert (sheet.verdict, sheet.ready, sheet.parts) == (said, False, ())


def test_a_booking_the_plan_does_not_reach_is_not_planned_yet() -> None:
    late = [houses.booking("K01", "06-01")]
    sheet = house_page(houses.wants(STOCK, 1000), bookings=late, on=houses.day("06-01"))
    assert sheet.verdict == "K01 Not planned yet"


def test_a_pencilled_class_is_planned_and_says_so() -> None:
    bookings = [houses.booking("K01", "01-12", firmness=Firmness.PENCILLED)]
    sheet = house_page(houses.wants(STOCK, 1000), bookings=bookings, bottles=[stock_found(1.0)])
    assert (sheet.verdict, sheet.bookings[0].title) == ("YES", "practical R01, pencilled")


def test_a_closed_day_wants_somebody() -> None:
    bookings = [houses.booking("K01", "01-16")]
    sheet = house_page(houses.wants(STOCK, 1000), bookings=bookings, on=houses.day("01-16"))
    [here] = [row for row in rows(sheet) if row.key.startswith("here")]
    assert "08:35 to 10:55" in here.what


def test_fresh_makes_take_turns_and_are_ready_when_it_is_set_out() -> None:
    sheet = _two_fresh(houses.solution(0.2))
    begins = [(row.minute, row.at) for row in rows(sheet) if row.key.startswith("make")]
    assert [at for _, at in begins] == ["08:15", "08:25"]


def test_each_class_has_its_own_time_to_be_set_out(page_of: PageOf) -> None:
    outs = {row.booking: (row.at, row.what) for row in rows(page_of(OPEN_DAY)) if row.items}
    assert [at for at, _ in outs.values()] == ["12:05", "12:15", "12:25", "12:50"]
    assert outs["K28"][1].replace("\xa0", " ").endswith(", 25 min")


def test_what_does_not_fit_before_the_class_says_so() -> None:
    bookings = [houses.booking("K01", "01-12", minute=495)]
    wanted = houses.wants(WEAK, houses.cm3(50), fresh=True)
    sheet = house_page(wanted, bookings=bookings, bottles=[stock_found(1.0)])
    told = " ".join(row.what for row in rows(sheet))
    assert "does not fit before the class for one pair of hands" in told


def test_what_is_not_made_yet_is_to_be_made_and_an_order_is_not_set_out(page_of: PageOf) -> None:
    items = [item for row in rows(page_of(OPEN_DAY)) for item in row.items]
    origins = {item.what.split(" 0")[0]: item.origin.replace("\xa0", " ") for item in items}
    assert origins["lithium chloride"] == "to be made Mon 22 Mar after O01"
    assert origins["silver nitrate"] == "to be made Mon 22 Mar"
    assert origins["hydrogen peroxide"] == "to be made today"
    to_do = page_of(OPEN_DAY).parts[0].to_do
    assert "order O01: lithium chloride, 1 × 100 g, by 2026-12-11" in [
        each.replace("\xa0", " ") for each in to_do
    ]


def test_a_closed_day_says_why(college: tuple[Facts, Plan]) -> None:
    sheet = day_of(*college, date(2027, 2, 16), closed="mid-term week")
    assert sheet.head.about == "Closed: mid-term week."


def test_the_day_and_the_week_guess_alike(college: tuple[Facts, Plan], page_of: PageOf) -> None:
    known, made = college
    for number in ("K08", "K11", "K26"):
        needs = tuple(need for need in made.needs if need.booking.number == number)
        guesses = [raised(each.text) for each in leaned_on(known, made, needs)]
        told = page_of(needs[0].booking.on, number).parts[0].guessed
        assert [each.replace("\xa0", " ").split(": ", 1)[1] for each in told] == guesses
    on_the_day = " ".join(page_of(date(2027, 1, 26)).parts[0].guessed)
    assert "its check falls due" not in on_the_day


def _two_fresh(other: Any) -> Day:
    known = houses.house(
        [SALT, STOCK, WEAK, other],
        methods=[houses.made_from(WEAK, STOCK), houses.made_from(other, STOCK)],
        recipes=[
            houses.recipe(
                houses.wants(WEAK, houses.cm3(50), fresh=True),
                houses.wants(other, houses.cm3(50), fresh=True),
            )
        ],
        bookings=[houses.booking("K01", "01-12")],
        bottles=[stock_found(1.0)],
    )
    return day_of(known, plan(known), ON)


def test_handling_is_told_apart() -> None:
    timed_ones, before, rest = handling_of(
        "Bath at 80 °C from 25 min before. Splints soak overnight. Gloves. Ice 2 h before use."
    )
    assert [minutes for minutes, _ in timed_ones] == [25, 120]
    assert (before, rest) == (("Splints soak overnight.",), ("Gloves.",))


def test_words_of_what_is_never_kept_go_to_their_step() -> None:
    how = "Mix at the last; destroy with chloride; rinse all vessels."
    assert mixed_how(how) == ("Mix at the last.",)
    assert destroyed_how(how) == ("Destroy with chloride; rinse all vessels.",)
    # words that tell nothing apart are said at both
    assert mixed_how("Destroy it.") == destroyed_how("Destroy it.") == ("Destroy it.",)
    assert mixed_how("") == ()


@pytest.mark.parametrize(
    ("value", "shown"),
    [
        (0.0987, "0.099"),
        (0.09949, "0.099"),
        (0.0996, "0.10"),
        (0.05, "0.050"),
        (2.0, "2.0"),
        (99.6, "100"),
        (123.4, "120"),
        (0.0, "0"),
    ],
)
def test_two_figures(value: float, shown: str) -> None:
    assert two_figures(WEAK, value) == f"{shown} mol/dm³"


# -- on paper ------------------------------------------------------------------------------------


def printed(sheet: Day, paper: str = "A4") -> bytes:
    [pdf] = typeset(DAY.name, DAY.data(sheet), paper=paper)
    return pdf


def test_the_open_day_is_one_side(page_of: PageOf) -> None:
    pdf = printed(page_of(OPEN_DAY))
    assert paper_reading.sizes_mm(pdf) == [(210.0, 297.0)]
    assert paper_reading.overlapping(pdf) == []
    assert paper_reading.outside(pdf, margin=15) == []
    assert paper_reading.greys_only(pdf)
    told = paper_reading.words(pdf)
    for words in (
        "NO, NOT YET: 13 things to do",
        "PRACTICE",
        "DESTROYED BY 15:40",
        "must be ticked",
        "99 vol",
        "label 100 vol",
        "local assessment ref",
        NO_REFERENCE,
        "come first",
    ):
        assert words in told


def test_the_verdict_is_the_biggest_thing(page_of: PageOf) -> None:
    seen = paper_reading.pieces(printed(page_of(EVENING)))
    tallest = max(seen, key=lambda piece: piece.top - piece.bottom)
    assert tallest.text.startswith("NO, NOT YET")


def hideous(count: int) -> Day:
    """So many classes on one day, all about the first as long as anybody could write it."""
    name = "a substance with a name that nobody would wish to write twice, " * 3
    word = "pneumonoultramicroscopicsilicovolcanoconiosis" * 2
    line = houses.solution(1.0, name=f"{name}{word}"[:200], never_kept="")
    wanted = houses.wants(line, houses.cm3(100))
    told: dict[str, Any] = {
        "title": f"{word} {name}"[:200],
        "handling": f"{name}. {word}. Baths from 30 min before, {name}.",
        "never_kept": f"Mix {name}; destroy {name}",
        "waste": f"{word} {name}",
        "assessment": f"{name} {word} 2026-01-01",
    }
    swaps = (Swap(line.key, f"{name} instead", 1.0, f"{name} {word}"),)
    known = houses.house(
        [line],
        recipes=[
            replace(houses.recipe(*[wanted] * 2), swaps=swaps, **told),
            houses.recipe(houses.wants(line, 1000), code="R02"),
        ],
        bookings=[
            houses.booking(
                f"K{n:02}",
                "01-12",
                minute=480 + 60 * n,
                room=f"ROOM {word}"[:40],
                recipe="R02" if n else "R01",
            )
            for n in range(count)
        ],
        bottles=[houses.bought_bottle("B01", line, houses.cm3(150))],
    )
    return day_of(known, plan(known), ON)


@pytest.mark.parametrize("count", [1, 5])
def test_nothing_hideous_clips_or_overlaps(count: int) -> None:
    sheet = hideous(count)
    pdf = printed(sheet, "Letter")
    assert paper_reading.overlapping(pdf) == []
    assert paper_reading.outside(pdf, margin=12) == []
    told = re.sub(r"[\s\u200b-]", "", paper_reading.words(pdf))
    for row in rows(sheet):
        assert re.sub(r"[\s\u200b-]", "", row.what) in told
    assert len(sheet.parts) == (1 if count == 1 else count)


def test_many_bookings_go_booking_by_booking() -> None:
    bookings = [houses.booking(f"K{n:02}", "01-12", minute=540 + n) for n in range(1, 7)]
    sheet = house_page(
        houses.wants(STOCK, houses.cm3(10)), bookings=bookings, bottles=[stock_found(1.0)]
    )
    text = DAY.text(sheet, 100)
    assert text.startswith("YES\n")
    assert [part.verdict for part in sheet.parts] == ["YES"] * 6
    assert text.count("COVERED BY") == 6
    assert "YES" in paper_reading.page_words(printed(sheet))[0]


def test_a_line_has_a_key_of_its_own() -> None:
    bookings: list[Booking] = [houses.booking(f"K{n:02}", "01-12") for n in range(1, 4)]
    requirement = houses.wants(STOCK, houses.cm3(10), closeness=Closeness.EXACT)
    sheet = house_page(requirement, bookings=bookings, bottles=[stock_found(1.0)])
    keys = [row.key for row in rows(sheet)]
    assert len(keys) == len(set(keys))
    lines = DAY.lines(sheet)
    assert all(key.startswith("2027-01-12 ") for key in lines)
    assert "2027-01-12 K02" in lines


def test_the_number_of_a_make_is_no_news(college: tuple[Facts, Plan]) -> None:
    known, made = college
    lines = DAY.lines(day_of(known, made, OPEN_DAY))
    assert not [said for said in lines.values() if re.search(r"\b[MO]\d\d\b", said)]


def test_recipes_are_what_they_are() -> None:
    # the helper above replaces fields by name: a renamed one must not pass unseen
    assert {"title", "handling", "never_kept", "waste", "assessment"} <= set(Recipe.__slots__)


def test_another_form_than_the_method_asks_for_is_told() -> None:
    plain, hydrate = houses.solid("salt, anhydrous"), houses.solid("salt, hydrate", 200.0)
    method = houses.made_from(STOCK, Ingredient((hydrate.key, plain.key)))
    known = houses.house(
        [plain, hydrate, STOCK],
        methods=[method],
        recipes=[houses.recipe(houses.wants(STOCK, houses.cm3(100)))],
        bookings=[houses.booking("K01", "01-12")],
        bottles=[houses.bought_bottle("B07", plain, houses.g(500))],
    )
    [told] = day_of(known, plan(known), ON).parts[0].different
    assert told.replace("\xa0", " ") == (
        "K01 salt solution 1 mol/dm³ made from salt, anhydrous (B07), not salt, hydrate"
    )


def test_an_exact_line_is_told_as_found_though_it_fades() -> None:
    law = Rule(RuleKind.FADES, origin=Origin.MADE, law=Law(1, 0.01))
    fading = houses.solution(1.0, name="fading salt", rules=(law,))
    wanted = houses.wants(
        fading, 1000, closeness=Closeness.EXACT, may_differ=0.2, found_within_days=28
    )
    bottle = houses.made_bottle("S01", fading, 500_000, checks=(houses.found("01-04", 0.97),))
    sheet = house_page(wanted, lines=[fading], bottles=[bottle])
    told = strength(sheet, "K01.1")
    assert (told.basis, told.today) == (FOUND, "0.97 mol/dm³")
    # of a line that is only close it is what is expected by then, and no figure more
    close = house_page(houses.wants(fading, 1000, tolerance=0.5), lines=[fading], bottles=[bottle])
    assert (strength(close, "K01.1").basis, strength(close, "K01.1").today) == (
        EXPECTED,
        "0.90 mol/dm³",
    )


def test_a_dilution_of_what_has_faded_since_is_only_expected() -> None:
    law = Rule(RuleKind.FADES, origin=Origin.MADE, law=Law(1, 0.01))
    fading = houses.solution(2.0, name="fading salt", rules=(law,))
    weaker = houses.solution(0.2, name="weak salt")
    bottle = houses.made_bottle("S01", fading, 900_000, checks=(houses.found("01-04", 1.9),))
    known = houses.house(
        [fading, weaker],
        methods=[houses.made_from(weaker, fading)],
        recipes=[houses.recipe(houses.wants(weaker, houses.cm3(100)))],
        bookings=[houses.booking("K01", "01-12")],
        bottles=[bottle],
    )
    told = strength(day_of(known, plan(known), ON), "K01.1")
    assert (told.basis, told.today) == (EXPECTED, "0.20 mol/dm³")
    assert told.how == "by dilution of S01, 1.8 mol/dm³ expected"
