"""A walk along the shelves, line by line: what each writes, and what it leaves alone."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadAmount, BadDate, BadInput, NotAllowed, UnknownName
from stockroom.measure.amounts import Amount
from stockroom.planning.walking import Met
from stockroom.reports.walk_text import result_text, walk_text
from stockroom.service import checks, stock
from stockroom.service.walk import Sheet, sheet
from stockroom.service.walk_entering import end, enter_line, start
from stockroom.service.walk_told import Came, Told
from stockroom.store.diary import diary

MONDAY, TUESDAY = date(2027, 1, 4), date(2027, 1, 5)
WHO: dict[str, Any] = {"on": None, "today": MONDAY, "by": "T2"}
JAN = "Jan"


@pytest.fixture
def begun(own: Path) -> Path:
    """The college with a walk along every shelf begun."""
    start(own, JAN, **WHO)
    return own


def enter(path: Path, line: str, **more: Any) -> Told:
    told = enter_line(path, JAN, line, **{**WHO, **more})
    assert told is not None
    return told


def walk(path: Path, on: date = MONDAY) -> Sheet:
    found = sheet(path, JAN, on=on)
    assert found is not None
    return found


def kept(path: Path, bottle: str) -> list[tuple[str, float]]:
    """What the diary holds of a bottle from the day of the walk on: kinds and changes."""
    told = [entry for entry in diary(path, bottle) if entry.entered >= MONDAY]
    return [(entry.kind, entry.change.number) for entry in told if entry.said.startswith(JAN)]


def test_a_count_is_a_difference_under_the_walks_name(begun: Path) -> None:
    told = enter(begun, "B06 590 g")
    assert told.came is Came.DIFFERS
    assert told.text == (
        "Counted 590 g of B06 sodium thiosulfate pentahydrate; 50 g less than entered."
    )
    assert kept(begun, "B06") == [("counted", -50)]
    (visit,) = walk(begun).visits
    assert (visit.bottle, visit.how, visit.difference) == ("B06", Met.COUNTED, -50_000_000)


def test_the_same_is_a_count_too_and_no_difference(begun: Path) -> None:
    assert enter(begun, "b07 same").came is Came.COUNTED
    assert kept(begun, "B07") == [("counted", 0)]
    assert walk(begun).differing == ()


def test_a_part_judged_by_eye_stays_about_until_it_is_counted(begun: Path) -> None:
    told = enter(begun, "B12 about half")
    assert told.text.startswith("Counted about 250 g of B12 ")
    assert walk(begun).visits[0].about is True
    # whoever writes "same" has looked, and measured no better
    start(begun, "Feb", **WHO)
    again = enter_line(begun, "Feb", "B12 same", **WHO)
    assert again is not None
    assert again.text.startswith("Counted about 250 g")


def test_a_missing_bottle_is_lost_and_one_missed_before_is_told(begun: Path) -> None:
    told = enter(begun, "B11 missing")
    assert (told.came, "130 g; it last stood at A2" in told.text) == (Came.MISSING, True)
    assert kept(begun, "B11") == [("lost", 0)]
    assert enter(begun, "B11 missing").came is Came.ALREADY
    assert enter(begun, "B28 missing").text == "B28 lithium chloride: still not found."
    assert kept(begun, "B28") == []


@pytest.mark.parametrize("line", ["hello", "BB7", "BB7 ....", "here"])
def test_a_line_that_names_no_bottle_is_not_swallowed(begun: Path, line: str) -> None:
    with pytest.raises(UnknownName, match=f'No bottle "{line.split()[0]}"'):
        enter(begun, line)
    assert enter_line(begun, JAN, "B07 ....", **WHO) is None


def test_a_unit_is_asked_for_as_its_bottle_is_measured(begun: Path) -> None:
    with pytest.raises(BadAmount) as refused:
        enter(begun, "B12 310")
    assert refused.value.hint == 'Add the unit, as "310 g".'
    with pytest.raises(BadAmount, match="310 of what"):
        enter(begun, "S01 310")


def test_what_says_what_it_is_may_be_what_the_house_keeps(begun: Path) -> None:
    told = enter(begun, "+ sodium chloride, A2, 500 g")
    assert (
        "sodium chloride is kept here. If its label says so: stockroom unknown B46 --is"
        ' "sodium chloride" --evidence "its label".'
    ) in told.details
    assert not any("kept here" in one for one in enter(begun, "+ grey dust, A2, 5 g").details)


def test_a_walk_lists_again_what_it_counted_and_counts_apart_what_turned_up(begun: Path) -> None:
    for line in ("B06 590 g", "B28 here", "+ grey dust, A2, 5 g", "B11 missing"):
        enter(begun, line)
    told = "1 counted, 1 of them differing, 1 turned up, 1 not on the list, 1 not found"
    assert told in " ".join(result_text(walk(begun), 100).split())
    once = sheet(begun, JAN, on=MONDAY, again=True)
    assert once is not None
    listed = [row.bottle.number for row in once.again]
    assert {"B06", "B28", "B46"} < set(listed)
    assert "B06" not in [row.bottle.number for row in once.to_count]
    text = walk_text(once, 100)
    assert ("B06" in text, text.endswith('Next: stockroom walk "Jan" --enter --again')) == (
        True,
        True,
    )


def test_a_bottle_used_after_the_round_was_not_missing_on_it(begun: Path) -> None:
    stock.draw(begun, "B11", Amount.grams(1), on=None, today=TUESDAY, by="T1")
    with pytest.raises(NotAllowed, match="B11 was there after 4 January 2027: entry"):
        enter(begun, "B11 missing", on=MONDAY, today=TUESDAY)
    assert walk(begun, TUESDAY).visits == ()


def test_what_is_judged_by_eye_is_said_in_few_figures_and_nothing_is_not_about(
    begun: Path,
) -> None:
    assert enter(begun, "B06 a third left").text.startswith("Counted about 333 g of B06")
    with pytest.raises(NotAllowed) as refused:
        enter(begun, "B06 600 g")
    assert ": about 333 g (entry" in refused.value.message
    assert "about 333" in result_text(walk(begun), 100)
    assert enter(begun, "B07 0 g").text.startswith("Counted 0 g of B07")
    assert enter(begun, "B06 100 g again").text.endswith("; about 233 g less than entered.")


def test_a_missed_bottle_that_is_counted_has_turned_up(begun: Path) -> None:
    told = enter(begun, "B28 38 g, A2")
    assert told.came is Came.TURNED_UP
    assert "Set aside until somebody has looked at it." in told.details
    assert kept(begun, "B28") == [("turned up", 0), ("counted", 0)]
    # missed on this very walk, and met further along
    enter(begun, "B11 missing")
    assert enter(begun, "B11 here at A3").text.endswith("turned up, at A3.")
    assert [visit.how for visit in walk(begun).visits] == [Met.TURNED_UP, Met.TURNED_UP]


def test_what_is_only_seen_is_met_and_nothing_of_it_changes(begun: Path) -> None:
    before = {row.bottle.number: row for row in walk(begun).to_count}["B29"]
    assert enter(begun, "B29 here").came is Came.SEEN
    (visit,) = walk(begun).visits
    assert (visit.how, visit.difference, visit.left) == (Met.SEEN, 0, before.bottle.left)
    start(begun, "Feb", **WHO)
    later = sheet(begun, "Feb", on=MONDAY)
    assert later is not None
    after = {row.bottle.number: row for row in later.to_count}["B29"]
    assert (after.verdict, after.bottle.left) == (before.verdict, before.bottle.left)


def test_a_bottle_met_elsewhere_stands_there_from_now_on(begun: Path) -> None:
    told = enter(begun, "B04 610 cm3 at A3")
    news, beside = told.details
    assert news == "It stands at A3 now; it was listed at A1."
    assert "bleach beside peroxide" in beside
    assert kept(begun, "B04") == [("moved", 0), ("counted", 0)]
    assert "B04" not in [row.bottle.number for row in walk(begun).to_count]


def test_a_bottle_on_no_list_is_numbered_once(begun: Path) -> None:
    told = enter(begun, "+ brown powder, label gone, A2, 100 g")
    assert (told.bottle, told.came) == ("B46", Came.UNLISTED)
    assert 'Write on it: B46 "UNKNOWN, do not use or move".' in told.details
    again = enter(begun, "+ Brown powder, label gone, A2, 100 g")
    assert (again.bottle, again.came) == ("B46", Came.ALREADY)
    # two jars alike, or the same look on another shelf
    assert enter(begun, "+ brown powder, label gone, A2, 100 g again").bottle == "B47"
    assert enter(begun, "+ brown powder, label gone, A4, 100 g").bottle == "B48"
    with pytest.raises(NotAllowed, match="unknown"):
        stock.draw(begun, "B46", Amount.grams(1), **WHO)


@pytest.mark.parametrize(
    ("line", "words"),
    [
        ("+ brown powder, 100 g", '"brown powder": where does it stand'),
        ("+ brown powder, A2", '"brown powder": about how much does it hold'),
    ],
)
def test_an_unlisted_bottle_is_asked_for_what_is_missing(
    begun: Path, line: str, words: str
) -> None:
    with pytest.raises(BadInput) as refused:
        enter(begun, line)
    assert refused.value.message.startswith(words)


def test_a_second_count_on_one_walk_is_refused_unless_it_is_meant(begun: Path) -> None:
    enter(begun, "B06 590 g")
    with pytest.raises(NotAllowed) as refused:
        enter(begun, "B06 600 g", by="T1")
    assert 'B06 was counted in "Jan" already, by T2 on 2027-01-04: 590 g' in refused.value.message
    with pytest.raises(NotAllowed):
        enter(begun, "B06 missing")
    assert enter(begun, "B06 590 g", by="T1").came is Came.ALREADY
    assert enter(begun, "B06 600 g again").came is Came.DIFFERS
    (visit,) = walk(begun).visits
    assert (visit.left, visit.difference) == (600_000_000, -40_000_000)


def test_a_count_alone_joins_the_walk_of_its_name(begun: Path) -> None:
    stock.count(begun, "B06", Amount.grams(590), walk="jan", **WHO)
    assert [visit.bottle for visit in walk(begun).visits] == ["B06"]
    with pytest.raises(NotAllowed, match="already"):
        stock.count(begun, "B06", Amount.grams(600), walk=JAN, **WHO)
    stock.count(begun, "B06", Amount.grams(600), walk=JAN, sure=True, **WHO)
    with pytest.raises(UnknownName, match='No walk "spring"'):
        stock.count(begun, "B07", Amount.grams(500), walk="spring", **WHO)
    end(begun, JAN, **WHO)
    with pytest.raises(NotAllowed, match="ended"):
        stock.count(begun, "B08", Amount.grams(96), walk=JAN, **WHO)


def test_what_was_drawn_between_sheet_and_count_is_no_difference(begun: Path) -> None:
    assert {row.bottle.number: row.bottle.left for row in walk(begun).to_count}[
        "B06"
    ] == 640_000_000
    stock.draw(begun, "B06", Amount.grams(40), on=None, today=MONDAY, by="T1")
    assert enter(begun, "B06 600 g").came is Came.COUNTED
    # "same" is as entered by now, and not as printed this morning
    stock.draw(begun, "B07", Amount.grams(40), on=None, today=MONDAY, by="T1")
    assert enter(begun, "B07 same").came is Came.COUNTED
    assert walk(begun).visits[1].left == 460_000_000


def test_a_draw_written_up_after_the_count_explains_part_of_the_difference(begun: Path) -> None:
    enter(begun, "B06 590 g", on=MONDAY, today=TUESDAY)
    stock.draw(begun, "B06", Amount.grams(20), on=date(2027, 1, 3), today=TUESDAY, by="T1")
    (visit,) = walk(begun, TUESDAY).visits
    # what was counted was seen, so it stands
    assert (visit.left, visit.difference) == (590_000_000, -30_000_000)


def test_a_count_of_an_earlier_day_is_held_against_that_day(begun: Path) -> None:
    stock.draw(begun, "B06", Amount.grams(40), on=None, today=TUESDAY, by="T1")
    told = enter(begun, "B06 640 g", on=MONDAY, today=TUESDAY)
    assert told.came is Came.COUNTED
    with pytest.raises(BadDate):
        enter(begun, "B07 500 g", on=TUESDAY)
    with pytest.raises(BadDate, match="S01"):
        enter(begun, "S01 1 cm3", on=date(2026, 11, 1))


def test_a_count_put_right_is_to_be_made_again(begun: Path) -> None:
    told = enter(begun, "B06 59 g")
    assert told.entry is not None
    stock.put_right(begun, told.entry, "590 g meant", **WHO)
    assert (walk(begun).visits, walk(begun).differing) == ((), ())
    assert enter(begun, "B06 590 g").came is Came.DIFFERS


def test_water_lost_is_offered_and_not_assumed(begun: Path) -> None:
    told = enter(begun, "S01 1300 cm3")
    assert told.details[0].startswith("Nothing was drawn. Water lost? Then it is ×1.038 by now")
    assert kept(begun, "S01") == [("counted", -50)]


@pytest.mark.parametrize(
    ("line", "error", "words"),
    [
        ("B99 3 g", UnknownName, 'No bottle "B99".'),
        ("B06 3 cm3", BadInput, "is measured by mass"),
        ("B20 1 kg", NotAllowed, "B20 holds 250 g when full; 1 000 g counted?"),
        ("B06 640 g at Z9", UnknownName, 'No place "Z9".'),
    ],
)
def test_a_line_that_cannot_be_is_refused_whole(
    begun: Path, line: str, error: type[Exception], words: str
) -> None:
    with pytest.raises(error, match=words.replace("?", r"\?")):
        enter(begun, line)
    assert walk(begun).visits == ()


def test_more_than_full_is_taken_from_whoever_is_sure(begun: Path) -> None:
    assert enter(begun, "B20 300 g sure").came is Came.DIFFERS


def test_a_walk_of_some_places_lists_them_in_its_own_order(own: Path) -> None:
    start(own, JAN, places=("oxidisers cupboard", "A1", "A3"), **WHO)
    found = walk(own)
    assert found.walk.places == ("A3", "A1")
    assert list(dict.fromkeys(row.bottle.place for row in found.to_count)) == ["A3", "A1"]
    # a bottle that is listed elsewhere is counted, and asked about
    told = enter(own, "B06 640 g")
    assert told.details == (
        "B06 is listed at A2, which this walk does not go along: if it stands here,"
        " stockroom move B06 A3.",
    )


def test_what_turns_up_on_a_walk_of_one_place_stands_there(own: Path) -> None:
    start(own, JAN, places=("A1",), **WHO)
    assert enter(own, "B28 here").text == "B28 lithium chloride: turned up, at A1."


def test_a_walk_is_taken_up_again_and_not_begun_twice(begun: Path) -> None:
    enter(begun, "B06 590 g")
    assert "taken up again" in start(begun, " jan ", on=None, today=TUESDAY, by="T1").text
    assert len(walk(begun, TUESDAY).visits) == 1
    with pytest.raises(NotAllowed, match="goes along every shelf, not A1"):
        start(begun, JAN, places=("A1",), **WHO)


@pytest.mark.parametrize(
    ("more", "error"),
    [
        ({"name": "  "}, BadInput),
        ({"name": "n" * 61}, BadInput),
        ({"by": " "}, BadInput),
        ({"places": ("A9",)}, UnknownName),
    ],
)
def test_a_walk_wants_a_name_initials_and_places_that_are_there(
    own: Path, more: dict[str, Any], error: type[Exception]
) -> None:
    with pytest.raises(error):
        start(own, **{"name": JAN, **WHO, **more})
    assert sheet(own, JAN, on=MONDAY) is None


def test_an_ended_walk_says_its_day_and_takes_nothing_more(begun: Path) -> None:
    enter(begun, "B06 590 g")
    end(begun, JAN, on=None, today=TUESDAY, by="T1")
    for attempt in (
        lambda: enter(begun, "B07 same"),
        lambda: start(begun, JAN, **WHO),
        lambda: end(begun, JAN, **WHO),
    ):
        with pytest.raises(NotAllowed, match="ended on 5 January 2027 by T1"):
            attempt()
    found = walk(begun, date(2027, 3, 1))
    assert (found.walk.ended, len(found.to_count), len(found.visits)) == (TUESDAY, 73, 1)


def test_what_is_written_for_a_walk_nobody_began_names_the_nearest(begun: Path) -> None:
    with pytest.raises(UnknownName) as refused:
        enter_line(begun, "Jann", "B06 same", **WHO)
    assert refused.value.hint == 'Nearest: Jan. To start it: stockroom walk "Jann".'


def test_a_bottle_that_is_gone_cannot_be_counted(begun: Path) -> None:
    stock.discard(begun, "S14", how="iron waste", why="past", **WHO)
    with pytest.raises(NotAllowed, match="S14 is gone"):
        enter(begun, "S14 200 cm3")
    checks.lost(begun, "B11", **WHO)
    assert "B11" in [row.bottle.number for row in walk(begun).look_out]
